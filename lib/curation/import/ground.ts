import { eq, sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { amendmentChanges, amendments } from '@/db/schema'
import type { Finding } from '@/openapi/schemas/change'
import { amendmentMissing } from '../editing'
import { loadPublishedTable, newestEdition } from '../table'
import { ownColumn } from './columns'
import { RowCells } from './cells'
import type { Ground, OwnChange } from './plan'
import type { ReadFile } from './read-file'
import { speciesMeant } from './species-name'

/** A change of the amendment with what a new writing of it must keep or compare. */
export interface StoredChange extends OwnChange { comment: string | null; findings: Finding[]; baseRevision: number | null }

/** What is imported into, and what must still be so when it is written. */
export interface LoadedGround extends Ground { own: readonly StoredChange[]; version: number }

const PAGE = 2000

async function ownChanges(db: Db, amendment: string): Promise<StoredChange[]> {
  const all: StoredChange[] = []
  for (let after = -1; ;) {
    const rows = await db.select().from(amendmentChanges).where(sql`${amendmentChanges.amendmentId} = ${amendment} and ${amendmentChanges.position} > ${after}`).orderBy(amendmentChanges.position).limit(PAGE)
    for (const { id, kind, action, subject, speciesId, given, row, reason, successor, comment, findings, baseRevision } of rows) {
      all.push({ id, kind, action, subject, speciesId, given, row, reason, successor, comment, findings: findings as Finding[], baseRevision })
    }
    const last = rows.at(-1)
    if (last === undefined || rows.length < PAGE) return all
    after = last.position
  }
}

const MOST_SPECIES = 500

/** Species that the rows are about, by name or by the level named, and those that may have been meant. */
function speciesNamed(file: ReadFile): Set<string> {
  const named = new Set<string>()
  if (ownColumn('id') === undefined) return named
  for (const { cells } of file.rows) {
    const row = new RowCells(file.reader, cells)
    const id = row.text('id')?.trim() ?? ''
    for (const species of [...speciesMeant(row.text('species')), ...speciesMeant(id.slice(0, Math.max(0, id.indexOf('.'))))]) named.add(species)
  }
  return named
}

/** Loads of the newest edition what the file and the amendment touch. The version is read first: what changes later shows by it. */
export async function loadGround(db: Db, amendment: string, file: ReadFile): Promise<LoadedGround> {
  const [row] = await db.select({ version: amendments.version }).from(amendments).where(eq(amendments.id, amendment))
  if (row === undefined) throw amendmentMissing()
  const own = await ownChanges(db, amendment)
  const named = speciesNamed(file)
  for (const { speciesId, kind, subject } of own) {
    if (speciesId !== null) named.add(speciesId)
    else if (kind === 'species') named.add(subject)
  }
  const edition = await newestEdition(db)
  const table = await loadPublishedTable(db, edition, named.size > MOST_SPECIES ? undefined : [...named])
  return { table, own, version: row.version }
}
