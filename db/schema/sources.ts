import { sql } from 'drizzle-orm'
import { check, index, integer, pgTable, text } from 'drizzle-orm/pg-core'
import { revisionChecks, revisionColumns } from './columns'

export const SOURCE_KINDS = ['article', 'report', 'book', 'data sheet', 'abstract', 'other'] as const

/** Identity of a source; the key is readable and never reused. */
export const sources = pgTable('sources', { key: text('key').primaryKey() }, (t) => [
  check('sources_key_shape', sql`${t.key} ~ '^[a-z0-9]+(-[a-z0-9]+)*$'`),
])

export const sourceRevisions = pgTable(
  'source_revisions',
  {
    ...revisionColumns(),
    // RESTRICT: a published revision is never deleted, so neither is what it describes.
    sourceKey: text('source_key')
      .notNull()
      .references(() => sources.key, { onDelete: 'restrict' }),
    /** The reference as it was given with the value. */
    citation: text('citation').notNull(),
    kind: text('kind', { enum: SOURCE_KINDS }).notNull(),
    authors: text('authors'),
    title: text('title'),
    journal: text('journal'),
    year: integer('year'),
    doi: text('doi'),
    note: text('note'),
  },
  (t) => [
    ...revisionChecks('source_revisions', t),
    check('source_revisions_kind', sql`${t.kind} in ('article', 'report', 'book', 'data sheet', 'abstract', 'other')`),
    check('source_revisions_year', sql`${t.year} between 1800 and 2200`),
    index('source_revisions_identity').on(t.sourceKey, t.publishedFrom),
  ],
)
