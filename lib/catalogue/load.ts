import { and, eq, sql, type SQL } from 'drizzle-orm'
import { among } from '@/db/among'
import type { Db, Tx } from '@/db/client'
import { inEdition } from '@/db/edition-content'
import {
  hyperfineConstants,
  hyperfineRevisions,
  isotopeRevisions,
  isotopes,
  levelRevisions,
  levels,
  measuredG,
  measuredGRevisions,
  sourceRevisions,
  species,
  speciesRevisions,
} from '@/db/schema'
import { toRoman } from '@/lib/atomic/elements'
import type { EditionContent, SpeciesRow } from '@/lib/catalogue/shape'
import type { Isotope } from '@/openapi/schemas/species'

async function readSpecies(db: Db | Tx, n: number): Promise<SpeciesRow[]> {
  const isotopeRows = await db
    .select({
      speciesId: isotopes.speciesId,
      mass_number: isotopes.massNumber,
      mass_u: isotopeRevisions.massU,
      twoI: isotopeRevisions.twoI,
      abundance_percent: isotopeRevisions.abundancePercent,
      g_i: isotopeRevisions.gI,
      source: isotopeRevisions.source,
      evidence: isotopeRevisions.evidence,
    })
    .from(isotopeRevisions)
    .innerJoin(isotopes, eq(isotopes.id, isotopeRevisions.isotopeId))
    .where(inEdition(isotopeRevisions, n))
    .orderBy(isotopes.speciesId, isotopes.massNumber)
  const bySpecies = new Map<string, Isotope[]>()
  for (const { speciesId, twoI, ...isotope } of isotopeRows) {
    const list = bySpecies.get(speciesId) ?? []
    list.push({ ...isotope, nuclear_spin: twoI === null ? null : twoI / 2 })
    bySpecies.set(speciesId, list)
  }
  const rows = await db
    .select({
      id: speciesRevisions.speciesId,
      element: speciesRevisions.element,
      z: speciesRevisions.z,
      charge: speciesRevisions.charge,
      name: speciesRevisions.name,
      core_configuration: speciesRevisions.coreConfiguration,
      ionisation_energy_invcm: speciesRevisions.ionisationEnergyInvcm,
      ionisation_source: speciesRevisions.ionisationSource,
      ionisation_evidence: speciesRevisions.ionisationEvidence,
      note: speciesRevisions.note,
    })
    .from(speciesRevisions)
    .innerJoin(species, eq(species.id, speciesRevisions.speciesId))
    .where(inEdition(speciesRevisions, n))
    .orderBy(species.ordinal)
  return rows.map((row) => ({ ...row, stage: toRoman(row.charge + 1), isotopes: bySpecies.get(row.id) ?? [] }))
}

const readLevels = (db: Db | Tx, n: number, ids?: readonly string[]) => levelsWhere(db, and(inEdition(levelRevisions, n), among(levelRevisions.levelId, ids)))

const levelsWhere = (db: Db | Tx, where: SQL | undefined) =>
  db
    .select({
      speciesId: levelRevisions.speciesId,
      ordinal: levels.ordinal,
      configuration: levelRevisions.configuration,
      coupling: levelRevisions.coupling,
      label: levelRevisions.label,
      twoS: levelRevisions.twoS,
      l: levelRevisions.l,
      twoJ: levelRevisions.twoJ,
      twoK: levelRevisions.twoK,
      coreTwoS: levelRevisions.coreTwoS,
      coreL: levelRevisions.coreL,
      coreTwoJ: levelRevisions.coreTwoJ,
      lOuter: levelRevisions.lOuter,
      twoJOuter: levelRevisions.outerTwoJ,
      parity: levelRevisions.parity,
      repeatIndex: levelRevisions.repeatIndex,
      alternativeName: levelRevisions.alternativeName,
      energyInvcm: levelRevisions.energyInvcm,
      energyUncInvcm: levelRevisions.energyUncInvcm,
      energyLiteral: levelRevisions.energyLiteral,
      energySource: levelRevisions.energySource,
      energyEvidence: levelRevisions.energyEvidence,
      lineChecked: levelRevisions.lineChecked,
      note: levelRevisions.note,
      status: levelRevisions.status,
      retiredReason: levelRevisions.retiredReason,
      successor: levelRevisions.successor,
      publishedFrom: levelRevisions.publishedFrom,
      revision: levelRevisions.revision,
      gChosen: levelRevisions.gChosen,
      gChosenReason: levelRevisions.gChosenReason,
    })
    .from(levelRevisions)
    .innerJoin(levels, eq(levels.id, levelRevisions.levelId))
    .where(where)

const readMeasured = (db: Db | Tx, n: number, ids?: readonly string[]) =>
  db
    .select({
      levelId: measuredG.levelId,
      value: measuredGRevisions.value,
      unc: measuredGRevisions.unc,
      source: measuredGRevisions.source,
      evidence: measuredGRevisions.evidence,
      note: measuredGRevisions.note,
    })
    .from(measuredGRevisions)
    .innerJoin(measuredG, eq(measuredG.id, measuredGRevisions.measuredGId))
    .where(and(inEdition(measuredGRevisions, n), among(measuredG.levelId, ids)))
    .orderBy(measuredG.id)

const readHyperfine = (db: Db | Tx, n: number) =>
  db
    .select({
      levelId: hyperfineConstants.levelId,
      mass_number: isotopes.massNumber,
      a_mhz: hyperfineRevisions.aMhz,
      a_unc_mhz: hyperfineRevisions.aUncMhz,
      b_mhz: hyperfineRevisions.bMhz,
      b_unc_mhz: hyperfineRevisions.bUncMhz,
      source: hyperfineRevisions.source,
      evidence: hyperfineRevisions.evidence,
      note: hyperfineRevisions.note,
    })
    .from(hyperfineRevisions)
    .innerJoin(hyperfineConstants, eq(hyperfineConstants.id, hyperfineRevisions.hyperfineId))
    .innerJoin(isotopes, eq(isotopes.id, hyperfineConstants.isotopeId))
    .where(inEdition(hyperfineRevisions, n))
    .orderBy(hyperfineConstants.levelId, isotopes.massNumber)

const readSources = (db: Db | Tx, n: number) =>
  db
    .select({
      key: sourceRevisions.sourceKey,
      citation: sourceRevisions.citation,
      kind: sourceRevisions.kind,
      authors: sourceRevisions.authors,
      title: sourceRevisions.title,
      journal: sourceRevisions.journal,
      year: sourceRevisions.year,
      doi: sourceRevisions.doi,
      note: sourceRevisions.note,
    })
    .from(sourceRevisions)
    .where(inEdition(sourceRevisions, n))
    .orderBy(sourceRevisions.sourceKey)

/** Reads all of an edition. Editions are immutable, so the parts need no common transaction. */
export async function loadEdition(db: Db | Tx, edition: number): Promise<EditionContent> {
  return {
    edition,
    species: await readSpecies(db, edition),
    // a published revision always has the edition that published it; the range condition leaves no other
    levels: (await readLevels(db, edition)).map((row) => ({ ...row, publishedFrom: row.publishedFrom ?? edition })),
    measuredG: await readMeasured(db, edition),
    hyperfine: await readHyperfine(db, edition),
    sources: await readSources(db, edition),
  }
}

/** A few levels of an edition, retired ones too, with what their values are made from: for telling what differs, not for searching. */
export async function loadLevels(db: Db | Tx, edition: number, ids: readonly string[]): Promise<EditionContent> {
  return {
    edition,
    species: await readSpecies(db, edition),
    levels: (await readLevels(db, edition, ids)).map((row) => ({ ...row, publishedFrom: row.publishedFrom ?? edition })),
    measuredG: await readMeasured(db, edition, ids),
    hyperfine: [],
    sources: [],
  }
}

interface Past { from: number | null; until: number | null }
const isIn = ({ from, until }: Past, n: number): boolean => from !== null && from <= n && (until === null || until > n)

/** What a level was in some editions, each as `loadLevels` would give it, read at once however many they are. */
export async function loadLevelPast(db: Db | Tx, id: string, editions: readonly number[]): Promise<Map<number, EditionContent>> {
  const kinds = await db
    .select({
      from: speciesRevisions.publishedFrom, until: speciesRevisions.publishedUntil, id: speciesRevisions.speciesId, element: speciesRevisions.element, z: speciesRevisions.z,
      charge: speciesRevisions.charge, name: speciesRevisions.name, core_configuration: speciesRevisions.coreConfiguration, ionisation_energy_invcm: speciesRevisions.ionisationEnergyInvcm,
      ionisation_source: speciesRevisions.ionisationSource, ionisation_evidence: speciesRevisions.ionisationEvidence, note: speciesRevisions.note,
    })
    .from(speciesRevisions).innerJoin(levels, eq(levels.speciesId, speciesRevisions.speciesId)).where(eq(levels.id, id))
  const revisions = await levelsWhere(db, and(eq(levelRevisions.levelId, id), sql`${levelRevisions.publishedFrom} is not null`))
  const measured = await db
    .select({
      from: measuredGRevisions.publishedFrom, until: measuredGRevisions.publishedUntil, levelId: measuredG.levelId, value: measuredGRevisions.value, unc: measuredGRevisions.unc,
      source: measuredGRevisions.source, evidence: measuredGRevisions.evidence, note: measuredGRevisions.note,
    })
    .from(measuredGRevisions).innerJoin(measuredG, eq(measuredG.id, measuredGRevisions.measuredGId)).where(eq(measuredG.levelId, id)).orderBy(measuredG.id)
  return new Map(editions.map((edition): [number, EditionContent] => {
    const newest = revisions.filter(({ publishedFrom }) => publishedFrom !== null && publishedFrom <= edition).sort((a, b) => (b.publishedFrom ?? 0) - (a.publishedFrom ?? 0)).slice(0, 1)
    return [edition, {
      edition,
      species: kinds.filter((row) => isIn(row, edition)).map((row) => ({ ...row, stage: toRoman(row.charge + 1), isotopes: [] })),
      levels: newest.map((row) => ({ ...row, publishedFrom: row.publishedFrom ?? edition })),
      measuredG: measured.filter((row) => isIn(row, edition)),
      hyperfine: [],
      sources: [],
    }]
  }))
}
