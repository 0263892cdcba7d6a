import { describe, expect, it } from 'vitest'
import type { z } from 'zod'
import type { Snapshot } from '@/lib/catalogue/shape'
import { fieldFitAnswer } from '@/lib/prediction/field-fits/answer'
import { fieldTableAnswer } from '@/lib/prediction/answers/bulk'
import { profilesAnswer } from '@/lib/prediction/profiles-answer'
import { type PredictionsAsked, planPredictions } from '@/lib/prediction/bulk/request'
import { planFieldTable } from '@/lib/prediction/bulk/table-request'
import { boundGivenTerms, GIVEN_MULTIPLET_MOST, type GivenTerms } from '@/lib/prediction/term-work'
import { Problem } from '@/lib/problem'
import { FieldFitRequest } from '@/openapi/operations/field-fits'
import { GIVEN_COMPONENTS_MOST } from '@/openapi/operations/inline'
import { makeFieldTable } from '@/openapi/operations/field-tables'
import { predict } from '@/openapi/operations/predictions'
import { ProfilesRequest } from '@/openapi/operations/profiles'

const terms = (levels: number, energyInvcm = 0): GivenTerms => {
  const term = { levels: Array.from({ length: levels }, (_, i) => ({ twoJ: 2 * i + 1, energyInvcm: energyInvcm + i, g: null })) }
  return { kind: 'E1', lower: term, upper: term }
}
const refusal = (given: GivenTerms[]): unknown => {
  try {
    return boundGivenTerms(given, 'answer_too_large')
  } catch (error) {
    return error
  }
}

/** A line between the highest J of two terms of 40 levels, which no atom has. */
const monstrous = (from: number) => {
  const term = (l: number, energy: number, parity: 'even' | 'odd') => Array.from({ length: 40 }, (_, i) => ({ energy_invcm: energy + 10 * i, s: 19.5, l, j: l - 19.5 + i, parity }))
  const [low, high] = [term(20, from, 'even'), term(21, from + 30_000, 'odd')]
  return { lower: low[39], lower_others: low.slice(0, 39), upper: high[39], upper_others: high.slice(0, 39) }
}
const noTable = {} as Snapshot

describe('terms given in a request', () => {
  it('may be many of an atom, or the same one for many lines', () => {
    expect(refusal(Array.from({ length: 50 }, (_, i) => terms(5, i)))).toBeUndefined()
    expect(refusal(Array.from({ length: 100 }, () => terms(15)))).toBeUndefined()
  })

  it('are refused where all together are larger than a second of work, with the limit', () => {
    const error = refusal(Array.from({ length: 100 }, (_, i) => terms(15, i)))
    expect(error).toBeInstanceOf(Problem)
    expect(error).toMatchObject({ code: 'answer_too_large', extra: { limit: GIVEN_COMPONENTS_MOST } })
  })

  it('are bounded for profiles before any of them is diagonalised', async () => {
    const body = ProfilesRequest.parse({ lines: Array.from({ length: 100 }, (_, i) => monstrous(i)), field: 1, resolving_power: 1000 })
    const before = performance.now()
    await expect(profilesAnswer(noTable, body, () => undefined)).rejects.toMatchObject({ code: 'answer_too_large', status: 413 })
    expect(performance.now() - before).toBeLessThan(5000)
  })

  it('are bounded for fits, of g and in the linear law too', async () => {
    const one = { lines: [monstrous(0)], unit: 'cm-1', model: 'linear', measurements: [29_999, 30_001].map((position) => ({ position, m_lower: 0.5, m_upper: 0.5 })) }
    for (const more of [{}, { unknown: 'g', field: 1 }]) {
      await expect((async () => fieldFitAnswer(noTable, FieldFitRequest.parse({ ...one, ...more }), () => undefined))()).rejects.toMatchObject({ code: 'fit_too_large' })
    }
  })
})

describe('a multiplet given inline', () => {
  const level = (s: number, l: number, j: number, from: number) => ({ energy_invcm: from + 10 * j, s, l, j, parity: l % 2 === 0 ? 'even' : 'odd' })
  const whole = (s: number, l: number, from: number) => Array.from({ length: 2 * Math.min(s, l) + 1 }, (_, i) => level(s, l, Math.abs(l - s) + i, from))
  const field = { start: 0, stop: 1, unit: 'T' }
  const predictions = (multiplet: unknown) => planPredictions(noTable, (predict.body as z.ZodType).parse({ multiplets: [multiplet], field: { ...field, count: 2 } }) as PredictionsAsked)
  const table = (multiplet: unknown, more = {}) => planFieldTable(noTable, (makeFieldTable.body as z.ZodType).parse({ multiplet, field, ...more }) as Parameters<typeof planFieldTable>[1]).faults.map(({ pointer, code }) => `${pointer} ${code}`)

  it('may be as large as those of atoms, and is refused with the limit where it is larger', async () => {
    // 11 levels each way, as no half-filled f shell with an open d shell exceeds by much: 4435 components; 15 each way: 10 067
    const [real, larger] = [{ lower: whole(5, 8, 0), upper: whole(5, 7, 30_000) }, { lower: whole(7, 10, 0), upper: whole(7, 9, 30_000) }]
    await expect(predictions(real)).resolves.toMatchObject({ values: 8870 })
    await expect(predictions(larger)).rejects.toMatchObject({ code: 'answer_too_large', status: 413, extra: { limit: GIVEN_MULTIPLET_MOST }, errors: [{ pointer: '/multiplets/0' }] })
    expect(table(real)).toEqual([])
    expect(table(larger)).toEqual(['/multiplet table_too_large'])
  })

  it('is tabulated to no smaller an error than rounding lets pass', () => {
    const multiplet = { lower: whole(0.5, 0, 0), upper: whole(0.5, 1, 30_000) }
    // 16 units of the last place of 30 000 cm^-1 are 1.07e-10 cm^-1, and half of the error asked is kept for rounding
    expect([2.1e-10, 2.2e-10].map((max_error_invcm) => table(multiplet, { max_error_invcm }))).toEqual([['/max_error_invcm error_below_rounding'], []])
  })
})

describe('a field table in the linear law', () => {
  const level = (l: number, j: number, from: number) => ({ energy_invcm: from + 10 * j, s: 2, l, j, parity: l === 2 ? 'even' : 'odd' })
  const table = (lower: unknown[], upper: unknown[]) => {
    const body = (makeFieldTable.body as z.ZodType).parse({ multiplet: { lower, upper }, field: { start: 0, stop: 1, unit: 'T' }, model: 'linear' }) as Parameters<typeof fieldTableAnswer>[1]
    const noPool = () => {
      throw new Error('asked the pool')
    }
    return fieldTableAnswer(noTable, body, 'json', { pool: noPool, caller: 'a', signal: new AbortController().signal }).stream({})
  }

  it('is made at once where it is small, and elsewhere where it is of many lines', async () => {
    const small = await table([level(2, 4, 0)], [level(3, 5, 30_000)])
    expect(JSON.parse(new TextDecoder().decode(small.body as Uint8Array))).toMatchObject({ data: { model: 'linear', nodes_tesla: [0, 1] } })
    await expect(table([0, 1, 2, 3, 4].map((j) => level(2, j, 0)), [1, 2, 3, 4, 5].map((j) => level(3, j, 30_000)))).rejects.toThrow('asked the pool')
  })
})
