import { sql } from 'drizzle-orm'
import { type AnyPgColumn, bigint, boolean, check, customType, index, integer, jsonb, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { instant } from './instant'

export const ROLES = ['reader', 'curator', 'admin'] as const

const bytes = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' })

/** People and service accounts. Never deleted: `active` false closes one, so that what it did keeps its name. */
export const users = pgTable(
  'users',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    email: text('email').notNull(),
    name: text('name').notNull(),
    role: text('role', { enum: ROLES }).notNull(),
    /** argon2id in PHC form; null for a service account, which cannot sign in. */
    passwordHash: text('password_hash'),
    active: boolean('active').notNull().default(true),
    demo: boolean('demo').notNull().default(false),
    /** Closed because demo accounts are not allowed here, not by anybody: the same setting opens it again. */
    closedBySetting: boolean('closed_by_setting').notNull().default(false),
    /** Raised by every change that others make to the account: role, name, open or closed. */
    version: integer('version').notNull().default(1),
    createdAt: instant('created_at').notNull().defaultNow(),
    updatedAt: instant('updated_at').notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('users_email').on(sql`lower(${t.email})`),
    check('users_role', sql`${t.role} in ('reader', 'curator', 'admin')`),
    check('users_email_shape', sql`${t.email} ~ '^[^@[:space:]]+@[^@[:space:]]+$' and length(${t.email}) <= 320`),
    check('users_name', sql`length(btrim(${t.name})) between 1 and 200`),
    check('users_version', sql`${t.version} >= 1`),
  ],
)

/** One sign-in of one browser; ended, not deleted, so that the audit can name it. */
export const sessions = pgTable(
  'sessions',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // CASCADE: a session is nothing without its user.
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at').notNull(),
    lastSeenAt: instant('last_seen_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
    userAgent: text('user_agent'),
    ip: text('ip'),
  },
  (t) => [index('sessions_user').on(t.userId), check('sessions_expiry', sql`${t.expiresAt} > ${t.createdAt}`)],
)

/** API keys: of the secret only the SHA-256 is kept, and the visible start to tell keys apart. */
export const apiKeys = pgTable(
  'api_keys',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: a key's owner bounds what it may do, and the audit names both.
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'restrict' }),
    name: text('name').notNull(),
    prefix: text('prefix').notNull(),
    sha256: bytes('sha256').notNull(),
    role: text('role', { enum: ROLES }).notNull(),
    /** The key it was made with, which takes it along when it is revoked; null where a person at a browser made it. */
    // RESTRICT: keys are revoked, never deleted.
    madeWith: uuid('made_with').references((): AnyPgColumn => apiKeys.id, { onDelete: 'restrict' }),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at'),
    revokedAt: instant('revoked_at'),
    lastUsedAt: instant('last_used_at'),
  },
  (t) => [
    uniqueIndex('api_keys_sha256').on(t.sha256),
    index('api_keys_user').on(t.userId, t.createdAt.desc(), t.id),
    check('api_keys_role', sql`${t.role} in ('reader', 'curator', 'admin')`),
    check('api_keys_sha256_length', sql`length(${t.sha256}) = 32`),
    check('api_keys_name', sql`length(btrim(${t.name})) between 1 and 200`),
  ],
)

/** Attempts to sign in, for slowing guesses down; no reference to users, since the address may be nobody's. */
export const signInAttempts = pgTable(
  'sign_in_attempts',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    at: instant('at').notNull().defaultNow(),
    email: text('email').notNull(),
    ip: text('ip').notNull(),
    succeeded: boolean('succeeded').notNull(),
  },
  (t) => [index('sign_in_attempts_email').on(t.email, t.at.desc()), index('sign_in_attempts_ip').on(t.ip, t.at.desc())],
)

/** Who did what, when, from where. Rows are added and read, nothing else: triggers refuse the rest. */
export const auditEvents = pgTable(
  'audit_events',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    at: instant('at').notNull().defaultNow(),
    // RESTRICT on all three: an audit row must never lose the name of who acted.
    actorUser: uuid('actor_user').references(() => users.id, { onDelete: 'restrict' }),
    actorKey: uuid('actor_key').references(() => apiKeys.id, { onDelete: 'restrict' }),
    actorSession: uuid('actor_session').references(() => sessions.id, { onDelete: 'restrict' }),
    action: text('action').notNull(),
    subjectKind: text('subject_kind').notNull(),
    subjectId: text('subject_id'),
    before: jsonb('before'),
    after: jsonb('after'),
    ip: text('ip'),
    requestId: text('request_id'),
  },
  (t) => [index('audit_events_subject').on(t.subjectKind, t.subjectId), index('audit_events_actor').on(t.actorUser, t.id.desc())],
)

/** The answer given to a write, kept so that the same Idempotency-Key gets the same answer. */
export const idempotencyKeys = pgTable(
  'idempotency_keys',
  {
    // CASCADE: kept answers serve their caller only.
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    operation: text('operation').notNull(),
    key: text('key').notNull(),
    /** SHA-256 of the request: the same key with another request is a conflict. */
    requestSha256: text('request_sha256').notNull(),
    status: integer('status'),
    headers: jsonb('headers'),
    body: jsonb('body'),
    /** Set in the transaction of the effect: from then on the request is never performed again, whether its answer was kept or not. */
    committed: boolean('committed').notNull().default(false),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [primaryKey({ columns: [t.userId, t.operation, t.key] }), index('idempotency_keys_age').on(t.createdAt)],
)
