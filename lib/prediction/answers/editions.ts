import type { z } from 'zod'
import { getDb } from '@/db/client'
import { canonicalEdition } from '@/db/edition-content'
import { editionExists, getSnapshot } from '@/lib/catalogue/snapshot'
import type { Snapshot } from '@/lib/catalogue/shape'
import { compareEditions, countDifferences } from '@/lib/prediction/comparison'
import { describeDifferences } from '@/lib/prediction/comparison-details'
import { citeEdition, citeSource } from '@/lib/prediction/citations'
import { readEdition, readEditionHead, readEditions } from '@/lib/prediction/editions'
import { readFeed } from '@/lib/prediction/feed'
import { levelHistory } from '@/lib/prediction/history'
import { levelMap } from '@/lib/prediction/level-map'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { sourceOf } from '@/lib/prediction/resolve'
import { changeTable, feedTable, levelMapTable } from '@/lib/prediction/tables/editions'
import { levelTable } from '@/lib/prediction/tables/levels'
import { parameterProblem } from '@/lib/problem'
import type { listChanges, listEditionChanges } from '@/openapi/operations/editions'
import type { Level } from '@/openapi/schemas/level'

export async function editionList(query: object, after: Position) {
  const limit = limitOf(query)
  const { rows, next } = pageOf(await readEditions(getDb()), limit, after, (edition) => edition.number)
  return { data: [...rows], page: { limit, next } }
}

export const oneEdition = async (n: number) => ({ data: await readEdition(getDb(), n) })

/** The edition compared with: the one before where none is named; 0 is the empty table. */
async function sinceOf(n: number, asked: number | undefined, both: boolean): Promise<number> {
  const since = asked ?? n - 1
  if (since === n || (since > n && !both)) throw parameterProblem('since', 'number_out_of_range', both ? `since must be another edition than ${n}; 0 is the empty table.` : `since must be an edition before ${n}; 0 is the empty table.`)
  if (since > 0 && !(await editionExists(since))) throw parameterProblem('since', 'edition_unknown', `There is no edition ${since}; GET /api/v1/editions lists all.`)
  return since
}

/** What an edition shows otherwise than another: counts of all of it, the fields of one page. */
export async function changeList(n: number, query: z.output<(typeof listEditionChanges)['query']>, after: Position) {
  const limit = limitOf(query)
  const since = await sinceOf(n, query.since, true)
  const all = await compareEditions(getDb(), n, since)
  const wanted = query.species === undefined && query.kind === undefined && query.action === undefined ? all : all.filter(({ kind, species, action }) =>
    (query.kind === undefined || query.kind === kind) && (query.action === undefined || query.action === action) && (query.species === undefined || (species !== null && query.species.includes(species))))
  const { rows, next } = pageOf(wanted, limit, after, ({ kind, subject }) => `${kind} ${subject}`)
  const changes = await describeDifferences(getDb(), n, since, rows)
  return { data: changes, page: { limit, next }, meta: { since, total: wanted.length, counts: countDifferences(all) }, table: () => changeTable(changes, `lodeterm-edition-${n}-since-${since}`) }
}

/** Every level of an earlier edition with its place in this one. */
export async function levelMapFile(snapshot: Snapshot, asked: number | undefined) {
  const n = snapshot.edition
  const since = await sinceOf(n, asked, false)
  const earlier = since === 0 ? null : await getSnapshot(since)
  const changed = new Set((await compareEditions(getDb(), n, since)).flatMap(({ kind, action, subject }) => (kind === 'level' && action === 'replaced' ? [subject] : [])))
  const again = { [Symbol.iterator]: () => levelMap(earlier, snapshot, changed) }
  return { meta: { since }, table: levelMapTable(again, `lodeterm-levels-${since}-to-${n}`) }
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

/** The canonical text that the checksum is made of, as a file. */
export async function contentFile(n: number) {
  const head = await readEditionHead(getDb(), n)
  return { text: canonicalEdition(getDb(), head), headers: { 'content-disposition': `inline; filename="lodeterm-edition-${n}-content.json"` } }
}

export const editionCitation = async (n: number) => ({ data: citeEdition(await readEdition(getDb(), n)) })

export const sourceCitation = (snapshot: Snapshot, key: string) => ({ data: citeSource(sourceOf(snapshot, key)) })

/** The feed of changes, from a place in it or from a cursor. `last_sequence` is what to ask on from, whether anything is new or not. */
export async function feedList(query: z.output<(typeof listChanges)['query']>, after: Position) {
  const limit = limitOf(query)
  const from = after === null ? query.after : Number(after[0])
  const entries = await readFeed(getDb(), from, limit)
  const rows = entries.slice(0, limit)
  const last = rows.at(-1)
  return { data: rows, page: { limit, next: entries.length > limit && last !== undefined ? [last.sequence] : null }, meta: { last_sequence: last?.sequence ?? from }, table: () => feedTable(rows) }
}

export const historyOf = async (level: string) => ({ data: await levelHistory(getDb(), level) })
