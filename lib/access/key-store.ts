import { and, count, desc, eq, gt, isNull, lt, or, sql, type SQL } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { apiKeys, users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { knownCaller } from '@/lib/access/accounts'
import { atLeast, type Caller } from '@/lib/access/caller'
import { mintKey } from '@/lib/access/keys'
import { forgetVerified } from '@/lib/access/verified'
import { bodyProblem, Problem } from '@/lib/problem'
import type { ApiKey, NewKey, NewKeyRequest } from '@/openapi/schemas/key'

/** Keys in use that one account may have. */
const MOST_KEYS = 100

type Row = { key: typeof apiKeys.$inferSelect; owner: { id: string; name: string } }

const stateOf = (key: Row['key']): ApiKey['state'] =>
  key.revokedAt !== null ? 'revoked' : key.expiresAt !== null && key.expiresAt.getTime() <= Date.now() ? 'expired' : 'active'

const shown = ({ key, owner }: Row): ApiKey => ({
  id: key.id, name: key.name, start: key.prefix, role: key.role, owner, made_with: key.madeWith, state: stateOf(key), created_at: key.createdAt.toISOString(),
  expires_at: key.expiresAt?.toISOString() ?? null, revoked_at: key.revokedAt?.toISOString() ?? null, last_used_at: key.lastUsedAt?.toISOString() ?? null,
})

const COLUMNS = { key: apiKeys, owner: { id: users.id, name: users.name } }

/** One's own keys; an admin's key or session sees all. */
const visible = (caller: Caller): SQL | undefined => (caller.role === 'admin' ? undefined : eq(apiKeys.userId, knownCaller(caller).userId))

/** What an entity tag of a key is made from: everything about it that can be changed by someone. */
export const keyVersion = (key: Pick<ApiKey, 'id' | 'expires_at' | 'revoked_at'>): readonly [string, string, string | null, string | null] => ['key', key.id, key.expires_at, key.revoked_at]

/** Newest first. `after` is [creation time, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listKeys(db: Db, caller: Caller, after: readonly (string | number | null)[] | null, limit: number): Promise<ApiKey[]> {
  const conditions: (SQL | undefined)[] = [visible(caller)]
  if (after !== null) {
    const [at, id] = [new Date(String(after[0])), String(after[1])]
    conditions.push(or(lt(apiKeys.createdAt, at), and(eq(apiKeys.createdAt, at), gt(apiKeys.id, id))))
  }
  const rows = await db.select(COLUMNS).from(apiKeys).innerJoin(users, eq(users.id, apiKeys.userId)).where(and(...conditions)).orderBy(desc(apiKeys.createdAt), apiKeys.id).limit(limit + 1)
  return rows.map(shown)
}

const missing = (): Problem => new Problem('key_not_found', 'You have no key of this identifier; GET /keys lists yours.')

export async function readKey(db: Db, caller: Caller, id: string): Promise<ApiKey> {
  const [row] = await db.select(COLUMNS).from(apiKeys).innerJoin(users, eq(users.id, apiKeys.userId)).where(and(eq(apiKeys.id, id), visible(caller)))
  if (row === undefined) throw missing()
  return shown(row)
}

/**
 * Makes a key of the caller's own. Its role is at most the caller's, and a key made with a key cannot outlive it.
 * The text of the key stands in the answer and nowhere else.
 */
export async function createKey(db: Db, acting: Acting, given: NewKeyRequest): Promise<NewKey> {
  const caller = knownCaller(acting.caller)
  const role = given.role ?? caller.role
  if (!atLeast(caller.role, role)) throw bodyProblem('/role', 'role_above_owner', `You have the role ${caller.role}; a key cannot have the role ${role}.`)
  let expiresAt = given.expires_at === undefined || given.expires_at === null ? null : new Date(given.expires_at)
  if (expiresAt !== null && expiresAt.getTime() <= Date.now()) throw bodyProblem('/expires_at', 'expiry_past', 'This time is past; give a later one, or null.')
  if (caller.kind === 'key' && caller.expiresAt !== null) {
    if (expiresAt !== null && expiresAt > caller.expiresAt) throw bodyProblem('/expires_at', 'expiry_beyond_own', `The key you use ends at ${caller.expiresAt.toISOString()}; the new one cannot end later.`)
    expiresAt ??= caller.expiresAt
  }
  const minted = mintKey()
  const made = await db.transaction(async (tx) => {
    // the owner's row is locked, so that two keys made at once are counted one after the other
    const [owner] = await tx.select({ id: users.id, name: users.name }).from(users).where(and(eq(users.id, caller.userId), eq(users.active, true))).for('update')
    if (owner === undefined) throw missing()
    await requireUnrevoked(tx, caller)
    const [used] = await tx.select({ number: count() }).from(apiKeys)
      .where(and(eq(apiKeys.userId, owner.id), isNull(apiKeys.revokedAt), or(isNull(apiKeys.expiresAt), gt(apiKeys.expiresAt, new Date()))))
    if ((used?.number ?? 0) >= MOST_KEYS) throw new Problem('too_many_keys', `You have ${MOST_KEYS} keys in use; revoke one first.`)
    const [row] = await tx.insert(apiKeys).values({ userId: owner.id, createdAt: new Date(), name: given.name, prefix: minted.prefix, sha256: minted.sha256, role, expiresAt, madeWith: caller.kind === 'key' ? caller.keyId : null }).returning()
    if (row === undefined) throw new Error('The key was not stored')
    const key = shown({ key: row, owner })
    await recordAudit(tx, acting, { action: 'key.create', subjectKind: 'key', subjectId: row.id, after: { name: key.name, role: key.role, expires_at: key.expires_at, made_with: key.made_with } })
    return key
  })
  return { ...made, key: minted.key }
}

/** Whoever revokes a key holds its owner's row; after that a key that was revoked meanwhile makes no others. */
async function requireUnrevoked(tx: Tx, caller: Caller): Promise<void> {
  if (caller.kind !== 'key') return
  const [own] = await tx.select({ id: apiKeys.id }).from(apiKeys).where(and(eq(apiKeys.id, caller.keyId), isNull(apiKeys.revokedAt)))
  if (own === undefined) throw new Problem('key_revoked', 'This key was revoked; make a new one.', { headers: { 'www-authenticate': 'Bearer realm="lodeterm", error="invalid_token"' } })
}

/** A key and all that were made with it, and with those. */
const descended = (id: string) => sql`${apiKeys.id} in (with recursive line(id) as (select ${id}::uuid union select made.id from api_keys made join line on made.made_with = line.id) select id from line)`

/**
 * Revokes a key at once, in every process, and the keys that were made with it. `check` sees the key as it is, under lock, and may
 * refuse. Revoking twice is no error.
 */
export async function revokeKey(db: Db, acting: Acting, id: string, check: (key: ApiKey) => void): Promise<ApiKey> {
  const key = await db.transaction(async (tx) => {
    const [named] = await tx.select({ owner: apiKeys.userId }).from(apiKeys).where(and(eq(apiKeys.id, id), visible(acting.caller)))
    if (named === undefined) throw missing()
    await tx.select({ id: users.id }).from(users).where(eq(users.id, named.owner)).for('update')
    const [row] = await tx.select(COLUMNS).from(apiKeys).innerJoin(users, eq(users.id, apiKeys.userId)).where(eq(apiKeys.id, id)).for('update', { of: apiKeys })
    if (row === undefined) throw missing()
    check(shown(row))
    if (row.key.revokedAt !== null) return shown(row)
    const revokedAt = new Date()
    const revoked = await tx.update(apiKeys).set({ revokedAt }).where(and(descended(id), isNull(apiKeys.revokedAt))).returning({ id: apiKeys.id })
    for (const one of revoked) {
      const along = one.id === id ? {} : { along_with: id }
      await recordAudit(tx, acting, { action: 'key.revoke', subjectKind: 'key', subjectId: one.id, before: { revoked_at: null }, after: { revoked_at: revokedAt.toISOString(), ...along } })
    }
    return shown({ key: { ...row.key, revokedAt }, owner: row.owner })
  })
  forgetVerified()
  return key
}
