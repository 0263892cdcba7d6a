import type { Snapshot } from '@/lib/catalogue/shape'
import { Problem } from '@/lib/problem'
import type { Source } from '@/openapi/schemas/source'
import type { Species } from '@/openapi/schemas/species'

/** How unlike two identifiers are: letters that stand in one and not at the same place in the other. */
function unlike(a: string, b: string): number {
  let different = Math.abs(a.length - b.length)
  for (let i = 0; i < Math.min(a.length, b.length); i += 1) if (a[i]?.toLowerCase() !== b[i]?.toLowerCase()) different += 1
  return different
}

/** Up to three known identifiers near the one that was asked for; the nearest first. */
function near(id: string, known: Iterable<string>, within: number): string[] {
  return [...known]
    .map((candidate) => ({ candidate, distance: unlike(id, candidate) }))
    .filter(({ distance }) => distance <= within)
    .sort((a, b) => a.distance - b.distance)
    .slice(0, 3)
    .map(({ candidate }) => candidate)
}

const orList = (items: readonly string[]): string => (items.length === 0 ? '' : ` Did you mean ${items.join(' or ')}?`)

/** Other stages of the same element go before look-alikes. */
function speciesNear(snapshot: Snapshot, id: string): string[] {
  const element = id.split('-')[0] ?? ''
  const same = snapshot.species.filter((species) => species.element === element).map((species) => species.id)
  return same.length > 0 ? same : near(id, snapshot.speciesIndex.keys(), 1)
}

/** Index of a species; 404 `species_unknown` naming near ones. */
export function speciesIndex(snapshot: Snapshot, id: string, parameter = 'species'): number {
  const index = snapshot.speciesIndex.get(id)
  if (index !== undefined) return index
  const detail = `Edition ${snapshot.edition} holds no species ${id}.${orList(speciesNear(snapshot, id))} GET /api/v1/species lists all.`
  throw new Problem('species_unknown', detail, { errors: [{ parameter, code: 'species_unknown', detail }] })
}

export function speciesOf(snapshot: Snapshot, id: string): Species {
  const species = snapshot.species[speciesIndex(snapshot, id)]
  if (!species) throw new Problem('species_unknown', `Edition ${snapshot.edition} holds no species ${id}.`)
  return species
}

/** The levels of a species whose ordinals are nearest. */
function levelsNear(snapshot: Snapshot, species: number, ordinal: number): string[] {
  const [from, to] = snapshot.speciesRange(species)
  return Array.from({ length: to - from }, (_, i) => from + i)
    .sort((a, b) => Math.abs((snapshot.columns.ordinal[a] ?? 0) - ordinal) - Math.abs((snapshot.columns.ordinal[b] ?? 0) - ordinal))
    .slice(0, 2)
    .map((index) => snapshot.levelId(index))
}

/** Index of an active level. 410 `level_retired` with reason and successor from the retiring edition on; 404 `level_unknown` naming near ones. */
export function levelIndex(snapshot: Snapshot, id: string, parameter = 'level'): number {
  const index = snapshot.indexOf(id)
  if (index !== undefined) return index
  const retired = snapshot.retired(id)
  if (retired) {
    const before = retired.edition > 1 ? ` Edition ${retired.edition - 1} still holds it.` : ''
    const successor = retired.successor === null ? '' : ` Its successor is ${retired.successor}.`
    throw new Problem('level_retired', `${id} was retired in edition ${retired.edition}${retired.reason === null ? '' : `: ${retired.reason}`}.${successor}${before}`, {
      extra: { reason: retired.reason, successor: retired.successor, retired_in_edition: retired.edition },
    })
  }
  const [speciesId = '', ordinal = '0'] = id.split('.')
  const species = snapshot.speciesIndex.get(speciesId)
  const hint = species === undefined ? ` There is no species ${speciesId} either.${orList(speciesNear(snapshot, speciesId))}` : orList(levelsNear(snapshot, species, Number(ordinal)))
  const detail = `Edition ${snapshot.edition} holds no level ${id}.${hint}`
  throw new Problem('level_unknown', detail, { errors: [{ parameter, code: 'level_unknown', detail }] })
}

/** Indices of both levels of a transition's id, in the order given. */
export function transitionIndices(snapshot: Snapshot, id: string): readonly [number, number] {
  const [first = '', second = ''] = id.split('~')
  return [levelIndex(snapshot, first, 'transition'), levelIndex(snapshot, second, 'transition')]
}

export function sourceOf(snapshot: Snapshot, key: string, parameter = 'key'): Source {
  const source = snapshot.sourceByKey.get(key)
  if (source) return source
  const detail = `Edition ${snapshot.edition} holds no source ${key}.${orList(near(key, snapshot.sourceByKey.keys(), 4))} GET /api/v1/sources lists all.`
  throw new Problem('source_unknown', detail, { errors: [{ parameter, code: 'source_unknown', detail }] })
}
