import { sql } from 'drizzle-orm'
import { bigint, check, doublePrecision, index, pgTable, text, unique } from 'drizzle-orm/pg-core'
import { evidence, isEvidence, isFinite, isUncertainty, revisionChecks, revisionColumns } from './columns'
import { levels } from './levels'
import { sources } from './sources'
import { isotopes } from './species'

/** Identity of the hyperfine constants of one isotope in one level. */
export const hyperfineConstants = pgTable(
  'hyperfine_constants',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedByDefaultAsIdentity(),
    // RESTRICT: see levels.
    levelId: text('level_id')
      .notNull()
      .references(() => levels.id, { onDelete: 'restrict' }),
    // RESTRICT: see levels.
    isotopeId: text('isotope_id')
      .notNull()
      .references(() => isotopes.id, { onDelete: 'restrict' }),
  },
  (t) => [unique('hyperfine_constants_once').on(t.levelId, t.isotopeId)],
)

export const hyperfineRevisions = pgTable(
  'hyperfine_revisions',
  {
    ...revisionColumns(),
    // RESTRICT: a published revision is never deleted, so neither is what it describes.
    hyperfineId: bigint('hyperfine_id', { mode: 'number' })
      .notNull()
      .references(() => hyperfineConstants.id, { onDelete: 'restrict' }),
    aMhz: doublePrecision('a_mhz'),
    aUncMhz: doublePrecision('a_unc_mhz'),
    bMhz: doublePrecision('b_mhz'),
    bUncMhz: doublePrecision('b_unc_mhz'),
    // RESTRICT: a value must keep its source.
    source: text('source')
      .notNull()
      .references(() => sources.key, { onDelete: 'restrict' }),
    evidence: evidence('evidence').notNull(),
    note: text('note'),
  },
  (t) => [
    ...revisionChecks('hyperfine_revisions', t),
    check('hyperfine_revisions_values', sql`num_nonnulls(${t.aMhz}, ${t.bMhz}) >= 1 and ${isFinite(t.aMhz)} and ${isFinite(t.bMhz)}`),
    check('hyperfine_revisions_unc', sql`${isUncertainty(t.aUncMhz)} and ${isUncertainty(t.bUncMhz)}`),
    check('hyperfine_revisions_evidence', isEvidence(t.evidence)),
    index('hyperfine_revisions_identity').on(t.hyperfineId, t.publishedFrom),
  ],
)
