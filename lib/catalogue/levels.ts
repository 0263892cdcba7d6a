import { levelVerdict, type LevelCriteria, type LevelExclusion } from '@/lib/catalogue/criteria'
import { type LevelSort, searchIndex } from '@/lib/catalogue/search-index'
import type { Snapshot } from '@/lib/catalogue/shape'

export type { LevelCriteria } from '@/lib/catalogue/criteria'
export type { LevelSort } from '@/lib/catalogue/search-index'

/** Rows that `explain` lists at most; the counts are always of all. */
export const EXPLAINED_LIMIT = 1000

export interface LevelListQuery {
  readonly criteria: LevelCriteria
  readonly sort: LevelSort
  readonly limit: number
  /** Id of the last level already given. */
  readonly after: string | null
  readonly explain: boolean
}

export interface LevelList {
  /** Indices of the page's levels, in order. */
  readonly indices: readonly number[]
  /** Id of the last level of this page where more follow. */
  readonly next: string | null
  /** All levels that match, on any page. */
  readonly total: number
  readonly excluded: Partial<Record<LevelExclusion, number>>
  readonly explained: readonly { level: string; reason: LevelExclusion }[]
}

/**
 * Lists levels. The order is total (ties by species, energy and ordinal), so a page begins exactly after the level the last one
 * ended with. One pass over the edition counts matches and exclusions: the same on every page.
 * Null when `after` names no active level of this edition.
 */
export function listLevels(snapshot: Snapshot, { criteria, sort, limit, after, explain }: LevelListQuery): LevelList | null {
  const verdict = levelVerdict(snapshot, criteria)
  const { sequence, place } = searchIndex(snapshot).order(sort)
  let begin = 0
  if (after !== null) {
    const last = snapshot.indexOf(after)
    if (last === undefined) return null
    begin = (place[last] ?? 0) + 1
  }
  const indices: number[] = []
  const excluded: Partial<Record<LevelExclusion, number>> = {}
  const explained: { level: string; reason: LevelExclusion }[] = []
  let total = 0
  let more = false
  const leaveOut = (i: number, reason: LevelExclusion): void => {
    excluded[reason] = (excluded[reason] ?? 0) + 1
    if (explain && explained.length < EXPLAINED_LIMIT) explained.push({ level: snapshot.levelId(i), reason })
  }
  for (let at = 0; at < sequence.length; at += 1) {
    const i = sequence[at] ?? 0
    const result = verdict(i)
    if (result === 'out') continue
    if (result !== 'in') {
      leaveOut(i, result)
      continue
    }
    total += 1
    if (at < begin) continue
    if (indices.length < limit) indices.push(i)
    else more = true
  }
  for (let i = snapshot.size; i < snapshot.total; i += 1) if (verdict(i) === 'retired') leaveOut(i, 'retired')
  const last = indices.at(-1)
  return { indices, next: more && last !== undefined ? snapshot.levelId(last) : null, total, excluded, explained }
}
