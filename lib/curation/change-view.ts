import { and, asc, eq, gt, sql, type SQL } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { amendmentChanges, users } from '@/db/schema'
import { entityTag } from '@/lib/entity-tag'
import { Problem } from '@/lib/problem'
import type { AmendmentChange, ChangeKind, Finding, Values } from '@/openapi/schemas/change'
import { amendmentRow } from './amendments'
import type { AmendmentRow } from './editing'
import { type InForce, readInForce, staleDetail } from './in-force'
import type { AnyRow, ChangeInput } from './rows'
import { loadSubjects, newestEdition } from './table'
import { differences, writeValues } from './values'

export type ChangeRow = typeof amendmentChanges.$inferSelect

export const changeMissing = (): Problem => new Problem('change_unknown', 'The amendment has no change of this identifier; it may have been taken out. GET its changes to see them.')

/** The tag that If-Match names: of what was written, not of the findings, which other changes can alter. */
export const changeTag = ({ id, version }: { id: string; version: number }): string => entityTag('change', id, version)

export const inputOf = ({ id, kind, action, subject, speciesId, given, reason, successor }: ChangeRow): ChangeInput => ({ id, kind, action, subject, speciesId, given, reason, successor })

/** The edition that an amendment is compared with: the newest, or for a published one that before its own. */
export const comparedEdition = async (db: Db | Tx, amendment: Pick<AmendmentRow, 'publishedIn'>): Promise<number> => (amendment.publishedIn === null ? newestEdition(db) : amendment.publishedIn - 1)

interface Told { action: AmendmentChange['action']; kind: ChangeKind; given: unknown; row: AnyRow | null; before: AnyRow | null }

/** Before, after and what differs, as a curator writes values. */
export function beforeAndAfter({ action, kind, row, before }: Omit<Told, 'given'>): Pick<AmendmentChange, 'before' | 'after' | 'fields'> {
  return {
    before: before === null ? null : writeValues(kind, before),
    after: row === null || action === 'retire' ? null : writeValues(kind, row),
    fields: row === null ? [] : differences(kind, before, row),
  }
}

/** Found on reading, not stored: it comes of an edition, not of an edit, and stays through edits that do not state the revision in force. */
const staleFinding = (change: ChangeRow, now: InForce | null): Finding => ({
  severity: 'error', code: 'base_stale', field: null, detail: `${staleDetail(change.subject, change.baseRevision, now)} Look at its values of today, and save the change with base_revision ${now?.revision ?? 'null'}.`,
})

/** Changes as the API gives them, beside the values of the edition compared with. */
export async function describeChanges(db: Db | Tx, rows: readonly ChangeRow[], edition: number): Promise<AmendmentChange[]> {
  if (rows.length === 0) return []
  const published = await loadSubjects(db, edition, rows)
  const authors = await db.select({ id: users.id, name: users.name }).from(users).where(sql`${users.id} in (select (jsonb_array_elements_text(${JSON.stringify([...new Set(rows.map((row) => row.author))])}::jsonb))::uuid)`)
  const isStale = (change: ChangeRow): boolean => (published(change.kind, change.subject)?.revision ?? null) !== change.baseRevision
  const inForce = await readInForce(db, edition, rows.filter(isStale))
  return rows.map((change) => {
    const { kind, action, subject } = change
    const now = published(kind, subject)
    return {
      id: change.id, amendment: change.amendmentId, kind, action, subject,
      species: change.speciesId, level: kind === 'level' ? subject : kind === 'hyperfine' ? subject.slice(0, subject.indexOf('/')) : null,
      values: action === 'retire' ? null : (change.given as Values), reason: change.reason, successor: change.successor, comment: change.comment, base_revision: change.baseRevision, current_revision: now?.revision ?? null,
      ...beforeAndAfter({ kind, action, row: change.row as AnyRow | null, before: now?.row ?? null }),
      findings: isStale(change) ? [staleFinding(change, inForce(kind, subject)), ...(change.findings as Finding[])] : (change.findings as Finding[]),
      author: authors.find((person) => person.id === change.author) ?? { id: change.author, name: '' },
      import_row: change.importRow, version: change.version, etag: changeTag(change), created_at: change.createdAt.toISOString(), updated_at: change.updatedAt.toISOString(),
    }
  })
}

export interface ChangeFilter { kind?: ChangeKind; severity?: 'error' | 'warning'; q?: string }

/** In the order they came; `after` is the position of the last one already given. One row more than `limit` tells that there is a next page. */
export async function listChanges(db: Db, amendmentId: string, filter: ChangeFilter, after: number | null, limit: number): Promise<{ rows: AmendmentChange[]; positions: number[] }> {
  const amendment = await amendmentRow(db, amendmentId)
  const c = amendmentChanges
  const conditions: (SQL | undefined)[] = [eq(c.amendmentId, amendmentId), after === null ? undefined : gt(c.position, after)]
  if (filter.kind !== undefined) conditions.push(eq(c.kind, filter.kind))
  if (filter.severity !== undefined) conditions.push(gt(filter.severity === 'error' ? c.errors : c.warnings, 0))
  for (const word of filter.q?.split(/\s+/) ?? []) {
    const like = `%${word.toWellFormed().replace(/[\\%_]/g, '\\$&')}%`
    conditions.push(sql`(${c.subject} ilike ${like} or ${c.given}::text ilike ${like} or ${c.comment} ilike ${like} or ${c.reason} ilike ${like})`)
  }
  const rows = await db.select().from(c).where(and(...conditions)).orderBy(asc(c.position)).limit(limit + 1)
  return { rows: await describeChanges(db, rows, await comparedEdition(db, amendment)), positions: rows.map((row) => row.position) }
}

export async function changeRow(db: Db | Tx, amendmentId: string, id: string, hold?: 'key share'): Promise<ChangeRow> {
  const query = db.select().from(amendmentChanges).where(and(eq(amendmentChanges.amendmentId, amendmentId), eq(amendmentChanges.id, id)))
  const [row] = await (hold === undefined ? query : query.for(hold))
  if (row === undefined) throw changeMissing()
  return row
}

/** One change with what its consequences are computed from. */
export async function readChange(db: Db | Tx, amendmentId: string, id: string): Promise<{ change: AmendmentChange; row: ChangeRow; edition: number }> {
  const amendment = await amendmentRow(db, amendmentId)
  const row = await changeRow(db, amendmentId, id)
  const edition = await comparedEdition(db, amendment)
  const [change] = await describeChanges(db, [row], edition)
  if (change === undefined) throw changeMissing()
  return { change, row, edition }
}
