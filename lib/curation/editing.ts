import { and, eq, isNull, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { amendmentAuthors, amendments, reviews } from '@/db/schema'
import { Problem } from '@/lib/problem'
import type { AmendmentState } from '@/openapi/schemas/amendment'
import type { ChangeAction, ChangeKind, Finding } from '@/openapi/schemas/change'
import type { AnyRow } from './rows'

export type AmendmentRow = typeof amendments.$inferSelect

/** The states in which an amendment can be edited; where it is not a draft, an edit makes it one again. */
export const EDITABLE: readonly AmendmentState[] = ['draft', 'in_review', 'accepted']

export const amendmentMissing = (): Problem => new Problem('amendment_unknown', 'There is no amendment of this identifier; GET /amendments lists them.')

export const stateConflict = (state: AmendmentState, possible: readonly AmendmentState[], what: string): Problem =>
  new Problem('state_conflict', `This amendment is ${state.replace('_', ' ')}; ${what} is possible only when it is ${possible.map((one) => one.replace('_', ' ')).join(' or ')}.`, { extra: { state, possible_states: possible } })

/** Takes the amendment's row for the rest of the transaction: whoever else edits it or moves it on waits. A comment, which only refers to the row, does not. */
export async function lockAmendment(tx: Tx, id: string): Promise<AmendmentRow> {
  const [row] = await tx.select().from(amendments).where(eq(amendments.id, id)).for('no key update')
  if (row === undefined) throw amendmentMissing()
  return row
}

/** The same for an edit: 409 where the amendment is published or withdrawn. */
export async function lockForEdit(tx: Tx, id: string): Promise<AmendmentRow> {
  const row = await lockAmendment(tx, id)
  if (!EDITABLE.includes(row.state)) throw stateConflict(row.state, EDITABLE, 'an edit')
  return row
}

/** Notes who wrote or edited changes of an amendment: they cannot accept it. */
export async function recordAuthors(tx: Tx, amendment: string, userId: string): Promise<void> {
  await tx.insert(amendmentAuthors).values({ amendmentId: amendment, userId }).onConflictDoNothing()
}

/**
 * Ends an edit: the version rises, an amendment in review or accepted is a draft again, its open review is closed as edited, and its acceptance is void.
 * Call it last in the transaction, with the row that `lockForEdit` gave. Returns the new version.
 */
export async function noteEdit(tx: Tx, amendment: AmendmentRow, userId: string, more: { title?: string; note?: string } = {}): Promise<AmendmentRow> {
  const now = new Date()
  if (amendment.state === 'in_review') {
    await tx.update(reviews).set({ outcome: 'edited', closedBy: userId, closedAt: now }).where(and(eq(reviews.amendmentId, amendment.id), isNull(reviews.outcome)))
  } else if (amendment.state === 'accepted') {
    // the acceptance spoke for the version before, and stays on record as it was given
    await tx.execute(sql`update reviews set voided_by = ${userId}, voided_at = ${now.toISOString()}::timestamptz
      where id = (select id from reviews where amendment_id = ${amendment.id} order by asked_at desc, id limit 1) and outcome = 'accepted'`)
  }
  const [row] = await tx.update(amendments).set({ ...more, state: 'draft', version: amendment.version + 1, updatedAt: now }).where(eq(amendments.id, amendment.id)).returning()
  if (row === undefined) throw amendmentMissing()
  return row
}

/**
 * Reserves `count` ordinals for new levels of a species and gives the first: beyond every ordinal in use and every one ever reserved.
 * Whoever reserves others of the same species waits until this transaction ends.
 */
export async function reserveOrdinals(tx: Tx, species: string, count: number): Promise<number> {
  const { rows } = await tx.execute<{ next: number }>(sql`
    with used as (select coalesce(max(ordinal), 0) + 1 as free from levels where species_id = ${species})
    insert into ordinal_counters (species_id, next) values (${species}, (select free from used) + ${count}::int)
    on conflict (species_id) do update set next = greatest(ordinal_counters.next, (select free from used)) + ${count}::int
    returning next`)
  const [row] = rows
  if (row === undefined) throw new Error('No ordinal was reserved')
  return row.next - count
}

/** A checked change ready to be stored. */
export interface PreparedChange {
  kind: ChangeKind
  action: ChangeAction
  subject: string
  speciesId: string | null
  /** As the curator wrote it. */
  given: unknown
  row: AnyRow | null
  findings: readonly Finding[]
  reason: string | null
  successor: string | null
  comment: string | null
  /** Revision of the subject in the newest edition; null where it is not there. */
  baseRevision: number | null
  importId?: string | null
  importRow?: number | null
}

const BATCH = 1000

const UNSTORABLE = /\\u(?:0000|d[89a-f])/i

/** JSON that PostgreSQL takes: neither half of a surrogate pair nor NUL is a character to it. Few texts hold any, and looking at each value costs. */
export function storable(value: unknown): string {
  const text = JSON.stringify(value)
  if (!UNSTORABLE.test(text)) return text
  return JSON.stringify(value, (_, inner: unknown) => (typeof inner === 'string' ? inner.toWellFormed().replaceAll('\0', '\ufffd') : inner))
}

const countOf = (findings: readonly Finding[], severity: Finding['severity']): number => findings.reduce((sum, one) => sum + (one.severity === severity ? 1 : 0), 0)

const stored = (change: PreparedChange) => ({
  kind: change.kind, action: change.action, subject: change.subject, species_id: change.speciesId, given: change.given, row: change.row,
  reason: change.reason, successor: change.successor, comment: change.comment, base_revision: change.baseRevision, findings: change.findings,
  errors: countOf(change.findings, 'error'), warnings: countOf(change.findings, 'warning'), import_id: change.importId ?? null, import_row: change.importRow ?? null,
})

/**
 * Stores changes of an amendment, a thousand in a statement, in the order given. A subject that the amendment changes already gets the
 * new values in place of the old ones. Checks nothing, and touches neither the amendment nor its authors: see `noteEdit`,
 * `recordAuthors`. Returns the identifiers in the order given.
 */
export async function insertChanges(tx: Tx | Db, amendment: string, author: string, prepared: readonly PreparedChange[]): Promise<string[]> {
  const ids = new Map<string, string>()
  for (let from = 0; from < prepared.length; from += BATCH) {
    const batch = prepared.slice(from, from + BATCH).map(stored)
    const { rows } = await tx.execute<{ id: string; kind: string; subject: string }>(sql`
      insert into amendment_changes (amendment_id, author, created_at, updated_at, kind, action, subject, species_id, given, row, reason, successor, comment, base_revision, findings, errors, warnings, import_id, import_row)
      select ${amendment}::uuid, ${author}::uuid, date_trunc('milliseconds', clock_timestamp()), date_trunc('milliseconds', clock_timestamp()),
        r.kind, r.action, r.subject, r.species_id, r.given, nullif(r.row, 'null'::jsonb), r.reason, r.successor, r.comment, r.base_revision, r.findings, r.errors, r.warnings, r.import_id, r.import_row
      from rows from (jsonb_to_recordset(${storable(batch)}::jsonb) as (kind text, action text, subject text, species_id text, given jsonb, row jsonb, reason text, successor text, comment text,
        base_revision int, findings jsonb, errors int, warnings int, import_id uuid, import_row int)) with ordinality as r (kind, action, subject, species_id, given, row, reason, successor, comment, base_revision, findings, errors, warnings, import_id, import_row, place)
      order by r.place
      on conflict (amendment_id, kind, subject) do update set action = excluded.action, given = excluded.given, row = excluded.row, reason = excluded.reason, successor = excluded.successor,
        comment = excluded.comment, base_revision = excluded.base_revision, findings = excluded.findings, errors = excluded.errors, warnings = excluded.warnings, author = excluded.author,
        import_id = excluded.import_id, import_row = excluded.import_row, version = amendment_changes.version + 1, updated_at = excluded.updated_at
      returning id, kind, subject`)
    for (const row of rows) ids.set(`${row.kind} ${row.subject}`, row.id)
  }
  return prepared.map((change) => ids.get(`${change.kind} ${change.subject}`) ?? '')
}
