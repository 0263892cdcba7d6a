import { eq } from 'drizzle-orm'
import type { Tx } from '@/db/client'
import { apiKeys, users } from '@/db/schema'
import { atLeast, type Caller } from '@/lib/access/caller'
import type { Role } from '@/openapi/core/define'

/**
 * Why whoever began something long may not end it any more, as a sentence; null where they still may. With `hold` account and key stay as
 * they are until the transaction ends.
 */
export async function lostStanding(tx: Tx, caller: Caller, needed: Role, hold: boolean): Promise<string | null> {
  if (caller.userId === null) return 'Nobody is signed in.'
  const account = tx.select({ active: users.active, role: users.role }).from(users).where(eq(users.id, caller.userId))
  const [user] = await (hold ? account.for('share') : account)
  if (user?.active !== true) return 'The account that began it has been closed meanwhile.'
  if (!atLeast(user.role, needed)) return `The account that began it has the role ${user.role} now, and this needs the role ${needed}.`
  if (caller.kind !== 'key') return null
  const key = tx.select({ revokedAt: apiKeys.revokedAt, expiresAt: apiKeys.expiresAt }).from(apiKeys).where(eq(apiKeys.id, caller.keyId))
  const [found] = await (hold ? key.for('share') : key)
  if (found === undefined || found.revokedAt !== null) return 'The key that it was begun with has been revoked meanwhile.'
  return found.expiresAt !== null && found.expiresAt.getTime() <= Date.now() ? 'The key that it was begun with has expired meanwhile.' : null
}
