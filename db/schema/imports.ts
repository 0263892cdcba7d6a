import { sql } from 'drizzle-orm'
import { boolean, check, index, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { users } from './access'
import { amendments } from './amendments'
import { instant } from './instant'

/** One that runs and has not moved for long was interrupted with its process; nothing of it was written. */
export const IMPORT_STATES = ['running', 'done', 'refused', 'stopped', 'failed'] as const
export const IMPORT_VERDICTS = ['new', 'changed', 'same', 'ambiguous', 'error'] as const

/** One reading of one file for an amendment: a dry run, or the import itself. */
export const imports = pgTable(
  'imports',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    // RESTRICT: changes name the import they came with.
    amendmentId: uuid('amendment_id').notNull().references(() => amendments.id, { onDelete: 'restrict' }),
    // RESTRICT: see amendments.
    author: uuid('author').notNull().references(() => users.id, { onDelete: 'restrict' }),
    fileName: text('file_name').notNull(),
    /** Of the file's bytes. */
    sha256: text('sha256').notNull(),
    bytes: integer('bytes').notNull(),
    dryRun: boolean('dry_run').notNull(),
    /** How the file was read: encoding, delimiter, decimal mark, and which of its columns is which of ours. */
    reading: jsonb('reading').notNull(),
    state: text('state', { enum: IMPORT_STATES }).notNull().default('running'),
    rowsTotal: integer('rows_total').notNull().default(0),
    rowsDone: integer('rows_done').notNull().default(0),
    /** Rows by verdict. */
    counts: jsonb('counts').notNull().default({}),
    /** What is wrong with the file as a whole. */
    problems: jsonb('problems').notNull().default([]),
    createdAt: instant('created_at').notNull().defaultNow(),
    /** Moved on while it runs: one that has stood still was interrupted. */
    aliveAt: instant('alive_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    index('imports_of_amendment').on(t.amendmentId, t.createdAt),
    check('imports_state', sql`${t.state} in ('running', 'done', 'refused', 'stopped', 'failed')`),
    check('imports_sha256', sql`${t.sha256} ~ '^[0-9a-f]{64}$'`),
    check('imports_rows', sql`${t.rowsDone} between 0 and ${t.rowsTotal}`),
  ],
)

/** What an import says of each row of its file. Kept until the amendment's next import. */
export const importRows = pgTable(
  'import_rows',
  {
    // CASCADE: a report is nothing without its import.
    importId: uuid('import_id').notNull().references(() => imports.id, { onDelete: 'cascade' }),
    /** Line of the file, the header being line 1. */
    row: integer('row').notNull(),
    verdict: text('verdict', { enum: IMPORT_VERDICTS }).notNull(),
    /** The level it is about, where there is one. */
    levelId: text('level_id'),
    findings: jsonb('findings').notNull().default([]),
    /** What would change, field by field. */
    fields: jsonb('fields').notNull().default([]),
  },
  (t) => [
    primaryKey({ columns: [t.importId, t.row] }),
    index('import_rows_verdict').on(t.importId, t.verdict, t.row),
    check('import_rows_verdict_known', sql`${t.verdict} in ('new', 'changed', 'same', 'ambiguous', 'error')`),
  ],
)
