import { and, asc, desc, eq, gt, inArray, isNull, lt, or, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { Db, Tx } from '@/db/client'
import { amendmentAuthors, amendmentChanges, amendments, comments, reviews, users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import { entityTag, staleProblem } from '@/lib/entity-tag'
import type { Amendment, AmendmentChanges, AmendmentDetail, NewAmendment, Review } from '@/openapi/schemas/amendment'
import { amendmentMissing, type AmendmentRow, lockForEdit, noteEdit } from './editing'
import { possibleFor } from './possible'

type Person = Amendment['author']

/** The tag that If-Match names: of the amendment's own version, not of what is said about it. */
export const amendmentTag = ({ id, version }: { id: string; version: number }): string => entityTag('amendment', id, version)

const NO_COUNTS = { changes: 0, errors: 0, warnings: 0, uncommented: 0 }

async function countsOf(db: Db | Tx, ids: string[]): Promise<Map<string, typeof NO_COUNTS>> {
  const c = amendmentChanges
  const number = (condition: SQL) => sql<number>`count(*) filter (where ${condition})`.mapWith(Number)
  const rows = await db
    .select({ id: c.amendmentId, changes: number(sql`true`), errors: number(sql`${c.errors} > 0`), warnings: number(sql`${c.warnings} > 0`), uncommented: number(sql`${c.warnings} > 0 and coalesce(btrim(${c.comment}), '') = ''`) })
    .from(c).where(inArray(c.amendmentId, ids)).groupBy(c.amendmentId)
  return new Map(rows.map(({ id, ...counts }) => [id, counts]))
}

async function authorsOf(db: Db | Tx, rows: readonly AmendmentRow[]): Promise<(row: AmendmentRow) => { author: Person; authors: Person[] }> {
  const written = await db
    .select({ amendment: amendmentAuthors.amendmentId, id: users.id, name: users.name })
    .from(amendmentAuthors).innerJoin(users, eq(users.id, amendmentAuthors.userId)).where(inArray(amendmentAuthors.amendmentId, rows.map((row) => row.id))).orderBy(users.name, users.id)
  const begun = await db.select({ id: users.id, name: users.name }).from(users).where(inArray(users.id, rows.map((row) => row.author)))
  return (row) => {
    const author = begun.find((person) => person.id === row.author) ?? { id: row.author, name: '' }
    return { author, authors: [author, ...written.filter((one) => one.amendment === row.id && one.id !== row.author).map(({ id, name }) => ({ id, name }))] }
  }
}

async function reviewsOf(db: Db | Tx, ids: string[]): Promise<Map<string, Review[]>> {
  const [asker, closer, voider] = [alias(users, 'asker'), alias(users, 'closer'), alias(users, 'voider')]
  const rows = await db
    .select({ review: reviews, askedBy: { id: asker.id, name: asker.name }, closerName: closer.name, voiderName: voider.name })
    .from(reviews).innerJoin(asker, eq(asker.id, reviews.askedBy)).leftJoin(closer, eq(closer.id, reviews.closedBy)).leftJoin(voider, eq(voider.id, reviews.voidedBy))
    .where(inArray(reviews.amendmentId, ids)).orderBy(asc(reviews.askedAt), asc(reviews.version))
  const byAmendment = new Map<string, Review[]>()
  for (const { review, askedBy, closerName, voiderName } of rows) {
    const list = byAmendment.get(review.amendmentId) ?? []
    list.push({
      id: review.id, version: review.version, asked_by: askedBy, asked_at: review.askedAt.toISOString(), comment: review.comment, outcome: review.outcome,
      closed_by: review.closedBy === null ? null : { id: review.closedBy, name: closerName ?? '' }, closed_at: review.closedAt?.toISOString() ?? null, closing_comment: review.closingComment,
      voided: review.voidedBy === null || review.voidedAt === null ? null : { by: { id: review.voidedBy, name: voiderName ?? '' }, at: review.voidedAt.toISOString() },
    })
    byAmendment.set(review.amendmentId, list)
  }
  return byAmendment
}

async function openThreadsOf(db: Db | Tx, ids: string[]): Promise<Map<string, number>> {
  const rows = await db.select({ id: comments.amendmentId, count: sql<number>`count(*)`.mapWith(Number) }).from(comments)
    .where(and(inArray(comments.amendmentId, ids), isNull(comments.thread), isNull(comments.resolvedAt))).groupBy(comments.amendmentId)
  return new Map(rows.map((row) => [row.id, row.count]))
}

/** Amendments as the API gives them, with all their reviews beside; four queries, however many there are. */
export async function describeAmendments(db: Db | Tx, rows: readonly AmendmentRow[]): Promise<{ amendment: Amendment; reviews: Review[] }[]> {
  if (rows.length === 0) return []
  const ids = rows.map((row) => row.id)
  const [counts, people, reviewed, threads] = [await countsOf(db, ids), await authorsOf(db, rows), await reviewsOf(db, ids), await openThreadsOf(db, ids)]
  return rows.map((row) => {
    const list = reviewed.get(row.id) ?? []
    return {
      reviews: list,
      amendment: {
        id: row.id, title: row.title, note: row.note, state: row.state, ...people(row),
        counts: { ...(counts.get(row.id) ?? NO_COUNTS), open_comments: threads.get(row.id) ?? 0 },
        review: list.at(-1) ?? null, published_in: row.publishedIn, version: row.version, etag: amendmentTag(row),
        created_at: row.createdAt.toISOString(), updated_at: row.updatedAt.toISOString(),
      },
    }
  })
}

/** One amendment with its reviews and what the one who asks may do with it. */
export async function describeDetail(db: Db | Tx, row: AmendmentRow, caller: Caller): Promise<AmendmentDetail> {
  const [one] = await describeAmendments(db, [row])
  if (one === undefined) throw amendmentMissing()
  return { ...one.amendment, reviews: one.reviews, possible: possibleFor(one.amendment, caller) }
}

/** Newest first; one row more than `limit` tells that there is a next page. */
export async function listAmendments(db: Db, filter: { state?: Amendment['state'] }, after: readonly (string | number | null)[] | null, limit: number): Promise<Amendment[]> {
  const conditions: (SQL | undefined)[] = [filter.state === undefined ? undefined : eq(amendments.state, filter.state)]
  if (after !== null) {
    const [at, id] = [new Date(String(after[0])), String(after[1])]
    conditions.push(or(lt(amendments.createdAt, at), and(eq(amendments.createdAt, at), gt(amendments.id, id))))
  }
  const rows = await db.select().from(amendments).where(and(...conditions)).orderBy(desc(amendments.createdAt), amendments.id).limit(limit + 1)
  return (await describeAmendments(db, rows)).map(({ amendment }) => amendment)
}

export async function amendmentRow(db: Db | Tx, id: string): Promise<AmendmentRow> {
  const [row] = await db.select().from(amendments).where(eq(amendments.id, id))
  if (row === undefined) throw amendmentMissing()
  return row
}

export const readAmendment = async (db: Db, id: string, caller: Caller): Promise<AmendmentDetail> => describeDetail(db, await amendmentRow(db, id), caller)

export async function createAmendment(db: Db, acting: Acting, given: NewAmendment): Promise<AmendmentDetail> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    // milliseconds: what a cursor can carry
    const now = new Date()
    const [row] = await tx.insert(amendments).values({ title: given.title, note: given.note ?? '', author: caller.userId, createdAt: now, updatedAt: now }).returning()
    if (row === undefined) throw new Error('The amendment was not stored')
    await recordAudit(tx, acting, { action: 'amendment.create', subjectKind: 'amendment', subjectId: row.id, after: { title: row.title, note: row.note } })
    return describeDetail(tx, row, acting.caller)
  })
}

/** 412 with what is there now, where `ifMatch` is not the amendment's tag. The row is under lock. */
export async function requireAmendment(tx: Tx, row: AmendmentRow, ifMatch: string | null, caller: Caller): Promise<void> {
  if (ifMatch !== amendmentTag(row)) throw staleProblem(await describeDetail(tx, row, caller))
}

/** Changes title or note; whatever state it was in, it is a draft afterwards. */
export async function changeAmendment(db: Db, acting: Acting, id: string, given: AmendmentChanges, ifMatch: string | null): Promise<AmendmentDetail> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    const row = await lockForEdit(tx, id)
    await requireAmendment(tx, row, ifMatch, acting.caller)
    const { title, note, state, version } = row
    const next = { title: given.title ?? title, note: given.note ?? note }
    // what says the same again is no edit: it must not void a review
    if (next.title === title && next.note === note) return describeDetail(tx, row, acting.caller)
    const changed = await noteEdit(tx, row, caller.userId, next)
    await recordAudit(tx, acting, { action: 'amendment.change', subjectKind: 'amendment', subjectId: id, before: { title, note, state, version }, after: { ...next, state: changed.state, version: changed.version } })
    return describeDetail(tx, changed, acting.caller)
  })
}
