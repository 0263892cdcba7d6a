import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parseTerm } from '@/lib/atomic/term'
import { type LevelCriteria, wholeConfiguration } from '@/lib/catalogue/criteria'
import { listLevels, type LevelSort } from '@/lib/catalogue/levels'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import type { Level } from '@/openapi/schemas/level'
import { syntheticSnapshot } from '@/tests/bench/synthetic'
import { seedSnapshot, withRetired } from './editions'

const snapshot = seedSnapshot()
const term = (text: string) => {
  const read = parseTerm(text)
  if (!read.ok) throw new Error(read.detail)
  return read.value
}
const all = (of: Snapshot, criteria: LevelCriteria, sort: LevelSort = 'species') => {
  const list = listLevels(of, { criteria, sort, limit: of.total, after: null, explain: true })
  if (list === null) throw new Error('no list')
  return { ...list, levels: list.indices.map((i) => of.level(i)) }
}
const species = (id: string) => new Set([snapshot.speciesIndex.get(id) ?? -1])

describe('filters of levels', () => {
  it('2P matches either parity, 2P* odd only, and J narrows', () => {
    const carbon = species('C-II')
    const either = all(snapshot, { species: carbon, terms: [term('2P')] }).levels
    expect(either.length).toBeGreaterThan(0)
    expect(all(snapshot, { terms: [term('2P')] }).total).toBeGreaterThan(all(snapshot, { terms: [term('2P*')] }).total)
    for (const level of all(snapshot, { terms: [term('2P*')] }).levels) expect(level.term).toMatchObject({ s: 0.5, l: 1, parity: 'odd' })
    for (const level of all(snapshot, { terms: [term('2P*3/2')] }).levels) expect(level.term.j).toBe(1.5)
  })

  it('z5P* asks for the label too', () => {
    const labelled = all(snapshot, { terms: [term('z5P*')] }).levels
    expect(labelled.map((level) => level.term.label)).toEqual(labelled.map(() => 'z'))
    expect(labelled.length).toBeGreaterThan(0)
  })

  it('finds pair-coupled levels by their own symbol', () => {
    expect(all(snapshot, { terms: [term('2[3/2]*2')] }).levels.map((level) => level.id)).toEqual(['Ne-I.2', 'Ar-I.2', 'Kr-I.2'])
  })

  it('matches a configuration whole; parents left out match any parents, given ones must fit', () => {
    const iron = species('Fe-I')
    expect(all(snapshot, { species: iron, configurations: [wholeConfiguration('3d6.4s.4p')] }).total).toBe(10)
    expect(all(snapshot, { species: iron, configurations: [wholeConfiguration('3d6.(5D).4s.4p.(3P*)')] }).total).toBe(10)
    expect(all(snapshot, { species: iron, configurations: [wholeConfiguration('3d6.(5D).4s.4p.(1P*)')] }).total).toBe(0)
    expect(all(snapshot, { species: iron, configurations: [wholeConfiguration('4s.4p')] }).total).toBe(0)
    expect(all(snapshot, { configurations: [wholeConfiguration('[Ne].3p')] }).levels.map((level) => level.id)).toContain('Na-I.3')
  })

  it('never lets an unknown g match a bound, and says how many were left out so', () => {
    const { total, excluded, levels } = all(snapshot, { gMin: { value: -100 } })
    const withoutG = Array.from({ length: snapshot.size }, (_, i) => snapshot.level(i)).filter((level) => level.g_j.adopted === null)
    expect(total).toBe(snapshot.size - withoutG.length)
    expect((excluded.g_not_known ?? 0) + (excluded.g_not_applicable ?? 0)).toBe(withoutG.length)
    for (const level of levels) expect(level.g_j.adopted).not.toBeNull()
  })

  it('tells levels of no S and L from those of other S and L', () => {
    const { excluded } = all(snapshot, { species: species('Ne-I'), twoS: 1 })
    expect(excluded).toEqual({ s_l_not_applicable: 15 })
  })

  it('counts and lists retired levels that would have matched, and no others', () => {
    const later = withRetired(['Na-I.3', 'Na-I.5'])
    const { total, excluded, explained } = all(later, { terms: [term('2P*')], species: species('Na-I') })
    expect(total).toBe(3)
    expect(excluded).toEqual({ retired: 1 })
    expect(explained).toEqual([{ level: 'Na-I.3', reason: 'retired' }])
  })

  it('finds what rests on a source', () => {
    const { total } = all(snapshot, { source: 'sansonetti-2008-na' })
    expect(total).toBe(11)
  })

  it('answers null for a cursor that names no active level', () => {
    expect(listLevels(snapshot, { criteria: {}, sort: 'energy', limit: 10, after: 'Na-I.999', explain: false })).toBeNull()
  })
})

const bound = fc.option(fc.double({ min: -1, max: 4, noNaN: true }), { nil: undefined })
const anyCriteria = fc.record(
  {
    species: fc.uniqueArray(fc.nat({ max: 32 }), { minLength: 1, maxLength: 6 }).map((list) => new Set(list)),
    twoS: fc.nat({ max: 6 }),
    l: fc.nat({ max: 4 }),
    twoJ: fc.array(fc.nat({ max: 12 }), { minLength: 1, maxLength: 2 }),
    parity: fc.constantFrom('even' as const, 'odd' as const),
    energyMin: fc.double({ min: 0, max: 60_000, noNaN: true }),
    energyMax: fc.double({ min: 0, max: 200_000, noNaN: true }),
    gMin: bound.map((value) => (value === undefined ? undefined : { value })),
    gMax: bound.map((value) => (value === undefined ? undefined : { value })),
  },
  { requiredKeys: [] },
)

function satisfies(level: Level, speciesAt: number, criteria: LevelCriteria): boolean {
  const g = level.g_j.adopted
  return (
    (criteria.species === undefined || criteria.species.has(speciesAt)) &&
    (criteria.twoS === undefined || level.term.s === criteria.twoS / 2) &&
    (criteria.l === undefined || level.term.l === criteria.l) &&
    (criteria.twoJ === undefined || criteria.twoJ.includes(2 * level.term.j)) &&
    (criteria.parity === undefined || level.term.parity === criteria.parity) &&
    (criteria.energyMin === undefined || level.energy_invcm >= criteria.energyMin) &&
    (criteria.energyMax === undefined || level.energy_invcm <= criteria.energyMax) &&
    (criteria.gMin === undefined || (g !== null && g >= criteria.gMin.value)) &&
    (criteria.gMax === undefined || (g !== null && g <= criteria.gMax.value))
  )
}

describe('any filter', () => {
  it('returns exactly the levels that satisfy it', () => {
    fc.assert(
      fc.property(anyCriteria, (given) => {
        const criteria: LevelCriteria = JSON.parse(JSON.stringify({ ...given, species: undefined })) as LevelCriteria
        const whole: LevelCriteria = given.species === undefined ? criteria : { ...criteria, species: given.species }
        const expected = Array.from({ length: snapshot.size }, (_, i) => i).filter((i) => satisfies(snapshot.level(i), snapshot.columns.speciesOf[i] ?? 0, whole))
        expect(all(snapshot, whole).indices).toEqual(expected)
      }),
      { numRuns: 200 },
    )
  })
})

describe('pages of levels', () => {
  const invented = syntheticSnapshot({ species: 5, levels: 60, seed: 3, degenerate: true })
  const key: Record<LevelSort, (level: Level) => number> = {
    energy: (level) => level.energy_invcm,
    '-energy': (level) => -level.energy_invcm,
    j: (level) => level.term.j,
    g: (level) => level.g_j.adopted ?? Number.POSITIVE_INFINITY,
    species: (level) => invented.speciesIndex.get(level.species) ?? 0,
  }

  it.each(['energy', '-energy', 'j', 'g', 'species'] as const)('make the whole list once, in order, sorted by %s', (sort) => {
    const seen: string[] = []
    let after: string | null = null
    let last = Number.NEGATIVE_INFINITY
    do {
      const list = listLevels(invented, { criteria: { parity: 'odd' }, sort, limit: 7, after, explain: false })
      if (list === null) throw new Error('the cursor was refused')
      for (const i of list.indices) {
        const level = invented.level(i)
        expect(key[sort](level)).toBeGreaterThanOrEqual(last)
        last = key[sort](level)
        seen.push(level.id)
      }
      // counts do not change with the page
      expect(list.total).toBe(all(invented, { parity: 'odd' }).total)
      after = list.next
    } while (after !== null)
    expect(new Set(seen).size).toBe(seen.length)
    expect([...seen].sort()).toEqual(all(invented, { parity: 'odd' }).levels.map((level) => level.id).sort())
  })
})
