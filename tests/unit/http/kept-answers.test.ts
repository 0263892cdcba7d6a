import pino from 'pino'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { ANONYMOUS } from '@/lib/access/caller'
import { createEndpoint } from '@/lib/http/endpoint'
import { KeptAnswers } from '@/lib/http/kept-answers'
import { RateLimiter } from '@/lib/http/rate-limit'
import { Problem } from '@/lib/problem'
import { defineOperation } from '@/openapi/core/define'

const written = (body: string, status = 200) => ({ status, headers: { etag: '"a"' }, body, json: {} })

describe('kept answers', () => {
  it('forget the least recently asked when they hold too much', () => {
    // two answers of 2000 characters and their overhead fit into 10 000 bytes, three do not
    const kept = new KeptAnswers(10_000)
    kept.keep('a', written('x'.repeat(2000)))
    kept.keep('b', written('y'.repeat(2000)))
    kept.get('a')
    kept.keep('c', written('z'.repeat(2000)))
    expect([kept.get('a')?.body, kept.get('b'), kept.size]).toEqual(['x'.repeat(2000), undefined, 2])
  })

  it('are whole, successful and short', () => {
    const kept = new KeptAnswers()
    kept.keep('refused', written('no', 404))
    kept.keep('long', written('x'.repeat(100_000)))
    expect(kept.size).toBe(0)
  })
})

describe('the wrapper with kept answers', () => {
  const operation = defineOperation({
    id: 'getThing', method: 'get', path: '/things/{thing}', summary: 's', tag: 't', role: 'reader',
    params: z.strictObject({ thing: z.string() }), answer: z.strictObject({ made: z.number() }), edition: 'computed',
  })
  let made = 0
  let latest = 1
  let open = true
  const { endpoint, resource } = createEndpoint<null>(() => ({
    baseUrl: 'http://here.example', openReading: open, ratePerMinute: { anonymous: 100, known: 100 }, trustedProxies: [], constants: 'C', physics: 1, secret: () => new Uint8Array(32),
    editions: { latest: () => Promise.resolve(latest), exists: () => Promise.resolve(true) }, snapshotFor: () => Promise.resolve(null), callerFor: () => ANONYMOUS,
    idempotency: { begin: (claim) => Promise.resolve({ state: 'new', claim: { ...claim, claimedAt: new Date(0) } }), finish: () => Promise.resolve(), abandon: () => Promise.resolve(true) },
    limiter: new RateLimiter(), kept, writeTable: () => ({ contentType: 'text/csv', body: '' }), log: pino({ level: 'silent' }),
  }))
  const kept = new KeptAnswers()
  const routes = resource(
    endpoint(operation, ({ params }) => {
      if (params.thing === 'none') throw new Problem('level_unknown', 'No such thing.')
      made += 1
      return { data: { made } }
    }),
  )
  const ask = async (at: string, headers: Record<string, string> = {}) => {
    const response = await routes.GET(new Request(`http://here.example/api/v1${at}`, { headers }))
    return { status: response.status, etag: response.headers.get('etag'), id: response.headers.get('x-request-id'), body: await response.text() }
  }

  it('gives the same bytes and tag under a request id of its own, and makes them once', async () => {
    const [one, two] = [await ask('/things/a'), await ask('/things/a')]
    expect([two.status, two.body, two.etag]).toEqual([200, one.body, one.etag])
    expect(two.id).not.toBe(one.id)
    expect(made).toBe(1)
  })

  it('makes another answer for another query, and for a new edition', async () => {
    const before = await ask('/things/b')
    latest = 2
    const after = await ask('/things/b')
    expect(after.body).not.toBe(before.body)
    expect(JSON.parse(after.body)).toMatchObject({ meta: { edition: 2 } })
    latest = 1
    expect((await ask('/things/b')).body).toBe(before.body)
  })

  it('answers 304 as ever', async () => {
    const { etag } = await ask('/things/a')
    expect((await ask('/things/a', { 'if-none-match': etag ?? '' })).status).toBe(304)
    expect((await ask('/things/a', { 'if-none-match': '*' })).status).toBe(304)
  })

  it('keeps no refusal, and asks who is there before it gives anything', async () => {
    expect([(await ask('/things/none')).status, (await ask('/things/none')).status]).toEqual([404, 404])
    open = false
    expect((await ask('/things/a')).status).toBe(401)
    open = true
  })
})
