import { sql } from 'drizzle-orm'
import { bigint, check, index, integer, jsonb, pgTable, primaryKey, text, unique, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'
import { instant } from './instant'

/** A returned amendment is a draft again; what became of each review stands in `reviews`. */
export const AMENDMENT_STATES = ['draft', 'in_review', 'accepted', 'published', 'withdrawn'] as const
export const CHANGE_KINDS = ['level', 'source', 'species', 'isotope', 'hyperfine'] as const
export const CHANGE_ACTIONS = ['create', 'replace', 'retire'] as const
/** `edited`: a change was made after the review was asked for and before it was given. One that voids an acceptance stands in `voided_at`. */
export const REVIEW_OUTCOMES = ['accepted', 'returned', 'withdrawn', 'edited'] as const

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
    /** Raised by every change of title, note, state, or of a change within: what a review binds to. */
    version: integer('version').notNull().default(1),
    /** The edition it went into. The foreign key is deferred and stands in the migration, since the edition's row is written last. */
    publishedIn: integer('published_in'),
    createdAt: instant('created_at').notNull().defaultNow(),
    updatedAt: instant('updated_at').notNull().defaultNow(),
  },
  (t) => [
    check('amendments_state', sql`${t.state} in ('draft', 'in_review', 'accepted', 'published', 'withdrawn')`),
    check('amendments_title', sql`length(btrim(${t.title})) between 1 and 200`),
    check('amendments_version', sql`${t.version} >= 1`),
    check('amendments_published', sql`(${t.state} = 'published') = (${t.publishedIn} is not null)`),
    index('amendments_newest').on(t.createdAt.desc(), t.id),
    index('amendments_of_state').on(t.state),
  ],
)

/** Everyone who ever wrote or edited a change of an amendment: none of them may accept it. Rows are added, never removed. */
export const amendmentAuthors = pgTable(
  'amendment_authors',
  {
    // CASCADE: nothing without its amendment.
    amendmentId: uuid('amendment_id').notNull().references(() => amendments.id, { onDelete: 'cascade' }),
    // RESTRICT: see amendments.
    userId: uuid('user_id').notNull().references(() => users.id, { onDelete: 'restrict' }),
  },
  (t) => [primaryKey({ columns: [t.amendmentId, t.userId] })],
)

/** One change: a level, source, species, isotope or pair of hyperfine constants made, replaced or retired. */
export const amendmentChanges = pgTable(
  'amendment_changes',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: a published amendment is the record of why values are as they are.
    amendmentId: uuid('amendment_id').notNull().references(() => amendments.id, { onDelete: 'restrict' }),
    /** The order in which changes came. */
    position: bigint('position', { mode: 'number' }).notNull().generatedAlwaysAsIdentity(),
    kind: text('kind', { enum: CHANGE_KINDS }).notNull(),
    action: text('action', { enum: CHANGE_ACTIONS }).notNull(),
    /** `Na-I.3`, a source's key, `Na-I`, `Na-I/23`, or `Na-I.3/23` for hyperfine constants. A level to be created has its ordinal already. */
    subject: text('subject').notNull(),
    speciesId: text('species_id'),
    /** What the curator wrote, kept as it is even where it is wrong. */
    given: jsonb('given').notNull(),
    /** The same read into the columns of a revision; null where it cannot be. */
    row: jsonb('row'),
    reason: text('reason'),
    successor: text('successor'),
    /** Why a warning is no ground to hold the change back. */
    comment: text('comment'),
    /** Revision of the subject that the change was made from; null where it did not exist. */
    baseRevision: integer('base_revision'),
    findings: jsonb('findings').notNull().default([]),
    errors: integer('errors').notNull().default(0),
    warnings: integer('warnings').notNull().default(0),
    // RESTRICT: see amendments.
    author: uuid('author').notNull().references(() => users.id, { onDelete: 'restrict' }),
    version: integer('version').notNull().default(1),
    /** The import that brought it, and the row of the file. */
    importId: uuid('import_id'),
    importRow: integer('import_row'),
    createdAt: instant('created_at').notNull().defaultNow(),
    updatedAt: instant('updated_at').notNull().defaultNow(),
  },
  (t) => [
    unique('amendment_changes_once').on(t.amendmentId, t.kind, t.subject),
    index('amendment_changes_order').on(t.amendmentId, t.position),
    check('amendment_changes_kind', sql`${t.kind} in ('level', 'source', 'species', 'isotope', 'hyperfine')`),
    check('amendment_changes_action', sql`${t.action} in ('create', 'replace', 'retire') and (${t.action} <> 'retire' or ${t.kind} = 'level')`),
    check('amendment_changes_counts', sql`${t.errors} >= 0 and ${t.warnings} >= 0 and ${t.version} >= 1`),
    // what cannot be read has an error that says why
    check('amendment_changes_row', sql`${t.row} is not null or ${t.errors} > 0`),
  ],
)

/** One asking for review and what became of it. It speaks for one version of the amendment only. */
export const reviews = pgTable(
  'reviews',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: see amendment_changes.
    amendmentId: uuid('amendment_id').notNull().references(() => amendments.id, { onDelete: 'restrict' }),
    version: integer('version').notNull(),
    // RESTRICT: see amendments.
    askedBy: uuid('asked_by').notNull().references(() => users.id, { onDelete: 'restrict' }),
    askedAt: instant('asked_at').notNull().defaultNow(),
    comment: text('comment').notNull().default(''),
    outcome: text('outcome', { enum: REVIEW_OUTCOMES }),
    // RESTRICT: see amendments.
    closedBy: uuid('closed_by').references(() => users.id, { onDelete: 'restrict' }),
    closedAt: instant('closed_at'),
    closingComment: text('closing_comment'),
    /** Who edited the amendment after it was accepted: the review no longer speaks for it, and stays as it was given. */
    // RESTRICT: see amendments.
    voidedBy: uuid('voided_by').references(() => users.id, { onDelete: 'restrict' }),
    voidedAt: instant('voided_at'),
  },
  (t) => [
    // at most one open review of an amendment
    uniqueIndex('reviews_one_open').on(t.amendmentId).where(sql`${t.outcome} is null`),
    index('reviews_of_amendment').on(t.amendmentId, t.askedAt),
    check('reviews_outcome', sql`${t.outcome} in ('accepted', 'returned', 'withdrawn', 'edited')`),
    check('reviews_voided', sql`num_nonnulls(${t.voidedBy}, ${t.voidedAt}) in (0, 2) and (${t.voidedAt} is null or ${t.outcome} = 'accepted')`),
    check('reviews_closed', sql`num_nonnulls(${t.outcome}, ${t.closedBy}, ${t.closedAt}) in (0, 3)`),
  ],
)

/** What people say about an amendment, or about one change of it; an answer names what it answers. */
export const comments = pgTable(
  'comments',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: see amendment_changes.
    amendmentId: uuid('amendment_id').notNull().references(() => amendments.id, { onDelete: 'restrict' }),
    // SET NULL: when a change is taken out, what was said of it stays with the amendment.
    changeId: uuid('change_id').references(() => amendmentChanges.id, { onDelete: 'set null' }),
    /** The first comment of the thread; null for the first itself. */
    thread: uuid('thread'),
    // RESTRICT: see amendments.
    author: uuid('author').notNull().references(() => users.id, { onDelete: 'restrict' }),
    text: text('text').notNull(),
    /** Raised when the thread is resolved or opened again. */
    version: integer('version').notNull().default(1),
    createdAt: instant('created_at').notNull().defaultNow(),
    resolvedAt: instant('resolved_at'),
    // RESTRICT: see amendments.
    resolvedBy: uuid('resolved_by').references(() => users.id, { onDelete: 'restrict' }),
  },
  (t) => [
    index('comments_of_amendment').on(t.amendmentId, t.createdAt),
    check('comments_text', sql`length(btrim(${t.text})) between 1 and 10000`),
    check('comments_resolved', sql`num_nonnulls(${t.resolvedAt}, ${t.resolvedBy}) in (0, 2)`),
  ],
)

/** The next ordinal of a species' levels: given when a change is made, and never given again, whatever becomes of the change. */
export const ordinalCounters = pgTable('ordinal_counters', { speciesId: text('species_id').primaryKey(), next: integer('next').notNull() }, (t) => [
  check('ordinal_counters_next', sql`${t.next} >= 1`),
])
