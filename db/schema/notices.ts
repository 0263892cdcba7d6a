import { sql } from 'drizzle-orm'
import { bigint, boolean, check, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'
import { instant } from './instant'

export const EVENT_KINDS = ['review.asked', 'review.returned', 'review.accepted', 'edition.published', 'invitation.made', 'password.reset', 'password.changed'] as const
export const FOLLOW_KINDS = ['species', 'level', 'line'] as const

/** Something that people or programs are to be told of, written in the transaction that makes it so; told of afterwards. */
export const noticeEvents = pgTable(
  'notice_events',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    kind: text('kind', { enum: EVENT_KINDS }).notNull(),
    /** What the messages are made from; never a password, and a token only until the message is made. */
    payload: jsonb('payload').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    /** When its mails and deliveries were written. */
    spreadAt: instant('spread_at'),
    attempts: integer('attempts').notNull().default(0),
    lastError: text('last_error'),
  },
  (t) => [index('notice_events_waiting').on(t.id).where(sql`${t.spreadAt} is null`), check('notice_events_kind', sql`${t.kind} in ('review.asked', 'review.returned', 'review.accepted', 'edition.published', 'invitation.made', 'password.reset', 'password.changed')`)],
)

/** Mail on its way out. */
export const mails = pgTable(
  'mails',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    // SET NULL: events are tidied away.
    eventId: bigint('event_id', { mode: 'number' }).references(() => noticeEvents.id, { onDelete: 'set null' }),
    recipient: text('recipient').notNull(),
    subject: text('subject').notNull(),
    text: text('text').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    sentAt: instant('sent_at'),
    attempts: integer('attempts').notNull().default(0),
    nextAttemptAt: instant('next_attempt_at').notNull().defaultNow(),
    lastError: text('last_error'),
    /** Given up after the last attempt. */
    failedAt: instant('failed_at'),
  },
  (t) => [index('mails_waiting').on(t.nextAttemptAt).where(sql`${t.sentAt} is null and ${t.failedAt} is null`), uniqueIndex('mails_once').on(t.eventId, t.recipient)],
)

/** What a reader wants to hear of when an edition changes it: `Na-I`, `Na-I.3`, `Na-I.1~Na-I.3`. */
export const follows = pgTable(
  'follows',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // CASCADE: nothing without its reader.
    userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
    kind: text('kind', { enum: FOLLOW_KINDS }).notNull(),
    subject: text('subject').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [uniqueIndex('follows_once').on(t.userId, t.kind, t.subject), index('follows_subject').on(t.kind, t.subject), check('follows_kind', sql`${t.kind} in ('species', 'level', 'line')`)],
)

/** An address that is told of events by a signed request. */
export const webhooks = pgTable(
  'webhooks',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: who set it up stays known.
    owner: uuid('owner').notNull().references(() => users.id, { onDelete: 'restrict' }),
    name: text('name').notNull(),
    url: text('url').notNull(),
    /** Key of the HMAC; told once, when it is made. It has to be kept whole, since it signs. */
    secret: text('secret').notNull(),
    events: jsonb('events').$type<string[]>().notNull(),
    active: boolean('active').notNull().default(true),
    version: integer('version').notNull().default(1),
    createdAt: instant('created_at').notNull().defaultNow(),
    removedAt: instant('removed_at'),
  },
  (t) => [check('webhooks_url', sql`${t.url} ~ '^https?://' and length(${t.url}) <= 2000`), check('webhooks_name', sql`length(btrim(${t.name})) between 1 and 200`)],
)

/** One event for one webhook, and how the telling of it goes. */
export const webhookDeliveries = pgTable(
  'webhook_deliveries',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // CASCADE: a log is nothing without what it logs.
    webhookId: uuid('webhook_id').notNull().references(() => webhooks.id, { onDelete: 'cascade' }),
    // SET NULL: events are tidied away.
    eventId: bigint('event_id', { mode: 'number' }).references(() => noticeEvents.id, { onDelete: 'set null' }),
    event: text('event').notNull(),
    body: text('body').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    attempts: integer('attempts').notNull().default(0),
    nextAttemptAt: instant('next_attempt_at').notNull().defaultNow(),
    deliveredAt: instant('delivered_at'),
    failedAt: instant('failed_at'),
    responseStatus: integer('response_status'),
    /** What went wrong at the last attempt, without anything the other side sent. */
    lastError: text('last_error'),
  },
  (t) => [
    index('webhook_deliveries_waiting').on(t.nextAttemptAt).where(sql`${t.deliveredAt} is null and ${t.failedAt} is null`),
    index('webhook_deliveries_log').on(t.webhookId, t.createdAt),
    uniqueIndex('webhook_deliveries_once').on(t.webhookId, t.eventId),
  ],
)
