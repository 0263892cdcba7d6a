import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { pageOf, type Position } from '@/lib/prediction/paging'
import { termSublevels } from '@/lib/prediction/sublevels'

describe('pages', () => {
  it('to the end make the whole list, each row once, whatever the limit', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 40 }), fc.integer({ min: 1, max: 12 }), (size, limit) => {
        const rows = Array.from({ length: size }, (_, i) => i * 3)
        const seen: number[] = []
        let after: Position = null
        let pages = 0
        do {
          const page: { rows: readonly number[]; next: Position } = pageOf(rows, limit, after, (row) => row)
          seen.push(...page.rows)
          after = page.next
          pages += 1
        } while (after !== null)
        expect(seen).toEqual(rows)
        expect(pages).toBe(Math.max(1, Math.ceil(size / limit)))
      }),
    )
  })
})

describe('sublevels of a term', () => {
  const term = [
    { energy_invcm: 0, s: 1, l: 1, j: 0, parity: 'odd' as const },
    { energy_invcm: 10, s: 1, l: 1, j: 1, parity: 'odd' as const },
    { energy_invcm: 30, s: 1, l: 1, j: 2, parity: 'odd' as const },
  ]

  it('keep the sum of energies at every field, m summing to zero in each level', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 1e4, noNaN: true }), { minLength: 1, maxLength: 5 }), (values) => {
        const { energies_invcm: energies, m } = termSublevels({ levels: term, field: { values, unit: 'T' }, model: 'linear', g_values: 'adopted' }).matrix
        expect(m).toEqual([...m].sort((a, b) => a - b))
        for (const row of energies) expect(row.reduce((sum, energy) => sum + energy, 0)).toBeCloseTo(0 + 3 * 10 + 5 * 30, 6)
      }),
      { numRuns: 50 },
    )
  })

  it('go upwards within an m at small field', () => {
    const { m, j } = termSublevels({ levels: [...term].reverse(), field: 0.001, model: 'linear', g_values: 'adopted' }).matrix
    expect(j.filter((_, i) => m[i] === 0)).toEqual([0, 1, 2])
  })
})
