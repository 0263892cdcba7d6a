import { and, desc, eq, gt, lt, sql, type SQL } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { signInAttempts } from '@/db/schema'
import { Problem } from '@/lib/problem'

/**
 * Slows guessing without locking anyone out for long. Failures of the last hour since the last success are counted per
 * account and per address; a few are free, then each further attempt waits twice as long as the one before, at most
 * a quarter of an hour after the last failure. A refused attempt is not counted, so hammering does not prolong the wait.
 * A browser that has signed in to the account before is counted by itself, whatever is tried elsewhere or from its address,
 * so strangers cannot keep an owner out.
 */
const FREE = { account: 5, address: 20 }
const WINDOW_MS = 3_600_000
const LONGEST_MS = 900_000
const FIRST_MS = 2_000

/** Milliseconds to wait after the last of `failures` failures, `free` of them free. */
export const waitAfter = (failures: number, free: number): number => (failures < free ? 0 : Math.min(LONGEST_MS, FIRST_MS * 2 ** Math.min(failures - free, 20)))

export interface Attempt { id: number }

async function waitFor(db: Pick<Db, 'select'>, where: SQL, free: number, now: number): Promise<number> {
  const rows = await db.select({ at: signInAttempts.at, succeeded: signInAttempts.succeeded }).from(signInAttempts)
    .where(and(where, gt(signInAttempts.at, new Date(now - WINDOW_MS)))).orderBy(desc(signInAttempts.at)).limit(100)
  const success = rows.findIndex((row) => row.succeeded)
  const failures = success < 0 ? rows : rows.slice(0, success)
  const last = failures[0]
  return last === undefined ? 0 : last.at.getTime() + waitAfter(failures.length, free) - now
}

/** What attempts are counted under: the address typed, alone or with the device that has signed in to it before. */
export const subjectOf = (email: string, device: string | null): string => (device === null ? email : `${email} on ${device}`)

const throttled = (seconds: number): Problem =>
  new Problem('sign_in_throttled', `After several failures the next attempt has to wait ${seconds} s.`, { headers: { 'retry-after': String(seconds) } })

/**
 * Counts an attempt before it is judged, as failed, so that attempts side by side cannot pass together; `succeed` corrects it.
 * Throws 429 `sign_in_throttled` with Retry-After where it has to wait. `subject` is that of `subjectOf`.
 */
export async function beginAttempt(db: Db, subject: string, ip: string, knownDevice = false, refuse = throttled): Promise<Attempt> {
  return db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${subject}))`)
    const now = Date.now()
    const wait = Math.max(
      await waitFor(tx, eq(signInAttempts.email, subject), FREE.account, now),
      // a success says nothing about other accounts tried from the address, so only failures are looked at there
      knownDevice ? 0 : await waitFor(tx, and(eq(signInAttempts.ip, ip), eq(signInAttempts.succeeded, false)) ?? sql`false`, FREE.address, now),
    )
    if (wait > 0) throw refuse(Math.ceil(wait / 1000))
    const [row] = await tx.insert(signInAttempts).values({ email: subject, ip, succeeded: false, at: new Date(now) }).returning({ id: signInAttempts.id })
    if (row === undefined) throw new Error('The attempt was not stored')
    return row
  })
}

/** Marks an attempt as good, and clears away what is older than a day. */
export async function succeed(db: Db, attempt: Attempt): Promise<void> {
  await db.update(signInAttempts).set({ succeeded: true }).where(eq(signInAttempts.id, attempt.id))
  await db.delete(signInAttempts).where(lt(signInAttempts.at, new Date(Date.now() - 24 * WINDOW_MS)))
}
