import { and, eq, isNull, lt, or, sql } from 'drizzle-orm'
import { getDb, listen, type Listener } from '@/db/client'
import { apiKeys, sessions, users } from '@/db/schema'
import { lowerRole, type Caller } from '@/lib/access/caller'
import { shared } from '@/lib/access/shared'

type KeyCaller = Extract<Caller, { kind: 'key' }>
type SessionCaller = Extract<Caller, { kind: 'session' }>
export interface VerifiedKey { caller: KeyCaller; usedNotedAt: number }
export interface VerifiedSession { caller: SessionCaller; expiresAt: Date; usedNotedAt: number }

/** Callers proved by the database, while this process is certain to hear of every change to them. */
interface Verified {
  keys: Map<string, VerifiedKey>
  sessions: Map<string, VerifiedSession>
  listening: boolean
  /** Counts what was heard: an answer of the database that was under way when something was heard is not kept. */
  generation: number
  listener: Listener | undefined
}

const MOST = 20_000
/** A time of last use is written at most this often. */
const NOTE_USE_MS = 60_000

function held(): Verified {
  return shared('verified', () => {
    const state: Verified = { keys: new Map(), sessions: new Map(), listening: false, generation: 0, listener: undefined }
    // Accounts, keys and sessions change rarely: whatever is heard, everything is asked again.
    state.listener = listen(['lodeterm_access'], () => forgetAll(state), (connected) => {
      state.listening = connected
      forgetAll(state)
    })
    return state
  })
}

function forgetAll(state: Verified): void {
  state.generation += 1
  state.keys.clear()
  state.sessions.clear()
}

/** Drops what is remembered in this process, at once after a change made here; other processes hear of it from the database. */
export const forgetVerified = (): void => forgetAll(held())

function keep<T>(map: Map<string, T>, name: string, value: T, generation: number): T {
  const state = held()
  if (!state.listening || state.generation !== generation) return value
  if (map.size >= MOST) map.clear()
  map.set(name, value)
  return value
}

/** A key from memory; undefined where it has to be asked for. */
export const rememberedKey = (digest: string): VerifiedKey | undefined => {
  const state = held()
  return state.listening ? state.keys.get(digest) : undefined
}

export const rememberedSession = (cookie: string): VerifiedSession | undefined => {
  const state = held()
  return state.listening ? state.sessions.get(cookie) : undefined
}

export type KeyFinding = { state: 'unknown' } | { state: 'revoked' } | { state: 'expired'; at: Date } | { state: 'good'; verified: VerifiedKey }

/** Asks the database for a key by the SHA-256 of its text. */
export async function findKey(sha256: Buffer): Promise<KeyFinding> {
  const state = held()
  const { generation } = state
  const [row] = await getDb()
    .select({ id: apiKeys.id, name: apiKeys.name, role: apiKeys.role, expiresAt: apiKeys.expiresAt, revokedAt: apiKeys.revokedAt, userId: users.id, userRole: users.role, active: users.active })
    .from(apiKeys).innerJoin(users, eq(users.id, apiKeys.userId)).where(eq(apiKeys.sha256, sha256))
  if (row === undefined) return { state: 'unknown' }
  if (row.revokedAt !== null || !row.active) return { state: 'revoked' }
  if (row.expiresAt !== null && row.expiresAt.getTime() <= Date.now()) return { state: 'expired', at: row.expiresAt }
  const caller: KeyCaller = { kind: 'key', role: lowerRole(row.role, row.userRole), userId: row.userId, keyId: row.id, name: row.name, expiresAt: row.expiresAt }
  return { state: 'good', verified: keep(state.keys, sha256.toString('base64'), { caller, usedNotedAt: 0 }, generation) }
}

/** Asks the database for a session that goes on; null where there is none. `cookie` is the name it is remembered by. */
export async function findSession(id: string, cookie: string): Promise<VerifiedSession | null> {
  const state = held()
  const { generation } = state
  const [row] = await getDb()
    .select({ id: sessions.id, expiresAt: sessions.expiresAt, userId: users.id, role: users.role, name: users.name })
    .from(sessions).innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.id, id), isNull(sessions.endedAt), eq(users.active, true)))
  if (row === undefined || row.expiresAt.getTime() <= Date.now()) return null
  const caller: SessionCaller = { kind: 'session', role: row.role, userId: row.userId, sessionId: row.id, name: row.name }
  return keep(state.sessions, cookie, { caller, expiresAt: row.expiresAt, usedNotedAt: 0 }, generation)
}

const older = sql`now() - interval '1 minute'`

/** Writes the time of use in the background, at most once a minute; a failure is of no consequence. */
export function noteKeyUse(key: VerifiedKey, now: number): void {
  if (now - key.usedNotedAt < NOTE_USE_MS) return
  key.usedNotedAt = now
  void getDb().update(apiKeys).set({ lastUsedAt: sql`now()` })
    .where(and(eq(apiKeys.id, key.caller.keyId), or(isNull(apiKeys.lastUsedAt), lt(apiKeys.lastUsedAt, older)))).catch(() => undefined)
}

export function noteSessionUse(session: VerifiedSession, now: number): void {
  if (now - session.usedNotedAt < NOTE_USE_MS) return
  session.usedNotedAt = now
  void getDb().update(sessions).set({ lastSeenAt: sql`now()` })
    .where(and(eq(sessions.id, session.caller.sessionId), lt(sessions.lastSeenAt, older))).catch(() => undefined)
}
