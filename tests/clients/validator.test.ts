import { spawn } from 'node:child_process'
import http from 'node:http'
import type { AddressInfo } from 'node:net'
import { afterEach, describe, expect, inject, it, vi } from 'vitest'
import type { Report } from '@/clients/validator/validate'

// hundreds of requests each, on a machine that may have other work
vi.setConfig({ testTimeout: 300_000 })
const base = inject('baseUrl')

const run = (args: string[]): Promise<{ code: number | null; out: string; errors: string }> =>
  new Promise((resolve, reject) => {
    const child = spawn(process.execPath, ['--import', 'tsx', 'clients/validator/run.ts', ...args])
    let [out, errors] = ['', '']
    child.stdout.on('data', (piece) => { out += String(piece) })
    child.stderr.on('data', (piece) => { errors += String(piece) })
    child.on('error', reject)
    child.on('close', (code) => resolve({ code, out, errors }))
  })
const report = async (address: string, ...args: string[]): Promise<{ code: number | null; report: Report }> => {
  const { code, out } = await run([address, '--json', '--seed', '20', '--count', '4', ...args])
  return { code, report: JSON.parse(out) as Report }
}
const failed = (told: Report): string[] => told.results.filter((one) => one.outcome === 'failed').map((one) => one.check)

let proxy: http.Server | undefined
afterEach(() => {
  proxy?.closeAllConnections()
  proxy?.close()
})

interface Passing { url: string; headers: Record<string, string>; body: string; status: number }

/** A proxy before the server that alters what passes. */
async function lying(alter: (passing: Passing) => void): Promise<string> {
  proxy = http.createServer((request, response) => {
    const pieces: Buffer[] = []
    request.on('data', (piece: Buffer) => pieces.push(piece))
    request.on('end', () => {
      void (async () => {
        const headers = Object.fromEntries(Object.entries(request.headers).filter(([name]) => !['host', 'connection', 'content-length', 'transfer-encoding', 'accept-encoding'].includes(name))) as Record<string, string>
        const answer = await fetch(`${base}${request.url ?? ''}`, { method: request.method ?? 'GET', headers, ...(pieces.length > 0 ? { body: Buffer.concat(pieces) } : {}) })
        const bytes = Buffer.from(await answer.arrayBuffer())
        const told = Object.fromEntries([...answer.headers].filter(([name]) => !['connection', 'content-length', 'transfer-encoding', 'content-encoding', 'keep-alive'].includes(name)))
        // Latin-1 keeps every byte of what is not text
        const passing = { url: request.url ?? '', headers: told, body: bytes.toString('latin1'), status: answer.status }
        alter(passing)
        response.writeHead(passing.status, passing.headers)
        response.end(passing.status === 304 ? undefined : Buffer.from(passing.body, 'latin1'))
      })().catch(() => response.destroy())
    })
  })
  await new Promise<void>((done) => proxy?.listen(0, '127.0.0.1', done))
  return `http://127.0.0.1:${(proxy.address() as AddressInfo).port}`
}

describe('an instance that keeps its word', () => {
  it('holds every claim, of every check', async () => {
    const { code, report: told } = await report(base, '--seed', '2', '--count', '12')
    expect(told.results.flatMap((one) => one.failures)).toEqual([])
    expect(told.results.filter((one) => one.outcome === 'nothing').map((one) => `${one.check}: ${one.reason}`)).toEqual([])
    expect([code, told.passed]).toEqual([0, true])
    expect(told.claims).toBeGreaterThan(500)
  })

  it('the same seed draws the same, through a proxy too, and the text tells it', async () => {
    const address = await lying(() => undefined)
    const [one, other] = [await report(base), await report(address)]
    expect([other.report.levels, other.report.lines, other.report.claims]).toEqual([one.report.levels, one.report.lines, one.report.claims])
    const { code, out } = await run([base, '--seed', '20', '--count', '1'])
    expect(code).toBe(0)
    expect(out).toMatch(/^ok {4} levels: /m)
    expect(out).toMatch(/Edition 1, 1 levels, .* claims, 0 did not hold\.$/m)
  })
})

describe('an instance that does not', () => {
  it('a strength that is wrong', async () => {
    const address = await lying((passing) => {
      if (passing.url.includes('/components')) passing.body = passing.body.replace(/"strength":([\d.]+)/, (_, value: string) => `"strength":${Number(value) * 1.000001}`)
    })
    const { code, report: told } = await report(address)
    expect(code).toBe(1)
    expect(failed(told)).toContain('strengths of a line')
    const shown = told.results.find((one) => one.check === 'strengths of a line')?.failures[0]
    expect(shown?.claim).toMatch(/^(strengths of q|intensities)/)
    expect(shown?.request).toMatch(/^GET \/transitions\/.*\/components\?/)
  })

  it('an entity tag that changes', async () => {
    let count = 0
    const address = await lying((passing) => {
      if (passing.headers.etag !== undefined && passing.url.includes('/levels/')) passing.headers.etag = `"${(count += 1)}"`
    })
    const { code, report: told } = await report(address)
    expect(code).toBe(1)
    expect(failed(told)).toEqual(expect.arrayContaining(['editions', 'entity tags']))
  })

  it('a level that changes within an edition', async () => {
    let count = 0
    const address = await lying((passing) => {
      if (/\/levels\/[^/?]+\?/.test(passing.url) && passing.status === 200) passing.body = passing.body.replace(/"revision":\d+/, `"revision":${(count += 1)}`)
    })
    expect(failed((await report(address)).report)).toEqual(expect.arrayContaining(['editions']))
  })

  it('a derivative, and a position of bulk', async () => {
    const address = await lying((passing) => {
      if (passing.url.includes('/predictions') && passing.headers['content-type']?.startsWith('application/json')) passing.body = passing.body.replace(/"derivatives":\[\[(-?[\d.]+)/, (_, value: string) => `"derivatives":[[${Number(value) + 0.01}`).replace(/\[\[(\d{4,}\.\d+)/, (_, value: string) => `[[${Number(value) + 1e-6}`)
    })
    const { code, report: told } = await report(address)
    expect(code).toBe(1)
    expect(failed(told)).toEqual(expect.arrayContaining(['formats in bulk', 'one and many']))
  })
})

describe('what cannot be asked', () => {
  it.each([
    [[], /Give the address/],
    [['nowhere'], /no address/],
    [['http://127.0.0.1:9', '--seed', 'x'], /--seed is a whole number/],
    [['http://127.0.0.1:9', '--what'], /--what/],
  ])('%j ends with 2 and says how it is used', async (args, says) => {
    const { code, errors } = await run(args)
    expect(code).toBe(2)
    expect(errors).toMatch(says)
    expect(errors).toContain('npm run validate -- <base-url>')
  })

  it('an address that is something else', async () => {
    proxy = http.createServer((_, response) => response.writeHead(404, { 'content-type': 'text/plain' }).end('nothing here'))
    await new Promise<void>((done) => proxy?.listen(0, '127.0.0.1', done))
    const { code, errors } = await run([`http://127.0.0.1:${(proxy.address() as AddressInfo).port}`])
    expect(code).toBe(2)
    expect(errors).toContain('could not be asked: 404')
  })
})
