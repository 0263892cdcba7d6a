import { and, desc, eq, sql } from 'drizzle-orm'
import { among } from '@/db/among'
import type { Db, Tx } from '@/db/client'
import { inEdition } from '@/db/edition-content'
import {
  editions, hyperfineConstants, hyperfineRevisions, isotopeRevisions, isotopes, levelRevisions, measuredG, measuredGRevisions, sourceRevisions, speciesRevisions,
} from '@/db/schema'
import type { ChangeKind } from '@/openapi/schemas/change'
import type { AnyRow, HyperfineRow, IsotopeRow, LevelRow, MeasuredGRow, Published, PublishedTable, SourceRow, SpeciesRow } from './rows'

/** Number of the newest edition as this transaction sees it; 0 before the first. */
export async function newestEdition(db: Db | Tx): Promise<number> {
  const [row] = await db.select({ number: editions.number }).from(editions).orderBy(desc(editions.number)).limit(1)
  return row?.number ?? 0
}

/** Which part of an edition is read: all of it, some species, or single things (each list counts by itself). */
interface Part { species?: readonly string[]; levels?: readonly string[]; isotopes?: readonly string[]; sources?: readonly string[] }

async function readSpecies(db: Db | Tx, n: number, part: Part): Promise<Map<string, Published<SpeciesRow>>> {
  const s = speciesRevisions
  const rows = await db
    .select({
      id: s.speciesId, revision: s.revision, name: s.name, element: s.element, z: s.z, charge: s.charge, coreConfiguration: s.coreConfiguration,
      ionisationEnergyInvcm: s.ionisationEnergyInvcm, ionisationSource: s.ionisationSource, ionisationEvidence: s.ionisationEvidence, note: s.note,
    })
    .from(s).where(and(inEdition(s, n), among(s.speciesId, part.species)))
  return new Map(rows.map(({ id, revision, ...row }) => [id, { revision, row }]))
}

async function readIsotopes(db: Db | Tx, n: number, part: Part): Promise<Map<string, Published<IsotopeRow>>> {
  const i = isotopeRevisions
  const rows = await db
    .select({ id: i.isotopeId, revision: i.revision, massU: i.massU, twoI: i.twoI, abundancePercent: i.abundancePercent, gI: i.gI, source: i.source, evidence: i.evidence, note: i.note })
    .from(i).innerJoin(isotopes, eq(isotopes.id, i.isotopeId))
    .where(and(inEdition(i, n), among(isotopes.speciesId, part.species), among(isotopes.id, part.isotopes)))
    .orderBy(isotopes.speciesId, isotopes.massNumber)
  return new Map(rows.map(({ id, revision, ...row }) => [id, { revision, row }]))
}

async function readSources(db: Db | Tx, n: number, part: Part): Promise<Map<string, Published<SourceRow>>> {
  const o = sourceRevisions
  const rows = await db
    .select({ key: o.sourceKey, revision: o.revision, citation: o.citation, kind: o.kind, authors: o.authors, title: o.title, journal: o.journal, year: o.year, doi: o.doi, note: o.note })
    .from(o).where(and(inEdition(o, n), among(o.sourceKey, part.sources)))
  return new Map(rows.map(({ key, revision, ...row }) => [key, { revision, row }]))
}

async function readMeasured(db: Db | Tx, n: number, part: Part): Promise<Map<string, MeasuredGRow[]>> {
  const g = measuredGRevisions
  const ofSpecies = part.species === undefined ? undefined : sql`substring(${measuredG.levelId} from '^[^.]+') in (select jsonb_array_elements_text(${JSON.stringify(part.species)}::jsonb))`
  const rows = await db
    .select({ levelId: measuredG.levelId, value: g.value, unc: g.unc, literal: g.literal, source: g.source, evidence: g.evidence, note: g.note })
    .from(g).innerJoin(measuredG, eq(measuredG.id, g.measuredGId)).where(and(inEdition(g, n), ofSpecies, among(measuredG.levelId, part.levels))).orderBy(measuredG.id)
  const byLevel = new Map<string, MeasuredGRow[]>()
  for (const { levelId, ...row } of rows) {
    const list = byLevel.get(levelId)
    if (list === undefined) byLevel.set(levelId, [row])
    else list.push(row)
  }
  return byLevel
}

async function readLevels(db: Db | Tx, n: number, part: Part): Promise<Map<string, Published<LevelRow>>> {
  const l = levelRevisions
  const measured = await readMeasured(db, n, part)
  const rows = await db
    .select({
      id: l.levelId, revision: l.revision, configuration: l.configuration, coupling: l.coupling, label: l.label, twoS: l.twoS, l: l.l, twoJ: l.twoJ, twoK: l.twoK,
      coreTwoS: l.coreTwoS, coreL: l.coreL, coreTwoJ: l.coreTwoJ, lOuter: l.lOuter, outerTwoJ: l.outerTwoJ, parity: l.parity, repeatIndex: l.repeatIndex,
      alternativeName: l.alternativeName, energyInvcm: l.energyInvcm, energyUncInvcm: l.energyUncInvcm, energyLiteral: l.energyLiteral, energySource: l.energySource,
      energyEvidence: l.energyEvidence, lineChecked: l.lineChecked, note: l.note, status: l.status, retiredReason: l.retiredReason, successor: l.successor,
      gChosen: l.gChosen, gChosenReason: l.gChosenReason,
    })
    .from(l).where(and(inEdition(l, n), among(l.speciesId, part.species), among(l.levelId, part.levels)))
  const none: MeasuredGRow[] = []
  return new Map(rows.map(({ id, revision, ...row }) => [id, { revision, row: { ...row, measured: measured.get(id) ?? none } }]))
}

async function readHyperfine(db: Db | Tx, n: number, part: Part): Promise<Map<string, Published<HyperfineRow>>> {
  const h = hyperfineRevisions
  const rows = await db
    .select({
      levelId: hyperfineConstants.levelId, massNumber: isotopes.massNumber, revision: h.revision,
      aMhz: h.aMhz, aUncMhz: h.aUncMhz, bMhz: h.bMhz, bUncMhz: h.bUncMhz, source: h.source, evidence: h.evidence, note: h.note,
    })
    .from(h).innerJoin(hyperfineConstants, eq(hyperfineConstants.id, h.hyperfineId)).innerJoin(isotopes, eq(isotopes.id, hyperfineConstants.isotopeId))
    .where(and(inEdition(h, n), among(isotopes.speciesId, part.species), among(hyperfineConstants.levelId, part.levels)))
    .orderBy(hyperfineConstants.levelId, isotopes.massNumber)
  return new Map(rows.map(({ levelId, massNumber, revision, ...row }) => [`${levelId}/${massNumber}`, { revision, row }]))
}

/**
 * What an edition holds of some species (of all without `species`): one query for each kind, the sources always whole.
 * Every value that a change can touch is there, so checks, comparisons and consequences need no other look at the database.
 */
export async function loadPublishedTable(db: Db | Tx, edition: number, species?: readonly string[]): Promise<PublishedTable> {
  const part: Part = species === undefined ? {} : { species }
  return {
    edition,
    species: await readSpecies(db, edition, part),
    isotopes: await readIsotopes(db, edition, part),
    sources: await readSources(db, edition, {}),
    levels: await readLevels(db, edition, part),
    hyperfine: await readHyperfine(db, edition, part),
  }
}

/** The published things that some changes are about, and no others: for showing before and after. By kind and subject. */
export async function loadSubjects(db: Db | Tx, edition: number, subjects: readonly { kind: ChangeKind; subject: string }[]): Promise<(kind: ChangeKind, subject: string) => Published<AnyRow> | undefined> {
  const of = (kind: ChangeKind): string[] => subjects.filter((one) => one.kind === kind).map((one) => one.subject)
  const empty = new Map<string, Published<AnyRow>>()
  const read = async (kind: ChangeKind, load: (ids: string[]) => Promise<Map<string, Published<AnyRow>>>) => (of(kind).length === 0 ? empty : load(of(kind)))
  const found: Record<ChangeKind, Map<string, Published<AnyRow>>> = {
    level: await read('level', (levels) => readLevels(db, edition, { levels })),
    source: await read('source', (sources) => readSources(db, edition, { sources })),
    species: await read('species', (species) => readSpecies(db, edition, { species })),
    isotope: await read('isotope', (ids) => readIsotopes(db, edition, { isotopes: ids })),
    hyperfine: await read('hyperfine', (ids) => readHyperfine(db, edition, { levels: [...new Set(ids.map((id) => id.slice(0, id.indexOf('/'))))] })),
  }
  return (kind, subject) => found[kind].get(subject)
}
