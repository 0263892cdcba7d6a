import { eq } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { recordEvent } from '@/db/events'
import { users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import { checkPassword, hashPassword, verifyPassword } from '@/lib/access/passwords'
import { voidResets } from '@/lib/access/resets'
import { endOtherSessions } from '@/lib/access/sessions'
import { beginAttempt, subjectOf, succeed } from '@/lib/access/throttle'
import { forgetVerified } from '@/lib/access/verified'
import { bodyProblem, Problem } from '@/lib/problem'
import type { Account } from '@/openapi/schemas/session'

type Known = Exclude<Caller, { kind: 'anonymous' }>

/** The caller, where it is known to be one: the wrapper admits no stranger to operations that need an account. */
export function knownCaller(caller: Caller): Known {
  if (caller.kind === 'anonymous') throw new Problem('credentials_missing', 'This is not open to strangers.')
  return caller
}

async function userOf(db: Db, id: string): Promise<typeof users.$inferSelect> {
  const [user] = await db.select().from(users).where(eq(users.id, id))
  if (user === undefined) throw new Problem('session_ended', 'The account is gone; sign in again.')
  return user
}

/** The caller's account, how the request was signed, and the role in force. */
export async function readAccount(db: Db, caller: Known): Promise<Account> {
  const user = await userOf(db, caller.userId)
  return {
    id: user.id, email: user.email, name: user.name, role: user.role, role_in_force: caller.role, demo: user.demo, created_at: user.createdAt.toISOString(),
    signed_in_by: caller.kind, key: caller.kind === 'key' ? { id: caller.keyId, name: caller.name, expires_at: caller.expiresAt?.toISOString() ?? null } : null,
  }
}

/**
 * Sets a new password; the present one is asked for again and guesses at it are slowed as at the door. Other sessions end.
 * Problems: 403 `password_wrong`, 422 for a new one that is too short, too common or the old one.
 */
export async function changePassword(db: Db, acting: Acting, given: { password: string; new_password: string }): Promise<void> {
  const caller = knownCaller(acting.caller)
  checkPassword(given.new_password, '/new_password')
  const user = await userOf(db, caller.userId)
  const attempt = await beginAttempt(db, subjectOf(user.email.toLowerCase(), `password change ${user.id}`), acting.ip ?? 'unknown', true)
  if (!(await verifyPassword(user.passwordHash, given.password))) throw bodyProblem('/password', 'password_wrong', 'This is not the present password.')
  await succeed(db, attempt)
  if (given.password === given.new_password) throw bodyProblem('/new_password', 'password_unchanged', 'The new password is the present one.')
  const passwordHash = await hashPassword(given.new_password)
  const now = new Date()
  await db.transaction(async (tx) => {
    await tx.update(users).set({ passwordHash, updatedAt: now }).where(eq(users.id, user.id))
    await voidResets(tx, user.id)
    if (caller.kind === 'session') await endOtherSessions(tx, user.id, caller.sessionId)
    await recordEvent(tx, 'password.changed', { email: user.email, name: user.name, by: 'session', at: now.toISOString() })
    await recordAudit(tx, acting, { action: 'password.change', subjectKind: 'user', subjectId: user.id })
  })
  forgetVerified()
}
