import type { Db, Tx } from './client'
import { type EVENT_KINDS, noticeEvents } from './schema'

export type EventKind = (typeof EVENT_KINDS)[number]

/** A review asked for, or given: of which amendment, by whom, and what was written about it. */
export interface ReviewPayload {
  amendment: string
  title: string
  by: { id: string; name: string }
  comment: string | null
}

/** What each kind of event carries: enough to write its messages without reading what may have changed since. */
export interface EventPayloads {
  'review.asked': ReviewPayload
  'review.returned': ReviewPayload
  'review.accepted': ReviewPayload
  /** `since` is the edition before. */
  'edition.published': { edition: number; label: string; since: number }
  /** The token stands here until the mail that carries it is written. */
  'invitation.made': { invitation: string; email: string; name: string; role: string; by: string; expires_at: string; token: string }
  'password.reset': { reset: string; email: string; name: string; expires_at: string; token: string }
  /** By whoever is signed in, who knew the one before, or by the link of a mail. */
  'password.changed': { email: string; name: string; by: 'session' | 'link'; at: string }
}

/**
 * Writes down something that people and programs are to be told of, in the transaction that makes it so: if that is rolled
 * back, nobody hears. A trigger wakes whoever spreads notices as soon as the transaction is committed. Returns the event's id.
 */
export async function recordEvent<K extends EventKind>(tx: Tx | Db, kind: K, payload: EventPayloads[K]): Promise<number> {
  const [row] = await tx.insert(noticeEvents).values({ kind, payload }).returning({ id: noticeEvents.id })
  if (row === undefined) throw new Error('The event was not stored')
  return row.id
}
