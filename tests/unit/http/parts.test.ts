import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { nesting, readBody, readText } from '@/lib/http/body'
import { noneMatchHits, noneMatchNames, readIfMatch } from '@/lib/http/etag'
import { editDistance, nearest } from '@/lib/problem/nearest'
import { chooseFormat } from '@/lib/http/negotiate'
import { clientAddress, decodable, watchPeers } from '@/lib/http/peer'
import { planPath, planQuery, readPath, readQuery } from '@/lib/http/query'
import { RateLimiter, rateFields } from '@/lib/http/rate-limit'
import { isDatabaseDown } from '@/lib/http/unexpected'
import { numberParameter, repeatable } from '@/openapi/core/parameters'

describe('the nearest known name', () => {
  it('is found for slips, and not for what is far off', () => {
    const known = ['species', 'energy_min_invcm', 'energy_max_invcm', 'limit', 'field']
    expect(nearest('speces', known)).toBe('species')
    expect(nearest('energy-min-invcm', known)).toBe('energy_min_invcm')
    expect(nearest('energy_mn_invcm', known)).toBe('energy_min_invcm')
    expect(nearest('lmiit', known)).toBe('limit')
    expect(nearest('Feild', known)).toBe('field')
    expect(nearest('wavelength', known)).toBeNull()
  })

  it('rests on a distance that is symmetric, zero for equal words only, and at most the longer length', () => {
    const word = fc.stringMatching(/^[a-d]{0,8}$/)
    fc.assert(fc.property(word, word, (a, b) => {
      const distance = editDistance(a, b)
      expect(distance).toBe(editDistance(b, a))
      expect(distance === 0).toBe(a === b)
      expect(distance).toBeLessThanOrEqual(Math.max(a.length, b.length))
    }))
    expect(editDistance('ab', 'ba')).toBe(1)
  })
})

describe('query text', () => {
  const plan = planQuery(z.strictObject({ limit: numberParameter('n', { min: 1, max: 10, integer: true }).prefault('5'), species: repeatable(z.string(), 's').optional(), q: z.string().optional() }))

  it('gives values, and what is in force as if typed', () => {
    expect(readQuery(plan, 'species=a+b&species=%C3%A9&q=')).toEqual({ value: { limit: 5, species: ['a b', 'é'], q: '' }, asked: { limit: '5', species: ['a b', 'é'], q: '' }, faults: [] })
    expect(readQuery(plan, '')).toEqual({ value: { limit: 5 }, asked: { limit: '5' }, faults: [] })
  })

  it('lists every fault', () => {
    const { faults } = readQuery(plan, 'limt=3&limit=99&q=a&q=b&species=%00&%zz=1')
    expect(faults.map((fault) => `${fault.parameter} ${fault.code}`).sort()).toEqual(['%zz encoding_malformed', 'limit number_out_of_range', 'limt unknown_parameter', 'q repeated_parameter', 'species nul_byte'])
  })

  it('never throws, whatever stands there', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), (text) => { expect(readQuery(plan, text).faults).toBeInstanceOf(Array) }))
    expect(readQuery(plan, '__proto__=1&constructor=2').faults.map((fault) => fault.code)).toEqual(['unknown_parameter', 'unknown_parameter'])
  })

  it('reads path parameters by their place', () => {
    const path = planPath('/levels/{level}/sublevels', z.strictObject({ level: z.string().regex(/^[A-Z]/) }))
    expect(readPath(path, '/levels/Na-I.3/sublevels').value).toEqual({ level: 'Na-I.3' })
    expect(readPath(path, '/levels/%4Ea/sublevels').value).toEqual({ level: 'Na' })
    expect(readPath(path, '/levels/na/sublevels').faults.map((fault) => fault.code)).toEqual(['identifier_malformed'])
    expect(readPath(path, '/levels/%E0%A4%A/sublevels').faults.map((fault) => fault.code)).toEqual(['encoding_malformed'])
  })
})

describe('bodies', () => {
  const schema = z.strictObject({ upper: z.strictObject({ j: z.number().min(0).max(50), parity: z.enum(['even', 'odd']) }), note: z.string().max(5).optional() })
  const faults = (text: string) => readBody(schema, text).faults.map((fault) => `${fault.pointer} ${fault.code}`)

  it('are told every fault by pointer', () => {
    expect(faults('{"upper":{"j":-1,"parity":"both","jj":1},"note":"far too long"}').sort()).toEqual(['/note length_out_of_range', '/upper/j number_out_of_range', '/upper/jj unknown_field', '/upper/parity value_not_listed'])
    expect(faults('{}')).toEqual(['/upper missing_field'])
    expect(faults('[]')).toEqual([' wrong_type'])
    expect(readBody(schema, '{"uper":{}}').faults.find((fault) => fault.code === 'unknown_field')?.detail).toContain('Did you mean upper?')
    expect(faults('{"upper":{"j":1,"parity":"even"},"note":"\\u0000"}')).toEqual(['/note nul_byte'])
  })

  it('count how deep they are without following strings', () => {
    expect(nesting('{"a":[1,{"b":"[[[[\\"["}]}')).toBe(3)
  })

  it('are not read past a mebibyte, whether or not they say how long they are', async () => {
    let sent = 0
    const endless = new ReadableStream<Uint8Array>({ pull: (controller) => { sent += 65_536; controller.enqueue(new Uint8Array(65_536)) } })
    const request = new Request('http://127.0.0.1/', { method: 'POST', body: endless, duplex: 'half' } as RequestInit)
    await expect(readText(request)).rejects.toMatchObject({ code: 'body_too_large' })
    // the rest is thrown away in the background, and not for ever
    await expect.poll(() => sent, { timeout: 5000 }).toBeGreaterThan(64_000_000)
    await new Promise((done) => setTimeout(done, 50))
    expect(sent).toBeLessThan(70_000_000)
    await expect(readText(new Request('http://127.0.0.1/', { method: 'POST', body: 'x', headers: { 'content-length': '2000000' } }))).rejects.toMatchObject({ code: 'body_too_large' })
  })
})

describe('entity tags', () => {
  it('match weakly for reading, strongly for changing', () => {
    expect(noneMatchHits('"a", W/"b"', '"b"')).toBe(true)
    expect(noneMatchHits('*', '"b"')).toBe(true)
    expect(noneMatchHits('"a"', '"b"')).toBe(false)
    expect(noneMatchHits(null, '"b"')).toBe(false)
    expect(noneMatchNames('"x", *', '"b"')).toBe(false)
    expect(noneMatchNames('"x", W/"b"', '"b"')).toBe(true)
    expect(readIfMatch('"a"')).toBe('"a"')
    for (const field of ['W/"a"', '*', 'a', '"a", "b"']) expect(() => readIfMatch(field)).toThrow(/strong entity tag/)
    expect(() => readIfMatch(null)).toThrow(/If-Match/)
  })
})

describe('negotiation', () => {
  const all = ['json', 'csv', 'arrow'] as const
  it('follows quality, then specificity, then our order', () => {
    expect(chooseFormat(all, undefined, null)).toBe('json')
    expect(chooseFormat(all, undefined, 'text/csv')).toBe('csv')
    expect(chooseFormat(all, undefined, 'text/csv;q=0.2, application/*;q=0.3')).toBe('json')
    expect(chooseFormat(all, undefined, '*/*;q=0.5, application/json;q=0')).toBe('csv')
    expect(chooseFormat(all, 'arrow', 'text/csv')).toBe('arrow')
    expect(() => chooseFormat(all, undefined, 'image/png')).toThrow(/text\/csv/)
    expect(() => chooseFormat(['json'], undefined, 'text/csv')).toThrow(/application\/json/)
  })
})

describe('the rate limiter', () => {
  it('lets a minute\'s worth pass at once, refills evenly, and says how long to wait', () => {
    let now = 0
    const limiter = new RateLimiter(() => now)
    const many = Array.from({ length: 60 }, () => limiter.take('a', 60))
    expect(many.every((allowance) => allowance.allowed)).toBe(true)
    expect(many.at(-1)).toMatchObject({ remaining: 0, reset: 60 })
    expect(limiter.take('a', 60)).toMatchObject({ allowed: false, retryAfter: 1 })
    expect(limiter.take('b', 60).allowed).toBe(true)
    now = 1000
    expect(limiter.take('a', 60).allowed).toBe(true)
    expect(limiter.take('a', 60).allowed).toBe(false)
    now = 1_000_000
    expect(limiter.take('a', 60)).toMatchObject({ allowed: true, remaining: 59 })
  })

  it('keeps a bounded number of callers', () => {
    const limiter = new RateLimiter(() => 0, 10)
    for (let i = 0; i < 100; i += 1) expect(limiter.take(`caller ${i}`, 5).allowed).toBe(true)
  })

  it('writes the fields of the draft', () => {
    expect(rateFields('key', { allowed: true, limit: 12000, remaining: 11999, reset: 1, retryAfter: 0 })).toEqual({ 'ratelimit-policy': '"key";q=12000;w=60', ratelimit: '"key";r=11999;t=1' })
  })
})

describe('the address of a client', () => {
  it('is that of the connection, unless a configured proxy says otherwise', () => {
    const of = (fields: Record<string, string>, proxies: string[] = []) => clientAddress(new Headers(fields), proxies)
    expect(of({ 'x-lodeterm-peer': '203.0.113.7' })).toBe('unknown')
    watchPeers()
    expect(of({ 'x-lodeterm-peer': '::ffff:203.0.113.7', 'x-forwarded-for': '198.51.100.1' })).toBe('203.0.113.7')
    expect(of({ 'x-lodeterm-peer': '10.0.0.1', 'x-forwarded-for': '192.0.2.9, 198.51.100.1, 10.0.0.2' }, ['10.0.0.1', '10.0.0.2'])).toBe('198.51.100.1')
    expect(of({ 'x-lodeterm-peer': '10.0.0.1' }, ['10.0.0.1'])).toBe('10.0.0.1')
  })
})

describe('a path', () => {
  it('can always be decoded, and is left alone where it can', () => {
    expect(decodable('/levels/Na-I.3?q=%ff')).toBe('/levels/Na-I.3?q=%ff')
    expect(decodable('/terms/%C2%B2P?x=1')).toBe('/terms/%C2%B2P?x=1')
    expect(decodable('/levels/%ff?x=%41')).toBe('/levels/%25ff?x=%41')
    fc.assert(fc.property(fc.webUrl({ withQueryParameters: true }), fc.constantFrom('%', '%f', '%ff', '%C2'), (url, bad) => {
      expect(() => decodeURIComponent(decodable(`/${bad}${url}`).split('?')[0] ?? '')).not.toThrow()
    }))
  })
})

describe('a database that is away', () => {
  it('is known by its errors, however wrapped', () => {
    const refused = Object.assign(new Error('connect ECONNREFUSED'), { code: 'ECONNREFUSED' })
    expect(isDatabaseDown(new Error('Failed query', { cause: refused }))).toBe(true)
    expect(isDatabaseDown(Object.assign(new Error('terminating'), { code: '57P01' }))).toBe(true)
    expect(isDatabaseDown(new Error('timeout exceeded when trying to connect'))).toBe(true)
    expect(isDatabaseDown(Object.assign(new Error('duplicate key'), { code: '23505' }))).toBe(false)
    expect(isDatabaseDown(new Error('x is not a function'))).toBe(false)
  })
})
