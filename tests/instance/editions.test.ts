import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { parse } from 'csv-parse/sync'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Instance, projectFolder, startInstance } from '../support/instance'
import { type Signed, signInAll, withTag } from '../support/signed'

/** Editions over the API, on a table of its own. All new values are invented. */
let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed
let reader: Signed
beforeAll(async () => {
  instance = await startInstance('editions')
  ;({ author, reviewer, admin, reader } = await signInAll(instance))
})
afterAll(() => instance.end())

const tagOf = async (id: string): Promise<string> => (await instance.get(`/amendments/${id}`, author)).json.data.etag
const corrected = async (level: string, changed: object) => ({ action: 'replace', level, values: { ...(await instance.get(`/levels/${level}/values`)).json.data.values, ...changed }, comment: 'meant' })

/** An accepted amendment with these changes; returns what POST /editions takes of it. */
async function accepted(title: string, changes: readonly unknown[]): Promise<{ id: string; version: number }> {
  const made = await instance.ask('post', '/amendments', { ...author, body: { title } })
  expect(made.status, made.text).toBe(201)
  const { id } = made.json.data
  for (const body of changes) {
    const added = await instance.ask('post', `/amendments/${id}/changes`, { ...author, body })
    expect(added.status, added.text).toBe(201)
  }
  for (const [step, signed] of [['submit', author], ['accept', reviewer]] as const) {
    const done = await instance.ask('post', `/amendments/${id}/${step}`, { ...withTag(signed, await tagOf(id)), body: { comment: 'seen' } })
    expect(done.status, done.text).toBe(200)
  }
  return { id, version: (await instance.get(`/amendments/${id}`, author)).json.data.version }
}
const verify = (args: string[]) => spawnSync(process.execPath, ['--import', 'tsx', 'lib/curation/cli/verify-edition.ts', ...args], { cwd: projectFolder, encoding: 'utf8', env: { ...process.env, ...instance.env } })

describe('the next edition', () => {
  it('is shown to curators and published by admins', async () => {
    expect((await instance.get('/editions/next')).status).toBe(401)
    expect((await instance.get('/editions/next', reader)).status).toBe(403)
    expect((await instance.get('/editions/next', author)).json.data).toMatchObject({ number: 2, amendments: [], conflicts: [], counts: { changes: 0 } })
    expect((await instance.ask('post', '/editions', { ...author, body: { label: 'x' } })).status).toBe(403)
    const nothing = await instance.ask('post', '/editions', { ...admin, body: { label: 'x' } })
    expect([nothing.status, nothing.json.code]).toEqual([409, 'nothing_to_publish'])
  })

  it('is published once under one Idempotency-Key, and is what was seen', async () => {
    const one = await accepted('Sodium', [
      { kind: 'source', action: 'create', source: 'invented-2026-test', values: { citation: 'Invented, J. Test 1, 2 (2026)', kind: 'article', authors: 'Invented, I.', journal: 'J. Test 1, 2', year: 2026 } },
      await corrected('Na-I.3', { energy_invcm: null, energy_literal: '16973.37619', energy_source: 'invented-2026-test' }),
      { action: 'retire', level: 'Na-I.8', reason: 'A test', successor: 'Na-I.7', comment: 'meant' },
    ])
    const other = await instance.ask('post', '/editions', { ...admin, body: { label: 'Second', amendments: [{ ...one, version: one.version + 1 }] } })
    expect([other.status, other.json.code]).toEqual([409, 'accepted_set_changed'])
    expect(other.json.accepted).toMatchObject([one])
    const sending = { ...admin, headers: { ...admin.headers, 'idempotency-key': 'second-edition' }, body: { label: 'Second edition', amendments: [one] } }
    const published = await instance.ask('post', '/editions', sending)
    expect(published.status, published.text).toBe(201)
    expect(published.headers.location).toBe(`${instance.base}/api/v1/editions/2`)
    const again = await instance.ask('post', '/editions', sending)
    expect([again.status, again.json.data.number, again.json.data.checksum]).toEqual([201, 2, published.json.data.checksum])
    expect((await instance.get('/editions')).json.data).toHaveLength(2)
    expect((await instance.get('/levels/Na-I.8')).status).toBe(410)
  })

  it('refuses to publish what does not go together, naming every conflict', async () => {
    const [a, b] = [await accepted('First of two', [await corrected('Na-I.4', { note: 'one' })]), await accepted('Second of two', [await corrected('Na-I.4', { note: 'other' })])]
    const refused = await instance.ask('post', '/editions', { ...admin, body: { label: 'Third edition' } })
    expect([refused.status, refused.json.code, refused.json.conflict_count]).toEqual([409, 'publication_conflict', 1])
    expect(refused.json.conflicts[0]).toMatchObject({ code: 'same_subject', subject: 'Na-I.4', changes: [{ amendment: { id: a.id, title: 'First of two' } }, { amendment: { id: b.id, title: 'Second of two' } }] })
    expect((await instance.get('/editions/next', author)).json.data.conflicts).toEqual(refused.json.conflicts)
    for (const id of [a.id, b.id]) expect((await instance.ask('post', `/amendments/${id}/withdraw`, { ...withTag(author, await tagOf(id)), body: {} })).status).toBe(200)
  })
})

describe('reading what was published', () => {
  it('compares, by kind and species and in either direction', async () => {
    const all = await instance.get('/editions/2/changes')
    expect(all.json.meta).toMatchObject({ since: 1, total: 3, counts: { source: { created: 1 }, level: { replaced: 1, retired: 1 } } })
    expect((await instance.get('/editions/2/changes?kind=source')).json.data.map((change: { subject: string }) => change.subject)).toEqual(['invented-2026-test'])
    expect((await instance.get('/editions/2/changes?species=Na-I&action=retired')).json.data).toMatchObject([{ subject: 'Na-I.8', level: 'Na-I.8', species: 'Na-I' }])
    expect((await instance.get('/editions/2/changes?species=Fe-I')).json.data).toEqual([])
    expect((await instance.get('/editions/1/changes?since=2')).json.data.map((change: { action: string }) => change.action)).toEqual(['absent', 'replaced', 'restored'])
    const csv = parse((await instance.get('/editions/2/changes?kind=level&format=csv')).text, { columns: true }) as Record<string, string>[]
    expect(csv).toContainEqual({ kind: 'level', subject: 'Na-I.3', level: 'Na-I.3', species: 'Na-I', action: 'replaced', field: 'energy_invcm', before: '16973.36619', after: '16973.37619' })
    for (const at of ['/editions/2/changes?since=2', '/editions/2/changes?since=9', '/editions/2/level-map?since=2', '/editions/1/level-map?since=2']) expect([400, 404], at).toContain((await instance.get(at)).status)
  })

  it('maps the levels of the old edition to the new one', async () => {
    const rows = parse((await instance.get('/editions/2/level-map?format=csv')).text, { columns: true }) as Record<string, string>[]
    expect(rows).toHaveLength(407)
    expect(rows.find((row) => row.level_old === 'Na-I.8')).toMatchObject({ level_new: 'Na-I.7', status: 'retired' })
    expect(rows.find((row) => row.level_old === 'Na-I.3')).toMatchObject({ level_new: 'Na-I.3', status: 'changed', energy_old_invcm: '16973.36619', energy_new_invcm: '16973.37619' })
    const lines = (await instance.get('/editions/2/level-map?format=ndjson')).text.trim().split('\n')
    expect(lines).toHaveLength(408)
    expect(JSON.parse(lines.at(-1) ?? '')).toMatchObject({ complete: true })
  })

  it('feeds whoever follows along, and says when nothing is new', async () => {
    const feed = await instance.get('/changes')
    expect(feed.json.data.map((entry: { subject: string; action: string; edition: number }) => [entry.subject, entry.action, entry.edition])).toEqual([['invented-2026-test', 'create', 2], ['Na-I.3', 'replace', 2], ['Na-I.8', 'retire', 2]])
    const last = feed.json.data.at(-1).sequence
    const end = await instance.get(`/changes?after=${last}`)
    expect(end.json.data).toEqual([])
    expect([feed.json.meta.last_sequence, end.json.meta.last_sequence]).toEqual([last, last])
    expect((await instance.get(`/changes?after=${last}`, { headers: { 'if-none-match': end.headers.etag ?? '' } })).status).toBe(304)
    const first = await instance.get('/changes?limit=2')
    expect((await instance.get(`/changes?limit=2&cursor=${encodeURIComponent(first.json.page.next_cursor)}`)).json.data).toEqual(feed.json.data.slice(2))
    await accepted('One more', [await corrected('Na-I.4', { note: 'more' })])
    const made = await instance.ask('post', '/editions', { ...admin, body: { label: 'Third edition' } })
    expect([made.status, made.json.data.number, made.json.meta.edition]).toEqual([201, 3, 3])
    const more = await instance.get(`/changes?after=${last}`, { headers: { 'if-none-match': end.headers.etag ?? '' } })
    expect([more.status, more.json.data.map((entry: { subject: string }) => entry.subject)]).toEqual([200, ['Na-I.4']])
  })

  it('tells the history of a level, also of one that is retired', async () => {
    const history = (await instance.get('/levels/Na-I.8/history')).json.data
    expect(history.map((revision: { action: string; edition: number; until_edition: number | null }) => [revision.action, revision.edition, revision.until_edition])).toEqual([['retired', 2, null], ['created', 1, 2]])
    expect(history[0]).toMatchObject({ reason: 'A test', amendment: { title: 'Sodium' } })
    expect((await instance.get('/levels/Na-I.777/history')).json.code).toBe('level_unknown')
  })

  it('says how to cite an edition and a source', async () => {
    const edition = (await instance.get('/editions/2/citation')).json.data
    expect(edition.text).toContain(`${instance.base}/editions/2`)
    expect(edition.bibtex).toContain('@misc{lodeterm-edition-2,')
    const source = (await instance.get('/sources/invented-2026-test/citation')).json.data
    expect(source.csl_json).toMatchObject({ id: 'invented-2026-test', type: 'article-journal', 'container-title': 'J. Test', volume: '1', page: '2', author: [{ family: 'Invented', given: 'I.' }] })
    expect((await instance.get('/sources/invented-2026-test/citation?edition=1')).json.code).toBe('source_unknown')
  })
})

describe('the checksum', () => {
  it('is the SHA-256 of the content as it comes', async () => {
    for (const n of [1, 2, 3]) {
      const { checksum } = (await instance.get(`/editions/${n}`)).json.data
      const content = await instance.get(`/editions/${n}/content`)
      expect(createHash('sha256').update(content.bytes).digest('hex'), `edition ${n}`).toBe(checksum)
      expect(content.headers['cache-control']).toContain('immutable')
      expect((await instance.get(`/editions/${n}/content`, { headers: { 'if-none-match': content.headers.etag ?? '' } })).status).toBe(304)
    }
  })

  it('is recomputed by npm run verify-edition from a running server, which fails where it does not agree', async () => {
    const good = verify(['1', '2', '3', '--url', instance.base])
    expect(good.status, `${good.stdout}${good.stderr}`).toBe(0)
    // as nobody can who does not own the table and switch its guards off
    await instance.query("alter table level_revisions disable trigger user; update level_revisions set energy_invcm = energy_invcm + 1e-9 where level_id = 'Fe-I.5'; alter table level_revisions enable trigger user")
    const bad = verify(['3', '--url', instance.base])
    expect(bad.status).toBe(1)
    expect(bad.stdout).toContain('DIFFERS')
  })
})
