import { and, asc, eq, isNull, ne, sql, type SQL } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { apiKeys, invitations, sessions, users, webhooks } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { atLeast } from '@/lib/access/caller'
import { voidResets } from '@/lib/access/resets'
import { forgetVerified } from '@/lib/access/verified'
import { entityTag } from '@/lib/entity-tag'
import { Problem } from '@/lib/problem'
import type { Role } from '@/openapi/core/define'
import type { PersonAccount, PersonChanges } from '@/openapi/schemas/people'

const keysInUse = sql<number>`(select count(*)::int from ${apiKeys} where ${apiKeys.userId} = ${users}.${sql.identifier('id')} and ${apiKeys.revokedAt} is null and (${apiKeys.expiresAt} is null or ${apiKeys.expiresAt} > now()))`
const lastSeen = sql<string | null>`(select max(${sessions.lastSeenAt}) from ${sessions} where ${sessions.userId} = ${users}.${sql.identifier('id')})`
const COLUMNS = { user: users, keys: keysInUse, seen: lastSeen }

const shown = ({ user, keys, seen }: { user: typeof users.$inferSelect; keys: number; seen: string | null }): PersonAccount => ({
  id: user.id, email: user.email, name: user.name, role: user.role, active: user.active, signs_in: user.passwordHash !== null, demo: user.demo, keys_in_use: keys,
  last_seen_at: seen === null ? null : new Date(seen).toISOString(), created_at: user.createdAt.toISOString(), updated_at: user.updatedAt.toISOString(), etag: entityTag('person', user.id, user.version),
})

/** Text for a LIKE pattern, in which nothing is a wildcard. */
const plainly = (text: string): string => text.replace(/[\\%_]/g, '\\$&')

/** By name. `after` is [name in lower case, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listPeople(db: Db, filter: { q?: string; role?: Role; active?: 'true' | 'false' }, after: readonly (string | number | null)[] | null, limit: number): Promise<PersonAccount[]> {
  const conditions: (SQL | undefined)[] = []
  if (filter.role !== undefined) conditions.push(eq(users.role, filter.role))
  if (filter.active !== undefined) conditions.push(eq(users.active, filter.active === 'true'))
  if (filter.q !== undefined) conditions.push(sql`(${users.name} ilike ${`%${plainly(filter.q)}%`} or ${users.email} ilike ${`%${plainly(filter.q)}%`})`)
  if (after !== null) conditions.push(sql`(lower(${users.name}), ${users.id}) > (lower(${String(after[0])}), ${String(after[1])}::uuid)`)
  const rows = await db.select(COLUMNS).from(users).where(and(...conditions)).orderBy(sql`lower(${users.name})`, asc(users.id)).limit(limit + 1)
  return rows.map(shown)
}

const missing = (): Problem => new Problem('person_unknown', 'There is no account of this identifier; GET /people lists them.')

export async function readPerson(db: Db | Tx, id: string): Promise<PersonAccount> {
  const [row] = await db.select(COLUMNS).from(users).where(eq(users.id, id))
  if (row === undefined) throw missing()
  return shown(row)
}

/** Whoever takes an admin away waits for whoever does the same, and then counts what is left. */
const adminsLock = sql`select pg_advisory_xact_lock(hashtext('lodeterm admins'))`

async function keepOneAdmin(tx: Tx, leaving: string): Promise<void> {
  const others = await tx.select({ id: users.id }).from(users)
    .where(and(ne(users.id, leaving), eq(users.role, 'admin'), eq(users.active, true), sql`${users.passwordHash} is not null`)).limit(1)
  if (others.length === 0) throw new Problem('last_admin', 'This is the last admin who can sign in; make another person an admin first.')
}

/** What an account leaves behind that would go on speaking for it. */
async function endSpeakingFor(tx: Tx, userId: string, closed: boolean): Promise<Record<string, number>> {
  const now = new Date()
  const count = (rows: unknown[]): number => rows.length
  const invited = count(await tx.update(invitations).set({ revokedAt: now }).where(and(eq(invitations.invitedBy, userId), isNull(invitations.acceptedAt), isNull(invitations.revokedAt))).returning({ id: invitations.id }))
  const hooks = count(await tx.update(webhooks).set({ active: false, version: sql`${webhooks.version} + 1` }).where(and(eq(webhooks.owner, userId), eq(webhooks.active, true), isNull(webhooks.removedAt))).returning({ id: webhooks.id }))
  if (!closed) return { invitations_revoked: invited, webhooks_switched_off: hooks }
  const ended = count(await tx.update(sessions).set({ endedAt: now }).where(and(eq(sessions.userId, userId), isNull(sessions.endedAt))).returning({ id: sessions.id }))
  const revoked = count(await tx.update(apiKeys).set({ revokedAt: now }).where(and(eq(apiKeys.userId, userId), isNull(apiKeys.revokedAt))).returning({ id: apiKeys.id }))
  await voidResets(tx, userId)
  return { sessions_ended: ended, keys_revoked: revoked, invitations_revoked: invited, webhooks_switched_off: hooks }
}

/**
 * Changes name or role, closes or opens an account. `check` sees it as it is, under lock, and may refuse. What follows from the change
 * happens in the same transaction, and every process hears of it from the database: roles in force, ended sessions, revoked keys.
 */
export async function changePerson(db: Db, acting: Acting, id: string, given: PersonChanges, check: (person: PersonAccount) => void): Promise<PersonAccount> {
  const person = await db.transaction(async (tx) => {
    await tx.execute(adminsLock)
    const [user] = await tx.select().from(users).where(eq(users.id, id)).for('update')
    if (user === undefined) throw missing()
    check(await readPerson(tx, id))
    const before = { name: user.name, role: user.role, active: user.active }
    const after = { name: given.name ?? user.name, role: given.role ?? user.role, active: given.active ?? user.active }
    const changed = (Object.keys(before) as (keyof typeof before)[]).filter((field) => before[field] !== after[field])
    if (changed.length === 0) return readPerson(tx, id)
    const isAdmin = (one: typeof before): boolean => one.role === 'admin' && one.active
    if (isAdmin(before) && !isAdmin(after) && user.passwordHash !== null) await keepOneAdmin(tx, id)
    // what a person opens or closes is no business of the setting any more
    const mark = changed.includes('active') ? { closedBySetting: false } : {}
    await tx.update(users).set({ ...after, ...mark, version: user.version + 1, updatedAt: new Date() }).where(eq(users.id, id))
    const closed = before.active && !after.active
    const lowered = before.role === 'admin' && !atLeast(after.role, 'admin')
    const ended = closed || lowered ? await endSpeakingFor(tx, id, closed) : {}
    const only = (one: typeof before) => Object.fromEntries(changed.map((field) => [field, one[field]]))
    const action = !changed.includes('active') ? 'person.change' : closed ? 'person.close' : 'person.open'
    await recordAudit(tx, acting, { action, subjectKind: 'user', subjectId: id, before: only(before), after: { ...only(after), ...ended } })
    return readPerson(tx, id)
  })
  forgetVerified()
  return person
}
