import { count, sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { sealEdition } from '@/db/edition-content'
import {
  auditEvents,
  type EditionCounts,
  editions,
  hyperfineConstants,
  hyperfineRevisions,
  isotopeRevisions,
  isotopes,
  levelRevisions,
  levels,
  measuredG,
  measuredGRevisions,
  sourceRevisions,
  sources,
  species,
  speciesRevisions,
} from '@/db/schema'
import { printConfiguration } from '@/lib/atomic/configuration'
import { CONSTANTS_EDITION } from '@/lib/atomic/constants'
import { parseHalf } from '@/lib/atomic/half'
import { coreOf, levelRow, SeedError } from './level-row'
import { readSeed, type Seed, type SpeciesSeed } from './read'

const EDITION = 1
const LABEL = 'First edition'
const NOTES =
  'The levels behind the classic lines of Zeeman work. Every value carries its source and how far it was checked against it; most are recalled, ' +
  'which means that the publication named is where the value is believed to stand. Energies have no uncertainty here, since none was kept with them.'
const CONFIDENCE = { high: null, medium: 'The energies of this species were recalled with medium confidence.', low: 'The energies of this species were recalled with low confidence.' }
/** Any number that no other part uses: two loaders at once take turns. */
const LOCK = 7_272_742

const published = { publishedFrom: EDITION }
const twoI = (spin: string): number | null => {
  const value = parseHalf(spin)
  return value.ok ? value.value : null
}

const isotopeId = (speciesId: string, massNumber: number) => `${speciesId}/${massNumber}`
const speciesOf = (level: string) => level.slice(0, level.indexOf('.'))

function levelRowsOf(one: SpeciesSeed): { rows: (typeof levelRevisions.$inferInsert)[]; problems: string[] } {
  const core = coreOf(one)
  const problems: string[] = []
  const rows = one.levels.map((level, index) => {
    const levelId = `${one.id}.${index + 1}`
    const checked = levelRow(one, core, level)
    problems.push(...checked.problems.map((problem) => `${levelId} ${level.configuration} ${level.term} J = ${level.j}: ${problem}`))
    return { ...checked.row, ...published, levelId, speciesId: one.id, energySource: one.source }
  })
  return { rows, problems }
}

/** All rows of the first edition, every level checked; throws SeedError naming all that is wrong. */
function rowsOf(seed: Seed) {
  const perSpecies = seed.species.map(levelRowsOf)
  const problems = perSpecies.flatMap((one) => one.problems)
  if (problems.length > 0) throw new SeedError(problems)
  return {
    levels: perSpecies.flatMap((one) => one.rows),
    species: seed.species.map((one) => {
      const core = coreOf(one)
      return {
        ...published,
        speciesId: one.id,
        name: one.name,
        element: one.id.slice(0, one.id.indexOf('-')),
        z: one.z,
        charge: one.charge,
        coreConfiguration: core === null ? '' : printConfiguration(core),
        ionisationEnergyInvcm: one.ionisation_energy_invcm,
        ionisationSource: one.source,
        ionisationEvidence: one.evidence,
        note: CONFIDENCE[one.confidence],
      }
    }),
    isotopes: seed.species.flatMap((one) =>
      one.isotopes.map((isotope) => ({
        ...published,
        isotopeId: isotopeId(one.id, isotope.mass_number),
        massU: isotope.mass_u,
        twoI: twoI(isotope.spin),
        abundancePercent: isotope.abundance_percent,
        gI: isotope.g_i ?? null,
        source: one.isotope_source,
        evidence: one.isotope_evidence,
      })),
    ),
  }
}

/**
 * Loads edition 1 into an empty table, whole or not at all, and writes it into the audit. Where there is an edition already
 * it does nothing and answers null.
 */
export async function loadFirstEdition(db: Db): Promise<{ checksum: string; counts: EditionCounts } | null> {
  const present = async (from: Pick<Db, 'select'>) => ((await from.select({ n: count() }).from(editions))[0]?.n ?? 0) > 0
  if (await present(db)) return null
  const seed = readSeed()
  const rows = rowsOf(seed)
  return db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK})`)
    if (await present(tx)) return null
    await tx.insert(sources).values(seed.sources.map(({ key }) => ({ key })))
    await tx.insert(sourceRevisions).values(seed.sources.map(({ key, ...source }) => ({ ...published, sourceKey: key, ...source })))
    await tx.insert(species).values(seed.species.map(({ id }, index) => ({ id, ordinal: index + 1 })))
    await tx.insert(speciesRevisions).values(rows.species)
    await tx.insert(isotopes).values(
      seed.species.flatMap((one) => one.isotopes.map(({ mass_number }) => ({ id: isotopeId(one.id, mass_number), speciesId: one.id, massNumber: mass_number }))),
    )
    await tx.insert(isotopeRevisions).values(rows.isotopes)
    await tx.insert(levels).values(rows.levels.map(({ levelId, speciesId }) => ({ id: levelId, speciesId, ordinal: Number(levelId.slice(speciesId.length + 1)) })))
    await tx.insert(levelRevisions).values(rows.levels)
    const measuredIds = await tx.insert(measuredG).values(seed.measuredG.map(({ level }) => ({ levelId: level }))).returning({ id: measuredG.id })
    await tx.insert(measuredGRevisions).values(
      seed.measuredG.map(({ level, ...value }, index) => ({ ...published, measuredGId: idAt(measuredIds, index, level), ...value })),
    )
    const hyperfineIds = await tx
      .insert(hyperfineConstants)
      .values(seed.hyperfine.map(({ level, mass_number }) => ({ levelId: level, isotopeId: isotopeId(speciesOf(level), mass_number) })))
      .returning({ id: hyperfineConstants.id })
    await tx.insert(hyperfineRevisions).values(
      seed.hyperfine.map((value, index) => ({
        ...published,
        hyperfineId: idAt(hyperfineIds, index, value.level),
        aMhz: value.a_mhz,
        aUncMhz: value.a_unc_mhz,
        bMhz: value.b_mhz,
        bUncMhz: value.b_unc_mhz,
        source: value.source,
        evidence: value.evidence,
        note: value.note,
      })),
    )
    const sealed = await sealEdition(tx, { number: EDITION, label: LABEL, notes: NOTES, constants: CONSTANTS_EDITION, publishedBy: null })
    await tx.insert(auditEvents).values({ action: 'edition.load', subjectKind: 'edition', subjectId: String(EDITION), after: { checksum: sealed.checksum, counts: sealed.counts } })
    return sealed
  })
}

function idAt(ids: { id: number }[], index: number, about: string): number {
  const row = ids[index]
  if (row === undefined) throw new SeedError([`${about}: the database gave no identity for its value`])
  return row.id
}
