import { sql } from 'drizzle-orm'
import { check, customType, index, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { ROLES, users } from './access'
import { instant } from './instant'

const bytes = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' })

/** An offer to open an account, sent by mail. Of the token in the mail only the SHA-256 is kept. */
export const invitations = pgTable(
  'invitations',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    email: text('email').notNull(),
    name: text('name').notNull(),
    role: text('role', { enum: ROLES }).notNull(),
    sha256: bytes('sha256').notNull(),
    // RESTRICT: who let whom in stays known.
    invitedBy: uuid('invited_by').notNull().references(() => users.id, { onDelete: 'restrict' }),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at').notNull(),
    acceptedAt: instant('accepted_at'),
    // RESTRICT: see invitedBy.
    acceptedBy: uuid('accepted_by').references(() => users.id, { onDelete: 'restrict' }),
    revokedAt: instant('revoked_at'),
  },
  (t) => [
    uniqueIndex('invitations_sha256').on(t.sha256),
    // one open invitation to an address
    uniqueIndex('invitations_open').on(sql`lower(${t.email})`).where(sql`${t.acceptedAt} is null and ${t.revokedAt} is null`),
    check('invitations_role', sql`${t.role} in ('reader', 'curator', 'admin')`),
    check('invitations_email_shape', sql`${t.email} ~ '^[^@[:space:]]+@[^@[:space:]]+$' and length(${t.email}) <= 320`),
    check('invitations_ends', sql`num_nonnulls(${t.acceptedAt}, ${t.revokedAt}) <= 1`),
  ],
)

/** A way to set a new password, sent by mail, used once. */
export const passwordResets = pgTable(
  'password_resets',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // CASCADE: nothing without its account.
    userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'cascade' }),
    sha256: bytes('sha256').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at').notNull(),
    usedAt: instant('used_at'),
  },
  (t) => [uniqueIndex('password_resets_sha256').on(t.sha256), index('password_resets_user').on(t.userId, t.createdAt)],
)
