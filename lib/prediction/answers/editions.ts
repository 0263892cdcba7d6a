import { getDb } from '@/db/client'
import { editionExists, getSnapshot } from '@/lib/catalogue/snapshot'
import type { Snapshot } from '@/lib/catalogue/shape'
import { changesBetween } from '@/lib/prediction/changes'
import { readEdition, readEditions } from '@/lib/prediction/editions'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { levelTable } from '@/lib/prediction/tables/levels'
import { parameterProblem } from '@/lib/problem'
import type { Change } from '@/openapi/schemas/edition'
import type { Level } from '@/openapi/schemas/level'

export async function editionList(query: object, after: Position) {
  const limit = limitOf(query)
  const { rows, next } = pageOf(await readEditions(getDb()), limit, after, (edition) => edition.number)
  return { data: [...rows], page: { limit, next } }
}

export const oneEdition = async (n: number) => ({ data: await readEdition(getDb(), n) })

/** Snapshots are immutable, so what changed between two of them is worked out once. */
const compared = new WeakMap<Snapshot, Map<number, Change[]>>()

async function changesSince(later: Snapshot, since: number): Promise<Change[]> {
  const known = compared.get(later) ?? new Map<number, Change[]>()
  compared.set(later, known)
  const made = known.get(since) ?? changesBetween(since === 0 ? null : await getSnapshot(since), later)
  known.set(since, made)
  return made
}

/** What changed since an earlier edition, the one before by default; 0 is the empty table. */
export async function changeList(snapshot: Snapshot, query: { since?: number | undefined }, after: Position) {
  const limit = limitOf(query)
  const since = query.since ?? snapshot.edition - 1
  if (since >= snapshot.edition) throw parameterProblem('since', 'number_out_of_range', `since must be an edition before ${snapshot.edition}; 0 is the empty table.`)
  if (since > 0 && !(await editionExists(since))) throw parameterProblem('since', 'edition_unknown', `There is no edition ${since}; GET /api/v1/editions lists all.`)
  const changes = await changesSince(snapshot, since)
  const { rows, next } = pageOf(changes, limit, after, (change) => change.level)
  return { data: [...rows], page: { limit, next }, meta: { since, total: changes.length } }
}

/** Every active level, built one after another as the file is written. */
function* levelsOf(snapshot: Snapshot): Generator<Level> {
  for (let i = 0; i < snapshot.size; i += 1) yield snapshot.level(i)
}

/** The whole table of an edition: rows only, so that every format, JSON too, is written piece by piece. */
export function editionFile(snapshot: Snapshot) {
  const again: Iterable<Level> = { [Symbol.iterator]: () => levelsOf(snapshot) }
  return { meta: { total: snapshot.size }, table: levelTable(again, `lodeterm-edition-${snapshot.edition}-levels`) }
}
