import { and, eq, gt, isNull, lte, or, type SQL } from 'drizzle-orm'
import type { AnyPgColumn } from 'drizzle-orm/pg-core'
import { canonicalJson, canonicalSha256, type Json } from './canonical'
import type { Db, Tx } from './client'
import {
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
  species,
  speciesRevisions,
} from './schema'

type Entity = { readonly id: string; readonly [field: string]: Json }

/** Everything that an edition shows, as plain values; what identifies a row only within one database is left out. */
export interface EditionContent {
  species: Entity[]
  isotopes: Entity[]
  sources: Entity[]
  levels: Entity[]
  measured_g: Entity[]
  hyperfine_constants: Entity[]
}

/** The range condition that makes an edition. */
export const inEdition = (t: { publishedFrom: AnyPgColumn; publishedUntil: AnyPgColumn }, edition: number): SQL | undefined =>
  and(lte(t.publishedFrom, edition), or(isNull(t.publishedUntil), gt(t.publishedUntil, edition)))

const byId = (entities: Entity[]): Entity[] =>
  entities
    .map((entity) => ({ entity, text: canonicalJson(entity) }))
    .sort((a, b) => (a.entity.id < b.entity.id ? -1 : a.entity.id > b.entity.id ? 1 : a.text < b.text ? -1 : 1))
    .map(({ entity }) => entity)

/** Reads all that edition `n` shows, each kind in the order of its ids (several values of one level in the order of their text). */
export async function readEditionContent(db: Db | Tx, n: number): Promise<EditionContent> {
  const s = speciesRevisions
  const speciesRows = await db
    .select({
      id: s.speciesId, ordinal: species.ordinal, name: s.name, element: s.element, z: s.z, charge: s.charge, core_configuration: s.coreConfiguration,
      ionisation_energy_invcm: s.ionisationEnergyInvcm, ionisation_source: s.ionisationSource, ionisation_evidence: s.ionisationEvidence, note: s.note,
    })
    .from(s).innerJoin(species, eq(species.id, s.speciesId)).where(inEdition(s, n))
  const i = isotopeRevisions
  const isotopeRows = await db
    .select({
      id: i.isotopeId, species: isotopes.speciesId, mass_number: isotopes.massNumber, mass_u: i.massU, two_i: i.twoI, abundance_percent: i.abundancePercent,
      g_i: i.gI, source: i.source, evidence: i.evidence, note: i.note,
    })
    .from(i).innerJoin(isotopes, eq(isotopes.id, i.isotopeId)).where(inEdition(i, n))
  const o = sourceRevisions
  const sourceRows = await db
    .select({ id: o.sourceKey, citation: o.citation, kind: o.kind, authors: o.authors, title: o.title, journal: o.journal, year: o.year, doi: o.doi, note: o.note })
    .from(o).where(inEdition(o, n))
  const l = levelRevisions
  const levelRows = await db
    .select({
      id: l.levelId, species: l.speciesId, ordinal: levels.ordinal, revision: l.revision, configuration: l.configuration, coupling: l.coupling, label: l.label,
      two_s: l.twoS, l: l.l, two_j: l.twoJ, two_k: l.twoK, core_two_s: l.coreTwoS, core_l: l.coreL, core_two_j: l.coreTwoJ, l_outer: l.lOuter, outer_two_j: l.outerTwoJ,
      parity: l.parity, repeat_index: l.repeatIndex, alternative_name: l.alternativeName, energy_invcm: l.energyInvcm, energy_unc_invcm: l.energyUncInvcm,
      energy_literal: l.energyLiteral, energy_source: l.energySource, energy_evidence: l.energyEvidence, line_checked: l.lineChecked, note: l.note,
      status: l.status, retired_reason: l.retiredReason, successor: l.successor, g_chosen: l.gChosen, g_chosen_reason: l.gChosenReason,
    })
    .from(l).innerJoin(levels, eq(levels.id, l.levelId)).where(inEdition(l, n))
  const g = measuredGRevisions
  const measuredRows = await db
    .select({ id: measuredG.levelId, value: g.value, unc: g.unc, literal: g.literal, source: g.source, evidence: g.evidence, note: g.note })
    .from(g).innerJoin(measuredG, eq(measuredG.id, g.measuredGId)).where(inEdition(g, n))
  const h = hyperfineRevisions
  const hyperfineRows = await db
    .select({
      id: hyperfineConstants.levelId, isotope: hyperfineConstants.isotopeId, a_mhz: h.aMhz, a_unc_mhz: h.aUncMhz, b_mhz: h.bMhz, b_unc_mhz: h.bUncMhz,
      source: h.source, evidence: h.evidence, note: h.note,
    })
    .from(h).innerJoin(hyperfineConstants, eq(hyperfineConstants.id, h.hyperfineId)).where(inEdition(h, n))
  return {
    species: byId(speciesRows),
    isotopes: byId(isotopeRows),
    sources: byId(sourceRows),
    levels: byId(levelRows),
    measured_g: byId(measuredRows),
    hyperfine_constants: byId(hyperfineRows),
  }
}

/** How much there is of each kind; of levels, the active ones. */
export const countContent = (content: EditionContent): EditionCounts => ({
  species: content.species.length,
  levels: content.levels.filter((level) => level.status === 'active').length,
  sources: content.sources.length,
  measured_g: content.measured_g.length,
  isotopes: content.isotopes.length,
  hyperfine_constants: content.hyperfine_constants.length,
})

interface EditionHead {
  number: number
  label: string
  notes: string
  counts: EditionCounts
  constants: string
}

/** SHA-256 (hexadecimal) of an edition's canonical content: what it is called, how much it holds, and all that it shows. */
export const editionChecksum = ({ number, label, notes, counts, constants }: EditionHead, content: EditionContent): string =>
  canonicalSha256({ number, label, notes, counts: { ...counts }, constants, content: { ...content } })

/** Writes the edition's row, last in its transaction, over the revisions already written for it; from then on it is sealed. */
export async function sealEdition(
  tx: Tx,
  edition: { number: number; label: string; notes: string; constants: string; publishedBy: string | null },
): Promise<{ checksum: string; counts: EditionCounts }> {
  const content = await readEditionContent(tx, edition.number)
  const counts = countContent(content)
  const checksum = editionChecksum({ ...edition, counts }, content)
  await tx.insert(editions).values({ ...edition, counts, checksum })
  return { checksum, counts }
}

/** Whether the stored content still is what was published: computes the checksum anew and compares. */
export async function verifyEdition(db: Db | Tx, n: number): Promise<{ stored: string; computed: string } | null> {
  const [row] = await db.select().from(editions).where(eq(editions.number, n))
  if (row === undefined) return null
  return { stored: row.checksum, computed: editionChecksum(row, await readEditionContent(db, n)) }
}
