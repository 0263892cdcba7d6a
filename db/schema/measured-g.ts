import { bigint, check, doublePrecision, index, pgTable, text } from 'drizzle-orm/pg-core'
import { evidence, isEvidence, isFinite, isUncertainty, revisionChecks, revisionColumns } from './columns'
import { levels } from './levels'
import { sources } from './sources'

/** Identity of one measured g_J; a level may have several. */
export const measuredG = pgTable(
  'measured_g',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedByDefaultAsIdentity(),
    // RESTRICT: see levels.
    levelId: text('level_id')
      .notNull()
      .references(() => levels.id, { onDelete: 'restrict' }),
  },
  (t) => [index('measured_g_level').on(t.levelId)],
)

export const measuredGRevisions = pgTable(
  'measured_g_revisions',
  {
    ...revisionColumns(),
    // RESTRICT: a published revision is never deleted, so neither is what it describes.
    measuredGId: bigint('measured_g_id', { mode: 'number' })
      .notNull()
      .references(() => measuredG.id, { onDelete: 'restrict' }),
    value: doublePrecision('value').notNull(),
    unc: doublePrecision('unc'),
    literal: text('literal'),
    // RESTRICT: a value must keep its source.
    source: text('source')
      .notNull()
      .references(() => sources.key, { onDelete: 'restrict' }),
    evidence: evidence('evidence').notNull(),
    note: text('note'),
  },
  (t) => [
    ...revisionChecks('measured_g_revisions', t),
    check('measured_g_revisions_value', isFinite(t.value)),
    check('measured_g_revisions_unc', isUncertainty(t.unc)),
    check('measured_g_revisions_evidence', isEvidence(t.evidence)),
    index('measured_g_revisions_identity').on(t.measuredGId, t.publishedFrom),
  ],
)
