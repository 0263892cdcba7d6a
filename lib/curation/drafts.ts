import { and, desc, eq, gt, lt, or, type SQL } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { amendments, users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { Problem } from '@/lib/problem'
import type { Amendment, AmendmentChanges, NewAmendment } from '@/openapi/schemas/amendment'

type Row = { amendment: typeof amendments.$inferSelect; author: { id: string; name: string } }
const COLUMNS = { amendment: amendments, author: { id: users.id, name: users.name } }

const shown = ({ amendment, author }: Row): Amendment => ({
  id: amendment.id, title: amendment.title, note: amendment.note, state: amendment.state, author, version: amendment.version,
  created_at: amendment.createdAt.toISOString(), updated_at: amendment.updatedAt.toISOString(),
})

/** What the entity tag of an amendment is made from. */
export const amendmentVersion = (amendment: Amendment): readonly [string, string, number] => ['amendment', amendment.id, amendment.version]

const missing = (): Problem => new Problem('amendment_unknown', 'There is no amendment of this identifier; GET /amendments lists them.')

/** Newest first; one row more than `limit` tells that there is a next page. */
export async function listAmendments(db: Db, filter: { state?: Amendment['state'] }, after: readonly (string | number | null)[] | null, limit: number): Promise<Amendment[]> {
  const conditions: (SQL | undefined)[] = [filter.state === undefined ? undefined : eq(amendments.state, filter.state)]
  if (after !== null) {
    const [at, id] = [new Date(String(after[0])), String(after[1])]
    conditions.push(or(lt(amendments.createdAt, at), and(eq(amendments.createdAt, at), gt(amendments.id, id))))
  }
  const rows = await db.select(COLUMNS).from(amendments).innerJoin(users, eq(users.id, amendments.author)).where(and(...conditions)).orderBy(desc(amendments.createdAt), amendments.id).limit(limit + 1)
  return rows.map(shown)
}

export async function readAmendment(db: Db, id: string): Promise<Amendment> {
  const [row] = await db.select(COLUMNS).from(amendments).innerJoin(users, eq(users.id, amendments.author)).where(eq(amendments.id, id))
  if (row === undefined) throw missing()
  return shown(row)
}

export async function createAmendment(db: Db, acting: Acting, given: NewAmendment): Promise<Amendment> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    // milliseconds: what a cursor can carry
    const now = new Date()
    const [row] = await tx.insert(amendments).values({ title: given.title, note: given.note ?? '', author: caller.userId, createdAt: now, updatedAt: now }).returning()
    const [author] = await tx.select({ id: users.id, name: users.name }).from(users).where(eq(users.id, caller.userId))
    if (row === undefined || author === undefined) throw new Error('The amendment was not stored')
    await recordAudit(tx, acting, { action: 'amendment.create', subjectKind: 'amendment', subjectId: row.id, after: { title: row.title, note: row.note } })
    return shown({ amendment: row, author })
  })
}

/** Changes title or note of a draft. `check` sees the amendment as it is, under lock, and refuses a stale version. */
export async function changeAmendment(db: Db, acting: Acting, id: string, given: AmendmentChanges, check: (amendment: Amendment) => void): Promise<Amendment> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    const [row] = await tx.select(COLUMNS).from(amendments).innerJoin(users, eq(users.id, amendments.author)).where(eq(amendments.id, id)).for('update', { of: amendments })
    if (row === undefined) throw missing()
    if (row.author.id !== caller.userId && caller.role !== 'admin') throw new Problem('not_the_author', 'Only its author or an admin may change a draft.')
    check(shown(row))
    if (row.amendment.state !== 'draft') {
      throw new Problem('state_conflict', `This amendment is ${row.amendment.state}; only a draft can be changed.`, { extra: { state: row.amendment.state, possible_states: ['draft'] } })
    }
    const { title, note, version } = row.amendment
    const next = { title: given.title ?? title, note: given.note ?? note }
    const [changed] = await tx.update(amendments).set({ ...next, version: version + 1, updatedAt: new Date() }).where(eq(amendments.id, id)).returning()
    if (changed === undefined) throw missing()
    await recordAudit(tx, acting, { action: 'amendment.change', subjectKind: 'amendment', subjectId: id, before: { title, note, version }, after: { ...next, version: version + 1 } })
    return shown({ amendment: changed, author: row.author })
  })
}
