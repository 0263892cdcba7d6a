import { eq, sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeDb, getDb } from '@/db/client'
import { amendmentChanges, amendments, users } from '@/db/schema'
import { checkChanges } from '@/lib/curation/checks'
import { insertChanges, type PreparedChange, reserveOrdinals } from '@/lib/curation/editing'
import type { AnyRow, ChangeInput, PublishedTable } from '@/lib/curation/rows'
import { loadPublishedTable, loadSubjects, newestEdition } from '@/lib/curation/table'
import { atomOf, differences, readLevelValues, writeLevelValues, writeValues } from '@/lib/curation/values'
import { CHANGE_KINDS } from '@/db/schema'

let table: PublishedTable
let author = ''
beforeAll(async () => {
  table = await loadPublishedTable(getDb(), await newestEdition(getDb()))
  const [user] = await getDb().insert(users).values({ email: `writer.${Date.now()}@test.example`, name: 'Writer', role: 'curator', passwordHash: 'x' }).returning()
  author = user?.id ?? ''
})
afterAll(closeDb)

const mapOf = (kind: ChangeInput['kind']) => ({ level: table.levels, source: table.sources, species: table.species, isotope: table.isotopes, hyperfine: table.hyperfine })[kind] as ReadonlyMap<string, { revision: number; row: AnyRow }>
const speciesOf = (kind: ChangeInput['kind'], subject: string): string | null => (kind === 'source' ? null : (subject.split(/[./]/)[0] ?? null))

/** Everything that the table holds, each thing replaced by itself. */
const everything = (): ChangeInput[] =>
  CHANGE_KINDS.flatMap((kind) => [...mapOf(kind)].map(([subject, { row }]) => ({ id: `${kind} ${subject}`, kind, action: 'replace' as const, subject, speciesId: speciesOf(kind, subject), given: writeValues(kind, row), reason: null, successor: null })))

const prepared = (changes: readonly ChangeInput[], comment: string | null = null): PreparedChange[] => {
  const checked = checkChanges(table, changes)
  return changes.map((change, at) => ({ ...change, row: checked[at]!.row, findings: checked[at]!.findings, comment, baseRevision: 1 }))
}

const amendment = async (): Promise<string> => (await getDb().insert(amendments).values({ title: 'test', author }).returning())[0]?.id ?? ''

describe('the published table', () => {
  it('holds every level of the first edition, which come back the same from what a curator writes', () => {
    expect(table.levels.size).toBe(407)
    for (const [id, { row }] of table.levels) {
      const species = id.slice(0, id.indexOf('.'))
      const again = readLevelValues(writeLevelValues(row), { atom: atomOf(species, table.species.get(species)!.row) })
      expect(again.findings, id).toEqual([])
      expect(again.row, id).toEqual(row)
      expect(writeLevelValues(again.row!)).toEqual(writeLevelValues(row))
    }
  })

  it('replaced by itself has no differences, and nothing else is found', () => {
    const changes = everything()
    const checked = checkChanges(table, changes)
    changes.forEach(({ kind, subject }, at) => {
      expect(checked[at]?.findings.map(({ code }) => code), subject).toEqual(['no_difference'])
      expect(differences(kind, mapOf(kind).get(subject)!.row, checked[at]!.row), subject).toEqual([])
    })
  })

  it('is read in parts too', async () => {
    const part = await loadPublishedTable(getDb(), 1, ['Na-I', 'Zz-I'])
    expect([...part.species.keys()]).toEqual(['Na-I'])
    for (const [id, published] of part.levels) expect(published).toEqual(table.levels.get(id))
    expect(part.levels.size).toBe([...table.levels.keys()].filter((id) => id.startsWith('Na-I.')).length)
    expect(part.sources.size).toBe(table.sources.size)
    const subjects = everything().map(({ kind, subject }) => ({ kind, subject }))
    const found = await loadSubjects(getDb(), 1, subjects)
    for (const { kind, subject } of subjects) expect(found(kind, subject), subject).toEqual(mapOf(kind).get(subject))
    expect(found('level', 'Na-I.9999')).toBeUndefined()
    expect((await loadPublishedTable(getDb(), 0)).levels.size).toBe(0)
  })
})

describe('changes in the database', () => {
  it('are stored in their order, and a second time in place of the first', async () => {
    const id = await amendment()
    const changes = everything()
    const ids = await getDb().transaction((tx) => insertChanges(tx, id, author, prepared(changes)))
    const rows = await getDb().select().from(amendmentChanges).where(eq(amendmentChanges.amendmentId, id)).orderBy(amendmentChanges.position)
    expect(rows.map((row) => row.id)).toEqual(ids)
    expect(rows.map((row) => `${row.kind} ${row.subject}`)).toEqual(changes.map((change) => change.id))
    expect(rows.map((row) => row.row)).toEqual(changes.map((change) => mapOf(change.kind).get(change.subject)?.row))
    const again = await getDb().transaction((tx) => insertChanges(tx, id, author, prepared(changes.slice(0, 3), 'again')))
    expect(again).toEqual(ids.slice(0, 3))
    const [first] = await getDb().select().from(amendmentChanges).where(eq(amendmentChanges.id, ids[0] ?? ''))
    expect(first).toMatchObject({ version: 2, comment: 'again' })
  })

  it('never share an ordinal, whoever makes them at once', async () => {
    const taken = await Promise.all(Array.from({ length: 8 }, () => getDb().transaction((tx) => reserveOrdinals(tx, 'K-I', 3))))
    expect(new Set(taken).size).toBe(8)
    const most = Math.max(...[...table.levels.keys()].filter((id) => id.startsWith('K-I.')).map((id) => Number(id.split('.')[1])))
    expect(Math.min(...taken)).toBeGreaterThan(most)
    await expect(getDb().transaction(async (tx) => {
      await reserveOrdinals(tx, 'K-I', 5)
      throw new Error('refused')
    })).rejects.toThrow('refused')
    const [counter] = (await getDb().execute<{ next: number }>(sql`select next from ordinal_counters where species_id = 'K-I'`)).rows
    expect(counter?.next).toBe(Math.max(...taken) + 3)
  })
})
