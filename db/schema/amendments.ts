import { sql } from 'drizzle-orm'
import { check, index, integer, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'

export const AMENDMENT_STATES = ['draft', 'in_review', 'accepted', 'published', 'returned', 'withdrawn'] as const

/** A titled set of changes on its way to an edition. */
export const amendments = pgTable(
  'amendments',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    title: text('title').notNull(),
    note: text('note').notNull().default(''),
    state: text('state', { enum: AMENDMENT_STATES }).notNull().default('draft'),
    // RESTRICT: the author answers for the change and may not accept it; accounts are made inactive, not deleted.
    author: uuid('author')
      .notNull()
      .references(() => users.id, { onDelete: 'restrict' }),
    version: integer('version').notNull().default(1),
    createdAt: timestamp('created_at', { withTimezone: true, mode: 'date' }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true, mode: 'date' }).notNull().defaultNow(),
  },
  (t) => [
    check('amendments_state', sql`${t.state} in ('draft', 'in_review', 'accepted', 'published', 'returned', 'withdrawn')`),
    check('amendments_title', sql`length(btrim(${t.title})) between 1 and 200`),
    check('amendments_version', sql`${t.version} >= 1`),
    index('amendments_newest').on(t.createdAt.desc(), t.id),
  ],
)
