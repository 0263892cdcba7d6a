import { setTimeout as pause } from 'node:timers/promises'
import { and, eq, gt, isNull, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { recordEvent } from '@/db/events'
import { passwordResets, sessions, signInAttempts, users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { checkPassword, hashPassword } from '@/lib/access/passwords'
import { beginAttempt } from '@/lib/access/throttle'
import { mintToken, tokenDigest } from '@/lib/access/tokens'
import { forgetVerified } from '@/lib/access/verified'
import { Problem } from '@/lib/problem'

const GOOD_FOR_MS = 3_600_000
/** Every answer takes this long at least, so that its time does not tell whether a mail was written. */
const ANSWER_MS = 400

const throttled = (seconds: number): Problem => new Problem('reset_throttled', `The next link may be asked for in ${seconds} s.`, { headers: { 'retry-after': String(seconds) } })

/** Makes every link to set a password void that an account has been sent. */
export async function voidResets(tx: Tx, userId: string): Promise<void> {
  const now = new Date()
  await tx.update(passwordResets).set({ expiresAt: now }).where(and(eq(passwordResets.userId, userId), isNull(passwordResets.usedAt), gt(passwordResets.expiresAt, now)))
}

/**
 * Has a link to set a new password sent to an address, if an open account that signs in has it. Whoever asks learns nothing of that:
 * the answer is the same and takes the same time, and requests are counted by the address typed. 429 `reset_throttled`.
 */
export async function askReset(db: Db, acting: Acting, given: { email: string }): Promise<void> {
  const answered = pause(ANSWER_MS)
  const email = given.email.trim().toLowerCase()
  await beginAttempt(db, `password reset ${email}`, `password reset ${acting.ip ?? 'unknown'}`, false, throttled)
  await db.transaction(async (tx) => {
    const [user] = await tx.select().from(users).where(and(eq(sql`lower(${users.email})`, email), eq(users.active, true), sql`${users.passwordHash} is not null`)).for('update')
    if (user === undefined) return
    await voidResets(tx, user.id)
    const { token, sha256 } = mintToken()
    const expiresAt = new Date(Date.now() + GOOD_FOR_MS)
    const [reset] = await tx.insert(passwordResets).values({ userId: user.id, sha256, expiresAt, createdAt: new Date() }).returning({ id: passwordResets.id })
    if (reset === undefined) throw new Error('The reset was not stored')
    await recordEvent(tx, 'password.reset', { reset: reset.id, email: user.email, name: user.name, expires_at: expiresAt.toISOString(), token })
    await recordAudit(tx, acting, { action: 'password.reset_ask', subjectKind: 'user', subjectId: user.id })
  })
  await answered
}

const unusable = (): Problem => new Problem('reset_unusable', 'This link was used, is too old, or a newer one was asked for. Ask for another.')

/** Sets a new password by the token of a mail. Every session of the account ends, and the wait after failed sign-ins with it. */
export async function useReset(db: Db, acting: Acting, given: { token: string; new_password: string }): Promise<void> {
  const open = and(eq(passwordResets.sha256, tokenDigest(given.token)), isNull(passwordResets.usedAt))
  const read = async (tx: Db | Tx) => {
    const [found] = await tx.select({ reset: passwordResets, user: users }).from(passwordResets).innerJoin(users, eq(users.id, passwordResets.userId)).where(open)
    if (found === undefined || found.reset.expiresAt.getTime() <= Date.now() || !found.user.active) throw unusable()
    return found
  }
  const { user } = await read(db)
  checkPassword(given.new_password, '/new_password')
  const passwordHash = await hashPassword(given.new_password)
  await db.transaction(async (tx) => {
    // whoever uses, replaces or closes holds the account's row, so that a token is good once
    await tx.select({ id: users.id }).from(users).where(eq(users.id, user.id)).for('update')
    const { reset } = await read(tx)
    const now = new Date()
    await tx.update(passwordResets).set({ usedAt: now }).where(eq(passwordResets.id, reset.id))
    await tx.update(users).set({ passwordHash, updatedAt: now }).where(eq(users.id, user.id))
    const ended = await tx.update(sessions).set({ endedAt: now }).where(and(eq(sessions.userId, user.id), isNull(sessions.endedAt))).returning({ id: sessions.id })
    await tx.insert(signInAttempts).values({ email: user.email.toLowerCase(), ip: acting.ip ?? 'unknown', succeeded: true, at: now })
    await recordEvent(tx, 'password.changed', { email: user.email, name: user.name, by: 'link', at: now.toISOString() })
    await recordAudit(tx, acting, { action: 'password.reset_use', subjectKind: 'user', subjectId: user.id, after: { sessions_ended: ended.length } })
  })
  forgetVerified()
}
