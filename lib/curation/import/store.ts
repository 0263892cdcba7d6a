import { and, desc, eq, gt, lt, or, type SQL, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { amendments, importRows, imports, users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { Problem } from '@/lib/problem'
import type { Import, ImportProblem, ImportReading, ImportRow, ImportVerdict } from '@/openapi/schemas/import'
import { amendmentMissing, storable } from '../editing'

/** The reports of imports in the database: begun, moved on while they run, ended once. */

/** One that has not moved for so long ended with its process. */
const SILENCE = sql`interval '15 seconds'`
const interrupted = sql<boolean>`(${imports.state} = 'running' and ${imports.aliveAt} < now() - ${SILENCE})`

type Row = { row: typeof imports.$inferSelect; author: { id: string; name: string }; interrupted: boolean }
const COLUMNS = { row: imports, author: { id: users.id, name: users.name }, interrupted }

export type Counts = Import['counts']
export const noCounts = (): Counts => ({ new: 0, changed: 0, same: 0, ambiguous: 0, error: 0 })

const count = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`

function summaryOf(state: Import['state'], dryRun: boolean, total: number, done: number, counts: Counts, problems: readonly ImportProblem[]): string {
  const would = dryRun ? 'would be ' : ''
  switch (state) {
    case 'running': return total === 0 ? 'The file is being read.' : `${done} of ${count(total, 'row')} done.`
    case 'stopped': return 'Stopped; nothing was written.'
    case 'interrupted': return 'Its process ended before it was done; nothing was written. Import the file again.'
    case 'failed': return 'It failed, and nothing was written. Import the file again.'
    case 'refused': {
      const [first] = problems
      if (first !== undefined) return `Nothing was written: ${first.detail}${problems.length > 1 ? ` And ${problems.length - 1} more.` : ''}`
      const bad = [counts.error > 0 ? `${count(counts.error, 'row has', 'rows have')} errors` : null, counts.ambiguous > 0 ? `${count(counts.ambiguous, 'row')} could be about several levels` : null]
      return `Nothing was written: ${bad.filter((one) => one !== null).join(' and ')}. Mend the file and import it again.`
    }
    case 'done': {
      if (counts.new + counts.changed === 0) return `Nothing differs: ${count(total, 'row says', 'rows say')} what the table or this amendment has already. Nothing was changed.`
      const same = counts.same > 0 ? ` ${count(counts.same, 'row says', 'rows say')} what is there already.` : ''
      return `${count(counts.new, 'level')} ${would}created and ${counts.changed} ${would}changed.${same}${dryRun ? ' This was a dry run: nothing was written.' : ''}`
    }
  }
}

function shown({ row, author, interrupted: lost }: Row): Import {
  const state = lost ? 'interrupted' : row.state
  const counts = { ...noCounts(), ...(row.counts as Partial<Counts>) }
  const problems = row.problems as ImportProblem[]
  const reading = row.reading as Partial<ImportReading>
  return {
    id: row.id, amendment: row.amendmentId, author, file_name: row.fileName, sha256: row.sha256, bytes: row.bytes, dry_run: row.dryRun, state,
    reading: reading.columns === undefined ? null : (reading as ImportReading),
    rows_total: row.rowsTotal, rows_done: row.rowsDone, counts, problems, summary: summaryOf(state, row.dryRun, row.rowsTotal, row.rowsDone, counts, problems),
    created_at: row.createdAt.toISOString(), ended_at: row.endedAt?.toISOString() ?? null,
  }
}

const importMissing = (): Problem => new Problem('import_unknown', 'This amendment has no import of this identifier; GET .../imports lists them.')

async function requireAmendment(db: Db | Tx, amendment: string): Promise<void> {
  const [row] = await db.select({ id: amendments.id }).from(amendments).where(eq(amendments.id, amendment))
  if (row === undefined) throw amendmentMissing()
}

export async function readImport(db: Db | Tx, amendment: string, id: string): Promise<Import> {
  const [row] = await db.select(COLUMNS).from(imports).innerJoin(users, eq(users.id, imports.author)).where(and(eq(imports.id, id), eq(imports.amendmentId, amendment)))
  if (row !== undefined) return shown(row)
  await requireAmendment(db, amendment)
  throw importMissing()
}

/** Newest first; one more than `limit` tells that there is a next page. */
export async function listImports(db: Db, amendment: string, after: readonly (string | number | null)[] | null, limit: number): Promise<Import[]> {
  const conditions: (SQL | undefined)[] = [eq(imports.amendmentId, amendment)]
  if (after !== null) {
    const [at, id] = [new Date(String(after[0])), String(after[1])]
    conditions.push(or(lt(imports.createdAt, at), and(eq(imports.createdAt, at), gt(imports.id, id))))
  }
  const rows = await db.select(COLUMNS).from(imports).innerJoin(users, eq(users.id, imports.author)).where(and(...conditions)).orderBy(desc(imports.createdAt), imports.id).limit(limit + 1)
  if (rows.length === 0) await requireAmendment(db, amendment)
  return rows.map(shown)
}

export interface Begun { amendment: string; author: string; fileName: string; sha256: string; bytes: number; dryRun: boolean }

/** Notes that an import has begun, unless another of the amendment is running. Call it with the amendment's row locked. */
export async function beginImport(tx: Tx, { amendment, ...begun }: Begun): Promise<string> {
  const [running] = await tx.select({ id: imports.id }).from(imports).where(and(eq(imports.amendmentId, amendment), eq(imports.state, 'running'), sql`${imports.aliveAt} >= now() - ${SILENCE}`)).limit(1)
  if (running !== undefined) throw new Problem('import_running', 'An import of this amendment is still running; wait for it, or stop it first.', { extra: { import: running.id } })
  // milliseconds: what a cursor can carry
  const [row] = await tx.insert(imports).values({ amendmentId: amendment, ...begun, reading: {}, createdAt: new Date() }).returning({ id: imports.id })
  if (row === undefined) throw new Error('The import was not stored')
  return row.id
}

/** Moves a running import on; false where it is not running any more, because somebody stopped it. */
export async function moveOn(db: Db, id: string, done: number, total: number): Promise<boolean> {
  const moved = await db.update(imports).set({ rowsDone: done, rowsTotal: total, aliveAt: sql`now()` }).where(and(eq(imports.id, id), eq(imports.state, 'running'))).returning({ id: imports.id })
  return moved.length > 0
}

export interface End { state: 'done' | 'refused' | 'failed'; reading: ImportReading | null; rowsTotal: number; counts: Counts; problems: readonly ImportProblem[] }

/** Ends a running import; false where it is not running any more, and then nothing of the transaction may stay. */
export async function endImport(tx: Tx | Db, id: string, end: End): Promise<boolean> {
  const ended = await tx.execute(sql`
    update imports set state = ${end.state}, reading = ${storable(end.reading ?? {})}::jsonb, rows_total = ${end.rowsTotal}, rows_done = ${end.rowsTotal}, counts = ${storable(end.counts)}::jsonb,
      problems = ${storable(end.problems)}::jsonb, alive_at = now(), ended_at = now()
    where id = ${id} and state = 'running'`)
  return (ended.rowCount ?? 0) > 0
}

/** Stops a running import, in whichever process it runs: it finds that out within half a second, or when it would write. */
export async function stopImport(db: Db, acting: Acting, amendment: string, id: string): Promise<Import> {
  const current = await readImport(db, amendment, id)
  if (current.state !== 'running') throw new Problem('state_conflict', `This import is ${current.state}; only a running one can be stopped.`, { extra: { state: current.state, possible_states: ['running'] } })
  const stopped = await db.transaction(async (tx) => {
    const ended = await tx.update(imports).set({ state: 'stopped', endedAt: sql`now()` }).where(and(eq(imports.id, id), eq(imports.state, 'running'))).returning({ id: imports.id })
    if (ended.length > 0) await recordAudit(tx, acting, { action: 'import.stop', subjectKind: 'amendment', subjectId: amendment, after: { import: id } })
    return ended
  })
  const after = await readImport(db, amendment, id)
  if (stopped.length === 0) throw new Problem('state_conflict', `This import is ${after.state}; only a running one can be stopped.`, { extra: { state: after.state, possible_states: ['running'] } })
  return after
}

const BATCH = 2000

/** Writes the report, row by row, and drops those of the amendment's earlier imports. `turn` gives the event loop back. */
export async function writeReport(tx: Tx, amendment: string, id: string, rows: readonly ImportRow[], turn: () => Promise<void>): Promise<void> {
  await tx.execute(sql`delete from import_rows where import_id in (select id from imports where amendment_id = ${amendment} and id <> ${id} and state <> 'running')`)
  for (let from = 0; from < rows.length; from += BATCH) {
    await turn()
    const batch = storable(rows.slice(from, from + BATCH))
    await tx.execute(sql`
      insert into import_rows (import_id, row, verdict, level_id, findings, fields)
      select ${id}::uuid, r.row, r.verdict, r.level, r.findings, r.fields from jsonb_to_recordset(${batch}::jsonb) as r (row int, verdict text, level text, findings jsonb, fields jsonb)`)
  }
}

/** Rows of a report in the order of the file, after row `after`. */
export async function listReport(db: Db, id: string, verdict: ImportVerdict | undefined, after: number, limit: number): Promise<ImportRow[]> {
  const rows = await db.select().from(importRows).where(and(eq(importRows.importId, id), gt(importRows.row, after), verdict === undefined ? undefined : eq(importRows.verdict, verdict))).orderBy(importRows.row).limit(limit)
  return rows.map((row) => ({ row: row.row, verdict: row.verdict, level: row.levelId, findings: row.findings as ImportRow['findings'], fields: row.fields as ImportRow['fields'] }))
}
