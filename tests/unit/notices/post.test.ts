import { createHmac } from 'node:crypto'
import http from 'node:http'
import type { AddressInfo } from 'node:net'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { MOST_ATTEMPTS, pauseAfter } from '@/lib/notices/backoff'
import { post } from '@/lib/notices/post'
import { deliveryFields, mintSecret } from '@/lib/notices/signature'

const seen: { url: string; host: string; body: string; headers: http.IncomingHttpHeaders }[] = []
let port = 0
const server = http.createServer((request, response) => {
  let body = ''
  request.on('data', (piece: Buffer) => { body += piece.toString() })
  request.on('end', () => {
    seen.push({ url: request.url ?? '', host: request.headers.host ?? '', body, headers: request.headers })
    if (request.url === '/redirect') response.writeHead(302, { location: `http://127.0.0.1:${port}/elsewhere` }).end()
    else if (request.url === '/broken') response.writeHead(500).end('a secret of the other side')
    else if (request.url === '/silent') return
    else if (request.url === '/endless') {
      response.writeHead(200)
      const more = setInterval(() => response.write('x'.repeat(1000)), 5)
      response.on('close', () => clearInterval(more))
    } else response.writeHead(204).end()
  })
})
beforeAll(() => new Promise<void>((done) => server.listen(0, '127.0.0.1', () => {
  port = (server.address() as AddressInfo).port
  done()
})))
afterAll(() => {
  server.closeAllConnections()
  server.close()
})

const at = (path: string, host = '127.0.0.1') => `http://${host}:${port}${path}`
const send = (target: string, more: object = {}) => post(target, '{}', { 'content-type': 'application/json' }, { privateToo: true, limitMs: 500, ...more })

describe('sending to a webhook', () => {
  it('goes to the address judged, under the host\'s name, and asks the name once', async () => {
    let asked = 0
    const outcome = await send(at('/named', 'hooks.example'), { resolve: async () => { asked += 1; return [{ address: '127.0.0.1', family: 4 }] } })
    expect([outcome, asked, seen.at(-1)?.host]).toEqual([{ status: 204, error: null }, 1, `hooks.example:${port}`])
  })

  it('refuses a private address whatever the name, before anything is sent', async () => {
    const before = seen.length
    expect(await send(at('/'), { privateToo: false })).toEqual({ status: null, error: 'the host leads to an address that is not public' })
    expect(await send(at('/', 'hooks.example'), { privateToo: false, resolve: async () => [{ address: '1.1.1.1', family: 4 }, { address: '127.0.0.1', family: 4 }] })).toMatchObject({ status: null })
    expect(seen).toHaveLength(before)
  })

  it('follows no redirect', async () => {
    expect(await send(at('/redirect'))).toEqual({ status: 302, error: 'answered 302; redirects are not followed' })
    expect(seen.some(({ url }) => url === '/elsewhere')).toBe(false)
  })

  it('tells of failures without a word of the other side\'s, and does not wait for long', async () => {
    expect(await send(at('/broken'))).toEqual({ status: 500, error: 'answered 500' })
    expect(await send(at('/silent'))).toEqual({ status: null, error: 'no answer within 0.5 s' })
    expect(await send('http://127.0.0.1:1/')).toEqual({ status: null, error: 'no answer: ECONNREFUSED' })
    expect(await send(at('/endless'))).toEqual({ status: 200, error: null })
  })

  it('is signed over time and body', async () => {
    const secret = mintSecret()
    const body = JSON.stringify({ id: 'x', text: 'Landé' })
    const fields = deliveryFields({ id: 'x', event: 'ping', body, secret, at: new Date(1_700_000_000_900) })
    await post(at('/signed'), body, fields, { privateToo: true })
    const got = seen.at(-1)
    const timestamp = got?.headers['lodeterm-timestamp'] as string
    expect(timestamp).toBe('1700000000')
    expect(got?.headers['lodeterm-signature']).toBe(`v1=${createHmac('sha256', secret).update(`${timestamp}.${got?.body}`).digest('hex')}`)
    expect(got?.headers).toMatchObject({ 'lodeterm-event': 'ping', 'lodeterm-delivery': 'x', 'content-type': 'application/json; charset=utf-8' })
  })
})

describe('trying again', () => {
  it('waits longer each time, from a minute to a day, and ends after eight attempts', () => {
    const pauses = Array.from({ length: 8 }, (_, i) => pauseAfter(i + 1))
    expect(pauses[0]).toBe(60_000)
    expect(pauses[6]).toBe(86_400_000)
    expect(pauses[7]).toBeNull()
    expect(MOST_ATTEMPTS).toBe(8)
    for (let i = 1; i < 7; i += 1) expect(pauses[i] ?? 0).toBeGreaterThan(pauses[i - 1] ?? 0)
  })
})
