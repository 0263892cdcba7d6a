import type { Snapshot } from '@/lib/catalogue/shape'
import type { MappedLevel } from '@/openapi/schemas/edition'

/** Successors of a retired level are followed to the one that is active; a chain that ends or comes back to itself leads nowhere. */
export function activeSuccessor(later: Pick<Snapshot, 'indexOf' | 'retired'>, id: string): number | null {
  const seen = new Set<string>()
  for (let at: string | null = id; at !== null && !seen.has(at); at = later.retired(at)?.successor ?? null) {
    seen.add(at)
    const index = later.indexOf(at)
    if (index !== undefined) return index
  }
  return null
}

const numberOf = (value: number | undefined): number | null => (value === undefined || Number.isNaN(value) ? null : value)

function mapped(earlier: Snapshot | null, old: number | null, later: Snapshot, now: number | null, status: MappedLevel['status']): MappedLevel {
  const [snapshot, index] = now !== null ? [later, now] : [earlier, old]
  if (snapshot === null || index === null) throw new Error('a level of neither edition was mapped')
  const level = snapshot.level(index)
  const energyOld = old === null ? null : numberOf(earlier?.columns.energyInvcm[old])
  const energyNew = now === null ? null : numberOf(later.columns.energyInvcm[now])
  return {
    level_old: old === null ? null : (earlier?.levelId(old) ?? null),
    level_new: now === null ? null : later.levelId(now),
    status,
    species: level.species,
    configuration: level.configuration,
    term: level.term.symbol,
    energy_old_invcm: energyOld,
    energy_new_invcm: energyNew,
    shift_invcm: energyOld === null || energyNew === null ? null : energyNew - energyOld,
    g_j_old: old === null ? null : numberOf(earlier?.columns.gAdopted[old]),
    g_j_new: now === null ? null : numberOf(later.columns.gAdopted[now]),
  }
}

/**
 * Every active level of the earlier edition with its place in the later one, then those that are new there and took nobody's place.
 * `changed` holds the levels that have other values; `earlier` null is the empty table.
 */
export function* levelMap(earlier: Snapshot | null, later: Snapshot, changed: ReadonlySet<string>): Generator<MappedLevel> {
  const taken = new Set<number>()
  for (let i = 0; earlier !== null && i < earlier.size; i += 1) {
    const id = earlier.levelId(i)
    const same = later.indexOf(id)
    const now = same ?? activeSuccessor(later, id)
    if (now !== null) taken.add(now)
    yield mapped(earlier, i, later, now, same === undefined ? 'retired' : changed.has(id) ? 'changed' : 'same')
  }
  for (let i = 0; i < later.size; i += 1) {
    if (!taken.has(i)) yield mapped(earlier, null, later, i, 'created')
  }
}
