import { eq } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import type { Caller } from '@/lib/access/caller'
import { getConfig } from '@/lib/config'
import { outboxNames, readOutboxMail } from '@/lib/mail/outbox'
import { Problem } from '@/lib/problem'
import type { OutboxMail } from '@/openapi/schemas/notices'

/**
 * Mail that the local stand-in took, newest first: one's own, and for an admin at a browser everyone's, since links in it let their
 * reader in. `after` is [id] of the last one given; one more than `limit` tells that there is a next page.
 */
export async function listOutbox(db: Db, caller: Caller, after: readonly (string | number | null)[] | null, limit: number): Promise<OutboxMail[]> {
  const folder = getConfig().outboxFolder
  if (folder === undefined) throw new Problem('no_outbox', 'Mail goes to a real server here; look into the mailbox itself.')
  const known = knownCaller(caller)
  const all = known.kind === 'session' && known.role === 'admin'
  const [user] = await db.select({ email: users.email }).from(users).where(eq(users.id, known.userId))
  const own = user?.email.toLowerCase()
  const found: OutboxMail[] = []
  for (const id of await outboxNames(folder)) {
    if (after !== null && id >= String(after[0])) continue
    const mail = await readOutboxMail(folder, id)
    if (mail !== null && (all || mail.to.some((to) => to.toLowerCase() === own))) found.push(mail)
    if (found.length > limit) break
  }
  return found
}
