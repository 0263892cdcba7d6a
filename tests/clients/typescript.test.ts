import http from 'node:http'
import type { AddressInfo } from 'node:net'
import { build } from 'esbuild'
import path from 'node:path'
import { afterEach, describe, expect, inject, it } from 'vitest'
import { interpolate, Lodeterm, predictArrays, predictBlocks, ProblemError, retryAfterMs, verifyFieldTable } from '@/clients/typescript'

const base = inject('baseUrl')
const table = new Lodeterm(base, { edition: 1 })

describe('asking by operation', () => {
  it('reads one thing, typed', async () => {
    const { data, meta } = await table.get('getLevel', { level: 'Na-I.3' })
    expect([data.id, data.term.symbol, meta.edition]).toEqual(['Na-I.3', '2P*3/2', 1])
  })

  it('puts path and query together from one object, and numbers as they are', async () => {
    const { data, meta } = await table.get('getComponents', { transition: 'Na-I.3~Na-I.1', field: 1.5, model: 'linear', theta_deg: 90 })
    expect([data.transition, data.field_tesla, data.model]).toEqual(['Na-I.1~Na-I.3', 1.5, 'linear'])
    expect(meta.query).toMatchObject({ theta_deg: '90', edition: '1' })
  })

  it('sends a body, and the edition with it', async () => {
    const { data, meta } = await table.post('computeSublevels', { levels: [{ energy_invcm: 0, s: 0, l: 1, j: 1, parity: 'odd' }], field: { values: [1], unit: 'T' }, model: 'linear' })
    expect(data).toMatchObject({ m: [-1, 0, 1] })
    expect(meta.edition).toBe(1)
  })

  it('takes an address with and without /api/v1', async () => {
    expect((await new Lodeterm(`${base}/api/v1/`).get('getLive')).status).toBe('ok')
  })

  it('answers 304 where nothing changed, and text in another format', async () => {
    const first = await table.ask('getLevel', { level: 'Na-I.3' })
    const again = await table.ask('getLevel', { level: 'Na-I.3' }, undefined, { ifNoneMatch: first.headers.get('etag') ?? '' })
    expect(again.status).toBe(304)
    const csv = await table.ask('listLevels', { species: 'Na-I' }, undefined, { format: 'csv' })
    expect(csv.headers.get('content-type')).toMatch(/^text\/csv/)
    expect(await csv.text()).toMatch(/^id,/)
  })
})

describe('paging', () => {
  it('gives every row once', async () => {
    const ids: string[] = []
    for await (const level of table.each('listLevels', { species: 'Na-I', limit: 7 })) ids.push(level.id)
    const whole = await table.get('listLevels', { species: 'Na-I', limit: 1000 })
    expect(ids).toEqual(whole.data.map(({ id }) => id))
    expect(new Set(ids).size).toBe(ids.length)
    expect(ids.length).toBeGreaterThan(7)
  })

  it('refuses to go on where the edition changes under it', async () => {
    let asked = 0
    const shifting: typeof fetch = async () => {
      asked += 1
      return Response.json({ data: [{ id: `row ${asked}` }], meta: { edition: asked, constants: '', warnings: [] }, page: { limit: 1, next_cursor: asked < 3 ? 'more' : null } })
    }
    const rows: unknown[] = []
    const read = async (): Promise<void> => {
      for await (const row of new Lodeterm(base, { fetch: shifting }).each('listLevels')) rows.push(row)
    }
    await expect(read()).rejects.toThrow('A page of edition 2 came after pages of edition 1.')
    expect(rows).toHaveLength(1)
  })

  it('holds to an edition: the one named, or the newest', async () => {
    expect((await new Lodeterm(base).pinned()).edition).toBe(1)
    const seen: string[] = []
    const watching: typeof fetch = (input, init) => {
      seen.push(String(input))
      return fetch(input, init)
    }
    const held = await new Lodeterm(base, { fetch: watching }).pinned(1)
    for await (const page of held.pages('listSpecies', { limit: 20 })) expect(page.meta.edition).toBe(1)
    expect(seen.length).toBeGreaterThan(1)
    expect(seen.every((url) => url.includes('edition=1'))).toBe(true)
  })
})

describe('refusals', () => {
  it('tell everything that is wrong, each with its place', async () => {
    const refusal = await table.get('getComponents', { transition: 'Na-I.1~Na-I.3', field: '3furlong', theta_deg: 900, modle: 'linear' } as never).catch((error: unknown) => error)
    expect(refusal).toBeInstanceOf(ProblemError)
    const problem = refusal as ProblemError
    expect(problem.status).toBe(400)
    expect(problem.errors.map((fault) => fault.parameter).sort()).toEqual(['field', 'modle', 'theta_deg'])
    for (const place of ['field', 'modle', 'theta_deg']) expect(problem.message).toContain(`\n  ${place}: `)
    expect(problem.requestId).toMatch(/^[0-9a-f-]{36}$/)
  })

  it('of a key that is none', async () => {
    await expect(new Lodeterm(base, { key: 'ldt_no' }).get('getMe')).rejects.toMatchObject({ status: 401 })
  })
})

describe('a busy server', () => {
  let server: http.Server | undefined
  afterEach(() => server?.close())
  /** Answers in turn: a status with fields, or null for a connection that breaks. */
  async function answering(turns: ([number, Record<string, string>?] | null)[]): Promise<{ at: string; asked: () => number }> {
    let asked = 0
    server = http.createServer((request, response) => {
      const turn = turns[Math.min(asked, turns.length - 1)]
      asked += 1
      if (turn === null || turn === undefined) return void request.socket.destroy()
      const [status, fields = {}] = turn
      response.writeHead(status, { 'content-type': status === 200 ? 'application/json' : 'application/problem+json', ...fields })
      response.end(JSON.stringify(status === 200 ? { status: 'ok' } : { title: 'Busy', status, detail: 'Later.', code: 'busy' }))
    })
    await new Promise<void>((done) => server?.listen(0, '127.0.0.1', done))
    return { at: `http://127.0.0.1:${(server.address() as AddressInfo).port}`, asked: () => asked }
  }
  const quick = { patience: { firstWaitMs: 1 } }

  it('is waited for as long as it asks', async () => {
    const { at, asked } = await answering([[429, { 'retry-after': '1' }], [503, { 'retry-after': '0' }], [200]])
    const from = performance.now()
    expect((await new Lodeterm(at, quick).get('getLive')).status).toBe('ok')
    // a timer may fire a millisecond early
    expect(performance.now() - from).toBeGreaterThan(990)
    expect(asked()).toBe(3)
  })

  it('is asked again after a broken connection, where that does no harm', async () => {
    const read = await answering([null, null, [200]])
    expect((await new Lodeterm(read.at, quick).get('getLive')).status).toBe('ok')
    server?.close()
    const write = await answering([null, [200]])
    await expect(new Lodeterm(write.at, quick).post('createKey', { name: 'x', role: 'reader' } as never)).rejects.toThrow(TypeError)
    expect(write.asked()).toBe(1)
    await new Lodeterm(write.at, quick).send('createKey', {}, { name: 'x', role: 'reader' } as never, { idempotencyKey: 'once' })
    expect(write.asked()).toBe(2)
  })

  it('a computation is asked again, a write is not, when the server is away', async () => {
    const computing = await answering([[503], [200]])
    await new Lodeterm(computing.at, quick).post('judgeTransition', {} as never)
    expect(computing.asked()).toBe(2)
    server?.close()
    const writing = await answering([[503], [200]])
    await expect(new Lodeterm(writing.at, quick).post('createKey', {} as never)).rejects.toMatchObject({ status: 503 })
  })

  it('gives up in the end, and at once where the wait is too long', async () => {
    const always = await answering([[429, { 'retry-after': '0' }]])
    await expect(new Lodeterm(always.at, { patience: { attempts: 3 } }).get('getLive')).rejects.toMatchObject({ status: 429, code: 'busy' })
    expect(always.asked()).toBe(3)
    server?.close()
    const long = await answering([[429, { 'retry-after': '3600' }]])
    await expect(new Lodeterm(long.at).get('getLive')).rejects.toMatchObject({ status: 429 })
    expect(long.asked()).toBe(1)
  })

  it('a signal ends the waiting', async () => {
    const { at } = await answering([[429, { 'retry-after': '30' }]])
    await expect(new Lodeterm(at).get('getLive', {}, { signal: AbortSignal.timeout(50) })).rejects.toMatchObject({ name: 'TimeoutError' })
  })

  it('reads both forms of Retry-After', () => {
    expect(retryAfterMs('7')).toBe(7000)
    expect(retryAfterMs('Thu, 01 Jan 2026 00:00:10 GMT', Date.parse('2026-01-01T00:00:00Z'))).toBe(10_000)
    expect(retryAfterMs(null)).toBeUndefined()
  })
})

describe('predictions', () => {
  const body = {
    lines: [{ transition: 'Na-I.1~Na-I.3' }], multiplets: [{ transition: 'Li-I.1~Li-I.2' }], field: { start: 0, stop: 50, count: 6, unit: 'kG' as const }, derivatives: true, theta_deg: 60,
  }

  it.each(['linear', 'intermediate'] as const)('Arrow carries the bits of the JSON: %s', async (model) => {
    const { data, meta } = await table.post('predict', { ...body, model })
    const blocks = []
    for await (const block of predictArrays(table, { ...body, model })) blocks.push(block)
    expect(blocks.map((block) => [block.transition, block.model, block.strengthNormalisation, block.unit])).toEqual([['Na-I.1~Na-I.3', model, 'line', 'cm^-1'], ['Li-I.1~Li-I.2', model, 'multiplet', 'cm^-1']])
    for (const [i, block] of blocks.entries()) {
      const json = data[i]
      if (json === undefined) throw new Error('a block too many')
      const rows = (columns: readonly Float64Array[] | null) => Array.from({ length: 6 }, (_, f) => columns?.map((column) => column[f]))
      const each = (numbers: unknown) => (model === 'linear' ? Array(6).fill(numbers) : numbers)
      expect(rows(block.values)).toStrictEqual(json.values)
      expect(rows(block.derivatives)).toStrictEqual(json.derivatives)
      expect(rows(block.strengths)).toStrictEqual(each(json.strengths))
      expect(rows(block.intensities)).toStrictEqual(each(json.intensities))
      expect([[...block.q], [...block.mLower], [...block.mUpper], [...block.jLower], [...block.jUpper]]).toEqual([json.q, json.m_lower, json.m_upper, json.j_lower, json.j_upper])
      expect([block.validity, block.field, block.meta.edition]).toEqual([json.validity, body.field, meta.edition])
    }
  })

  it('NDJSON gives the same blocks, and a stream that is cut is told', async () => {
    const { data } = await table.post('predict', body)
    const blocks = []
    for await (const block of predictBlocks(table, body)) blocks.push(block)
    expect(blocks).toEqual(data)
    const cutting: typeof fetch = async (input, init) => {
      const answer = await fetch(input, init)
      const lines = (await answer.text()).trimEnd().split('\n')
      return new Response(`${lines.slice(0, -1).join('\n')}\n`, { headers: answer.headers })
    }
    const read = async () => {
      for await (const block of predictBlocks(new Lodeterm(base, { fetch: cutting }), body)) expect(block.q.length).toBeGreaterThan(0)
    }
    await expect(read()).rejects.toThrow('before the line that says it is complete')
  })

  it('a field table is verified, and as close to the model as it says', async () => {
    const { data } = await table.post('makeFieldTable', { multiplet: { transition: 'Li-I.1~Li-I.2' }, field: { start: 0, stop: 5, unit: 'T' }, max_error_invcm: 1e-7 })
    await verifyFieldTable(data)
    const { data: [model] } = await table.post('predict', { multiplets: [{ transition: 'Li-I.1~Li-I.2' }], field: { values: [1.2345], unit: 'T' }, model: 'intermediate', derivatives: true })
    const read = interpolate(data, 1.2345)
    const worst = Math.max(...read.positions.map((position, c) => Math.abs(position - (model?.values[0]?.[c] ?? Number.NaN))))
    // rounding of wavenumbers near 15 000 cm^-1 beside the bound
    expect(worst).toBeLessThanOrEqual(data.max_error_invcm + 1e-11)
    expect(() => interpolate(data, 5.1)).toThrow(RangeError)
    const first = data.positions_invcm[0] ?? []
    await expect(verifyFieldTable({ ...data, positions_invcm: [first.map((value) => value + 1e-9), ...data.positions_invcm.slice(1)] })).rejects.toThrow('damaged')
  })
})

it('holds nothing that a browser lacks', async () => {
  const bundle = await build({ entryPoints: [path.resolve('clients/typescript/index.ts')], bundle: true, write: false, platform: 'browser', format: 'esm', metafile: true, logLevel: 'silent' })
  expect(bundle.errors).toEqual([])
  expect(Object.keys(bundle.metafile.inputs).filter((file) => !file.startsWith('clients/typescript/') && !file.startsWith('node_modules/'))).toEqual([])
})
