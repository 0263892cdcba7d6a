import { and, eq, inArray, isNull, notInArray, or, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import type { EventKind, EventPayloads, ReviewPayload } from '@/db/events'
import { amendmentAuthors, amendments, mails, noticeEvents, users, webhookDeliveries, webhooks } from '@/db/schema'
import { getConfig } from '@/lib/config'
import { invitationMail, type Message, passwordChangedMail, resetMail, reviewAskedMail, reviewGivenMail } from '@/lib/mail/messages'
import { editionLetters } from '@/lib/notices/edition-letters'
import { WebhookEvent } from '@/openapi/schemas/notices'

interface Letter extends Message { to: string }
type Told = { id: number; createdAt: Date } & { [K in EventKind]: { kind: K; payload: EventPayloads[K] } }[EventKind]

/** Whom mail can reach and concern: accounts that are open and that somebody signs in to. */
const reachable = and(eq(users.active, true), sql`${users.passwordHash} is not null`)

const authorsOf = (tx: Tx, amendment: string) => tx.select({ id: amendmentAuthors.userId }).from(amendmentAuthors).where(eq(amendmentAuthors.amendmentId, amendment))
const authorOf = (tx: Tx, amendment: string) => tx.select({ id: amendments.author }).from(amendments).where(eq(amendments.id, amendment))

/** Everyone who may give the review: curators and admins who wrote none of it. */
async function askedLetters(tx: Tx, review: ReviewPayload): Promise<Letter[]> {
  const people = await tx.select({ email: users.email, name: users.name }).from(users).where(and(
    reachable, inArray(users.role, ['curator', 'admin']),
    notInArray(users.id, authorsOf(tx, review.amendment)), notInArray(users.id, authorOf(tx, review.amendment)), sql`${users.id} <> ${review.by.id}::uuid`,
  ))
  return people.map(({ email, name }) => ({ to: email, ...reviewAskedMail(name, review) }))
}

/** Whoever wrote any of it, except the one who did this. */
async function givenLetters(tx: Tx, outcome: 'returned' | 'accepted', review: ReviewPayload): Promise<Letter[]> {
  const people = await tx.select({ email: users.email, name: users.name }).from(users).where(and(
    reachable, or(inArray(users.id, authorsOf(tx, review.amendment)), inArray(users.id, authorOf(tx, review.amendment))), sql`${users.id} <> ${review.by.id}::uuid`,
  ))
  return people.map(({ email, name }) => ({ to: email, ...reviewGivenMail(name, outcome, review) }))
}

async function lettersOf(tx: Tx, event: Told): Promise<Letter[]> {
  switch (event.kind) {
    case 'review.asked': return askedLetters(tx, event.payload)
    case 'review.returned': return givenLetters(tx, 'returned', event.payload)
    case 'review.accepted': return givenLetters(tx, 'accepted', event.payload)
    case 'edition.published': return editionLetters(tx, event.payload)
    case 'invitation.made': return [{ to: event.payload.email, ...invitationMail(event.payload) }]
    case 'password.reset': return [{ to: event.payload.email, ...resetMail(event.payload) }]
    case 'password.changed': return [{ to: event.payload.email, ...passwordChangedMail(event.payload) }]
  }
}

/** What webhooks are told: the payload, with the pages that show it. */
function dataOf(event: Told): Record<string, unknown> {
  const { baseUrl } = getConfig()
  if (event.kind === 'edition.published') {
    const { edition, label, since } = event.payload
    return { edition, label, since, url: `${baseUrl}/api/v1/editions/${edition}`, changes_url: `${baseUrl}/api/v1/editions/${edition}/changes?since=${Math.max(1, since)}` }
  }
  return 'amendment' in event.payload ? { ...event.payload, url: `${baseUrl}/api/v1/amendments/${event.payload.amendment}` } : {}
}

async function writeDeliveries(tx: Tx, event: Told): Promise<void> {
  if (!WebhookEvent.safeParse(event.kind).success) return
  const hooks = await tx.select({ id: webhooks.id }).from(webhooks).where(and(eq(webhooks.active, true), isNull(webhooks.removedAt), sql`${webhooks.events} ? ${event.kind}`))
  if (hooks.length === 0) return
  await tx.insert(webhookDeliveries).values(hooks.map((hook) => {
    const id = crypto.randomUUID()
    const body = JSON.stringify({ id, event: event.kind, at: event.createdAt.toISOString(), data: dataOf(event) })
    return { id, webhookId: hook.id, eventId: event.id, event: event.kind, body, createdAt: new Date() }
  })).onConflictDoNothing()
}

/** Tokens stand in the mail from now on, and there only until it is sent. */
const withoutToken = (payload: Told['payload']): Told['payload'] => ('token' in payload ? { ...payload, token: '' } : payload)

/** What may be written down of a failure. The message of a failed query repeats what was to be written, links in mails among it. */
export function reasonOf(error: unknown): string {
  const inner = error instanceof Error && error.cause instanceof Error ? error.cause : error
  return (inner instanceof Error ? `${inner.name}: ${inner.message}` : 'unknown').slice(0, 300)
}

const MOST_ATTEMPTS = 12
const PATIENCE = '10min'
/** A failed event waits a minute, then three, seven and so on from its beginning; others go on meanwhile. */
const due = sql`now() >= ${noticeEvents.createdAt} + (power(2, ${noticeEvents.attempts}) - 1) * interval '1 minute'`

/**
 * Turns the oldest event that waits into mails and deliveries, all in one transaction; an event that another process holds is passed
 * over. Resolves to whether there was one.
 */
export async function spreadNext(db: Db): Promise<boolean> {
  let taken: number | undefined
  try {
    return await db.transaction(async (tx) => {
      const [row] = await tx.select().from(noticeEvents).where(and(isNull(noticeEvents.spreadAt), due)).orderBy(noticeEvents.id).limit(1).for('update', { skipLocked: true })
      if (row === undefined) return false
      taken = row.id
      // an edition is compared for every follower while this transaction waits: longer than a request may keep one open
      await tx.execute(sql.raw(`set local idle_in_transaction_session_timeout = '${PATIENCE}'`))
      const event = row as unknown as Told
      const letters = await lettersOf(tx, event)
      for (let i = 0; i < letters.length; i += 500) {
        const part = letters.slice(i, i + 500).map(({ to, subject, text }) => ({ eventId: row.id, recipient: to, subject, text }))
        await tx.insert(mails).values(part).onConflictDoNothing()
      }
      await writeDeliveries(tx, event)
      await tx.update(noticeEvents).set({ spreadAt: new Date(), payload: withoutToken(event.payload), lastError: null }).where(eq(noticeEvents.id, row.id))
      return true
    })
  } catch (error) {
    if (taken === undefined) throw error
    const [row] = await db.update(noticeEvents).set({ attempts: sql`${noticeEvents.attempts} + 1`, lastError: reasonOf(error) }).where(and(eq(noticeEvents.id, taken), isNull(noticeEvents.spreadAt))).returning()
    if (row !== undefined && row.attempts >= MOST_ATTEMPTS) await db.update(noticeEvents).set({ spreadAt: new Date(), payload: withoutToken(row.payload as Told['payload']) }).where(eq(noticeEvents.id, taken))
    throw error
  }
}
