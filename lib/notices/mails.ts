import { and, eq, isNull, lte, sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { mails } from '@/db/schema'
import { canSend, failureOf, sendMail } from '@/lib/mail/transport'
import { pauseAfter } from '@/lib/notices/backoff'

const AT_ONCE = 4

/**
 * Hands the mails that are due to the mail server. Each is claimed by moving its next attempt on, so that another process leaves it
 * alone, and one that dies in between leaves it to be sent again. A mail that went out, or was given up, keeps no text: links in it
 * must not lie about. Returns how many were tried.
 */
export async function sendMails(db: Db): Promise<number> {
  if (!canSend()) return 0
  const due = db.select({ id: mails.id }).from(mails).where(and(isNull(mails.sentAt), isNull(mails.failedAt), lte(mails.nextAttemptAt, sql`now()`))).orderBy(mails.nextAttemptAt, mails.id).limit(AT_ONCE).for('update', { skipLocked: true })
  const claimed = await db.update(mails).set({ attempts: sql`${mails.attempts} + 1`, nextAttemptAt: sql`now() + interval '5 minutes'` }).where(sql`${mails.id} in (${due})`).returning()
  for (const mail of claimed.sort((a, b) => a.id - b.id)) {
    try {
      await sendMail({ to: mail.recipient, subject: mail.subject, text: mail.text })
      await db.update(mails).set({ sentAt: new Date(), text: '', lastError: null }).where(eq(mails.id, mail.id))
    } catch (error) {
      const pause = pauseAfter(mail.attempts)
      const next = pause === null ? { failedAt: new Date(), text: '' } : { nextAttemptAt: new Date(Date.now() + pause) }
      await db.update(mails).set({ ...next, lastError: failureOf(error) }).where(eq(mails.id, mail.id))
    }
  }
  return claimed.length
}
