import { parse } from 'csv-parse/sync'
import { sql } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { imports, users } from '@/db/schema'
import { inventedTable } from '../bench/import-table'
import { ask, base, get } from './helpers/client'
import { formOf } from './helpers/form'
import { importFile, newAmendment, reportOf } from './helpers/import'
import { makeKey } from './helpers/people'

let key = ''
let exported = ''
let header: string[] = []
let rows: string[][] = []
beforeAll(async () => {
  key = (await makeKey('curator')).key
  exported = (await get('/editions/1/levels?format=csv', { key })).text
  const [first = [], ...rest] = parse(exported) as string[][]
  header = first
  rows = rest
})

const quote = (cell: string, delimiter: string) => (cell.includes(delimiter) || /["\r\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell)
const written = (table: readonly (readonly string[])[], delimiter = ',') => table.map((row) => `${row.map((cell) => quote(cell, delimiter)).join(delimiter)}\r\n`).join('')
const at = (name: string) => header.indexOf(name)
/** The exported row of a level, with some cells changed. */
const rowOf = (level: string, cells: Record<string, string> = {}) => (rows.find((row) => row[0] === level) ?? []).map((cell, i) => cells[header[i] ?? ''] ?? cell)
const tableOf = (...changed: string[][]) => written([header, ...changed])
const SAME = { new: 0, changed: 0, ambiguous: 0, error: 0 }

describe('an exported table', () => {
  it.each(['csv', 'tab', 'semicolon and decimal comma', 'UTF-16', 'UTF-16 without a mark', 'without ids'])('comes back to no change: %s', async (form) => {
    const amendment = await newAmendment(key)
    const numbers = new Set(['s', 'k', 'core_s', 'core_j', 'j_outer', 'j', 'energy_invcm', 'energy_unc_invcm', 'energy_literal', 'g_j_measured', 'g_j_measured_unc'].map(at))
    const comma = () => [header, ...rows.map((row) => row.map((cell, i) => (numbers.has(i) ? cell.replace('.', ',') : cell)))]
    const file = form === 'csv' ? exported
      : form === 'tab' ? written([header, ...rows], '\t')
        : form === 'semicolon and decimal comma' ? written(comma(), ';')
          : form === 'without ids' ? written([header.slice(1), ...rows.map((row) => row.slice(1))])
            : Buffer.from(`${form === 'UTF-16' ? '\ufeff' : ''}${exported}`, 'utf16le')
    const reply = await importFile(key, amendment, file, '?dry_run=true')
    expect(reply.status, reply.text.slice(0, 500)).toBe(200)
    const { data } = reply.json
    expect(data.counts, JSON.stringify(data.problems)).toEqual({ ...SAME, same: rows.length })
    expect([data.state, data.rows_total, data.rows_done]).toEqual(['done', rows.length, rows.length])
    expect(data.summary).toContain('Nothing differs')
    const read = { csv: ['utf-8', ',', '.'], tab: ['utf-8', '\t', '.'], 'semicolon and decimal comma': ['utf-8', ';', ','], 'UTF-16': ['utf-16le', ',', '.'], 'UTF-16 without a mark': ['utf-16le', ',', '.'], 'without ids': ['utf-8', ',', '.'] }[form]
    expect([data.reading.encoding, data.reading.delimiter, data.reading.decimal]).toEqual(read)
  })
})

describe('a changed row', () => {
  it('is shown field by field, written, and found again when the file is imported again', async () => {
    const amendment = await newAmendment(key)
    const file = tableOf(rowOf('Na-I.3', { energy_invcm: '16973.3662', energy_unc_invcm: '0.0001', note: '=2+2 "Grüße" 😀' }), rowOf('Na-I.2'))
    const dry = (await importFile(key, amendment, file, '?dry_run=true')).json.data
    expect([dry.state, dry.counts]).toEqual(['done', { ...SAME, changed: 1, same: 1 }])
    const [changed] = await reportOf(key, amendment, dry.id, 'changed')
    expect(changed).toMatchObject({ row: 2, level: 'Na-I.3' })
    expect(changed?.fields.map((one) => one.field).sort()).toEqual(['energy_invcm', 'energy_unc_invcm', 'note'])
    expect((await get(`/amendments/${amendment}`, { key })).json.data.counts.changes).toBe(0)

    const done = (await importFile(key, amendment, file)).json.data
    expect([done.state, done.summary]).toEqual(['done', expect.stringContaining('1 changed')])
    const after = (await get(`/amendments/${amendment}`, { key })).json.data
    expect([after.version, after.counts.changes]).toEqual([2, 1])
    const [change] = (await get(`/amendments/${amendment}/changes`, { key })).json.data
    expect(change).toMatchObject({ subject: 'Na-I.3', action: 'replace', import_row: 2, base_revision: 1 })
    expect(change.after.note).toBe('=2+2 "Grüße" 😀')
    // of several measured g_J all stay
    const values = (await get('/levels/Na-I.3/values', { key })).json.data.values
    expect(change.after.measured_g).toEqual(values.measured_g)

    const again = (await importFile(key, amendment, file)).json.data
    expect([again.counts, again.summary]).toEqual([{ ...SAME, same: 2 }, expect.stringContaining('Nothing was changed')])
    expect((await get(`/amendments/${amendment}`, { key })).json.data.version).toBe(2)

    // the edition's own row takes the change out again
    const back = (await importFile(key, amendment, tableOf(rowOf('Na-I.3')))).json.data
    expect(back.counts).toEqual({ ...SAME, changed: 1, same: 0 })
    expect((await get(`/amendments/${amendment}`, { key })).json.data.counts.changes).toBe(0)
  })

  it('of a new level makes one, whose number is kept', async () => {
    const amendment = await newAmendment(key)
    const row = rowOf('Na-I.3', { id: '', configuration: '2p6.19d', term: '2D5/2', j: '2.5', parity: 'even', multiplicity: '', s: '', l: '', degeneracy: '', energy_invcm: '41100.5', g_j_measured: '', g_j_measured_unc: '', g_source: '', g_evidence: '', status: '' })
    const first = (await importFile(key, amendment, tableOf(row))).json.data
    expect([first.state, first.counts], JSON.stringify(await reportOf(key, amendment, first.id))).toEqual(['done', { ...SAME, new: 1, same: 0 }])
    const [report] = await reportOf(key, amendment, first.id)
    expect(report?.level).toMatch(/^Na-I\.\d+$/)
    const again = (await importFile(key, amendment, tableOf(row))).json.data
    expect(again.counts).toEqual({ ...SAME, same: 1 })
    const [same] = await reportOf(key, amendment, again.id)
    expect(same?.level).toBe(report?.level)
  })

  it('leaves alone what the file has no column for', async () => {
    const amendment = await newAmendment(key)
    const done = (await importFile(key, amendment, 'id;energy_unc_invcm\nNa-I.3;0,0003\n')).json.data
    expect(done.counts, JSON.stringify(done)).toEqual({ ...SAME, changed: 1, same: 0 })
    const [row] = await reportOf(key, amendment, done.id)
    expect(row?.fields).toEqual([{ field: 'energy_unc_invcm', before: null, after: 0.0003 }])
  })
})

/** All that an import could write to, as text. */
async function stateOf(amendment: string): Promise<string> {
  const { rows: found } = await getDb().execute(sql`select
    (select to_jsonb(a) from amendments a where a.id = ${amendment}) amendment, (select jsonb_agg(c order by c.id) from amendment_changes c where c.amendment_id = ${amendment}) changes,
    (select jsonb_agg(w) from amendment_authors w where w.amendment_id = ${amendment}) authors, (select jsonb_agg(o order by o.species_id) from ordinal_counters o) ordinals,
    (select count(*) from amendment_changes) all_changes, (select max(id) from level_revisions) revisions, (select max(id) from audit_events) audit`)
  return JSON.stringify(found)
}

describe('a file with a row in error', () => {
  it('changes nothing', async () => {
    const amendment = await newAmendment(key)
    const before = await stateOf(amendment)
    const good = rowOf('Na-I.2', { note: 'good' })
    const bad = rowOf('Na-I.3', { energy_unc_invcm: '-1' })
    const contradicting = rowOf('Na-I.4', { j: '7.5' })
    const reply = (await importFile(key, amendment, tableOf(good, bad, contradicting, rowOf('Na-I.6'), rowOf('Na-I.6', { note: 'again' }), ['Na-I.5', 'Na-I']))).json.data
    expect([reply.state, reply.counts]).toEqual(['refused', { ...SAME, changed: 1, same: 0, error: 5 }])
    expect(reply.summary).toContain('5 rows have errors')
    const report = await reportOf(key, amendment, reply.id, 'error')
    expect(report.map(({ row, findings }) => [row, [...new Set(findings.map((one) => one.code))]])).toEqual([[3, ['uncertainty_negative']], [4, ['column_contradicts']], [5, ['row_repeated']], [6, ['row_repeated']], [7, ['row_length']]])
    expect(await stateOf(amendment)).toBe(before)
    const after = (await get(`/amendments/${amendment}`, { key })).json.data
    expect([after.version, after.counts.changes]).toEqual([1, 0])
  })

  it('names the cure for a species that is not there, and for levels it cannot tell apart', async () => {
    const amendment = await newAmendment(key)
    const file = written([['species', 'configuration', 'term', 'energy_invcm', 'energy_source', 'energy_evidence'], ['Uuo-I', '7p6', '1S0', '0', 'nist', 'read'], ['Na-I', '', '2P*3/2', '', '', '']])
    const reply = (await importFile(key, amendment, file, '?dry_run=true')).json.data
    const report = await reportOf(key, amendment, reply.id)
    expect(report[0]?.findings[0]).toMatchObject({ code: 'species_unknown', detail: expect.stringContaining('add the species') })
    expect(report[1]?.verdict).toBe('error')
  })
})

describe('a row that fits several levels', () => {
  it('is ambiguous, and nothing is written', async () => {
    const all = rows.map((row) => Object.fromEntries(header.map((name, i) => [name, row[i] ?? ''])))
    const labelled = all.filter((one) => one.label !== '' || one.repeat_index !== '')
    const pair = labelled.find((one) => labelled.some((other) => other !== one && other.species === one.species && other.configuration === one.configuration && other.term === one.term))
    const amendment = await newAmendment(key)
    if (pair === undefined) {
      // make such a pair in the amendment: two levels told apart by their repeat index alone
      const twin = (index: string, energy: string) => rowOf('Na-I.3', { id: '', configuration: '2p6.21d', term: '2D5/2', j: '2.5', parity: 'even', multiplicity: '', s: '', l: '', degeneracy: '', energy_invcm: energy, g_j_measured: '', g_j_measured_unc: '', g_source: '', g_evidence: '', repeat_index: index })
      const made = (await importFile(key, amendment, tableOf(twin('1', '41200.5'), twin('2', '41201.5')))).json.data
      expect([made.state, made.counts.new], JSON.stringify(await reportOf(key, amendment, made.id))).toEqual(['done', 2])
      const reply = (await importFile(key, amendment, tableOf(twin('', '41300')))).json.data
      expect([reply.state, reply.counts.ambiguous]).toEqual(['refused', 1])
      const [row] = await reportOf(key, amendment, reply.id, 'ambiguous')
      expect(row?.findings[0]?.detail).toMatch(/Na-I\.\d+ .* or Na-I\.\d+/)
      return
    }
    const reply = (await importFile(key, amendment, tableOf(rowOf(pair.id ?? '', { id: '', label: '', repeat_index: '', energy_invcm: '1' })))).json.data
    expect(reply.counts.ambiguous).toBe(1)
  })
})

describe('other headers', () => {
  const foreign = 'Spectrum\tConfig\tTerm\tJ\tParity\tEnergy (cm-1)\tRemarks\nNa-I\t3p\t2P\t3/2\todd\t16973,36619\tm\u00fcller\n'

  it('are refused with what they may be, and read by a mapping', async () => {
    const amendment = await newAmendment(key)
    const refused = (await importFile(key, amendment, foreign, '?dry_run=true')).json.data
    expect(refused.state).toBe('refused')
    expect(refused.reading.columns.map((one: { suggestion: string | null; field: string | null }) => one.field ?? one.suggestion)).toEqual(['species', 'configuration', 'term', 'j', 'parity', 'energy_invcm', 'note'])
    expect(refused.problems.map((one: { code: string; column: string }) => `${one.code} ${one.column}`)).toEqual(['column_unknown Spectrum', 'column_unknown Config', 'column_unknown Energy (cm-1)', 'column_unknown Remarks'])
    const mapping = { Spectrum: 'species', Config: 'configuration', 'Energy (cm-1)': 'energy_invcm', Remarks: null }
    const same = (await importFile(key, amendment, foreign, '?dry_run=true', { mapping })).json.data
    expect([same.state, same.counts], JSON.stringify(await reportOf(key, amendment, same.id))).toEqual(['done', { ...SAME, same: 1 }])
    const noted = (await importFile(key, amendment, Buffer.from(foreign, 'latin1'), '?dry_run=true', { mapping: { ...mapping, Remarks: 'note' } })).json.data
    expect([noted.reading.encoding, noted.counts.changed]).toEqual(['windows-1252', 1])
    const [row] = await reportOf(key, amendment, noted.id)
    expect(row?.fields).toEqual([{ field: 'note', before: null, after: 'm\u00fcller' }])
  })

  it('may leave to defaults what is the same for all rows', async () => {
    const amendment = await newAmendment(key)
    const file = 'configuration,term,energy_invcm\n2p6.22d,2D3/2,41250.25\n'
    const done = (await importFile(key, amendment, file, '', { defaults: { species: 'Na-I', energy_source: 'sansonetti-2008-na', energy_evidence: 'read' } })).json.data
    expect([done.state, done.counts.new], JSON.stringify(await reportOf(key, amendment, done.id))).toEqual(['done', 1])
  })
})

describe('files that are no tables', () => {
  it.each([
    ['', 'table_empty'], ['id,energy_invcm\n', 'table_empty'], ['id,energy_invcm\nNa-I.3,"1\n', 'table_malformed'], ['id,energy_invcm\nNa-I.3,1\0\n', 'table_nul'], ['id,id\nNa-I.3,1\n', 'column_repeated'],
    ['hello\nworld\n', 'column_unknown'], ['species,note\nNa-I,x\n', 'column_missing'],
  ])('%j is refused with %s', async (file, code) => {
    const amendment = await newAmendment(key)
    const reply = await importFile(key, amendment, file, '?dry_run=true')
    expect(reply.status).toBe(200)
    expect(reply.json.data.state).toBe('refused')
    expect(reply.json.data.problems.map((one: { code: string }) => one.code)).toContain(code)
  })

  it('are refused as requests where the form itself is wrong', async () => {
    const amendment = await newAmendment(key)
    const to = `/amendments/${amendment}/import`
    expect((await ask('post', to, { key, body: { file: 'x' } })).status).toBe(415)
    expect((await ask('post', to, { key, raw: 'no boundary', headers: { 'content-type': 'multipart/form-data' } })).json.code).toBe('multipart_malformed')
    expect((await ask('post', to, { key, raw: 'nothing of it', headers: { 'content-type': 'multipart/form-data; boundary=x' } })).json.code).toBe('multipart_malformed')
    expect((await ask('post', to, { key, ...formOf('a', { mappings: '{}' }) })).json).toMatchObject({ code: 'unknown_field', errors: [{ pointer: '/mappings', detail: expect.stringContaining('mapping') }] })
    const large = await ask('post', to, { key, ...formOf(Buffer.alloc(66 * 1_048_576, 'a')) })
    expect([large.status, large.json.code]).toEqual([413, 'body_too_large'])
    expect((await importFile(key, '00000000-0000-4000-8000-000000000000', 'a')).status).toBe(404)
  })
})

describe('an import as a job', () => {
  it('answers at once where nobody waits, and tells how far it is', async () => {
    const amendment = await newAmendment(key)
    const begun = await importFile(key, amendment, exported, '?dry_run=true&wait=false')
    expect([begun.status, begun.headers.location]).toEqual([202, expect.stringContaining(`/amendments/${amendment}/imports/`)])
    const own = `/amendments/${amendment}/imports/${begun.json.data.id}`
    let state = begun.json.data.state
    for (let i = 0; i < 100 && state === 'running'; i += 1) {
      await new Promise((done) => setTimeout(done, 100))
      state = (await get(own, { key })).json.data.state
    }
    expect(state).toBe('done')
    expect((await ask('post', `${own}/stop`, { key })).json.code).toBe('state_conflict')
    expect((await get(`/amendments/${amendment}/imports`, { key })).json.data.map((one: { id: string }) => one.id)).toEqual([begun.json.data.id])
    expect((await get(`/amendments/${amendment}/imports/00000000-0000-4000-8000-000000000000`, { key })).json.code).toBe('import_unknown')
  })

  it('gives its report as a file, whole', async () => {
    const amendment = await newAmendment(key)
    const { id } = (await importFile(key, amendment, exported, '?dry_run=true')).json.data
    const to = `/amendments/${amendment}/imports/${id}/rows`
    const csv = await get(`${to}?format=csv&limit=5`, { key })
    expect(csv.headers['content-disposition']).toContain('import-report.csv')
    expect((parse(csv.text) as string[][]).length).toBe(rows.length + 1)
    const lines = (await get(`${to}?format=ndjson&verdict=same`, { key })).text.trimEnd().split('\n')
    expect(lines.length).toBe(rows.length + 1)
    const page = await get(`${to}?limit=5`, { key })
    const next = await get(`${to}?limit=5&cursor=${encodeURIComponent(page.json.page.next_cursor)}`, { key })
    expect([...page.json.data, ...next.json.data].map((one: { row: number }) => one.row)).toEqual([2, 3, 4, 5, 6, 7, 8, 9, 10, 11])
  })

  it('is done once under one Idempotency-Key', async () => {
    const amendment = await newAmendment(key)
    const file = tableOf(rowOf('Na-I.3', { note: 'once' }))
    const send = () => {
      const form = formOf(file)
      return ask('post', `/amendments/${amendment}/import`, { key, raw: form.raw, headers: { ...form.headers, 'idempotency-key': amendment } })
    }
    const [first, second] = [await send(), await send()]
    expect(second.json.data.id).toBe(first.json.data.id)
    expect((await get(`/amendments/${amendment}/imports`, { key })).json.data).toHaveLength(1)
  })

  it('is stopped, and then nothing of it is written', async () => {
    const amendment = await newAmendment(key)
    await ask('post', `/amendments/${amendment}/changes`, { key, body: { kind: 'source', action: 'create', source: 'invented-levels', values: { citation: 'Invented', kind: 'other' } } })
    const { version } = (await get(`/amendments/${amendment}`, { key })).json.data
    const begun = (await importFile(key, amendment, inventedTable(20_000), '?wait=false')).json.data
    expect(begun.state).toBe('running')
    // one at a time
    expect((await importFile(key, amendment, exported)).json.code).toBe('import_running')
    const stop = () => ask('post', `/amendments/${amendment}/imports/${begun.id}/stop`, { key, headers: { 'idempotency-key': `stop-${begun.id}` } })
    const stopped = (await stop()).json.data
    expect([stopped.state, stopped.summary]).toEqual(['stopped', 'Stopped; nothing was written.'])
    const again = await stop()
    expect([again.status, again.json.data, again.headers['idempotency-replayed']]).toEqual([200, stopped, 'true'])
    const next = (await importFile(key, amendment, exported, '?dry_run=true')).json.data
    expect(next.counts.same).toBe(rows.length)
    const after = (await get(`/amendments/${amendment}`, { key })).json.data
    expect([after.version, after.counts.changes]).toEqual([version, 1])
    expect((await get(`/amendments/${amendment}/imports/${begun.id}`, { key })).json.data.state).toBe('stopped')
  })

  it('raced by edits of the amendment is written whole or not at all', async () => {
    const amendment = await newAmendment(key)
    await ask('post', `/amendments/${amendment}/changes`, { key, body: { kind: 'source', action: 'create', source: 'invented-levels', values: { citation: 'Invented', kind: 'other' } } })
    const own = `/amendments/${amendment}/imports/${(await importFile(key, amendment, inventedTable(3000), '?wait=false')).json.data.id}`
    let etag = (await get(`/amendments/${amendment}`, { key })).json.data.etag
    let edits = 0
    while ((await get(own, { key })).json.data.state === 'running') {
      const edited = await ask('patch', `/amendments/${amendment}`, { key, headers: { 'if-match': etag }, body: { note: `edit ${(edits += 1)}` } })
      etag = edited.status === 200 ? edited.json.data.etag : (await get(`/amendments/${amendment}`, { key })).json.data.etag
      await new Promise((done) => setTimeout(done, 50))
    }
    const ended = (await get(own, { key })).json.data
    const { changes } = (await get(`/amendments/${amendment}`, { key })).json.data.counts
    if (ended.state === 'done') expect([ended.counts.new, changes]).toEqual([3000, 3001])
    else expect([ended.state, ended.problems[0].code, changes]).toEqual(['refused', 'amendment_changed', 1])
  })

  it('goes on when whoever sent it goes away', async () => {
    const amendment = await newAmendment(key)
    const leaving = new AbortController()
    const form = formOf(exported)
    const sent = fetch(`${base}/api/v1/amendments/${amendment}/import?dry_run=true`, { method: 'POST', body: new Uint8Array(form.raw), headers: { ...form.headers, authorization: `Bearer ${key}` }, signal: leaving.signal })
    const list = async (): Promise<{ state: string }[]> => (await get(`/amendments/${amendment}/imports`, { key })).json.data
    for (let i = 0; i < 200 && (await list()).length === 0; i += 1) await new Promise((done) => setTimeout(done, 20))
    leaving.abort()
    await sent.catch(() => undefined)
    for (let i = 0; i < 100 && (await list())[0]?.state === 'running'; i += 1) await new Promise((done) => setTimeout(done, 100))
    expect((await list()).map((one) => one.state)).toEqual(['done'])
  })

  it('whose process ended shows so, and keeps nobody from importing again', async () => {
    const amendment = await newAmendment(key)
    const [user] = await getDb().select({ id: users.id }).from(users).limit(1)
    await getDb().insert(imports).values({ amendmentId: amendment, author: user?.id ?? '', fileName: 'lost.csv', sha256: '0'.repeat(64), bytes: 1, dryRun: false, reading: {}, rowsTotal: 10, rowsDone: 4, aliveAt: new Date(Date.now() - 60_000) })
    const [lost] = (await get(`/amendments/${amendment}/imports`, { key })).json.data
    expect([lost.state, lost.summary]).toEqual(['interrupted', expect.stringContaining('nothing was written')])
    expect((await importFile(key, amendment, exported, '?dry_run=true')).json.data.state).toBe('done')
  })

  it('puts an amendment in review back to draft, and is refused by one that is withdrawn', async () => {
    const amendment = await newAmendment(key)
    await importFile(key, amendment, tableOf(rowOf('Na-I.3', { note: 'for review' })))
    const read = await get(`/amendments/${amendment}`, { key })
    const submitted = await ask('post', `/amendments/${amendment}/submit`, { key, headers: { 'if-match': read.json.data.etag }, body: { comment: 'please' } })
    expect(submitted.json.data.state, submitted.text.slice(0, 300)).toBe('in_review')
    await importFile(key, amendment, tableOf(rowOf('Na-I.3', { note: 'another' })))
    const back = (await get(`/amendments/${amendment}`, { key })).json.data
    expect([back.state, back.reviews.at(-1).outcome]).toEqual(['draft', 'edited'])
    await ask('post', `/amendments/${amendment}/withdraw`, { key, headers: { 'if-match': back.etag }, body: {} })
    expect((await importFile(key, amendment, exported)).json.code).toBe('state_conflict')
  })
})
