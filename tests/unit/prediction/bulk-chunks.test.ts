import { RecordBatchReader } from 'apache-arrow'
import { describe, expect, it } from 'vitest'
import { landeG } from '@/lib/atomic/lande'
import { weakFieldComponents } from '@/lib/atomic/components'
import { multipletOfTerms } from '@/lib/atomic/field-multiplet'
import { intermediateLine, multipletComponents } from '@/lib/atomic/intermediate-lines'
import { vacToAir } from '@/lib/atomic/air'
import { wholeAnswer } from '@/lib/prediction/bulk/answer'
import { type BlockGiven, fieldsTesla, type MultipletGiven, type PredictionJob, type PredictionOptions } from '@/lib/prediction/bulk/block'
import { ColumnStore, HELD_MOST } from '@/lib/prediction/bulk/column-store'
import { predictionChunks } from '@/lib/prediction/bulk/chunks'
import { type PreparedBlock, prepareSteps } from '@/lib/prediction/bulk/prepared'
import { fieldTableChunks } from '@/lib/prediction/bulk/table-chunks'
import type { PredictionBlock, PredictionQuantity } from '@/openapi/schemas/predictions'

const term = (twoS: number, l: number, levels: [number, number][]) => ({ twoS, l, levels: levels.map(([twoJ, energyInvcm]) => ({ twoJ, energyInvcm, g: landeG({ twoS, l, twoJ }) })) })
// the resonance doublet of Li I: 2s 2S, 2p 2P* (cm^-1, rounded), and a quintet pair with wide blocks
const S = term(1, 0, [[1, 0]])
const P = term(1, 1, [[1, 14_903.66], [3, 14_904]])
const D5 = term(4, 2, [[0, 978.07], [2, 888.13], [4, 704], [6, 415.93], [8, 0]])
const F5 = term(4, 3, [[2, 27_666.35], [4, 27_559.58], [6, 27_394.69], [8, 27_166.82], [10, 26_874.55]])

const end = (whole: typeof S, twoJ: number) => {
  const own = whole.levels.find((level) => level.twoJ === twoJ)
  if (own === undefined) throw new Error(`no J = ${twoJ}/2`)
  return { ...own, term: whole }
}
const line = (lower: typeof S, upper: typeof S, twoJLower: number, twoJUpper: number): BlockGiven => ({ form: 'line', transition: null, kind: 'E1', lower: end(lower, twoJLower), upper: end(upper, twoJUpper) })
const multiplet = (lower: typeof S, upper: typeof S): BlockGiven => ({ form: 'multiplet', transition: null, kind: 'E1', lower, upper })

const OPTIONS: PredictionOptions = { model: 'auto', gS: null, thetaDeg: 40, derivatives: true, strengths: true, quantity: 'wavenumber_invcm', tolerance: 0.01 }
const job = (format: PredictionJob['format'], blocks: BlockGiven[], options: Partial<PredictionOptions> = {}, field: PredictionJob['field'] = { start: 0, stop: 50, count: 41, perTesla: 10 }): PredictionJob => ({
  task: 'predictions', format, blocks, field, fieldText: '{}', options: { ...OPTIONS, ...options }, meta: '{"warnings":[]}',
})

const asText = (made: PredictionJob): string => new TextDecoder().decode(wholeAnswer(made))
const asJson = (made: PredictionJob): PredictionBlock[] => (JSON.parse(asText(made)) as { data: PredictionBlock[] }).data

/** The lists of an Arrow stream, batch by batch: numbers by [component][field], null where the format says so. */
function asArrow(made: PredictionJob) {
  const reader = RecordBatchReader.from(wholeAnswer(made))
  return [...reader].map((batch) => {
    const lists = (name: string): (number | null)[][] | null =>
      batch.schema.fields.some((field) => field.name === name) && batch.getChild(name)?.nullCount === 0
        ? Array.from({ length: batch.numRows }, (_, row) => [...((batch.getChild(name)?.get(row) ?? []) as Iterable<number | null>)])
        : null
    const column = (name: string) => [...(batch.getChild(name) ?? [])] as (number | null)[]
    return { metadata: batch.metadata, schema: batch.schema, rows: batch.numRows, lists, column }
  })
}

const turned = (rows: (number | null)[][]): (number | null)[][] => (rows[0] ?? []).map((_, i) => rows.map((row) => row[i] ?? null))
const BLOCKS = [line(S, P, 1, 3), multiplet(S, P), line(D5, F5, 6, 8), multiplet(D5, F5)]

describe('one computation in three formats', () => {
  it.each(['wavenumber_invcm', 'shift_invcm', 'wavelength_vac_nm', 'wavelength_air_nm', 'frequency_thz', 'shift_ghz'] as PredictionQuantity[])('%s: the same doubles, bit for bit', (quantity) => {
    const json = asJson(job('json', BLOCKS, { quantity }))
    const ndjson = asText(job('ndjson', BLOCKS, { quantity })).trimEnd().split('\n').map((text) => JSON.parse(text) as PredictionBlock)
    const arrow = asArrow(job('arrow', BLOCKS, { quantity }))
    expect(json).toHaveLength(BLOCKS.length)
    expect(arrow).toHaveLength(BLOCKS.length)
    expect(ndjson.slice(0, -1)).toEqual(json)
    expect(ndjson.at(-1)).toEqual({ meta: { warnings: [] }, complete: true })
    json.forEach((block, i) => {
      const batch = arrow[i]
      expect(batch?.rows).toBe(block.q.length)
      for (const [list, values] of [['value', block.values], ['derivative', block.derivatives ?? []]] as const) expect(batch?.lists(list)).toStrictEqual(turned(values))
      for (const [list, values] of [['strength', block.strengths], ['intensity', block.intensities]] as const) {
        const rows = values?.every((value) => Array.isArray(value)) ? turned(values as number[][]) : (values as number[]).map((value) => block.values.map(() => value))
        expect(batch?.lists(list)).toStrictEqual(rows)
      }
      for (const name of ['q', 'm_lower', 'm_upper', 'j_lower', 'j_upper'] as const) expect(batch?.column(name)).toEqual(block[name])
      expect(batch?.metadata.get('model')).toBe(block.model)
      expect(JSON.parse(batch?.metadata.get('validity') ?? '')).toEqual(block.validity)
    })
  })

  it('says units in the schema, and leaves out what was not asked', () => {
    const [batch] = asArrow(job('arrow', [BLOCKS[0] as BlockGiven], { quantity: 'shift_ghz' }))
    expect(batch?.schema.fields.map((field) => field.name)).toEqual(['block', 'q', 'm_lower', 'm_upper', 'j_lower', 'j_upper', 'value', 'derivative', 'strength', 'intensity'])
    expect(batch?.schema.fields.map((field) => field.metadata.get('unit') ?? null)).toEqual([null, null, null, null, null, null, 'GHz', 'GHz/T', null, null])
    const [bare] = asArrow(job('arrow', [BLOCKS[0] as BlockGiven], { derivatives: false, strengths: false }))
    expect(bare?.schema.fields.map((field) => field.name)).toEqual(['block', 'q', 'm_lower', 'm_upper', 'j_lower', 'j_upper', 'value'])
    const [block] = asJson(job('json', [BLOCKS[0] as BlockGiven], { derivatives: false, strengths: false, thetaDeg: null }))
    expect(block).toMatchObject({ derivatives: null, strengths: null, intensities: null })
  })

  it('has null, never NaN, where there is no wavelength', () => {
    // 199.98 nm without field: some components cross 200 nm, where air begins
    const upper = term(0, 1, [[2, 50_004]])
    const asked = { quantity: 'wavelength_air_nm' as const, thetaDeg: null }
    const fields = { values: [0, 5, 10, 20], perTesla: 1 }
    const [block] = asJson(job('json', [line(term(0, 0, [[0, 0]]), upper, 0, 2)], asked, fields))
    const [batch] = asArrow(job('arrow', [line(term(0, 0, [[0, 0]]), upper, 0, 2)], asked, fields))
    expect(block?.values.map((row) => row.map((value) => value === null))).toEqual([[true, true, true], [true, true, true], [false, true, true], [false, true, true]])
    expect(block?.derivatives?.map((row) => row.map((value) => value === null))).toEqual(block?.values.map((row) => row.map((value) => value === null)))
    expect(Array.from({ length: 3 }, (_, c) => [...(batch?.column('value')[c] as unknown as Iterable<number | null>)].map((value) => value === null))).toEqual(turned((block?.values ?? []).map((row) => row.map((value) => (value === null ? 1 : 0)))).map((row) => row.map((value) => value === 1)))
  })
})

describe('what the blocks say', () => {
  it('is the intermediate model by its specification, for a multiplet and for a line', () => {
    const made = job('json', [multiplet(S, P), line(S, P, 1, 3)], { model: 'intermediate' })
    const whole = multipletOfTerms(S, P)
    const [all, one] = asJson(made)
    fieldsTesla(made.field).forEach((tesla, f) => {
      const specified = multipletComponents(whole, tesla)
      // 4e-12 of the position is what is promised of positions; strengths and slopes are compared to the same relative size
      specified.forEach((component, c) => {
        expect(Math.abs((all?.values[f]?.[c] ?? 0) - component.wavenumberInvcm)).toBeLessThan(1e-9)
        expect(Math.abs((all?.derivatives?.[f]?.[c] ?? 0) - component.derivativeInvcmPerTesla)).toBeLessThan(1e-11)
        expect(Math.abs(((all?.strengths as number[][])[f]?.[c] ?? 0) - (component.strength ?? 0))).toBeLessThan(1e-12)
      })
      const of = intermediateLine(whole, { twoJLower: 1, twoJUpper: 3 }, tesla, 40).sort((a, b) => a.q - b.q || a.lower.twoM - b.lower.twoM)
      of.forEach((component, c) => {
        expect(Math.abs((one?.values[f]?.[c] ?? 0) - component.wavenumberInvcm)).toBeLessThan(1e-9)
        expect(Math.abs(((one?.strengths as number[][])[f]?.[c] ?? 0) - (component.strength ?? 0))).toBeLessThan(1e-12)
        expect(Math.abs(((one?.intensities as number[][])[f]?.[c] ?? 0) - (component.intensity ?? 0))).toBeLessThan(1e-12)
      })
    })
    expect(all?.q).toEqual(multipletComponents(whole, 1).map((component) => component.q))
  })

  it('is the linear law by its specification', () => {
    const made = job('json', [line(D5, F5, 6, 8)], { model: 'linear' })
    const [block] = asJson(made)
    fieldsTesla(made.field).forEach((tesla, f) => {
      const [lower, upper] = [end(D5, 6), end(F5, 8)]
      const specified = weakFieldComponents({ kind: 'E1', lower, upper, fieldTesla: tesla, thetaDeg: 40 }).sort((a, b) => a.q - b.q || a.twoMLower - b.twoMLower)
      expect(block?.values[f]).toHaveLength(specified.length)
      specified.forEach((component, c) => {
        expect(Math.abs((block?.values[f]?.[c] ?? 0) - (upper.energyInvcm - lower.energyInvcm + component.shiftInvcm))).toBeLessThan(1e-10)
        expect((block?.strengths as number[])[c]).toBe(component.strength)
        expect(Math.abs(((block?.intensities as number[])[c] ?? 0) - (component.intensity ?? 0))).toBeLessThan(1e-15)
      })
    })
  })

  it('gives a multiplet the same rows in either model, and strengths that sum to 1', () => {
    const [linear] = asJson(job('json', [multiplet(D5, F5)], { model: 'linear' }))
    const [intermediate] = asJson(job('json', [multiplet(D5, F5)], { model: 'intermediate' }))
    for (const name of ['q', 'm_lower', 'm_upper', 'j_lower', 'j_upper'] as const) expect(linear?.[name]).toEqual(intermediate?.[name])
    const sum = (row: number[]) => row.reduce((a, b) => a + b, 0)
    expect(sum(linear?.strengths as number[])).toBeCloseTo(1, 12)
    for (const row of intermediate?.strengths as number[][]) expect(sum(row)).toBeCloseTo(1, 12)
    // at zero field both are the same law; the zero-field limit has no rounding to speak of
    linear?.strengths?.forEach((strength, c) => expect((intermediate?.strengths as number[][])[0]?.[c]).toBeCloseTo(strength as number, 12))
    linear?.values[0]?.forEach((value, c) => expect(intermediate?.values[0]?.[c]).toBeCloseTo(value as number, 9))
  })

  it('decides auto once, from the largest field asked', () => {
    const models = (stop: number) => asJson(job('json', [multiplet(S, P)], {}, { values: [0, stop], perTesla: 1 })).map((block) => [block.model, block.validity.field_tesla])
    expect(models(0.001)).toEqual([['linear', 0.001]])
    expect(models(1)).toEqual([['intermediate', 1]])
  })

  it('has derivatives that are those of the values, in every quantity', () => {
    for (const quantity of ['wavenumber_invcm', 'wavelength_vac_nm', 'wavelength_air_nm', 'frequency_thz', 'shift_ghz'] as const) {
      const step = 1e-3
      const [block] = asJson(job('json', [multiplet(S, P)], { model: 'intermediate', quantity }, { values: [1 - step, 1, 1 + step], perTesla: 1 }))
      block?.values[1]?.forEach((value, c) => {
        const slope = ((block.values[2]?.[c] ?? 0) - (block.values[0]?.[c] ?? 0)) / (2 * step)
        // of third order in the step, and the rounding of two values over it
        const tolerance = 1e-4 * Math.abs(slope) + (1e-15 * Math.abs(value ?? 0)) / step + 1e-9
        expect(Math.abs((block.derivatives?.[1]?.[c] ?? 0) - slope)).toBeLessThan(tolerance)
      })
    }
  })

  it('gives air wavelengths by the formula of air', () => {
    const [vacuum] = asJson(job('json', [line(S, P, 1, 3)], { quantity: 'wavelength_vac_nm' }))
    const [air] = asJson(job('json', [line(S, P, 1, 3)], { quantity: 'wavelength_air_nm' }))
    vacuum?.values.forEach((row, f) => row.forEach((value, c) => expect(air?.values[f]?.[c]).toBe(vacToAir(value ?? 0))))
  })
})

describe('turns of others', () => {
  it('come between the lines of a multiplet while its model is decided', () => {
    // a field that nothing else here asks for, since decisions are remembered
    const chunks = predictionChunks(job('arrow', [multiplet(D5, F5)], {}, { values: [0.123], perTesla: 1 }))
    let pauses = 0
    for (let step = chunks.next(); step.value === null; step = chunks.next()) pauses += 1
    // 12 lines obey the rule for J between 5D and 5F; both levels and the line are steps
    expect(pauses).toBeGreaterThanOrEqual(3 * 12)
  })

  it('are as good as none for a table, which needs no validity', () => {
    const table = fieldTableChunks({ task: 'field-table', format: 'json', multiplet: multiplet(D5, F5) as MultipletGiven, fromTesla: 0, toTesla: 1, model: 'linear', gS: null, maxErrorInvcm: 1e-6, maxStrengthError: 1e-6, meta: '{}' })
    expect(table.next()).toEqual({ done: false, value: null })
    expect(table.next().value).toBeInstanceOf(Uint8Array)
    table.return(undefined)
  })
})

/** A prepared block, whoever has a turn meanwhile. */
function prepared(given: BlockGiven): PreparedBlock {
  const steps = prepareSteps(given, 5, { ...OPTIONS, model: 'intermediate' })
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
  }
}

describe('the room that the columns of a batch take', () => {
  const fields = Float64Array.from({ length: 1000 }, (_, i) => i / 200)
  const columns = ['value', 'derivative', 'strength', 'intensity'] as const

  const sameBits = (a: readonly Float64Array[], b: readonly Float64Array[]) => a.length === b.length && a.every((list, i) => Buffer.from(list.buffer).equals(Buffer.from(b[i]?.buffer ?? new ArrayBuffer(0))))

  /** Every column of a block, and the most numbers held on the way. */
  const read = (given: BlockGiven, most?: number) => {
    const block = prepared(given)
    const store = new ColumnStore(block, OPTIONS, fields, fields.length, most)
    let [held, steps] = [0, 0]
    const lists = columns.map((column) => {
      for (const turn of store.make(column)) steps += turn === null ? 1 : 0
      held = Math.max(held, store.numbersHeld)
      const numbers = new Float64Array(block.places.length * fields.length)
      block.places.forEach((_, c) => store.fill(column, c, 0, fields.length, numbers, c * fields.length))
      return numbers
    })
    return { lists, held, steps, numbers: block.places.length * fields.length }
  }

  it('is that of the columns for a line with wide m blocks, and within the bound where they do not fit at once, bit for bit the same', () => {
    // 15 components of J = 2 and 3; the solved blocks, of up to five states, would take 316 numbers a field
    const given = line(D5, F5, 4, 6)
    const plain = read(given)
    expect([plain.numbers, plain.held]).toEqual([15_000, 4 * 15_000])
    const bounded = read(given, 2 * 15_000)
    expect(bounded.held).toBe(2 * 15_000)
    expect(bounded.steps).toBe(2 * plain.steps)
    expect(sameBits(bounded.lists, plain.lists)).toBe(true)
    expect(read(given, 1).held).toBe(15_000)
  })

  it('is that of the solved terms for a multiplet, less than its columns', () => {
    const { lists, held, numbers } = read(multiplet(D5, F5))
    expect(held).toBeLessThan(2 * numbers)
    expect(sameBits(read(multiplet(D5, F5), numbers).lists, lists)).toBe(true)
  })

  it('keeps the promise of 200 MB for the largest request of one line: 80 MB at most for what is held', () => {
    expect(8 * HELD_MOST).toBeLessThanOrEqual(80e6)
    const most = 5_000_000
    const store = new ColumnStore(prepared(line(D5, F5, 4, 6)), OPTIONS, new Float64Array(Math.floor(most / 15)), 1)
    expect(store.make('value').next()).toEqual({ done: false, value: null })
    expect(store.numbersHeld).toBeLessThanOrEqual(HELD_MOST)
  })
})
