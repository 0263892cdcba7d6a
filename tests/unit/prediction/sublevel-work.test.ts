import { describe, expect, it } from 'vitest'
import { nuclearSublevels } from '@/lib/prediction/nuclear-sublevels'
import { checkSize, termSublevels } from '@/lib/prediction/sublevels'

const fields = (count: number) => ({ values: Array.from({ length: count }, (_, i) => i / count), unit: 'T' as const })
const nucleus = (j: number, i: number, count: number) => nuclearSublevels({ level: { j, g_j: 1 }, nucleus: { i, a_mhz: 100 }, field: fields(count) })
const term = (s: number, l: number, count: number) => {
  const levels = Array.from({ length: 2 * Math.min(s, l) + 1 }, (_, k) => ({ energy_invcm: 10 * k, s, l, j: Math.abs(s - l) + k, parity: 'even' as const }))
  return termSublevels({ levels, field: fields(count), model: 'intermediate', g_values: 'ls' })
}

describe('work of sublevels over fields', () => {
  it('is refused by the sizes of what is diagonalised, not by the numbers alone, with how many fields may be asked', () => {
    for (const ask of [() => nucleus(50, 20, 80), () => term(19.5, 20, 300)]) expect(ask).toThrow(expect.objectContaining({ code: 'answer_too_large', detail: expect.stringContaining('take too long') as string }))
  })

  it('leaves room for what atoms have, up to the limit of numbers', () => {
    // Rb-87 5p 2P3/2, Ho-165 (J = 15/2, I = 7/2), and a quintet D
    const blocks = (twoJ: number, twoI: number) => Array.from({ length: twoJ + twoI + 1 }, (_, k) => Math.min(k, twoJ + twoI - k, twoJ, twoI) + 1)
    expect(() => checkSize(16, 20_000, 3, blocks(3, 3))).not.toThrow()
    expect(() => checkSize(128, 2600, 3, blocks(15, 7))).not.toThrow()
    expect(() => checkSize(25, 20_000, 2, [1, 2, 3, 4, 5, 4, 3, 2, 1])).not.toThrow()
    expect(nucleus(1.5, 1.5, 3).matrix.shifts_mhz).toHaveLength(3)
    expect(term(2, 2, 3).matrix.energies_invcm[0]).toHaveLength(25)
  })

  it('may always be asked at one field', () => {
    expect(() => checkSize(4141, 1, 3, Array.from({ length: 141 }, () => 100))).not.toThrow()
  })
})
