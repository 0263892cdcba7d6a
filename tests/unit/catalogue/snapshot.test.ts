import { describe, expect, it } from 'vitest'
import { SnapshotCache } from '@/lib/catalogue/cache'
import { buildSnapshot, type Snapshot } from '@/lib/catalogue/snapshot'
import { Level } from '@/openapi/schemas/level'
import { Source } from '@/openapi/schemas/source'
import { Species } from '@/openapi/schemas/species'
import { syntheticContent } from '@/tests/bench/synthetic'
import { seedContent, seedSnapshot, withRetired } from './editions'

const indexOf = (snapshot: Snapshot, id: string): number => {
  const index = snapshot.indexOf(id)
  if (index === undefined) throw new Error(`${id} is missing`)
  return index
}

describe('an edition in memory', () => {
  const snapshot = seedSnapshot()

  it('holds the whole first edition', () => {
    expect(snapshot.species).toHaveLength(33)
    expect(snapshot.size).toBe(407)
    expect(snapshot.total).toBe(407)
    expect(snapshot.species.reduce((sum, species) => sum + species.level_count, 0)).toBe(407)
  })

  it('gives levels, species and sources in exactly the shape of the contract', () => {
    for (let i = 0; i < snapshot.total; i += 1) expect(Level.safeParse(snapshot.level(i)).error).toBeUndefined()
    for (const species of snapshot.species) expect(Species.safeParse(species).error).toBeUndefined()
    for (const source of snapshot.sources) expect(Source.safeParse(source).error).toBeUndefined()
  })

  it('keeps levels of a species together, lower energy first, equal energies by ordinal', () => {
    const { energyInvcm, ordinal, speciesOf } = snapshot.columns
    snapshot.species.forEach((species, index) => {
      const [from, to] = snapshot.speciesRange(index)
      expect(to - from).toBe(species.level_count)
      for (let i = from; i < to; i += 1) {
        expect(speciesOf[i]).toBe(index)
        if (i > from) expect(energyInvcm[i]! > energyInvcm[i - 1]! || (energyInvcm[i] === energyInvcm[i - 1] && ordinal[i]! > ordinal[i - 1]!)).toBe(true)
      }
    })
  })

  it('says the same in columns and in levels', () => {
    for (let i = 0; i < snapshot.size; i += 1) {
      const level = snapshot.level(i)
      const { columns } = snapshot
      expect(snapshot.indexOf(level.id)).toBe(i)
      expect(columns.energyInvcm[i]).toBe(level.energy_invcm)
      expect(columns.twoJ[i]).toBe(2 * level.term.j)
      expect(columns.twoS[i]).toBe(level.term.s === null ? -1 : 2 * level.term.s)
      expect(columns.l[i]).toBe(level.term.l ?? -1)
      expect(columns.parity[i]).toBe(level.term.parity === 'odd' ? 1 : 0)
      expect(columns.gAdopted[i]).toBe(level.g_j.adopted ?? Number.NaN)
      expect(snapshot.judged(i)).toEqual({ twoJ: 2 * level.term.j, twoS: level.term.s === null ? null : 2 * level.term.s, l: level.term.l, parity: level.term.parity, coupling: level.coupling })
    }
  })

  it('never gives a g of 0 for J = 0: it does not apply', () => {
    const level = snapshot.level(indexOf(snapshot, 'He-I.1'))
    expect(level.g_j).toMatchObject({ adopted: null, coupled: null, coupled_exact: null, ls: null, basis: 'none', status: 'not_applicable' })
  })

  it('gives pair-coupled levels K, core and their own g, and no S, L or LS g', () => {
    const level = snapshot.level(indexOf(snapshot, 'Ne-I.2'))
    expect(level.coupling).toBe('J1K')
    expect(level.term).toMatchObject({ symbol: '2[3/2]*2', unicode: '²[3/2]°₂', s: null, l: null, multiplicity: null, k: 1.5, core: { s: 0.5, l: 1, j: 1.5 }, l_outer: 0, j: 2 })
    expect(level.g_j).toMatchObject({ scheme: 'J1K', coupled_exact: '3/2', ls: null, ls_exact: null })
    expect(level.alternative_name).toBe('1s5')
  })

  it('keeps every measured g with source and evidence', () => {
    const level = snapshot.level(indexOf(snapshot, 'Cs-I.3'))
    expect(level.g_j.all_measured).toHaveLength(2)
    for (const { source, evidence } of level.g_j.all_measured) {
      expect(snapshot.sourceByKey.has(source)).toBe(true)
      expect(['read', 'quoted', 'recalled', 'computed']).toContain(evidence)
    }
  })

  it('knows a term complete, or which J it lacks', () => {
    const sodium = snapshot.termMembers(indexOf(snapshot, 'Na-I.3'))
    expect(sodium).toEqual({ indices: [indexOf(snapshot, 'Na-I.2'), indexOf(snapshot, 'Na-I.3')], missingTwoJ: [], complete: true })
    const calcium = snapshot.termMembers(indexOf(snapshot, 'Ca-I.16'))
    expect(calcium.complete).toBe(false)
    expect(calcium.missingTwoJ).toEqual([0, 2])
    expect(snapshot.termMembers(indexOf(snapshot, 'Ne-I.2')).complete).toBe(false)
  })

  it('tells terms of one symbol apart by configuration and label', () => {
    for (let i = 0; i < snapshot.size; i += 1) {
      const { indices } = snapshot.termMembers(i)
      expect(indices).toContain(i)
      const js = indices.map((k) => snapshot.columns.twoJ[k])
      expect(new Set(js).size).toBe(js.length)
    }
  })

  it('counts what rests on each source', () => {
    const total = (pick: (used: Source['used_by']) => number): number => snapshot.sources.reduce((sum, source) => sum + pick(source.used_by), 0)
    const content = seedContent()
    expect(total((used) => used.levels)).toBe(407)
    expect(total((used) => used.measured_g)).toBe(content.measuredG.length)
    expect(total((used) => used.hyperfine_constants)).toBe(content.hyperfine.length)
    expect(total((used) => used.species)).toBe(33)
  })

  it('keeps a retired level out of everything but the answer that it is gone', () => {
    const later = withRetired(['Na-I.3'])
    expect(later.size).toBe(406)
    expect(later.total).toBe(407)
    expect(later.indexOf('Na-I.3')).toBeUndefined()
    expect(later.retired('Na-I.3')).toEqual({ reason: 'entered twice', successor: 'Na-I.2', edition: 2 })
    expect(later.retired('Na-I.2')).toBeUndefined()
    expect(later.species[later.speciesIndex.get('Na-I') ?? -1]?.level_count).toBe(10)
    expect(later.termMembers(indexOf(later, 'Na-I.2')).missingTwoJ).toEqual([3])
    expect(later.level(later.size)).toMatchObject({ id: 'Na-I.3', status: 'retired', revision: 2 })
  })

  it('refuses an index that is no level rather than inventing one', () => {
    expect(() => snapshot.level(407)).toThrow(RangeError)
    expect(() => snapshot.level(-1)).toThrow(RangeError)
  })
})

describe('keeping editions', () => {
  const sized = (edition: number, bytes: number): Snapshot => ({ ...seedSnapshot(), edition, bytes })

  it('loads an edition once for requests that come together', async () => {
    let loads = 0
    const cache = new SnapshotCache((edition) => {
      loads += 1
      return Promise.resolve(sized(edition, 1))
    })
    const [a, b] = await Promise.all([cache.get(1), cache.get(1)])
    expect(a).toBe(b)
    expect(loads).toBe(1)
  })

  it('forgets the edition asked for longest ago when memory is short, never the newest', async () => {
    const cache = new SnapshotCache((edition) => Promise.resolve(sized(edition, 60)), 100)
    await cache.get(1)
    await cache.get(2)
    expect(cache.editions()).toEqual([2])
    const large = new SnapshotCache((edition) => Promise.resolve(sized(edition, 600)), 100)
    await large.get(1)
    expect(large.editions()).toEqual([1])
  })

  it('tries again after a load that failed', async () => {
    let loads = 0
    const cache = new SnapshotCache((edition) => {
      loads += 1
      return loads === 1 ? Promise.reject(new Error('connection lost')) : Promise.resolve(sized(edition, 1))
    })
    await expect(cache.get(1)).rejects.toThrow('connection lost')
    await expect(cache.get(1)).resolves.toMatchObject({ edition: 1 })
  })
})

describe('a large edition', () => {
  it('stays compact: under 500 bytes a level', () => {
    const snapshot = buildSnapshot(syntheticContent({ species: 10, levels: 1000 }))
    expect(snapshot.size).toBe(10_000)
    // levels built on request are bounded apart
    expect((snapshot.bytes - 3000 * 4096) / snapshot.size).toBeLessThan(500)
  })
})
