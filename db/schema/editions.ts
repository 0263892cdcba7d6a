import { sql } from 'drizzle-orm'
import { check, integer, jsonb, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'

export interface EditionCounts {
  species: number
  levels: number
  sources: number
  measured_g: number
  isotopes: number
  hyperfine_constants: number
}

/** A published edition. Written last in its transaction: from then on nothing may enter or leave it. */
export const editions = pgTable(
  'editions',
  {
    number: integer('number').primaryKey(),
    label: text('label').notNull(),
    notes: text('notes').notNull(),
    /** SHA-256 of the canonical content, hexadecimal. */
    checksum: text('checksum').notNull(),
    counts: jsonb('counts').$type<EditionCounts>().notNull(),
    /** Edition of the fundamental constants that computed answers use. */
    constants: text('constants').notNull(),
    publishedAt: timestamp('published_at', { withTimezone: true, mode: 'date' }).notNull().defaultNow(),
    // RESTRICT: who published stays known. Null for the edition a new installation is loaded with.
    publishedBy: uuid('published_by').references(() => users.id, { onDelete: 'restrict' }),
    /** The name that person had then: an edition, and what is told of it, never changes. */
    publisherName: text('publisher_name'),
  },
  (t) => [check('editions_number', sql`${t.number} >= 1`), check('editions_checksum', sql`${t.checksum} ~ '^[0-9a-f]{64}$'`)],
)
