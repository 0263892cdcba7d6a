import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { applicationUrl, type Db } from '@/db/client'
import { canonicalEdition, verifyEdition } from '@/db/edition-content'
import * as schema from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { buildSnapshot } from '@/lib/catalogue/build'
import { loadEdition, loadLevelPast } from '@/lib/catalogue/load'
import { createAmendment, readAmendment } from '@/lib/curation/amendments'
import { addChange } from '@/lib/curation/changes'
import { previewNextEdition } from '@/lib/curation/next-edition'
import { publishEdition } from '@/lib/curation/publish'
import { loadPublishedTable, newestEdition } from '@/lib/curation/table'
import { writeValues } from '@/lib/curation/values'
import { acceptAmendment, submitAmendment, withdrawAmendment } from '@/lib/curation/reviews'
import { compareEditions, countDifferences } from '@/lib/prediction/comparison'
import { describeDifferences } from '@/lib/prediction/comparison-details'
import { readFeed } from '@/lib/prediction/feed'
import { levelHistory } from '@/lib/prediction/history'
import { levelsIn, valuesIn } from '@/lib/prediction/comparison-details'
import { levelMap } from '@/lib/prediction/level-map'
import { Problem } from '@/lib/problem'
import type { ChangeRequest, LevelValues, MeasuredGValues } from '@/openapi/schemas/change'
import type { PublicationConflict } from '@/openapi/schemas/edition'
import { migrate, root, seed } from '../../db/scripts/steps.mjs'

// On a database of its own: it publishes editions.
const DATABASE = 'lodeterm_publish_test'
let pool: pg.Pool
let owner: pg.Client
let db: Db
let [author, reviewer, admin]: Acting[] = []

const as = (user: { id: string; role: string } | undefined): Acting => ({ caller: { kind: 'session', userId: user?.id, role: user?.role, sessionId: null } as never, ip: '127.0.0.1', requestId: null })
const who = (acting: Acting | undefined): Acting => {
  if (acting === undefined) throw new Error('there is nobody')
  return acting
}

beforeAll(async () => {
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', DATABASE], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  const address = made.stdout.trim()
  const env = { ...process.env, DATABASE_URL: address, DATABASE_APP_URL: '', DEMO: '1', DEMO_ACCOUNTS_FILE: `/tmp/lodeterm-publish-${process.pid}.json` }
  await migrate(env)
  await seed(env)
  pool = new pg.Pool({ connectionString: applicationUrl({ databaseUrl: address, databaseAppUrl: undefined }), max: 4 })
  db = drizzle(pool, { schema })
  owner = new pg.Client({ connectionString: address })
  await owner.connect()
  const { rows } = await owner.query<{ id: string; role: string }>('select id, role from users order by email')
  const curators = rows.filter(({ role }) => role === 'curator')
  ;[author, reviewer, admin] = [as(curators[0]), as(curators[1]), as(rows.find(({ role }) => role === 'admin'))]
})
afterAll(async () => {
  await pool.end()
  await owner.end()
})

/** The values of a level in the newest edition, as a curator would send them back. */
async function levelValues(level: string): Promise<LevelValues> {
  const table = await loadPublishedTable(db, await newestEdition(db), ['Na-I'])
  const published = table.levels.get(level)
  if (published === undefined) throw new Error(`there is no ${level}`)
  return writeValues('level', published.row) as LevelValues
}
const correct = async (level: string, changed: LevelValues): Promise<ChangeRequest> => ({ action: 'replace', level, values: { ...(await levelValues(level)), ...changed }, comment: 'meant' })

/** An amendment with these changes, accepted by a colleague; returns its id and version. */
async function accepted(title: string, changes: readonly ChangeRequest[]): Promise<{ id: string; version: number }> {
  const { id } = await createAmendment(db, who(author), { title })
  for (const change of changes) await addChange(db, who(author), id, change)
  const step = async (acting: Acting) => ({ acting, id, given: { comment: 'seen' }, ifMatch: (await readAmendment(db, id, acting.caller)).etag })
  await submitAmendment(db, (await step(who(author))) as never)
  const { version } = await acceptAmendment(db, (await step(who(reviewer))) as never)
  return { id, version }
}
const withdraw = async (id: string) => withdrawAmendment(db, { acting: who(author), id, given: { comment: 'away' }, ifMatch: (await readAmendment(db, id, who(author).caller)).etag } as never)
const publish = (label: string, more: { notes?: string; amendments?: { id: string; version: number }[] } = {}) => publishEdition(db, who(admin), { label, ...more })
const refusalOf = async (task: Promise<unknown>): Promise<Problem> => {
  const error = await task.then(() => null, (thrown: unknown) => thrown)
  if (!(error instanceof Problem)) throw error ?? new Error('nothing was refused')
  return error
}
const conflictsIn = (problem: Problem) => (problem.extra.conflicts as PublicationConflict[]).map(({ code, subject, changes }) => [code, subject, changes.length])
const counted = async () => (await owner.query("select (select count(*)::int from editions) as editions, (select count(*)::int from level_revisions) as levels, (select count(*)::int from sources) as sources, (select count(*)::int from edition_changes) as feed, (select count(*)::int from notice_events where kind = 'edition.published') as events")).rows[0]
async function contentSum(n: number): Promise<string> {
  const { rows } = await owner.query('select number, label, notes, constants, counts from editions where number = $1', [n])
  const hash = createHash('sha256')
  for await (const part of canonicalEdition(db, rows[0])) hash.update(part)
  return hash.digest('hex')
}
const snapshot = async (n: number) => buildSnapshot(await loadEdition(db, n))

const SOURCE = { citation: 'Invented, J. Test 1, 2 (2026)', kind: 'article', authors: 'Invented, I.', journal: 'J. Test 1, 2', year: 2026 }

describe('publishing', () => {
  it('refuses where nothing is accepted', async () => {
    expect((await refusalOf(publish('Empty'))).code).toBe('nothing_to_publish')
    expect(await counted()).toMatchObject({ editions: 1, feed: 0, events: 0 })
    expect(await previewNextEdition(db)).toMatchObject({ number: 2, label: 'Second edition', notes: '', amendments: [], conflicts: [] })
  })

  let sodium: { id: string; version: number }
  it('publishes every kind of change at once: made, corrected and retired', async () => {
    sodium = await accepted('Sodium anew', [
      { kind: 'source', action: 'create', source: 'invented-2026-test', values: SOURCE },
      { kind: 'source', action: 'replace', source: 'sansonetti-2008-na', values: { citation: 'Sansonetti, J. Phys. Chem. Ref. Data 37, 1659 (2008)', kind: 'article', authors: 'Sansonetti', journal: 'J. Phys. Chem. Ref. Data 37, 1659', year: 2008, doi: '10.1063/1.2943652' } },
      { ...(await correct('Na-I.3', { energy_invcm: null, energy_literal: '16973.37619', energy_source: 'invented-2026-test' })) },
      { action: 'create', species: 'Na-I', values: { configuration: '20s', term: '2S1/2', energy_literal: '41100.12', energy_source: 'invented-2026-test', energy_evidence: 'read', g_j_measured: 2.0023, g_source: 'invented-2026-test', g_evidence: 'read' }, comment: 'meant' },
      { action: 'retire', level: 'Na-I.8', reason: 'A test', successor: 'Na-I.7', comment: 'meant' },
      { kind: 'isotope', action: 'create', species: 'Na-I', mass_number: 22, values: { mass_u: 21.994, nuclear_spin: '3', source: 'invented-2026-test', evidence: 'read' }, comment: 'meant' },
      { kind: 'hyperfine', action: 'create', level: 'Na-I.1', mass_number: 22, values: { a_mhz: 348.75, source: 'invented-2026-test', evidence: 'read' }, comment: 'meant' },
      { kind: 'species', action: 'create', species: 'Al-III', values: { name: 'aluminium', core_configuration: '[Ne]' }, comment: 'meant' },
    ])
    // made once for all who ask at once or later, and anew when what is accepted changes
    const [preview, besides] = await Promise.all([previewNextEdition(db), previewNextEdition(db)])
    expect(besides).toBe(preview)
    expect(await previewNextEdition(db)).toBe(preview)
    const more = await accepted('For a moment', [await correct('Na-I.9', { note: 'a moment' })])
    expect((await previewNextEdition(db)).amendments.map(({ id }) => id)).toEqual([sodium.id, more.id])
    await withdraw(more.id)
    expect((await previewNextEdition(db)).amendments).toHaveLength(1)
    expect(preview.conflicts).toEqual([])
    expect(preview.amendments).toMatchObject([{ id: sodium.id, version: sodium.version, title: 'Sodium anew', changes: 8 }])
    expect(preview.counts).toMatchObject({ changes: 8, level: { create: 1, replace: 1, retire: 1 }, source: { create: 1, replace: 1 } })
    expect(preview.notes).toContain('Na I: 1 level corrected, 1 new, 1 retired')
    expect(preview.notes).toContain('16973.37619 cm')
    expect(preview.notes).toContain('Sources added: invented-2026-test.')

    expect((await refusalOf(publish('Other version', { amendments: [{ id: sodium.id, version: sodium.version + 1 }] }))).code).toBe('accepted_set_changed')
    expect((await refusalOf(publish('None of them', { amendments: [{ id: '00000000-0000-4000-8000-000000000000', version: 1 }] }))).code).toBe('accepted_set_changed')
    const before = { sum: await contentSum(1), levels: (await snapshot(1)).level(3) }
    expect(await publish('Second edition', { amendments: [sodium] })).toBe(2)

    expect(await contentSum(1)).toBe(before.sum)
    expect((await snapshot(1)).level(3)).toEqual(before.levels)
    for (const n of [1, 2]) {
      const sums = await verifyEdition(db, n)
      expect(sums?.computed, `edition ${n}`).toBe(sums?.stored)
    }
    const { rows } = await owner.query('select label, notes, counts, publisher_name, published_by from editions where number = 2')
    expect(rows[0]).toMatchObject({ label: 'Second edition', notes: preview.notes, counts: { species: 34, levels: 407, sources: 56, measured_g: 52, isotopes: 82, hyperfine_constants: 26 }, published_by: who(admin).caller.userId })
    expect(await readAmendment(db, sodium.id, who(author).caller)).toMatchObject({ state: 'published', published_in: 2 })
    expect(await counted()).toMatchObject({ editions: 2, feed: 8, events: 1 })
    const audit = await owner.query("select subject_id, after from audit_events where action = 'edition.publish'")
    expect(audit.rows).toMatchObject([{ subject_id: '2', after: { label: 'Second edition', changes: { changes: 8 }, amendments: [{ id: sodium.id }] } }])
  })

  it('keeps what did not change: measured g_J and their revisions', async () => {
    const { rows } = await owner.query('select count(*)::int as n from measured_g_revisions where published_from = 2')
    expect(rows).toEqual([{ n: 1 }])
  })

  it('is told by comparison, forwards and back, and by the feed', async () => {
    const forwards = await compareEditions(db, 2, 1)
    expect(countDifferences(forwards)).toEqual({ source: { created: 1, replaced: 1 }, species: { created: 1 }, isotope: { created: 1 }, level: { replaced: 1, retired: 1, created: 1 }, hyperfine: { created: 1 } })
    const told = await describeDifferences(db, 2, 1, forwards)
    const of = (subject: string) => told.find((change) => change.subject === subject)
    expect(of('Na-I.3')?.fields).toContainEqual({ field: 'energy_invcm', before: 16973.36619, after: 16973.37619 })
    expect(of('Na-I.8')?.fields).toEqual([{ field: 'status', before: 'active', after: 'retired' }, { field: 'reason', before: null, after: 'A test' }, { field: 'successor', before: null, after: 'Na-I.7' }])
    expect(of('sansonetti-2008-na')).toMatchObject({ kind: 'source', level: null, fields: [{ field: 'doi', before: null, after: '10.1063/1.2943652' }] })
    expect(of('Na-I/22')?.fields).toContainEqual({ field: 'nuclear_spin', before: null, after: 3 })
    expect(of('Na-I.1/22')).toMatchObject({ level: 'Na-I.1', species: 'Na-I', action: 'created' })
    const back = await describeDifferences(db, 1, 2, await compareEditions(db, 1, 2))
    expect(back.map(({ subject, action }) => [subject, action]).sort()).toEqual(told.map(({ subject, action }) => [subject, { created: 'absent', retired: 'restored', replaced: 'replaced' }[action as string]]).sort())
    expect(back.find(({ subject }) => subject === 'Na-I.3')?.fields).toContainEqual({ field: 'energy_invcm', before: 16973.37619, after: 16973.36619 })
    expect(await compareEditions(db, 1, 0)).toHaveLength(33 + 407 + 55 + 81 + 25)

    const feed = await readFeed(db, 0, 100)
    expect(feed.map(({ subject }) => subject).sort()).toEqual(told.map(({ subject }) => subject).sort())
    expect(await readFeed(db, feed[3]?.sequence ?? 0, 100)).toEqual(feed.slice(4))
    expect(await readFeed(db, 0, 2)).toEqual(feed.slice(0, 3))
  })

  it('stands in the history of each level', async () => {
    const [now, first] = await levelHistory(db, 'Na-I.3')
    expect(now).toMatchObject({ revision: 2, edition: 2, action: 'replaced', until_edition: null, amendment: { id: sodium.id, title: 'Sodium anew' }, comment: 'meant' })
    expect(now?.fields).toContainEqual({ field: 'energy_invcm', before: 16973.36619, after: 16973.37619 })
    expect(now?.authors).toHaveLength(1)
    expect(now?.reviewer).not.toBe(now?.authors[0])
    expect(first).toMatchObject({ revision: 1, edition: 1, action: 'created', until_edition: 2, amendment: null, fields: [] })
    // read at once, each edition as it is when it is read alone
    const past = await loadLevelPast(db, 'Na-I.3', [1, 2])
    for (const n of [1, 2]) expect([n, [...valuesIn(past.get(n) as never)]]).toEqual([n, [...(await levelsIn(db, n, ['Na-I.3']))]])
    expect((await levelHistory(db, 'Na-I.8')).map(({ action, reason }) => [action, reason])).toEqual([['retired', 'A test'], ['created', null]])
    expect((await refusalOf(levelHistory(db, 'Na-I.999'))).code).toBe('level_unknown')
  })

  it('leads a fit from the old levels to the new ones', async () => {
    const rows = [...levelMap(await snapshot(1), await snapshot(2), new Set(['Na-I.3']))]
    expect(rows).toHaveLength(408)
    expect(rows.find(({ level_old }) => level_old === 'Na-I.3')).toMatchObject({ level_new: 'Na-I.3', status: 'changed' })
    expect(rows.find(({ level_old }) => level_old === 'Na-I.8')).toMatchObject({ level_new: 'Na-I.7', status: 'retired' })
    expect(rows.filter(({ status }) => status === 'created')).toHaveLength(1)
  })
})

describe('a further edition', () => {
  it('changes measured g_J by their source, and ends those that are left out', async () => {
    const { measured_g: measured } = await levelValues('Na-I.3')
    const kept = measured?.[0] as MeasuredGValues
    await accepted('Measured anew', [
      await correct('Na-I.3', { measured_g: [{ ...kept, value: 1.33421 }, { value: 1.3343, unc: 0.0001, source: 'invented-2026-test', evidence: 'read' }] }),
    ])
    expect(await publish('Third edition', { notes: 'Our own words' })).toBe(3)
    const { rows } = await owner.query("select r.value, r.revision, r.published_from, r.published_until from measured_g_revisions r join measured_g g on g.id = r.measured_g_id where g.level_id = 'Na-I.3' order by g.id, r.revision")
    expect(rows).toEqual([
      { value: kept.value, revision: 1, published_from: 1, published_until: 3 }, { value: 1.33421, revision: 2, published_from: 3, published_until: null },
      { value: 1.3343, revision: 1, published_from: 3, published_until: null },
    ])
    const [change] = await describeDifferences(db, 3, 2, await compareEditions(db, 3, 2))
    expect(change).toMatchObject({ subject: 'Na-I.3', action: 'replaced' })
    expect(change?.fields.map(({ field }) => field)).toContain('g_j.all_measured')
    expect((await verifyEdition(db, 3))?.computed).toBe((await verifyEdition(db, 3))?.stored)
    // over two editions, what changed in either is told once
    expect(countDifferences(await compareEditions(db, 3, 1)).level).toEqual({ replaced: 1, retired: 1, created: 1 })
  })
})

describe('conflicts', () => {
  it('of two amendments on one thing, of twins, and of a stale base are named all at once, and nothing is published', async () => {
    const twin = { action: 'create' as const, species: 'Na-I', values: { configuration: '21s', term: '2S1/2', energy_literal: '41120.5', energy_source: 'invented-2026-test', energy_evidence: 'read' }, comment: 'meant' }
    const one = await accepted('One', [await correct('Na-I.4', { note: 'one' }), twin])
    const other = await accepted('Other', [await correct('Na-I.4', { note: 'other' }), { ...twin, values: { ...twin.values, energy_literal: '41121.5' } }])
    const before = await counted()
    const problem = await refusalOf(publish('Conflict'))
    expect(problem.code).toBe('publication_conflict')
    expect(problem.status).toBe(409)
    const found = conflictsIn(problem)
    expect(found).toContainEqual(['same_subject', 'Na-I.4', 2])
    expect(found.some(([code, , parts]) => code !== 'same_subject' && parts === 2), JSON.stringify(problem.extra.conflicts)).toBe(true)
    expect(problem.detail).toMatch(/\u201cOne\u201d and \u201cOther\u201d/)
    expect(await counted()).toEqual(before)
    expect((await previewNextEdition(db)).conflicts).toEqual(problem.extra.conflicts)

    await withdraw(other.id)
    const stale = await accepted('Stale', [await correct('Na-I.5', { note: 'stale' })])
    await owner.query("alter table amendment_changes disable trigger user; update amendment_changes set base_revision = 7 where subject = 'Na-I.5'; alter table amendment_changes enable trigger user")
    const refused = await refusalOf(publish('Stale'))
    expect((refused.extra.conflicts as PublicationConflict[])[0]).toMatchObject({ code: 'base_stale', subject: 'Na-I.5', base_revision: 7, current_revision: 1, changes: [{ amendment: { id: stale.id, title: 'Stale' } }] })
    await withdraw(stale.id)
    expect(await publish('Fourth edition')).toBe(4)
    expect(await readAmendment(db, one.id, who(author).caller)).toMatchObject({ state: 'published', published_in: 4 })
  })

  it('of an amendment made before another edition changed the same level', async () => {
    const late = await accepted('Late', [await correct('Na-I.6', { note: 'late' })])
    const { rows } = await owner.query("select state from amendments where id = $1", [late.id])
    expect(rows).toEqual([{ state: 'accepted' }])
    const early = await createAmendment(db, who(author), { title: 'Early' })
    await addChange(db, who(author), early.id, await correct('Na-I.6', { note: 'early' }))
    expect(await publish('Fifth edition')).toBe(5)
    const step = async (acting: Acting) => ({ acting, id: early.id, given: { comment: 'seen' }, ifMatch: (await readAmendment(db, early.id, acting.caller)).etag })
    const steps = async () => {
      await submitAmendment(db, (await step(who(author))) as never)
      await acceptAmendment(db, (await step(who(reviewer))) as never)
    }
    // review may see it first; where it does not, publishing does
    const seen = await steps().then(() => null, (error: unknown) => error)
    if (seen === null) expect(conflictsIn(await refusalOf(publish('Sixth')))).toEqual([['base_stale', 'Na-I.6', 1]])
    else expect(seen).toBeInstanceOf(Problem)
    await withdraw(early.id)
  })

  it('of an amendment whose values are read otherwise now than when they were accepted', async () => {
    const odd = await accepted('Odd', [await correct('Na-I.7', { note: 'odd' })])
    await owner.query(`alter table amendment_changes disable trigger user; update amendment_changes set row = row || '{"note": "other"}' where amendment_id = '${odd.id}'; alter table amendment_changes enable trigger user`)
    const before = await counted()
    expect(conflictsIn(await refusalOf(publish('Odd')))).toEqual([['read_otherwise', 'Na-I.7', 1]])
    expect(await counted()).toEqual(before)
    await withdraw(odd.id)
  })

  it('two publishers at once make one edition', async () => {
    await accepted('Once', [await correct('Na-I.4', { note: 'once' })])
    const results = await Promise.allSettled([publish('A'), publish('B')])
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
    const lost = results.find((result) => result.status === 'rejected')
    expect(lost?.status === 'rejected' && lost.reason).toMatchObject({ code: 'nothing_to_publish' })
    expect((await counted()).editions).toBe(6)
  })
})
