import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { amendmentChanges } from '@/db/schema'
import { ask, faultsOf, get, type Json } from './helpers/client'
import { begin, codesOf, replace, valuesOf } from './helpers/curation'
import { makeKey } from './helpers/people'

const NONE = '00000000-0000-4000-8000-000000000000'
const NEW_LEVEL = { configuration: '20s', term: '2S1/2', energy_literal: '41100.12(3)', energy_source: 'sansonetti-2008-na', energy_evidence: 'read' }

describe('correcting a sodium level', () => {
  it('shows before and after, and which lines move by how much', async () => {
    const one = await begin()
    const before = await valuesOf('Na-I.3')
    const reply = await one.add(await replace('Na-I.3', { energy_invcm: before.energy_invcm + 0.01, energy_literal: null }, { comment: 'remeasured' }))
    expect(reply.status).toBe(201)
    const { data } = reply.json
    expect(reply.headers.location).toMatch(new RegExp(`${one.at}/changes/${data.id}$`))
    expect(data).toMatchObject({ kind: 'level', action: 'replace', subject: 'Na-I.3', level: 'Na-I.3', species: 'Na-I', base_revision: 1, version: 1, comment: 'remeasured', author: { id: one.by.owner.id }, import_row: null })
    expect(data.fields.find((field: Json) => field.field === 'energy_invcm')).toEqual({ field: 'energy_invcm', before: before.energy_invcm, after: before.energy_invcm + 0.01 })
    expect(data.before).toEqual(before)
    expect(codesOf(data)).toEqual(expect.arrayContaining(['warning energy_moved', 'warning lines_moved']))
    const d2 = data.consequences.lines.find((line: Json) => line.transition === 'Na-I.1~Na-I.3')
    expect(d2).toMatchObject({ effect: 'moved', kind: 'E1', wavenumber_before_invcm: before.energy_invcm })
    expect(d2.shift_invcm).toBeCloseTo(0.01, 9)
    // d lambda = -lambda^2 d sigma: -(5.89e-5 cm)^2 x 0.01 cm^-1
    expect(d2.shift_pm).toBeCloseTo(-0.347, 2)
    expect(d2.g_eff_before).toBe(d2.g_eff_after)
    expect(data.consequences).toMatchObject({ complete: true, counts: { g_changed: 0, new: 0, gone: 0 } })
    const whole = await get(`${one.at}/consequences`, { key: one.by.key })
    expect(whole.json.data).toEqual(data.consequences)
  })

  it('tells which effective factors change, and lines made and gone', async () => {
    const one = await begin()
    const g = await one.add(await replace('Na-I.3', { measured_g: [{ value: 1.34, unc: 0.0001, source: 'sansonetti-2008-na', evidence: 'read' }] }))
    expect(g.json.data.consequences.counts).toMatchObject({ moved: 0, new: 0, gone: 0 })
    expect(g.json.data.consequences.counts.g_changed).toBeGreaterThan(0)
    const retired = await one.add({ action: 'retire', level: 'Na-I.2', reason: 'a test' })
    expect(retired.json.data).toMatchObject({ after: null, values: null, consequences: { counts: { moved: 0, new: 0 } } })
    expect(retired.json.data.consequences.counts.gone).toBeGreaterThan(0)
    expect(retired.json.data.fields).toEqual(expect.arrayContaining([{ field: 'status', before: 'active', after: 'retired' }, { field: 'reason', before: null, after: 'a test' }]))
    const made = await one.add({ action: 'create', species: 'Na-I', values: { ...NEW_LEVEL, configuration: '20d', term: '2D3/2' } })
    expect(made.json.data.consequences.counts.new).toBeGreaterThan(0)
  })
})

describe('changes of an amendment', () => {
  it('gives a new level its ordinal for good', async () => {
    const one = await begin()
    const first = await one.add({ action: 'create', species: 'Na-I', values: NEW_LEVEL })
    expect(codesOf(first.json.data)).toEqual([])
    expect(first.json.data).toMatchObject({ before: null, base_revision: null, after: { energy_invcm: 41100.12, energy_unc_invcm: 0.03, energy_literal: '41100.12(3)' } })
    const at = `${one.at}/changes/${first.json.data.id}`
    expect((await ask('delete', at, { key: one.by.key, headers: { 'if-match': first.headers.etag ?? '' } })).status).toBe(204)
    expect((await get(at, { key: one.by.key })).status).toBe(404)
    const second = await one.add({ action: 'create', species: 'Na-I', values: NEW_LEVEL })
    const ordinal = (reply: Json) => Number(reply.json.data.subject.split('.')[1])
    expect(ordinal(second)).toBeGreaterThan(ordinal(first))
  })

  it('refuses a second change of one subject, naming the first, and an edit that is of something else', async () => {
    const one = await begin()
    const first = await one.add(await replace('Na-I.3', { note: 'a' }))
    const second = await one.add(await replace('Na-I.3', { note: 'b' }))
    expect([second.status, second.json.code, second.json.change]).toEqual([409, 'change_exists', first.json.data.id])
    const other = await ask('put', `${one.at}/changes/${first.json.data.id}`, { key: one.by.key, headers: { 'if-match': first.headers.etag ?? '' }, body: await replace('Na-I.4', {}) })
    expect([other.status, other.json.code]).toEqual([409, 'subject_mismatch'])
    const retired = await ask('put', `${one.at}/changes/${first.json.data.id}`, { key: one.by.key, headers: { 'if-match': first.headers.etag ?? '' }, body: { action: 'retire', level: 'Na-I.3' } })
    expect(retired.status).toBe(200)
    expect(codesOf(retired.json.data)).toContain('error reason_missing')
  })

  it('lets one of two edits win and shows the other what is there', async () => {
    const [one, colleague] = [await begin(), await makeKey('curator')]
    const made = await one.add(await replace('Na-I.3', { note: 'a' }))
    const at = `${one.at}/changes/${made.json.data.id}`
    const headers = { 'if-match': made.headers.etag ?? '' }
    const bodies = [await replace('Na-I.3', { note: 'mine' }), await replace('Na-I.3', { note: 'yours' })]
    const replies = await Promise.all([ask('put', at, { key: one.by.key, headers, body: bodies[0] }), ask('put', at, { key: colleague.key, headers, body: bodies[1] })])
    expect(replies.map((reply) => reply.status).sort()).toEqual([200, 412])
    const [won, lost] = replies[0]?.status === 200 ? replies : [replies[1], replies[0]]
    expect(lost?.json.current).toMatchObject({ id: made.json.data.id, version: 2, values: { note: won?.json.data.values.note } })
    expect((await ask('put', at, { key: one.by.key, body: bodies[0] })).status).toBe(428)
    expect((await ask('delete', at, { key: one.by.key, headers })).status).toBe(412)
    expect((await ask('delete', at, { key: one.by.key })).status).toBe(428)
  })

  it('checks changes beside each other: a source, a species and isotopes made in the same amendment count', async () => {
    const one = await begin()
    const values = { configuration: '2p', term: '2P*1/2', energy_invcm: 2e5, energy_source: 'an-invented-paper', energy_evidence: 'read' }
    const level = await one.add({ action: 'create', species: 'Be-IV', values })
    expect(codesOf(level.json.data)).toEqual(expect.arrayContaining(['error source_unknown', 'error species_unknown']))
    expect((await one.add({ kind: 'source', action: 'create', source: 'an-invented-paper', values: { citation: 'Invented, A. (2026)', kind: 'article' } })).json.data.findings).toEqual([])
    expect((await one.add({ kind: 'species', action: 'create', species: 'Be-IV', values: { name: 'beryllium IV', core_configuration: '' } })).json.data.findings).toEqual([])
    const now = await get(`${one.at}/changes/${level.json.data.id}`, { key: one.by.key })
    expect(codesOf(now.json.data)).toEqual(['warning no_zero'])
    expect(now.headers.etag, 'nobody edited it').toBe(level.headers.etag)
    const isotope = await one.add({ kind: 'isotope', action: 'create', species: 'Be-IV', mass_number: 9, values: { mass_u: 9.0121831, nuclear_spin: '3/2', abundance_percent: 100, source: 'an-invented-paper', evidence: 'read' } })
    expect(isotope.json.data).toMatchObject({ subject: 'Be-IV/9', level: null, findings: [] })
    const hyperfine = await one.add({ kind: 'hyperfine', action: 'create', level: level.json.data.subject, mass_number: 9, values: { a_mhz: '-12.5', b_mhz: 1, source: 'an-invented-paper', evidence: 'read' } })
    expect(codesOf(hyperfine.json.data)).toEqual(['error hyperfine_impossible'])
    expect(hyperfine.json.data.findings[0].field).toBe('b_mhz')
    const rows = (await get(`${one.at}/changes?severity=error`, { key: one.by.key })).json.data
    expect(rows.map((row: Json) => row.subject)).toEqual([hyperfine.json.data.subject])
    expect((await get(`${one.at}/changes?kind=source`, { key: one.by.key })).json.data).toHaveLength(1)
    expect((await get(`${one.at}/changes?q=be-iv%20isotope`, { key: one.by.key })).json.data).toHaveLength(0)
    expect((await get(`${one.at}/changes?q=be-iv%2F9`, { key: one.by.key })).json.data).toHaveLength(1)
    expect((await get(`${one.at}/changes?q=%25_`, { key: one.by.key })).json.data).toHaveLength(0)
    const pages = await get(`${one.at}/changes?limit=2`, { key: one.by.key })
    const next = await get(`${one.at}/changes?limit=100&cursor=${encodeURIComponent(pages.json.page.next_cursor)}`, { key: one.by.key })
    expect([...pages.json.data, ...next.json.data].map((row: Json) => row.kind)).toEqual(['level', 'source', 'species', 'isotope', 'hyperfine'])
  })

  it('does one thing under one Idempotency-Key', async () => {
    const one = await begin()
    const headers = { 'idempotency-key': randomUUID() }
    const body = { action: 'create', species: 'Na-I', values: { ...NEW_LEVEL, configuration: '21s' } }
    const [first, again] = [await one.add(body, { headers }), await one.add(body, { headers })]
    expect([first.status, again.status]).toEqual([201, 201])
    expect(again.json.data.id).toBe(first.json.data.id)
    expect((await one.now()).counts.changes).toBe(1)
  })

  it('keeps half-typed and strange text as it was written', async () => {
    const one = await begin()
    const strange = '=cmd|"\u202e\ud83e\uddea <b> \u0301'
    const reply = await one.add({ action: 'replace', level: 'Na-I.3', values: { configuration: '3', term: '2P', energy_invcm: '16973,3', note: strange, energy_unc_invcm: -1 } })
    expect(reply.status).toBe(201)
    expect(reply.json.data).toMatchObject({ values: { configuration: '3', term: '2P', energy_invcm: '16973,3', note: strange }, after: null, consequences: null })
    expect(codesOf(reply.json.data)).toEqual(expect.arrayContaining(['error configuration_malformed', 'error j_missing', 'error number_malformed', 'error uncertainty_negative', 'error missing_source', 'error missing_evidence']))
    const lone = await one.add({ action: 'replace', level: 'Na-I.4', values: { note: '\ud800' } })
    expect([lone.status, faultsOf(lone)]).toEqual([400, ['/values/note format_mismatch']])
  })
})

describe('bad changes', () => {
  it('are refused whole, everything wrong told at once', async () => {
    const one = await begin()
    const tries: [unknown, string[]][] = [
      [{ action: 'create', values: {} }, ['/species missing_field']],
      [{ action: 'replace', values: {} }, ['/level missing_field']],
      [{ action: 'replace', level: 'Na-I.3' }, ['/values missing_field']],
      [{ action: 'replace', level: 'Na-I.3', species: 'K-I', values: {} }, ['/species subject_malformed']],
      [{ action: 'retire', level: 'Na-I.3', values: {} }, ['/values field_not_applicable']],
      [{ action: 'replace', level: 'Na-I.3', successor: 'Na-I.4', values: {} }, ['/successor field_not_applicable']],
      [{ kind: 'source', action: 'retire', source: 'x' }, ['/action action_impossible']],
      [{ kind: 'isotope', action: 'create', species: 'Na-I', values: {} }, ['/mass_number missing_field']],
      [{ action: 'replace', level: 'Na-I.3', values: { enrgy_invcm: 1, energy_unc_invcm: [] } }, ['/values/energy_unc_invcm', '/values/enrgy_invcm unknown_field']],
    ]
    for (const [body, wanted] of tries) {
      const reply = await one.add(body)
      expect(reply.status, JSON.stringify(body)).toBe(400)
      for (const fault of wanted) expect(faultsOf(reply).some((found) => found.startsWith(fault)), `${JSON.stringify(body)}: ${faultsOf(reply).join(', ')}`).toBe(true)
    }
    expect((await one.add({ action: 'replace', level: 'Na-I.3', values: { enrgy_invcm: 1 } })).json.detail).toContain('energy_invcm')
    expect((await one.now()).counts.changes).toBe(0)
    expect((await one.now()).version).toBe(1)
  })
})

describe('several changes together', () => {
  it('are tried without a trace', async () => {
    const one = await begin()
    const batch = { changes: [await replace('Na-I.3', { term: '2P*5/2' }), { action: 'create', species: 'Na-I', values: NEW_LEVEL }, { action: 'create', species: 'Na-I', values: NEW_LEVEL }] }
    const reply = await ask('post', `${one.at}/changes/check`, { key: one.by.key, body: batch })
    expect(reply.status).toBe(200)
    const [wrong, first, second] = reply.json.data.changes
    expect(wrong.subject).toBe('Na-I.3')
    expect(codesOf(wrong)).toContain('error term_impossible')
    expect([first.subject, second.subject]).toEqual([null, null])
    expect(codesOf(first)).toEqual(['error duplicate_level'])
    expect(first.findings[0].detail).toContain('another new level')
    expect((await one.now())).toMatchObject({ version: 1, counts: { changes: 0 } })
  })

  it('are written, edited and taken out together', async () => {
    const one = await begin()
    const made = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [await replace('Na-I.3', { note: 'a' }), await replace('Na-I.4', { note: 'b' }), { action: 'create', species: 'Na-I', values: NEW_LEVEL }] } })
    expect(made.status, made.text).toBe(200)
    const [a, b, c] = made.json.data.changes
    expect([a.subject, b.subject]).toEqual(['Na-I.3', 'Na-I.4'])
    expect(await one.now()).toMatchObject({ version: 2, counts: { changes: 3 } })
    const second = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [{ ...(await replace('Na-I.3', { note: 'aa' })), change: a.id, etag: a.etag }, await replace('Na-I.5', {})], remove: [{ change: b.id, etag: b.etag }] } })
    expect(second.status, second.text).toBe(200)
    expect(second.json.data.removed).toEqual([b.id])
    expect(second.json.data.changes[0]).toMatchObject({ id: a.id, version: 2, values: { note: 'aa' } })
    // the audit finds a batch by each level that it wrote, edited or took out
    const { key: admin } = await makeKey('admin')
    const found = async (level: string) => ((await get(`/audit?action=change.batch&subject_id=${level}&limit=100`, { key: admin })).json.data as Json[]).filter((event: Json) => event.subject.id === one.id).length
    expect([await found('Na-I.3'), await found('Na-I.4'), await found('Na-I.5'), await found(c.subject), await found('Na-I.33')]).toEqual([2, 2, 1, 1, 0])
    // one stale tag and nothing is written
    const before = await get(`${one.at}/changes`, { key: one.by.key })
    const stale = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [await replace('Na-I.6', {}), { ...(await replace('Na-I.3', { note: 'lost' })), change: a.id, etag: a.etag }], remove: [{ change: c.id, etag: '"old"' }] } })
    expect([stale.status, faultsOf(stale)]).toEqual([412, ['/changes/1/etag etag_stale', '/remove/0/etag etag_stale']])
    expect(stale.json.current.map((change: Json) => change.id)).toEqual([a.id, c.id])
    const taken = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [await replace('Na-I.5', {}), await replace('Na-I.7', {}), await replace('Na-I.7', {})] } })
    expect([taken.status, faultsOf(taken)]).toEqual([409, ['/changes/0 change_exists', '/changes/2 change_exists']])
    const unknown = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [{ ...(await replace('Na-I.3', {})), change: NONE, etag: '"x"' }] } })
    expect([unknown.status, faultsOf(unknown)]).toEqual([404, ['/changes/0/change change_unknown']])
    const half = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [{ ...(await replace('Na-I.3', {})), change: a.id }] } })
    expect([half.status, faultsOf(half)]).toEqual([400, ['/changes/0/etag missing_field']])
    expect((await get(`${one.at}/changes`, { key: one.by.key })).text).toBe(before.text)
  })

  it('may take one out and put another in its place', async () => {
    const one = await begin()
    const first = await one.add(await replace('Na-I.3', { note: 'a' }))
    const { id, etag } = first.json.data
    const reply = await ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [{ action: 'retire', level: 'Na-I.3', reason: 'better so', successor: 'Na-I.2' }], remove: [{ change: id, etag }] } })
    expect(reply.status, reply.text).toBe(200)
    expect(reply.json.data.changes[0]).toMatchObject({ action: 'retire', successor: 'Na-I.2' })
  })
})

describe('the values of a level', () => {
  it('sent back unchanged change nothing', async () => {
    const one = await begin()
    for (const level of ['Na-I.1', 'Ne-I.2', 'Fe-I.9', 'Hg-I.3']) {
      const reply = await one.add(await replace(level, {}))
      expect([reply.json.data.fields, reply.json.data.findings], level).toEqual([[], [{ severity: 'error', code: 'no_difference', field: null, detail: expect.any(String) }]])
      expect(reply.json.data.after).toEqual(await valuesOf(level))
    }
    const read = await get('/levels/Na-I.3/values?edition=1')
    expect(read.json.data).toMatchObject({ level: 'Na-I.3', revision: 1, edition: 1, values: { configuration: '3p', term: '2P*3/2', coupling: 'LS' } })
    expect((await get('/levels/Na-I.9999/values')).status).toBe(404)
  })
})

describe('what a change was made from', () => {
  const stale = { subject: 'Na-I.3', base_revision: 7, current_revision: 1, edition: 1, amendment: null }

  it('is refused where it is not the revision in force, naming what made that one', async () => {
    const one = await begin()
    const given = await replace('Na-I.3', { note: 'a' })
    const refused = await one.add({ ...given, base_revision: 7 })
    expect([refused.status, refused.json.code, refused.json.changes]).toEqual([409, 'base_stale', [{ change: null, ...stale }]])
    expect(refused.json.errors).toMatchObject([{ pointer: '/base_revision', code: 'base_stale' }])
    const batch = { changes: [{ action: 'create', species: 'Na-I', values: NEW_LEVEL }, { ...given, base_revision: 7 }, { ...(await replace('Na-I.4', { note: 'b' })), base_revision: null }] }
    for (const path of ['batch', 'check']) {
      const both = await ask('post', `${one.at}/changes/${path}`, { key: one.by.key, body: batch })
      expect([both.status, both.json.errors.map((error: Json) => error.pointer)]).toEqual([409, ['/changes/1/base_revision', '/changes/2/base_revision']])
    }
    expect((await get(`${one.at}/changes`, { key: one.by.key })).json.data).toEqual([])
    expect((await one.add({ ...given, base_revision: 1 })).json.data).toMatchObject({ base_revision: 1, current_revision: 1 })
  })

  it('stays through edits, with its finding, until the revision in force is stated', async () => {
    const one = await begin()
    const given = await replace('Na-I.3', { note: 'a' })
    const { id } = (await one.add(given)).json.data
    // as if an edition had come between
    await getDb().update(amendmentChanges).set({ baseRevision: 7 }).where(eq(amendmentChanges.id, id))
    const at = `${one.at}/changes/${id}`
    const tag = async () => (await get(at, { key: one.by.key })).json.data.etag as string
    const put = async (body: object) => ask('put', at, { key: one.by.key, headers: { 'if-match': await tag() }, body })
    const edited = await put({ ...given, comment: 'an edit' })
    expect([edited.json.data.base_revision, edited.json.data.current_revision, codesOf(edited.json.data)]).toEqual([7, 1, ['error base_stale']])
    expect(edited.json.data.findings[0].detail).toContain('edition 1')
    const batch = async (more: object) => ask('post', `${one.at}/changes/batch`, { key: one.by.key, body: { changes: [{ ...given, change: id, etag: await tag(), ...more }] } })
    expect((await batch({})).json.data.changes[0].base_revision).toBe(7)
    expect((await put({ ...given, base_revision: 7 })).json.changes).toEqual([{ change: id, ...stale }])
    expect((await batch({ base_revision: 1 })).json.data.changes[0]).toMatchObject({ base_revision: 1, findings: [] })
    expect((await put(given)).json.data.base_revision).toBe(1)
  })
})

describe('a source that comes or goes', () => {
  it('is known to changes of any species from then on, and to no other change anything happens', async () => {
    const one = await begin()
    const key = `test-${randomUUID()}`
    const [naming, other] = [await one.add(await replace('Na-I.3', { energy_source: key })), await one.add(await replace('Na-I.4', { energy_source: `${key}-other` }))]
    const codes = async (reply: Json) => codesOf((await get(`${one.at}/changes/${reply.json.data.id}`, { key: one.by.key })).json.data)
    expect(await codes(naming)).toEqual(['error source_unknown'])
    const source = await one.add({ kind: 'source', action: 'create', source: key, values: { citation: 'A test', kind: 'other' } })
    expect(codesOf(source.json.data)).toEqual([])
    expect([await codes(naming), await codes(other)]).toEqual([[], ['error source_unknown']])
    const removed = await ask('delete', `${one.at}/changes/${source.json.data.id}`, { key: one.by.key, headers: { 'if-match': source.json.data.etag } })
    expect(removed.status).toBe(204)
    expect([await codes(naming), await codes(other)]).toEqual([['error source_unknown'], ['error source_unknown']])
  })
})

describe('a level of a species that the same amendment makes', () => {
  it('tells the lines that it makes with the other levels there', async () => {
    const one = await begin()
    const source = { energy_source: 'sansonetti-2008-na', energy_evidence: 'read' }
    await one.add({ kind: 'species', action: 'create', species: 'Fr-I', values: { name: 'francium', core_configuration: '[Rn]' } })
    const first = await one.add({ action: 'create', species: 'Fr-I', values: { configuration: '7s', term: '2S1/2', energy_invcm: 0, ...source } })
    expect(first.json.data.consequences).toMatchObject({ counts: { moved: 0, new: 0, gone: 0 } })
    const second = await one.add({ action: 'create', species: 'Fr-I', values: { configuration: '7p', term: '2P*3/2', energy_invcm: 13924, ...source } })
    expect(second.json.data.consequences).toMatchObject({ counts: { new: 1 }, lines: [{ effect: 'new', wavenumber_after_invcm: 13924 }] })
  })
})
