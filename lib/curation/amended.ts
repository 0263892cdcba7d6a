import type { Db, Tx } from '@/db/client'
import { amendmentChanges } from '@/db/schema'
import { and, eq, inArray, isNotNull, ne } from 'drizzle-orm'
import { toRoman } from '@/lib/atomic/elements'
import { buildSnapshot, type EditionContent, type Snapshot } from '@/lib/catalogue/snapshot'
import { amendmentRow } from './amendments'
import { comparedEdition, type ChangeRow } from './change-view'
import { speciesOfLevel } from './checks/work'
import type { AnyRow, HyperfineRow, IsotopeRow, LevelRow, Published, PublishedTable, SourceRow, SpeciesRow } from './rows'
import { loadPublishedTable } from './table'

/** What a change makes of its subject. */
export type Made = Pick<ChangeRow, 'kind' | 'subject'> & { row: AnyRow }

const put = <R>(map: Map<string, Published<R>>, subject: string, row: AnyRow): void => void map.set(subject, { revision: (map.get(subject)?.revision ?? 0) + 1, row: row as R })

/** The table as it would be with the changes; the table given stays as it is. */
export function amendedTable(table: PublishedTable, changes: readonly Made[]): PublishedTable {
  const after: PublishedTable = { edition: table.edition, species: new Map(table.species), isotopes: new Map(table.isotopes), sources: new Map(table.sources), levels: new Map(table.levels), hyperfine: new Map(table.hyperfine) }
  for (const { kind, subject, row } of changes) {
    if (kind === 'level') put<LevelRow>(after.levels, subject, row)
    else if (kind === 'source') put<SourceRow>(after.sources, subject, row)
    else if (kind === 'species') put<SpeciesRow>(after.species, subject, row)
    else if (kind === 'isotope') put<IsotopeRow>(after.isotopes, subject, row)
    else put<HyperfineRow>(after.hyperfine, subject, row)
  }
  return after
}

const numberAfter = (id: string, mark: string): number => Number(id.slice(id.lastIndexOf(mark) + 1))

/** What the catalogue builds a snapshot from: of the species that the table holds, without what no computation asks for. */
function contentOf(table: PublishedTable): EditionContent {
  const levels = [...table.levels].filter(([id]) => table.species.has(speciesOfLevel(id)))
  return {
    edition: table.edition,
    species: [...table.species].map(([id, { row }]) => ({
      id, element: row.element, z: row.z, stage: toRoman(row.charge + 1), charge: row.charge, name: row.name, core_configuration: row.coreConfiguration,
      ionisation_energy_invcm: row.ionisationEnergyInvcm, ionisation_source: row.ionisationSource, ionisation_evidence: row.ionisationEvidence, note: row.note, isotopes: [],
    })),
    levels: levels.map(([id, { revision, row }]) => ({ ...row, speciesId: speciesOfLevel(id), ordinal: numberAfter(id, '.'), twoJOuter: row.outerTwoJ, publishedFrom: table.edition, revision })),
    measuredG: levels.flatMap(([levelId, { row }]) => row.measured.map(({ value, unc, source, evidence, note }) => ({ levelId, value, unc, source, evidence, note }))),
    hyperfine: [],
    sources: [],
  }
}

/** The species of a table in memory, as the catalogue holds an edition. */
export const snapshotOf = (table: PublishedTable): Snapshot => buildSnapshot(contentOf(table))

/** The edition and what changes would make of it, both in memory: for telling which lines move. */
export const amendedSnapshot = (table: PublishedTable, changes: readonly Made[]): { before: Snapshot; after: Snapshot } => ({ before: snapshotOf(table), after: snapshotOf(amendedTable(table, changes)) })

/** Of a species with more levels that are all new the whole amendment's consequences tell. */
const MOST_BESIDE = 5000

/** Before and after of one change alone; null where it is of no level, or cannot be read. */
export async function snapshotsOfChange(db: Db | Tx, change: ChangeRow, edition: number): Promise<{ before: Snapshot; after: Snapshot } | null> {
  if (change.kind !== 'level' || change.row === null || change.speciesId === null) return null
  const table = await loadPublishedTable(db, edition, [change.speciesId])
  const made = { kind: change.kind, subject: change.subject, row: change.row as AnyRow }
  if (table.species.has(change.speciesId)) return amendedSnapshot(table, [made])
  // a species that the same amendment makes: beside the rest of what it says of it
  const c = amendmentChanges
  const beside = await db.select({ kind: c.kind, subject: c.subject, row: c.row }).from(c)
    .where(and(eq(c.amendmentId, change.amendmentId), eq(c.speciesId, change.speciesId), inArray(c.kind, ['species', 'level']), ne(c.id, change.id), isNotNull(c.row))).limit(MOST_BESIDE + 1)
  if (beside.length > MOST_BESIDE || !beside.some(({ kind }) => kind === 'species')) return null
  return amendedSnapshot(amendedTable(table, beside.map(({ kind, subject, row }) => ({ kind, subject, row: row as AnyRow }))), [made])
}

/** Before and after of a whole amendment, in the species that it touches. Changes that cannot be read are left out. */
export async function snapshotsOfAmendment(db: Db | Tx, id: string): Promise<{ before: Snapshot; after: Snapshot; edition: number }> {
  const amendment = await amendmentRow(db, id)
  const edition = await comparedEdition(db, amendment)
  const c = amendmentChanges
  const rows = await db.select({ kind: c.kind, subject: c.subject, speciesId: c.speciesId, row: c.row }).from(c).where(and(eq(c.amendmentId, id), isNotNull(c.row)))
  const table = await loadPublishedTable(db, edition, [...new Set(rows.flatMap((row) => (row.kind === 'level' || row.kind === 'species' ? (row.speciesId ?? []) : [])))])
  return { edition, ...amendedSnapshot(table, rows.map(({ kind, subject, row }) => ({ kind, subject, row: row as AnyRow }))) }
}
