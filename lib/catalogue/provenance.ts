import type { EditionContent } from '@/lib/catalogue/shape'
import type { Source } from '@/openapi/schemas/source'

const speciesOfLevel = (levelId: string): string => levelId.slice(0, levelId.lastIndexOf('.'))

/** Ids of the levels that are active in the edition: only their values are counted. */
const activeIds = (content: EditionContent): ReadonlySet<string> =>
  new Set(content.levels.filter((row) => row.status === 'active').map((row) => `${row.speciesId}.${row.ordinal}`))

/** Each source with the number of values of the edition that rest on it, by kind of value. In order of their keys. */
export function countSources(content: EditionContent): Source[] {
  const active = activeIds(content)
  const counts = new Map(content.sources.map((source) => [source.key, { species: 0, levels: 0, measured_g: 0, isotopes: 0, hyperfine_constants: 0 }]))
  type Kind = 'species' | 'levels' | 'measured_g' | 'isotopes' | 'hyperfine_constants'
  const count = (key: string | null, kind: Kind): void => {
    const used = key === null ? undefined : counts.get(key)
    if (used) used[kind] += 1
  }
  for (const row of content.species) {
    count(row.ionisation_source, 'species')
    for (const isotope of row.isotopes) count(isotope.source, 'isotopes')
  }
  for (const row of content.levels) if (row.status === 'active') count(row.energySource, 'levels')
  for (const row of content.measuredG) if (active.has(row.levelId)) count(row.source, 'measured_g')
  for (const row of content.hyperfine) if (active.has(row.levelId)) count(row.source, 'hyperfine_constants')
  const zero = { species: 0, levels: 0, measured_g: 0, isotopes: 0, hyperfine_constants: 0 }
  return content.sources
    .map((source) => ({ ...source, used_by: counts.get(source.key) ?? zero }))
    .sort((a, b) => (a.key < b.key ? -1 : a.key > b.key ? 1 : 0))
}

/** The keys of every source that a value of a species rests on, in order of the keys. */
export function sourcesBySpecies(content: EditionContent): ReadonlyMap<string, readonly string[]> {
  const active = activeIds(content)
  const found = new Map<string, Set<string>>(content.species.map((row) => [row.id, new Set()]))
  const note = (speciesId: string, key: string | null): void => {
    if (key !== null) found.get(speciesId)?.add(key)
  }
  for (const row of content.species) {
    note(row.id, row.ionisation_source)
    for (const isotope of row.isotopes) note(row.id, isotope.source)
  }
  for (const row of content.levels) if (row.status === 'active') note(row.speciesId, row.energySource)
  for (const row of [...content.measuredG, ...content.hyperfine]) if (active.has(row.levelId)) note(speciesOfLevel(row.levelId), row.source)
  return new Map([...found].map(([id, keys]) => [id, [...keys].sort()]))
}
