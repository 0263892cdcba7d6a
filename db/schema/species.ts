import { sql } from 'drizzle-orm'
import { check, doublePrecision, index, integer, pgTable, text, unique } from 'drizzle-orm/pg-core'
import { evidence, isEvidence, isFinite, revisionChecks, revisionColumns } from './columns'
import { sources } from './sources'

/** Identity of a species, such as `Na-I`; `ordinal` is the order in which species entered the table. */
export const species = pgTable('species', { id: text('id').primaryKey(), ordinal: integer('ordinal').notNull().unique('species_ordinal') }, (t) => [
  check('species_id_shape', sql`${t.id} ~ '^[A-Z][a-z]?-[IVXLC]+$'`),
])

export const speciesRevisions = pgTable(
  'species_revisions',
  {
    ...revisionColumns(),
    // RESTRICT: a published revision is never deleted, so neither is what it describes.
    speciesId: text('species_id')
      .notNull()
      .references(() => species.id, { onDelete: 'restrict' }),
    name: text('name').notNull(),
    element: text('element').notNull(),
    z: integer('z').notNull(),
    charge: integer('charge').notNull(),
    /** Closed shells that the levels' configurations leave out, canonical, such as `[Xe].4f14.5d10`. Empty for none. */
    coreConfiguration: text('core_configuration').notNull(),
    ionisationEnergyInvcm: doublePrecision('ionisation_energy_invcm'),
    // RESTRICT: a value must keep its source.
    ionisationSource: text('ionisation_source').references(() => sources.key, { onDelete: 'restrict' }),
    ionisationEvidence: evidence('ionisation_evidence'),
    note: text('note'),
  },
  (t) => [
    ...revisionChecks('species_revisions', t),
    check('species_revisions_z', sql`${t.z} between 1 and 118`),
    check('species_revisions_charge', sql`${t.charge} >= 0 and ${t.charge} < ${t.z}`),
    check('species_revisions_ionisation', sql`${t.ionisationEnergyInvcm} > 0 and ${isFinite(t.ionisationEnergyInvcm)}`),
    check('species_revisions_ionisation_evidence', isEvidence(t.ionisationEvidence)),
    check('species_revisions_ionisation_sourced', sql`${t.ionisationEnergyInvcm} is null or (${t.ionisationSource} is not null and ${t.ionisationEvidence} is not null)`),
    index('species_revisions_identity').on(t.speciesId, t.publishedFrom),
  ],
)

/** Identity of an isotope of a species, such as `Na-I/23`. */
export const isotopes = pgTable(
  'isotopes',
  {
    id: text('id').primaryKey(),
    // RESTRICT: see levels.
    speciesId: text('species_id')
      .notNull()
      .references(() => species.id, { onDelete: 'restrict' }),
    massNumber: integer('mass_number').notNull(),
  },
  (t) => [
    unique('isotopes_of_species').on(t.speciesId, t.massNumber),
    check('isotopes_mass_number', sql`${t.massNumber} >= 1`),
    check('isotopes_id', sql`${t.id} = ${t.speciesId} || '/' || ${t.massNumber}`),
  ],
)

export const isotopeRevisions = pgTable(
  'isotope_revisions',
  {
    ...revisionColumns(),
    // RESTRICT: a published revision is never deleted, so neither is what it describes.
    isotopeId: text('isotope_id')
      .notNull()
      .references(() => isotopes.id, { onDelete: 'restrict' }),
    massU: doublePrecision('mass_u'),
    /** Twice the nuclear spin. */
    twoI: integer('two_i'),
    abundancePercent: doublePrecision('abundance_percent'),
    /** g_I' in units of mu_B, negative for a positive moment; null where it is not known. */
    gI: doublePrecision('g_i'),
    // RESTRICT: a value must keep its source.
    source: text('source')
      .notNull()
      .references(() => sources.key, { onDelete: 'restrict' }),
    evidence: evidence('evidence').notNull(),
    note: text('note'),
  },
  (t) => [
    ...revisionChecks('isotope_revisions', t),
    check('isotope_revisions_mass', sql`${t.massU} > 0 and ${isFinite(t.massU)}`),
    check('isotope_revisions_spin', sql`${t.twoI} >= 0`),
    check('isotope_revisions_abundance', sql`${t.abundancePercent} between 0 and 100`),
    check('isotope_revisions_g', isFinite(t.gI)),
    check('isotope_revisions_evidence', isEvidence(t.evidence)),
    index('isotope_revisions_identity').on(t.isotopeId, t.publishedFrom),
  ],
)
