import { RecordBatchReader } from 'apache-arrow'
import http from 'node:http'
import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { readCases } from '../reference/read'
import { ask, base, faultsOf, get, type Json } from './helpers/client'

const ask400 = async (body: Record<string, unknown>, query = '') => ask('post', `/predictions${query}`, { body })
const predicted = async (body: Record<string, unknown>): Promise<Json> => {
  const reply = await ask400(body)
  expect(reply.status, reply.text.slice(0, 500)).toBe(200)
  return reply.json
}
const level = (energy_invcm: number, s: number, l: number, j: number, parity: 'even' | 'odd', g_j?: number) => ({ energy_invcm, s, l, j, parity, ...(g_j === undefined ? {} : { g_j }) })
const sum = (row: readonly number[]): number => row.reduce((a, b) => a + b, 0)

const D_LINES = { lines: [{ transition: 'Na-I.1~Na-I.3' }, { transition: 'Na-I.2~Na-I.1' }], multiplets: [{ transition: 'Na-I.1~Na-I.3' }] }

describe('a bulk prediction', () => {
  it('has a block for each line and then for each multiplet, with components in one order', async () => {
    const { data, meta } = await predicted({ ...D_LINES, field: { values: [0, 100, 1000], unit: 'mT' }, derivatives: true })
    expect(data.map((block: Json) => [block.transition, block.strength_normalisation, block.q.length])).toEqual([['Na-I.1~Na-I.3', 'line', 6], ['Na-I.1~Na-I.2', 'line', 4], ['Na-I.1~Na-I.3', 'multiplet', 10]])
    expect(data[0]).toMatchObject({ q: [-1, -1, 0, 0, 1, 1], m_lower: [-0.5, 0.5, -0.5, 0.5, -0.5, 0.5], m_upper: [-1.5, -0.5, -0.5, 0.5, 0.5, 1.5], j_lower: Array(6).fill(0.5), j_upper: Array(6).fill(1.5) })
    expect(meta).toMatchObject({ edition: 1, model: 'auto', quantity: 'wavenumber_invcm', values: 60, warnings: [] })
    for (const block of data) {
      expect(block.values).toHaveLength(3)
      expect(block.derivatives).toHaveLength(3)
      expect(block.intensities).toBeNull()
    }
  })

  it.each(['linear', 'intermediate'])('says of a line what GET .../components says, %s', async (model) => {
    const asked = { lines: [{ transition: 'Na-I.1~Na-I.3' }], field: { values: [1.5], unit: 'T' }, model, theta_deg: 30 }
    const [block] = (await predicted(asked)).data
    const single = (await get(`/transitions/Na-I.1~Na-I.3/components?field=1.5T&model=${model}&theta_deg=30`)).json.data
    const rows = [...(single.components as Json[])].sort((a, b) => a.q - b.q || a.m_lower - b.m_lower)
    expect([block.q, block.m_lower, block.m_upper]).toEqual([rows.map((row) => row.q), rows.map((row) => row.m_lower), rows.map((row) => row.m_upper)])
    const strengths: number[] = model === 'linear' ? block.strengths : block.strengths[0]
    const intensities: number[] = model === 'linear' ? block.intensities : block.intensities[0]
    rows.forEach((row, c) => {
      // one rounding of a wavenumber of 17 000, and of strengths below 1
      expect(Math.abs(block.values[0][c] - row.wavenumber_invcm)).toBeLessThan(1e-11)
      expect(Math.abs((strengths[c] ?? 0) - row.strength)).toBeLessThan(1e-14)
      expect(Math.abs((intensities[c] ?? 0) - row.intensity)).toBeLessThan(1e-14)
    })
  })

  it('reads the edition in its body, and a field in any unit, one by one or evenly', async () => {
    const values = async (field: unknown) => (await predicted({ edition: 1, lines: [{ transition: 'Na-I.1~Na-I.3' }], field })).data[0].values
    const even = await values({ start: 0, stop: 20, count: 5, unit: 'kG' })
    expect(even).toHaveLength(5)
    expect(even).toEqual(await values({ values: [0, 0.5, 1, 1.5, 2], unit: 'T' }))
    expect((await ask400({ edition: 99, lines: [{ transition: 'Na-I.1~Na-I.3' }], field: { values: [1], unit: 'T' } })).json).toMatchObject({ code: 'edition_unknown', errors: [{ pointer: '/edition' }] })
  })

  it('moves a line by its derivative', async () => {
    const step = 1e-4
    const [block] = (await predicted({ multiplets: [{ transition: 'Na-I.1~Na-I.3' }], field: { values: [5 - step, 5, 5 + step], unit: 'T' }, derivatives: true, model: 'intermediate' })).data
    ;(block.values[1] as number[]).forEach((_, c) => {
      const difference = (block.values[2][c] - block.values[0][c]) / (2 * step)
      // two roundings of 17 000 over the step
      expect(Math.abs(block.derivatives[1][c] - difference)).toBeLessThan(1e-7)
    })
  })

  it('follows Li I 670.8 nm from an anomalous pattern to a triplet', async () => {
    const lines = (await get('/transitions?species=Li-I&wavelength_min_nm=670&wavelength_max_nm=671.5&medium=air')).json.data
    const [block] = (await predicted({ multiplets: [{ transition: lines[0].id }], field: { start: 0, stop: 5, count: 51, unit: 'T' }, quantity: 'wavenumber_invcm', model: 'auto', derivatives: true })).data
    expect(block.model).toBe('intermediate')
    // at 0 T: two lines, four parts of strength on the upper J = 3/2 for two of J = 1/2
    const apart = new Set((block.values[0] as number[]).map((value) => value.toFixed(6)))
    expect(apart.size).toBe(2)
    // at 5 T the strong components lie in three groups, mu_B B apart and each narrower than the fine structure of 0.34 cm^-1
    const last = (block.values[50] as number[]).map((value, c) => ({ value, strength: block.strengths[50][c] as number, q: block.q[c] as number })).filter((c) => c.strength > 0.05)
    const centre = (q: number) => {
      const group = last.filter((c) => c.q === q)
      return sum(group.map((c) => c.value * c.strength)) / sum(group.map((c) => c.strength))
    }
    for (const q of [-1, 0, 1]) {
      const values = last.filter((c) => c.q === q).map((c) => c.value)
      expect(Math.max(...values) - Math.min(...values)).toBeLessThan(0.34)
    }
    expect((centre(1) - centre(-1)) / (2 * MU_B_OVER_HC_INVCM_PER_T * 5)).toBeCloseTo(1, 2)
    for (const row of block.strengths as number[][]) expect(sum(row)).toBeCloseTo(1, 12)
  })

  it('decides auto once a block from the largest field, and stays linear with a warning where a term is not whole', async () => {
    const inline = { lower: level(0, 0.5, 0, 0.5, 'even'), upper: level(16973, 0.5, 1, 1.5, 'odd') }
    const { data, meta } = await predicted({ lines: [{ transition: 'Na-I.1~Na-I.3' }, inline], field: { values: [0.001, 60], unit: 'T' } })
    expect(data.map((block: Json) => block.model)).toEqual(['intermediate', 'linear'])
    expect(data.map((block: Json) => block.validity.positions.status)).toEqual(['not_valid', 'unknown'])
    expect(data[0].validity).toMatchObject({ field_tesla: 60, strengths: { status: 'not_valid' }, blend: { tolerance: 0.01 } })
    expect(meta.warnings).toEqual([{ code: 'term_incomplete', detail: expect.stringContaining('block 1') }])
  })

  it('exchanges inline levels that are the wrong way round, and says so', async () => {
    const [low, high] = [level(0, 0, 0, 0, 'even'), level(18000, 0, 1, 1, 'odd', 1.002)]
    const { data, meta } = await predicted({ lines: [{ lower: high, upper: low }], field: { values: [1], unit: 'T' }, quantity: 'shift_invcm' })
    expect(meta.warnings).toEqual([{ code: 'levels_exchanged', detail: expect.any(String) }])
    expect(data[0]).toMatchObject({ transition: null, j_lower: [0, 0, 0], j_upper: [1, 1, 1] })
    expect(data[0].values[0][2]).toBeCloseTo(1.002 * MU_B_OVER_HC_INVCM_PER_T, 14)
  })

  it('leaves strengths out where they are not wanted', async () => {
    expect((await predicted({ ...D_LINES, field: { values: [1], unit: 'T' }, strengths: false })).data[0]).toMatchObject({ strengths: null, intensities: null, derivatives: null })
  })
})

describe('every format', () => {
  const body = { ...D_LINES, field: { start: 0, stop: 3, count: 200, unit: 'T' }, derivatives: true, theta_deg: 55, quantity: 'wavelength_air_nm' }

  it('decodes to the same doubles, bit for bit, by Accept and by format', async () => {
    const json = await predicted(body)
    const ndjson = await ask400(body, '?format=ndjson')
    const arrow = await ask('post', '/predictions', { body, headers: { accept: 'application/vnd.apache.arrow.stream' } })
    expect([ndjson.status, ndjson.headers['content-type']]).toEqual([200, 'application/x-ndjson; charset=utf-8'])
    expect([arrow.status, arrow.headers['content-type']]).toEqual([200, 'application/vnd.apache.arrow.stream'])
    const rows = ndjson.text.trimEnd().split('\n').map((row) => JSON.parse(row) as Json)
    expect(rows.slice(0, -1)).toStrictEqual(json.data)
    expect(rows.at(-1)).toMatchObject({ complete: true, meta: { edition: 1, model: 'auto' } })
    const batches = [...RecordBatchReader.from(arrow.bytes)]
    expect(batches).toHaveLength(3)
    expect(JSON.parse(batches[0]?.schema.metadata.get('meta') ?? '')).toMatchObject({ edition: 1, quantity: 'wavelength_air_nm' })
    batches.forEach((batch, i) => {
      const block = json.data[i]
      expect(JSON.parse(batch.metadata.get('field') ?? '')).toEqual(body.field)
      expect([batch.metadata.get('transition'), batch.metadata.get('model')]).toEqual([block.transition, block.model])
      for (let c = 0; c < batch.numRows; c += 1) {
        const list = (name: string) => [...(batch.getChild(name)?.get(c) as Iterable<number>)]
        expect(list('value')).toStrictEqual((block.values as number[][]).map((row) => row[c]))
        expect(list('derivative')).toStrictEqual((block.derivatives as number[][]).map((row) => row[c]))
        expect(list('strength')).toStrictEqual((block.values as number[][]).map((_, f) => (Array.isArray(block.strengths[f]) ? block.strengths[f][c] : block.strengths[c])))
        expect(list('intensity')).toStrictEqual((block.values as number[][]).map((_, f) => (Array.isArray(block.intensities[f]) ? block.intensities[f][c] : block.intensities[c])))
      }
    })
  })

  it('is as good by the pool as at once', async () => {
    // 3 lines are answered at once, and 400 of them by the pool
    const one = (await predicted({ lines: D_LINES.lines, field: { values: [2.5], unit: 'T' } })).data
    const many = (await predicted({ lines: Array.from({ length: 200 }, () => D_LINES.lines).flat(), field: { values: [2.5], unit: 'T' } })).data
    expect(many).toHaveLength(400)
    expect(many[398]).toStrictEqual(one[0])
    expect(many[399]).toStrictEqual(one[1])
  })
})

describe('refusals', () => {
  it('tell everything that is wrong at once, each at its place', async () => {
    const reply = await ask400({
      lines: [{ transition: 'Na-I.1~Na-I.3' }, { transition: 'Na-I.1~Na-I.999' }, { lower: level(0, 0, 0, 0, 'even'), upper: level(9, 0, 1, 0, 'odd') }, { transition: 'Na-I.1~Na-I.1' }],
      multiplets: [{ lower: [level(0, 0.5, 0, 0.5, 'even')], upper: [level(9, 0.5, 1, 0.5, 'odd'), level(9.5, 0.5, 2, 1.5, 'even')] }],
      field: { values: [1, 20_000], unit: 'T' },
    })
    expect([reply.status, reply.json.code]).toEqual([400, 'invalid_input'])
    expect(faultsOf(reply)).toEqual([
      '/field/values/1 field_too_large',
      '/lines/1/transition level_unknown',
      '/lines/2/upper/j term_impossible',
      '/lines/3/transition zero_interval',
      '/multiplets/0/upper/1/l term_mixed',
      '/multiplets/0/upper/1/parity term_mixed',
    ])
  })

  it.each([
    [{ field: { values: [1], unit: 'T' } }, 400, ' prediction_empty'],
    [{ lines: [{ transition: 'Na-I.1~Na-I.999' }], field: { values: [1], unit: 'T' } }, 404, '/lines/0/transition level_unknown'],
    [{ lines: [{ transition: 'Na-I.1~Na-I.3', colour: 'yellow' }], field: { values: [1], unit: 'T' } }, 400, '/lines/0/colour unknown_field'],
    [{ lines: [{ transition: 'Na-I.1~Na-I.3' }], field: { values: [-1], unit: 'T' } }, 400, '/field/values/0 number_out_of_range'],
    [{ lines: [{ transition: 'Na-I.1~Na-I.3' }], field: { values: [1], unit: 'furlong' } }, 400, '/field/unit value_not_listed'],
    [{ lines: [{ lower: level(0, 0, 0, 0, 'even'), upper: level(9, 0, 0, 0, 'odd') }], field: { values: [1], unit: 'T' } }, 422, '/lines/0 transition_forbidden'],
    [{ lines: [{ lower: level(0, 0.5, 0, 0.5, 'even'), upper: level(9, 0.5, 1, 0.5, 'odd') }], field: { values: [1], unit: 'T' }, model: 'intermediate' }, 422, '/lines/0 term_incomplete'],
    [{ multiplets: [{ lower: [level(0, 0, 0, 0, 'even')], upper: [level(9, 0, 3, 3, 'odd')] }], field: { values: [1], unit: 'T' } }, 422, '/multiplets/0 transition_forbidden'],
  ])('%j: %d %s', async (body, status, fault) => {
    const reply = await ask400(body)
    expect([reply.status, faultsOf(reply)]).toEqual([status, [fault]])
  })

  it('413 with the limit beyond 5 000 000 values, before any work', async () => {
    const from = performance.now()
    const reply = await ask400({ multiplets: [{ transition: 'Na-I.1~Na-I.3' }], field: { start: 0, stop: 1, count: 500_001, unit: 'T' } })
    expect([reply.status, reply.json.code, reply.json.limit]).toEqual([413, 'answer_too_large', 5_000_000])
    expect(reply.json.detail).toContain('5000010')
    expect((await ask400({ lines: [{ transition: 'Na-I.1~Na-I.3' }], field: { start: 0, stop: 1, count: 1e15, unit: 'T' } })).status).toBe(413)
    // none of it was computed: 5 million values take longer than both of these
    expect(performance.now() - from).toBeLessThan(2000)
  })
})

describe('published vectors as inline multiplets', () => {
  interface Lines { lines: string; twoS: number; gS: number; B: number; lower: { L: number; levels: [number, number][] }; upper: { L: number; levels: [number, number][] }; components: [q: number, twoMLower: number, kLower: number, twoJLower: number | null, twoMUpper: number, kUpper: number, twoJUpper: number | null, wavenumber: number, strength: number][] }
  const cases = readCases<Lines>('06-full-field-lines.json')
  const groups = new Map<string, Lines[]>()
  for (const one of cases) groups.set(`${one.lines} ${one.gS}`, [...(groups.get(`${one.lines} ${one.gS}`) ?? []), one])

  it.each([...groups.keys()])('06, lines in a field of any strength: %s', async (name) => {
    const rows = groups.get(name) ?? []
    const [first] = rows as [Lines]
    const term = ({ L, levels }: Lines['lower'], parity: 'even' | 'odd') => levels.map(([twoJ, energy]) => level(energy, first.twoS / 2, L, twoJ / 2, parity))
    const multiplet = { lower: term(first.lower, 'even'), upper: term(first.upper, 'odd') }
    const { data } = await predicted({ multiplets: [multiplet], field: { values: rows.map((row) => row.B), unit: 'T' }, model: 'intermediate', g_s: first.gS })
    const [block] = data
    rows.forEach((row, f) => {
      // the k-th state of an m is the k-th in energy, so within one (q, m_lower) both lists run alike when sorted by position
      const found = (block.q as number[]).map((q, c) => ({ q, m: 2 * block.m_lower[c], value: block.values[f][c] as number, strength: block.strengths[f][c] as number }))
      const strong = found.filter((c) => c.strength > 1e-9)
      const sorted = <T extends { q: number; m: number; value: number }>(list: T[]) => list.sort((a, b) => a.q - b.q || a.m - b.m || a.value - b.value)
      const wanted = sorted(row.components.map(([q, m, , , , , , value, strength]) => ({ q, m, value, strength })))
      expect(strong).toHaveLength(wanted.length)
      // header: wavenumber 1e-9, strength 1e-10
      sorted(strong).forEach((c, i) => expect([Math.abs(c.value - (wanted[i]?.value ?? 0)) <= 1e-9, c.q, c.m]).toEqual([true, wanted[i]?.q, wanted[i]?.m]))
      const strengths = (list: { strength: number }[]) => list.map((c) => c.strength).sort((a, b) => a - b)
      strengths(strong).forEach((strength, i) => expect(Math.abs(strength - (strengths(wanted)[i] ?? 0))).toBeLessThanOrEqual(1e-10))
      expect(sum(found.filter((c) => c.strength <= 1e-9).map((c) => c.strength))).toBeLessThan(2e-9 * found.length)
    })
  })

  interface Levels { term: string; twoS: number; L: number; levels: [number, number][]; gS: number; B: number; states: [twoM: number, k: number, energy: number, ...rest: unknown[]][] }
  const terms = new Map<string, Levels[]>()
  for (const one of readCases<Levels>('05-full-field-levels.json')) if (one.L > 0) terms.set(`${one.term} ${one.gS}`, [...(terms.get(`${one.term} ${one.gS}`) ?? []), one])

  it.each([...terms.keys()])('05, levels in a field of any strength, as lines to the same term far below: %s', async (name) => {
    const rows = terms.get(name) ?? []
    const [first] = rows as [Levels]
    const below = 30_000
    const term = (shift: number, parity: 'even' | 'odd') => first.levels.map(([twoJ, energy]) => level(energy - shift, first.twoS / 2, first.L, twoJ / 2, parity))
    const { data } = await predicted({ multiplets: [{ lower: term(below, 'even'), upper: term(0, 'odd') }], field: { values: rows.map((row) => row.B), unit: 'T' }, model: 'intermediate', g_s: first.gS })
    const [block] = data
    rows.forEach((row, f) => {
      const energies = (twoM: number) => row.states.filter((state) => state[0] === twoM).map((state) => state[2])
      const pairs = new Map<string, number[]>()
      ;(block.q as number[]).forEach((q, c) => pairs.set(`${q} ${block.m_lower[c]}`, [...(pairs.get(`${q} ${block.m_lower[c]}`) ?? []), block.values[f][c] as number]))
      for (const [pair, values] of pairs) {
        const [q, m] = pair.split(' ').map(Number) as [number, number]
        const wanted = energies(2 * m + 2 * q).flatMap((up) => energies(2 * m).map((low) => up - low + below)).sort((a, b) => a - b)
        // 1e-9 for each energy, and 4e-12 of the position
        values.sort((a, b) => a - b).forEach((value, i) => expect(Math.abs(value - (wanted[i] ?? Number.NaN))).toBeLessThan(2e-9 + 4e-12 * below))
        expect(values).toHaveLength(wanted.length)
      }
    })
  })
})

describe('a client that leaves', () => {
  const large = { multiplets: [{ transition: 'Na-I.1~Na-I.3' }], field: { start: 0, stop: 5, count: 500_000, unit: 'T' }, model: 'intermediate', derivatives: true }

  /** Begins a large answer and leaves after the first bytes of it. */
  const beginAndLeave = () =>
    new Promise<void>((resolve, reject) => {
      const request = http.request(`${base}/api/v1/predictions`, { method: 'POST', headers: { 'content-type': 'application/json' } }, (response) => {
        response.once('data', () => {
          response.destroy()
          resolve()
        })
      })
      request.on('error', reject)
      request.end(JSON.stringify(large))
    })

  it('stops the work: a caller may have two large computations at once, and after leaving a dozen the next begins at once', async () => {
    // each of these takes seconds to finish as JSON; left running, they would fill the caller's turns and the queue behind them
    for (let i = 0; i < 12; i += 1) await beginAndLeave()
    const reply = await ask400({ ...large, field: { start: 0, stop: 5, count: 3000, unit: 'T' } }, '?format=arrow')
    expect(reply.status).toBe(200)
    expect([...RecordBatchReader.from(reply.bytes)][0]?.numRows).toBe(10)
  })
})
