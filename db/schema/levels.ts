import { sql } from 'drizzle-orm'
import { boolean, check, doublePrecision, index, integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core'
import { evidence, isEvidence, isFinite, isUncertainty, revisionChecks, revisionColumns } from './columns'

export const COUPLINGS = ['LS', 'J1K', 'jj', 'unassigned'] as const
export const PARITIES = ['even', 'odd'] as const
export const LEVEL_STATUSES = ['active', 'retired'] as const

/** Identity of a level, such as `Na-I.3`: the ordinal is given at creation and never reused. */
export const levels = pgTable(
  'levels',
  {
    id: text('id').primaryKey(),
    /** A species: seen to once a statement, see level_revisions. */
    speciesId: text('species_id').notNull(),
    ordinal: integer('ordinal').notNull(),
  },
  (t) => [
    unique('levels_of_species').on(t.speciesId, t.ordinal),
    check('levels_ordinal', sql`${t.ordinal} >= 1`),
    check('levels_id', sql`${t.id} = ${t.speciesId} || '.' || ${t.ordinal}`),
  ],
)

/**
 * The values of a level. Angular momenta are held as twice their value (`two_j` 3 is J = 3/2).
 * Which of them a row has follows from its coupling: LS has S and L; J1K has the core's S, L, J, the outer l and K;
 * jj has j of the core (or first) and of the outer (or second) electron; unassigned has J only.
 */
export const levelRevisions = pgTable(
  'level_revisions',
  {
    ...revisionColumns(),
    // An edition may bring 100 000 rows: that level and species, source and amendment are there is seen to once a statement, by
    // triggers in the migrations. What they name is never deleted and keeps its identity, so that this is as good as foreign keys.
    amendmentId: uuid('amendment_id'),
    levelId: text('level_id').notNull(),
    /** The level's species once more: the constraint on twins within an edition needs it in the row. */
    speciesId: text('species_id').notNull(),
    /** Canonical, with dots and parents: `3d6.(5D).4s.4p.(3P*)`. */
    configuration: text('configuration').notNull(),
    coupling: text('coupling', { enum: COUPLINGS }).notNull(),
    label: text('label'),
    twoS: integer('two_s'),
    l: integer('l'),
    twoJ: integer('two_j').notNull(),
    twoK: integer('two_k'),
    coreTwoS: integer('core_two_s'),
    coreL: integer('core_l'),
    coreTwoJ: integer('core_two_j'),
    lOuter: integer('l_outer'),
    outerTwoJ: integer('outer_two_j'),
    parity: text('parity', { enum: PARITIES }).notNull(),
    /** Tells apart levels that agree in everything else that names them. */
    repeatIndex: integer('repeat_index'),
    /** A second name in use, such as Paschen's `1s5`. */
    alternativeName: text('alternative_name'),
    energyInvcm: doublePrecision('energy_invcm').notNull(),
    energyUncInvcm: doublePrecision('energy_unc_invcm'),
    /** The digits the source printed; never made from the number. */
    energyLiteral: text('energy_literal'),
    energySource: text('energy_source').notNull(),
    energyEvidence: evidence('energy_evidence').notNull(),
    lineChecked: boolean('line_checked').notNull().default(false),
    note: text('note'),
    status: text('status', { enum: LEVEL_STATUSES }).notNull().default('active'),
    retiredReason: text('retired_reason'),
    // RESTRICT: a retired level must go on naming the one that took its place.
    successor: text('successor').references(() => levels.id, { onDelete: 'restrict' }),
    /** A curator's choice of g_J, with the reason; it goes before measured and coupled values. */
    gChosen: doublePrecision('g_chosen'),
    gChosenReason: text('g_chosen_reason'),
  },
  (t) => [
    ...revisionChecks('level_revisions', t),
    check('level_revisions_parity', sql`${t.parity} in ('even', 'odd')`),
    check('level_revisions_momenta', sql`${t.twoJ} >= 0 and ${t.twoS} >= 0 and ${t.l} >= 0 and ${t.twoK} >= 0 and ${t.coreTwoS} >= 0 and ${t.coreL} >= 0 and ${t.coreTwoJ} >= 0 and ${t.lOuter} >= 0 and ${t.outerTwoJ} >= 0`),
    check(
      'level_revisions_coupling',
      sql`case ${t.coupling}
        when 'LS' then num_nonnulls(${t.twoS}, ${t.l}) = 2 and num_nonnulls(${t.twoK}, ${t.coreTwoS}, ${t.coreL}, ${t.coreTwoJ}, ${t.lOuter}, ${t.outerTwoJ}) = 0
        when 'J1K' then num_nonnulls(${t.twoK}, ${t.coreTwoS}, ${t.coreL}, ${t.coreTwoJ}, ${t.lOuter}) = 5 and num_nonnulls(${t.twoS}, ${t.l}, ${t.outerTwoJ}) = 0
        when 'jj' then num_nonnulls(${t.coreTwoJ}, ${t.outerTwoJ}) = 2 and num_nonnulls(${t.twoS}, ${t.l}, ${t.twoK}) = 0
        when 'unassigned' then num_nonnulls(${t.twoS}, ${t.l}, ${t.twoK}, ${t.coreTwoS}, ${t.coreL}, ${t.coreTwoJ}, ${t.lOuter}, ${t.outerTwoJ}) = 0
        else false end`,
    ),
    // J = |L - S| .. L + S in unit steps.
    check('level_revisions_j_ls', sql`${t.coupling} <> 'LS' or (${t.twoJ} between abs(2 * ${t.l} - ${t.twoS}) and 2 * ${t.l} + ${t.twoS} and (${t.twoJ} + ${t.twoS}) % 2 = 0)`),
    // The core's J from its L and S, K from that J and the outer l, J = K +- 1/2.
    check(
      'level_revisions_j_pair',
      sql`${t.coupling} <> 'J1K' or (
        ${t.coreTwoJ} between abs(2 * ${t.coreL} - ${t.coreTwoS}) and 2 * ${t.coreL} + ${t.coreTwoS} and (${t.coreTwoJ} + ${t.coreTwoS}) % 2 = 0
        and ${t.twoK} between abs(${t.coreTwoJ} - 2 * ${t.lOuter}) and ${t.coreTwoJ} + 2 * ${t.lOuter} and (${t.twoK} + ${t.coreTwoJ}) % 2 = 0
        and abs(${t.twoJ} - ${t.twoK}) = 1)`,
    ),
    check('level_revisions_j_jj', sql`${t.coupling} <> 'jj' or (${t.twoJ} between abs(${t.coreTwoJ} - ${t.outerTwoJ}) and ${t.coreTwoJ} + ${t.outerTwoJ} and (${t.twoJ} + ${t.coreTwoJ} + ${t.outerTwoJ}) % 2 = 0)`),
    check('level_revisions_repeat_index', sql`${t.repeatIndex} >= 1`),
    check('level_revisions_label', sql`${t.label} ~ '^[A-Za-z]{1,4}$'`),
    check('level_revisions_configuration', sql`${t.configuration} <> ''`),
    check('level_revisions_energy', isFinite(t.energyInvcm)),
    check('level_revisions_energy_unc', isUncertainty(t.energyUncInvcm)),
    check('level_revisions_evidence', isEvidence(t.energyEvidence)),
    check('level_revisions_status', sql`(${t.status} = 'active' and ${t.retiredReason} is null and ${t.successor} is null) or (${t.status} = 'retired' and ${t.retiredReason} is not null)`),
    check('level_revisions_successor', sql`${t.successor} <> ${t.levelId}`),
    check('level_revisions_g_chosen', sql`num_nonnulls(${t.gChosen}, ${t.gChosenReason}) <> 1 and ${isFinite(t.gChosen)}`),
    index('level_revisions_species').on(t.speciesId, t.publishedFrom),
  ],
)
