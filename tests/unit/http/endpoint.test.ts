import pino from 'pino'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { ANONYMOUS, type Caller } from '@/lib/access/caller'
import { PhysicsError } from '@/lib/atomic/errors'
import { createEndpoint } from '@/lib/http/endpoint'
import type { House } from '@/lib/http/house'
import { RateLimiter } from '@/lib/http/rate-limit'
import type { Answer } from '@/lib/http/types'
import { Problem } from '@/lib/problem'
import { defineOperation } from '@/openapi/core/define'
import { fieldParameter } from '@/openapi/core/parameters'

const READER: Caller = { kind: 'key', role: 'reader', userId: 'u1', keyId: 'k1', name: 'n', expiresAt: null }

const operation = defineOperation({
  id: 'getThing', method: 'get', path: '/things/{thing}', summary: 's', tag: 't', role: 'reader',
  params: z.strictObject({ thing: z.string() }), query: z.strictObject({ field: fieldParameter().prefault('1T') }), answer: z.strictObject({ tesla: z.number() }), edition: 'computed',
})
const list = defineOperation({ id: 'listThings', method: 'get', path: '/things', summary: 's', tag: 't', role: 'reader', answer: z.number(), list: true, edition: 'stored' })

function house(change: Partial<House<string>> = {}): House<string> {
  return {
    baseUrl: 'http://here.example', openReading: true, ratePerMinute: { anonymous: 100, known: 100 }, trustedProxies: [], constants: 'C', physics: 3, secret: () => new Uint8Array(32),
    editions: { latest: () => Promise.resolve(2), exists: (n) => Promise.resolve(n === 1 || n === 2) }, snapshotFor: (n) => Promise.resolve(`edition ${n}`), callerFor: () => ANONYMOUS,
    idempotency: { begin: (claim) => Promise.resolve({ state: 'new', claim: { ...claim, claimedAt: new Date(0) } }), finish: () => Promise.resolve(), abandon: () => Promise.resolve(true) },
    limiter: new RateLimiter(), writeTable: () => ({ contentType: 'text/csv', body: '' }), log: pino({ level: 'silent' }), ...change,
  }
}

const ask = (routes: { GET: (request: Request) => Promise<Response> }, at: string, headers: Record<string, string> = {}) => routes.GET(new Request(`http://here.example/api/v1${at}`, { headers }))
const thing = (change: Partial<House<string>> = {}, handle: () => Answer<{ tesla: number }> = () => ({ data: { tesla: 1 } })) => {
  const { endpoint, resource } = createEndpoint(() => house(change))
  return resource(endpoint(operation, handle))
}

describe('the wrapper', () => {
  it('refuses strangers with 401 while open reading is off, and lets keys in', async () => {
    const shut = await ask(thing({ openReading: false }), '/things/a')
    expect(shut.status).toBe(401)
    expect(shut.headers.get('www-authenticate')).toContain('Bearer')
    const open = await ask(thing({ openReading: false, callerFor: () => READER }), '/things/a?edition=1')
    expect([open.status, open.headers.get('cache-control')]).toEqual([200, 'private, max-age=86400'])
  })

  it('answers 429 with Retry-After and the fields of the limit', async () => {
    const routes = thing({ ratePerMinute: { anonymous: 2, known: 100 }, limiter: new RateLimiter(() => 0) })
    const statuses = [await ask(routes, '/things/a'), await ask(routes, '/things/a'), await ask(routes, '/things/a')]
    expect(statuses.map((response) => response.status)).toEqual([200, 200, 429])
    expect(statuses[2]?.headers.get('retry-after')).toBe('30')
    expect(statuses[2]?.headers.get('ratelimit')).toBe('"anonymous";r=0;t=60')
    expect(statuses[2]?.headers.get('content-type')).toBe('application/problem+json')
  })

  it('lets reads pass when the limiter fails', async () => {
    const broken = { take: () => { throw new Error('broken') } } as unknown as RateLimiter
    expect((await ask(thing({ limiter: broken }), '/things/a')).status).toBe(200)
  })

  it('counts a key that does not hold against the address', async () => {
    const refuse = () => { throw new Problem('key_malformed', 'no') }
    const routes = thing({ callerFor: refuse, ratePerMinute: { anonymous: 1, known: 100 }, limiter: new RateLimiter(() => 0) })
    expect((await ask(routes, '/things/a')).status).toBe(401)
    expect((await ask(routes, '/things/a')).status).toBe(429)
  })

  it('answers 304 without performing anything, by edition, physics, query and form', async () => {
    let performed = 0
    const count = () => { performed += 1; return { data: { tesla: 1 } } }
    const tag = (await ask(thing({}, count), '/things/a?edition=1')).headers.get('etag') ?? ''
    expect((await ask(thing({}, count), '/things/a?edition=1', { 'if-none-match': tag })).status).toBe(304)
    expect(performed).toBe(1)
    const others = [['/things/a?edition=2', {}], ['/things/b?edition=1', {}], ['/things/a?edition=1&field=2T', {}], ['/things/a?edition=1', { physics: 4 }]] as const
    for (const [at, change] of others) expect((await ask(thing(change, count), at, { 'if-none-match': tag })).status).toBe(200)
    expect(performed).toBe(5)
  })

  it('turns impossible physics into 422, a database that is away into 503, and anything else into 500 without its message', async () => {
    const failing = (error: Error) => ask(thing({}, () => { throw error }), '/things/a')
    const physics = await failing(new PhysicsError('zero_interval', 'equal energies', 'transition'))
    expect([physics.status, await physics.json()]).toEqual([422, expect.objectContaining({ code: 'zero_interval', errors: [{ parameter: 'transition', code: 'zero_interval', detail: 'equal energies' }] })])
    const away = await failing(Object.assign(new Error('x'), { code: 'ECONNREFUSED' }))
    expect([away.status, away.headers.get('retry-after')]).toEqual([503, '5'])
    const fault = await failing(new Error('secret detail'))
    expect(fault.status).toBe(500)
    expect(await fault.text()).not.toContain('secret detail')
  })

  it('keeps paging on the edition a cursor began with, also across a publication', async () => {
    let latest = 1
    const seen: number[] = []
    const { endpoint, resource } = createEndpoint(() => house({ editions: { latest: () => Promise.resolve(latest), exists: () => Promise.resolve(true) } }))
    const routes = resource(endpoint(list, ({ edition, after, query }) => {
      seen.push(edition)
      return { data: [1], page: { limit: query.limit, next: [Number(after?.[0] ?? 0) + 1] } }
    }))
    const first = (await (await ask(routes, '/things')).json()) as { page: { next_cursor: string } }
    latest = 2
    expect((await ask(routes, `/things?cursor=${first.page.next_cursor}`)).status).toBe(200)
    expect((await ask(routes, '/things')).status).toBe(200)
    expect(seen).toEqual([1, 1, 2])
    expect((await ask(routes, `/things?edition=2&cursor=${first.page.next_cursor}`)).status).toBe(400)
  })

  it('authenticates before it says that a method or a path does not exist', async () => {
    const { resource } = createEndpoint(() => house({ openReading: false }))
    expect((await ask(resource(), '/nowhere')).status).toBe(401)
    expect((await thing({ openReading: false }).POST(new Request('http://here.example/api/v1/things/a', { method: 'POST' }))).status).toBe(401)
    expect((await thing().POST(new Request('http://here.example/api/v1/things/a', { method: 'POST' }))).status).toBe(405)
  })

  it('is not ready while nothing is published', async () => {
    const response = await ask(thing({ editions: { latest: () => Promise.resolve(0), exists: () => Promise.resolve(false) } }), '/things/a')
    expect([response.status, response.headers.get('retry-after')]).toEqual([503, '30'])
  })
})

describe('an Idempotency-Key', () => {
  const make = defineOperation({ id: 'makeThing', method: 'post', path: '/things', summary: 's', tag: 't', role: 'reader', answer: z.strictObject({ made: z.string() }), edition: 'none', idempotent: true })
  const send = (idempotency: Partial<House<string>['idempotency']>, handle: (claim: unknown) => Answer<{ made: string }>) => {
    const settings = house({ callerFor: () => READER })
    const { endpoint, resource } = createEndpoint(() => ({ ...settings, idempotency: { ...settings.idempotency, ...idempotency } }))
    return resource(endpoint(make, (call) => handle(call.claim))).POST(new Request('http://here.example/api/v1/things', { method: 'POST', headers: { 'idempotency-key': 'k' } }))
  }
  const codeOf = async (response: Response) => [response.status, ((await response.json()) as { code: string }).code]

  it('gives its claim to what it performs', async () => {
    expect((await send({}, (claim) => ({ data: { made: (claim as { key: string }).key } }))).status).toBe(200)
  })

  it('is answered with 409 and performed no more where its effect stands and its answer is lost', async () => {
    let performed = 0
    expect(await codeOf(await send({ begin: () => Promise.resolve({ state: 'lost' }) }, () => ({ data: { made: String(performed += 1) } })))).toEqual([409, 'idempotency_answer_lost'])
    expect(performed).toBe(0)
  })

  it('tells the first request the same, and its own error where nothing was done', async () => {
    const fail = (): never => { throw new Problem('unavailable', 'gone') }
    expect(await codeOf(await send({ abandon: () => Promise.resolve(false) }, fail))).toEqual([409, 'idempotency_answer_lost'])
    expect(await codeOf(await send({}, fail))).toEqual([503, 'unavailable'])
    expect(await codeOf(await send({ abandon: () => Promise.reject(new Error('no database')) }, fail))).toEqual([503, 'unavailable'])
  })
})
