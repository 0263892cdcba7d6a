import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { changesBetween } from '@/lib/prediction/changes'
import { pageOf, type Position } from '@/lib/prediction/paging'
import { termSublevels } from '@/lib/prediction/sublevels'
import { edition, level, SODIUM_LEVELS } from './edition'

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

describe('changes between editions', () => {
  const before = edition(SODIUM_LEVELS)
  const after = edition(
    [
      ...SODIUM_LEVELS.slice(0, 1),
      level({ ...SODIUM_LEVELS[1], energyInvcm: 16956.17, revision: 2 }),
      level({ ...SODIUM_LEVELS[2], status: 'retired', retiredReason: 'not found again', publishedFrom: 2, revision: 2 }),
      level({ ordinal: 4, configuration: '4s', energyInvcm: 25739.999 }),
    ],
    { edition: 2 },
  )

  it('tell what was replaced field by field, what came and what went, in the order of the table', () => {
    const changes = changesBetween(before, after)
    expect(changes.map(({ level: id, action }) => [id, action])).toEqual([['Na-I.2', 'replaced'], ['Na-I.3', 'retired'], ['Na-I.4', 'created']])
    expect(changes[0]?.fields).toEqual([{ field: 'energy_invcm', before: 16956.17025, after: 16956.17 }])
    expect(changes[1]?.fields).toContainEqual({ field: 'reason', before: null, after: 'not found again' })
    expect(changes[2]?.fields).toContainEqual({ field: 'term.symbol', before: null, after: '2S1/2' })
  })

  it('are none between an edition and itself', () => {
    expect(changesBetween(before, before)).toEqual([])
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
        const { energies_invcm: energies, m } = termSublevels({ levels: term, field: { values, unit: 'T' }, model: 'linear', g_values: 'adopted' })
        expect(m).toEqual([...m].sort((a, b) => a - b))
        for (const row of energies) expect(row.reduce((sum, energy) => sum + energy, 0)).toBeCloseTo(0 + 3 * 10 + 5 * 30, 6)
      }),
      { numRuns: 50 },
    )
  })

  it('go upwards within an m at small field', () => {
    const { m, j } = termSublevels({ levels: [...term].reverse(), field: 0.001, model: 'linear', g_values: 'adopted' })
    expect(j.filter((_, i) => m[i] === 0)).toEqual([0, 1, 2])
  })
})
