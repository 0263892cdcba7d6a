import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import { verifyPassword } from '@/lib/access/passwords'
import { beginSession, clearedSessionCookie, deviceCookie, deviceCookieName, deviceToken, endSession, readCookie, readDeviceToken, sessionCookie } from '@/lib/access/sessions'
import { beginAttempt, subjectOf, succeed } from '@/lib/access/throttle'
import { forgetVerified } from '@/lib/access/verified'
import { Problem } from '@/lib/problem'
import type { SignedIn } from '@/openapi/schemas/session'

export interface SignInFrom { ip: string; userAgent: string | null; cookie: string | null; requestId: string }

/**
 * Signs a person in: the session and the cookies that carry it. The answer to a wrong password and to an address that is
 * nobody's is the same, and takes the same time. Problems: 401 `sign_in_refused`, 429 `sign_in_throttled`.
 */
export async function signIn(db: Db, given: { email: string; password: string }, from: SignInFrom): Promise<{ data: SignedIn; cookies: string[] }> {
  const email = given.email.trim().toLowerCase()
  const [user] = await db.select().from(users).where(eq(sql`lower(${users.email})`, email))
  const deviceField = readCookie(from.cookie, deviceCookieName())
  const device = deviceField === null ? null : await readDeviceToken(deviceField)
  const known = device !== null && user !== undefined && device.subject === user.id ? device.id : null
  const attempt = await beginAttempt(db, subjectOf(email, known), from.ip, known !== null)
  const fits = await verifyPassword(user?.active === true ? user.passwordHash : null, given.password)
  if (!fits || user === undefined) throw refused()
  await succeed(db, attempt)
  return db.transaction(async (tx) => {
    // an account that was closed, or given another password, while this one was looked at, is not signed in to
    const [now] = await tx.select().from(users).where(eq(users.id, user.id)).for('share')
    if (now === undefined || !now.active || now.passwordHash !== user.passwordHash) throw refused()
    return enter(tx, now, from, known ?? randomUUID())
  })
}

const refused = (): Problem => new Problem('sign_in_refused', 'The address and the password do not belong together.', { headers: { 'www-authenticate': 'Bearer realm="lodeterm"' } })

/** Begins a session of an account that has proved who it is: what the answer says, and the cookies that carry it. */
export async function enter(tx: Tx, user: typeof users.$inferSelect, from: SignInFrom, device: string): Promise<{ data: SignedIn; cookies: string[]; session: string }> {
  const begun = await beginSession(tx, user.id, from)
  const caller: Caller = { kind: 'session', role: user.role, userId: user.id, sessionId: begun.id, name: user.name }
  await recordAudit(tx, { caller, ip: from.ip, requestId: from.requestId }, { action: 'session.begin', subjectKind: 'session', subjectId: begun.id })
  return {
    data: { user: { id: user.id, email: user.email, name: user.name, role: user.role }, expires_at: begun.expiresAt.toISOString() },
    cookies: [sessionCookie(begun.token), deviceCookie(await deviceToken(user.id, device))],
    session: begun.id,
  }
}

/** Ends the caller's session at once, in every process. Returns the cookie that clears it in the browser. */
export async function signOut(db: Db, acting: Acting): Promise<string> {
  const { caller } = acting
  if (caller.kind === 'session') {
    await db.transaction(async (tx) => {
      await endSession(tx, caller.sessionId)
      await recordAudit(tx, acting, { action: 'session.end', subjectKind: 'session', subjectId: caller.sessionId })
    })
    forgetVerified()
  }
  return clearedSessionCookie()
}
