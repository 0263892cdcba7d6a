import { sql } from 'drizzle-orm'
import { bigint, check, index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'
import { CHANGE_ACTIONS, CHANGE_KINDS } from './amendments'
import { instant } from './instant'

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
    publishedAt: instant('published_at').notNull().defaultNow(),
    // RESTRICT: who published stays known. Null for the edition a new installation is loaded with.
    publishedBy: uuid('published_by').references(() => users.id, { onDelete: 'restrict' }),
    /** The name that person had then: an edition, and what is told of it, never changes. */
    publisherName: text('publisher_name'),
  },
  (t) => [check('editions_number', sql`${t.number} >= 1`), check('editions_checksum', sql`${t.checksum} ~ '^[0-9a-f]{64}$'`)],
)

/** The feed of changes: one row for each thing that an edition made, replaced or retired, in one sequence over all editions. */
export const editionChanges = pgTable(
  'edition_changes',
  {
    sequence: bigint('sequence', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    edition: integer('edition').notNull(),
    kind: text('kind', { enum: CHANGE_KINDS }).notNull(),
    subject: text('subject').notNull(),
    action: text('action', { enum: CHANGE_ACTIONS }).notNull(),
    /** The amendment and change it came by; a trigger sees to it that they are there and published, since published changes stay. */
    amendmentId: uuid('amendment_id').notNull(),
    changeId: uuid('change_id').notNull(),
  },
  (t) => [index('edition_changes_edition').on(t.edition, t.sequence), index('edition_changes_subject').on(t.kind, t.subject)],
)

/**
 * Numbers that revisions enter or leave at. The guards of the revisions write here the edition being made, and the deferred
 * foreign key (in the migration) sees at the end of the transaction that it was published: once, not once for each revision.
 */
export const editionsBegun = pgTable('editions_begun', { number: integer('number').primaryKey() })
