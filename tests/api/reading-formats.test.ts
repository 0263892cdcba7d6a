import fs from 'node:fs'
import path from 'node:path'
import { tableFromIPC } from 'apache-arrow'
import { parse } from 'csv-parse/sync'
import { sql } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { unescapeText } from '@/lib/http/writers/csv'
import { get, type Json, type Reply } from './helpers/client'

const golden = (name: string): string => path.join(import.meta.dirname, 'golden', name)

/** Compares bytes with the file kept beside the tests; UPDATE_GOLDEN=1 writes it anew, for a change that was meant. */
function expectGolden(name: string, reply: Reply): void {
  if (process.env.UPDATE_GOLDEN === '1') fs.writeFileSync(golden(name), reply.bytes)
  const kept = fs.readFileSync(golden(name))
  if (name.endsWith('.arrow')) expect(reply.bytes.equals(kept), `${name} is not the bytes kept`).toBe(true)
  else expect(reply.text).toBe(kept.toString('utf8'))
}

/** The 64 bits of a double. */
const bits = (value: number): bigint => new BigUint64Array(Float64Array.of(value).buffer)[0] ?? 0n

const MEDIA: Readonly<Record<string, string>> = {
  csv: 'text/csv',
  ndjson: 'application/x-ndjson',
  ecsv: 'application/x-ecsv',
  arrow: 'application/vnd.apache.arrow.stream',
}

const EXPORTS: readonly (readonly [string, string])[] = [
  ['levels', '/levels?species=Na-I&species=Ne-I&edition=1&limit=20'],
  ['lines', '/transitions?species=Na-I&wavelength_min_nm=500&wavelength_max_nm=1200&edition=1&rules=rigorous'],
  ['components', '/transitions/Na-I.1~Na-I.3/components?field=1.5T&theta_deg=90&model=linear&edition=1'],
  ['sublevels', '/levels/Na-I.3/sublevels?field=15kG&model=linear&edition=1'],
  ['partners', '/levels/Na-I.2/transitions?include=forbidden&edition=1'],
  ['species', '/species?edition=1&limit=5'],
  ['sources', '/sources?edition=1&limit=5'],
]

describe('exports are byte for byte the files kept', () => {
  for (const [name, at] of EXPORTS) {
    it.each(['csv', 'ndjson', 'ecsv', 'arrow'])(`${name}.%s`, async (format) => {
      const reply = await get(`${at}&format=${format}`)
      expect(reply.status, reply.text).toBe(200)
      expect(reply.headers['content-type']).toContain(MEDIA[format])
      expectGolden(`${name}.${format}`, reply)
    })
  }
})

describe('negotiation', () => {
  it.each(['csv', 'ndjson', 'ecsv', 'arrow'])('Accept gives the same %s as format', async (format) => {
    const [, at] = EXPORTS[0] as readonly [string, string]
    const accepted = await get(at, { headers: { accept: MEDIA[format] ?? '' } })
    expect(accepted.headers['content-type']).toContain(MEDIA[format])
    expect(accepted.headers.vary).toContain('Accept')
  })

  it('what cannot be had is 406 with what can', async () => {
    const reply = await get('/levels/Na-I.3', { headers: { accept: 'text/csv' } })
    expect([reply.status, reply.json.code, reply.json.available]).toEqual([406, 'not_acceptable', ['application/json']])
  })
})

describe('every format tells the same numbers', () => {
  it('components: JSON, CSV, NDJSON, ECSV and Arrow agree to the last bit', async () => {
    const at = '/transitions/Hg-I.4~Hg-I.6/components?field=0.73T&theta_deg=37&model=linear&edition=1'
    const json = (await get(at)).json.data.components as unknown as Record<string, number | string | null>[]
    const csv = parse((await get(`${at}&format=csv`)).text, { columns: true }) as Record<string, string>[]
    const ndjson = (await get(`${at}&format=ndjson`)).text.trimEnd().split('\n').map((line) => JSON.parse(line) as Record<string, unknown>)
    const ecsv = parse((await get(`${at}&format=ecsv`)).text, { columns: true, comment: '#' }) as Record<string, string>[]
    const arrow = tableFromIPC((await get(`${at}&format=arrow`)).bytes).toArray().map((row: { toJSON(): Record<string, unknown> }) => row.toJSON())
    expect(ndjson.pop()).toMatchObject({ complete: true, meta: { model: 'linear' } })
    expect([csv.length, ndjson.length, ecsv.length, arrow.length]).toEqual([9, 9, 9, 9])
    json.forEach((row, i) => {
      expect(ndjson[i]).toEqual(row)
      for (const name of Object.keys(csv[0] ?? {})) {
        const value = row[name]
        if (typeof value !== 'number') continue
        expect(bits(Number(csv[i]?.[name])), `${name} in CSV`).toBe(bits(value))
        expect(bits(Number(ecsv[i]?.[name])), `${name} in ECSV`).toBe(bits(value))
        expect(bits(arrow[i]?.[name] as number), `${name} in Arrow`).toBe(bits(value))
      }
    })
  })

  it('measured g are the bits that the database holds', async () => {
    const stored = await getDb().execute<{ id: string; bits: string }>(sql`
      select m.level_id as id, encode(float8send(r.value), 'hex') as bits
      from measured_g_revisions r join measured_g m on m.id = r.measured_g_id where r.published_from <= 1 and (r.published_until is null or r.published_until > 1)`)
    const levels = (await get('/editions/1/levels')).json.data as unknown as { id: string; g_j: { all_measured: { value: number }[] } }[]
    const told = levels.flatMap((level) => level.g_j.all_measured.map(({ value }) => `${level.id} ${bits(value)}`))
    expect(stored.rows.length).toBeGreaterThan(40)
    expect(told.sort()).toEqual(stored.rows.map((row) => `${row.id} ${BigInt(`0x${row.bits}`)}`).sort())
  })

  it('energies are the bits that the database holds', async () => {
    const stored = await getDb().execute<{ id: string; bits: string }>(sql`
      select r.level_id as id, encode(float8send(r.energy_invcm), 'hex') as bits
      from level_revisions r where r.published_from <= 1 and (r.published_until is null or r.published_until > 1)`)
    const inDatabase = new Map(stored.rows.map((row) => [row.id, BigInt(`0x${row.bits}`)]))
    expect(inDatabase.size).toBe(407)
    const json = (await get('/editions/1/levels')).json.data as unknown as { id: string; energy_invcm: number }[]
    const csv = parse((await get('/editions/1/levels?format=csv')).text, { columns: true }) as Record<string, string>[]
    const arrow = tableFromIPC((await get('/editions/1/levels?format=arrow')).bytes)
    const [arrowId, arrowEnergy] = [arrow.getChild('id'), arrow.getChild('energy_invcm')]
    expect([json.length, csv.length, arrow.numRows]).toEqual([407, 407, 407])
    for (const [i, level] of json.entries()) {
      const wanted = inDatabase.get(level.id)
      expect(bits(level.energy_invcm), level.id).toBe(wanted)
      expect(bits(Number(csv[i]?.energy_invcm)), level.id).toBe(wanted)
      expect(arrowId?.get(i)).toBe(level.id)
      expect(bits(arrowEnergy?.get(i) as number), level.id).toBe(wanted)
    }
  })
})

describe('the whole edition as a file', () => {
  it.each(['json', 'csv', 'ndjson', 'ecsv', 'arrow'])('%s holds 407 levels, is immutable and named', async (format) => {
    const reply = await get(`/editions/1/levels?format=${format}`)
    expect(reply.status).toBe(200)
    expect(reply.headers['cache-control']).toContain('immutable')
    expect(reply.headers['content-disposition']).toContain(`lodeterm-edition-1-levels.${format}`)
    const rows: Readonly<Record<string, () => number>> = {
      json: () => (reply.json.data as unknown as unknown[]).length,
      csv: () => (parse(reply.text, { columns: true }) as unknown[]).length,
      ndjson: () => reply.text.trimEnd().split('\n').length - 1,
      ecsv: () => (parse(reply.text, { columns: true, comment: '#' }) as unknown[]).length,
      arrow: () => tableFromIPC(reply.bytes).numRows,
    }
    expect(rows[format]?.()).toBe(407)
    const again = await get(`/editions/1/levels?format=${format}`, { headers: { 'if-none-match': reply.headers.etag ?? '' } })
    expect([again.status, again.text]).toEqual([304, ''])
  })

  it('its levels are those that the list gives', async () => {
    const [file, list] = [(await get('/editions/1/levels')).json.data, (await get('/levels?sort=species&limit=1000')).json.data]
    const byId = (a: Json, b: Json): number => (String(a.id) < String(b.id) ? -1 : 1)
    expect([...(file as Json[])].sort(byId)).toEqual([...(list as Json[])].sort(byId))
  })

  it('text of CSV cells comes back as it was through the inverse of the escape', async () => {
    const json = (await get('/sources?edition=1&limit=1000')).json.data as unknown as { key: string; citation: string; note: string | null }[]
    const csv = parse((await get('/sources?edition=1&limit=1000&format=csv')).text, { columns: true }) as Record<string, string>[]
    expect(csv.map((row) => [unescapeText(row.key ?? ''), unescapeText(row.citation ?? ''), unescapeText(row.note ?? '')])).toEqual(json.map(({ key, citation, note }) => [key, citation, note ?? '']))
  })
})

describe('pinned reads', () => {
  it.each([
    ['/levels/Na-I.3?edition=1', 'public, max-age=31536000, immutable'],
    ['/species?edition=1', 'public, max-age=31536000, immutable'],
    ['/transitions/Na-I.1~Na-I.3/components?field=1T&edition=1', 'public, max-age=86400'],
  ])('%s is %s, with an ETag that gives 304', async (at, caching) => {
    const reply = await get(at)
    expect(reply.headers['cache-control']).toBe(caching)
    const again = await get(at, { headers: { 'if-none-match': reply.headers.etag ?? '' } })
    expect([again.status, again.headers.etag]).toEqual([304, reply.headers.etag])
  })

  it('latest revalidates', async () => {
    const reply = await get('/levels/Na-I.3')
    expect(reply.headers['cache-control']).toContain('no-cache')
    expect((await get('/levels/Na-I.3', { headers: { 'if-none-match': reply.headers.etag ?? '' } })).status).toBe(304)
  })
})
