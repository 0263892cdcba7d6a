import { sql, type SQL } from 'drizzle-orm'
import { type AnyPgColumn, bigint, check, integer, text, uuid } from 'drizzle-orm/pg-core'
import { amendments } from './amendments'
import { instant } from './instant'

/** How far a value was checked against its source; the grade it came with, never raised. */
export const EVIDENCE = ['read', 'quoted', 'recalled', 'computed'] as const

/**
 * What every revision row carries beside its values.
 *
 * `publishedFrom` and `publishedUntil` are edition numbers; the row stands in the editions n with
 * publishedFrom <= n < publishedUntil (no upper end while null). A null publishedFrom is a draft: it belongs to an amendment
 * and no edition shows it. Both are numbers in editions_begun, by the guards in the migrations; an edition's row (with the checksum
 * of its content) is written last.
 */
export const revisionColumns = () => ({
  id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
  revision: integer('revision').notNull().default(1),
  publishedFrom: integer('published_from'),
  publishedUntil: integer('published_until'),
  // RESTRICT: an amendment is the record of why a revision exists.
  amendmentId: uuid('amendment_id').references(() => amendments.id, { onDelete: 'restrict' }),
  createdAt: instant('created_at').notNull().defaultNow(),
})

/** The checks on the columns above. */
export const revisionChecks = (table: string, t: { revision: AnyPgColumn; publishedFrom: AnyPgColumn; publishedUntil: AnyPgColumn; amendmentId: AnyPgColumn }) => [
  check(`${table}_revision_positive`, sql`${t.revision} >= 1`),
  check(`${table}_edition_range`, sql`case when ${t.publishedFrom} is null then ${t.publishedUntil} is null else ${t.publishedFrom} >= 1 and coalesce(${t.publishedUntil} > ${t.publishedFrom}, true) end`),
  check(`${table}_draft_has_amendment`, sql`${t.publishedFrom} is not null or ${t.amendmentId} is not null`),
]

export const evidence = (name: string) => text(name, { enum: EVIDENCE })
export const isEvidence = (column: AnyPgColumn): SQL => sql`${column} in ('read', 'quoted', 'recalled', 'computed')`

/** A double that is a number: PostgreSQL's NaN and infinities are not values of a measurement. */
export const isFinite = (column: AnyPgColumn): SQL => sql`${column} not in ('NaN', 'Infinity', '-Infinity')`

/** An uncertainty: null is unknown; else one standard deviation, never negative. */
export const isUncertainty = (column: AnyPgColumn): SQL => sql`${column} >= 0 and ${isFinite(column)}`
