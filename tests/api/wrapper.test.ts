import { describe, expect, it } from 'vitest'
import { PHYSICS_VERSION } from '@/lib/atomic/constants'
import { ask, faultsOf, get, type Json } from './helpers/client'
import { makeKey, makePerson, signIn } from './helpers/people'

const LEVEL = '/levels/Na-I.3'
const COMPONENTS = '/transitions/Na-I.1~Na-I.3/components?field=1.5T'

describe('the envelope', () => {
  it('names edition, constants and the defaults in force', async () => {
    const reply = await get('/levels?species=Na-I')
    expect(reply.status).toBe(200)
    expect(reply.json.meta).toMatchObject({ edition: 1, constants: 'CODATA 2022', warnings: [], query: { species: ['Na-I'], sort: 'energy', limit: '100', edition: 'latest', explain: 'false' } })
    expect(reply.json.page).toMatchObject({ limit: 100, next_cursor: null })
    expect(reply.json.meta).not.toHaveProperty('physics')
  })

  it('tells the physics version, model and conventions of what is computed', async () => {
    const reply = await get(COMPONENTS)
    expect(reply.json.meta).toMatchObject({ physics: PHYSICS_VERSION, model: 'intermediate' })
    expect(reply.json.meta?.conventions).toBeTypeOf('object')
  })

  it('answers every request with an id of its own', async () => {
    const [one, two] = [await get(LEVEL), await get(LEVEL)]
    expect(one.headers['x-request-id']).not.toBe(two.headers['x-request-id'])
  })
})

describe('strict input', () => {
  it('refuses an unknown parameter by name, with the nearest known one', async () => {
    const reply = await get('/levels?speces=Na-I')
    expect(reply.status).toBe(400)
    expect(reply.json.code).toBe('unknown_parameter')
    expect(faultsOf(reply)).toEqual(['speces unknown_parameter'])
    expect(reply.json.errors?.[0]?.detail).toContain('Did you mean species?')
  })

  it('refuses a parameter given twice', async () => {
    const reply = await get(`${LEVEL}/sublevels?field=1T&field=2T`)
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toEqual(['field repeated_parameter'])
  })

  it('lists everything that is wrong at once', async () => {
    const reply = await get('/levels?specie=Na-I&j=0.7&limit=0&parity=strange&energy_min_invcm=high')
    expect(reply.status).toBe(400)
    expect(faultsOf(reply).sort()).toEqual(['energy_min_invcm number_malformed', 'j half_integer_malformed', 'limit number_out_of_range', 'parity value_not_listed', 'specie unknown_parameter'])
  })

  it.each([
    ['field=3furlong', 'field_unit_unknown'],
    ['field=-1T', 'field_negative'],
    ['field=10001T', 'field_too_large'],
    ['field=', 'field_malformed'],
    ['field=NaN', 'field_malformed'],
  ])('refuses %s as %s', async (query, code) => {
    const reply = await get(`/transitions/Na-I.1~Na-I.3/components?${query}`)
    expect(reply.status).toBe(400)
    expect(reply.json.code).toBe(code)
  })

  it('lists the known units of a field', async () => {
    const reply = await get('/transitions/Na-I.1~Na-I.3/components?field=3furlong')
    for (const unit of ['T', 'mT', 'G', 'kG']) expect(reply.json.detail).toContain(unit)
  })

  it('calls a well-formed impossible term 422, naming the rule', async () => {
    const reply = await get('/terms/2P*5-2')
    expect(reply.status).toBe(422)
    expect(reply.json.code).toBe('term_impossible')
  })

  it.each(['/levels?q=a%00b', '/levels/Na-I%00.3', '/terms/2P%00', '/levels?%00q=a'])('refuses NUL bytes in %s', async (at) => {
    const reply = await get(at)
    expect(reply.status).toBe(400)
    expect(faultsOf(reply).some((fault) => fault.endsWith('nul_byte'))).toBe(true)
  })

  it('refuses percent-encoding that is not UTF-8 in the query', async () => {
    const reply = await get('/levels?q=%ff')
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toEqual(['q encoding_malformed'])
  })

  it.each(['/levels/%ff', '/levels/%', '/terms/%C2', '/%E0%A4%A'])('answers %s, which is not UTF-8, as what does not exist', async (at) => {
    const reply = await get(at)
    expect([400, 404]).toContain(reply.status)
  })

  it('refuses a body where none is meant', async () => {
    const reply = await ask('get', LEVEL, { raw: '{}', headers: { 'content-type': 'application/json' } })
    expect(reply.status).toBe(400)
    expect(reply.json.code).toBe('body_unexpected')
  })
})

describe('bodies', () => {
  const at = '/transitions/judge'
  it('refuses another media type with 415', async () => {
    const reply = await ask('post', at, { raw: 'a=1', headers: { 'content-type': 'application/x-www-form-urlencoded' } })
    expect(reply.status).toBe(415)
  })

  it('refuses what is not JSON with 400', async () => {
    const reply = await ask('post', at, { raw: '{"lower": ', headers: { 'content-type': 'application/json' } })
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toEqual([])
    expect(reply.json.code).toBe('body_not_json')
  })

  it('refuses 10 MB with 413', async () => {
    const reply = await ask('post', at, { raw: `{"x":"${'a'.repeat(10_000_000)}"}`, headers: { 'content-type': 'application/json' } })
    expect(reply.status).toBe(413)
  })

  it('names the species that was meant, the decimal point, and the parameter that is missing', async () => {
    expect((await get('/levels?species=na+i')).json.errors[0].detail).toMatch(/Did you mean Na-I\?/)
    expect((await get('/transitions/Na-I.1~Na-I.2/components?field=1,5T')).json.detail).toMatch(/decimal point/)
    expect((await get('/transitions/Na-I.1~Na-I.2/components')).json.detail).toMatch(/^field is needed/)
  })

  it('answers a body of countless unknown keys, and a parameter of endless length, briefly', async () => {
    const many = await ask('post', at, { body: Object.fromEntries(Array.from({ length: 60_000 }, (_, index) => [`k${index}`, 1])) })
    expect(many.status).toBe(400)
    expect(many.json.errors.length).toBeLessThanOrEqual(200)
    expect(many.text.length).toBeLessThan(100_000)
    const long = await get(`/transitions/Na-I.1~Na-I.2/components?field=1a${'+'.repeat(12_000)}b`)
    expect(long.status).toBe(400)
    expect(faultsOf(long)).toEqual(['field length_out_of_range'])
  })

  it('refuses nesting without end, and names NUL bytes and unknown keys by pointer', async () => {
    const deep = await ask('post', at, { raw: '['.repeat(100_000), headers: { 'content-type': 'application/json' } })
    expect(deep.status).toBe(400)
    const reply = await ask('post', at, { body: { lower: { label: 'a\u0000b' }, uper: {} } })
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toEqual(expect.arrayContaining(['/lower/label nul_byte', '/uper unknown_field', '/upper missing_field', '/lower/energy_invcm missing_field']))
  })

  it('asks for a body that is missing', async () => {
    const reply = await ask('post', at, { headers: { 'content-type': 'application/json' } })
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toEqual([' body_missing'])
  })
})

describe('methods', () => {
  it('refuses others with 405, Allow and a problem', async () => {
    for (const method of ['post', 'put', 'patch', 'delete']) {
      const reply = await ask(method, LEVEL)
      expect(reply.status).toBe(405)
      expect(reply.headers.allow).toBe('GET, HEAD, OPTIONS')
    }
  })

  it('answers HEAD as GET without a body', async () => {
    const headers = { 'accept-encoding': 'identity' }
    const [whole, head] = [await get(LEVEL, { headers }), await ask('head', LEVEL, { headers })]
    expect(head.status).toBe(200)
    expect(head.text).toBe('')
    for (const name of ['etag', 'cache-control', 'content-type', 'vary']) expect(head.headers[name]).toBe(whole.headers[name])
  })

  it('answers 404 as a problem wherever nothing is, for every method', async () => {
    for (const method of ['get', 'post', 'put', 'patch', 'delete']) {
      const reply = await ask(method, '/no/such/thing')
      expect(reply.status).toBe(404)
      expect(reply.json.code).toBe('not_found')
    }
  })

  it('tells other sites what they may read, and only that', async () => {
    const preflight = await ask('options', LEVEL, { headers: { origin: 'https://elsewhere.example', 'access-control-request-method': 'GET' } })
    expect(preflight.status).toBe(204)
    expect(preflight.headers['access-control-allow-origin']).toBe('*')
    expect(preflight.headers['access-control-allow-methods']).toBe('GET, HEAD')
    expect(preflight.headers['access-control-allow-headers']).toContain('Authorization')
    expect((await get(LEVEL)).headers['access-control-allow-origin']).toBe('*')
    const account = await ask('options', '/keys', { headers: { origin: 'https://elsewhere.example', 'access-control-request-method': 'POST' } })
    expect(account.headers['access-control-allow-origin']).toBeUndefined()
    expect(account.headers.allow).toBe('GET, HEAD, POST, OPTIONS')
  })
})

describe('caching', () => {
  it('lets a stored answer of a numbered edition keep for ever, a computed one a day, latest not at all', async () => {
    expect((await get(`${LEVEL}?edition=1`)).headers['cache-control']).toBe('public, max-age=31536000, immutable')
    expect((await get(`${COMPONENTS}&edition=1`)).headers['cache-control']).toBe('public, max-age=86400')
    expect((await get(LEVEL)).headers['cache-control']).toBe('public, no-cache')
    expect((await get('/editions/1/levels')).headers['cache-control']).toBe('public, max-age=31536000, immutable')
  })

  it('keeps what a key or a session was given out of shared caches', async () => {
    const { key } = await makeKey('reader')
    expect((await get(`${LEVEL}?edition=1`, { key })).headers['cache-control']).toBe('private, max-age=31536000, immutable')
    const cookie = await signIn(await makePerson('reader'))
    expect((await get(`${LEVEL}?edition=1`, { cookie })).headers['cache-control']).toBe('private, max-age=31536000, immutable')
  })

  it.each([LEVEL, `${LEVEL}?edition=1`, COMPONENTS, '/levels?limit=3', '/editions', '/openapi.json', '/editions/1/levels?format=csv'])('answers %s again with 304 and the same validators', async (at) => {
    const first = await get(at)
    expect(first.status).toBe(200)
    const tag = first.headers.etag ?? ''
    const again = await get(at, { headers: { 'if-none-match': `"other", ${tag}` } })
    expect(again.status).toBe(304)
    for (const name of ['etag', 'cache-control']) expect(again.headers[name]).toBe(first.headers[name])
    for (const reply of [first, again]) expect(reply.headers.vary).toContain('Accept, Authorization, Cookie')
    expect((await get(at, { headers: { 'if-none-match': '"other"' } })).status).toBe(200)
  })

  it('gives every representation a tag of its own', async () => {
    const tags = await Promise.all(['json', 'csv', 'ndjson', 'ecsv', 'arrow'].map(async (format) => (await get(`/levels?species=Na-I&format=${format}`)).headers.etag))
    expect(new Set(tags).size).toBe(5)
  })

  it('does not answer 304 to a star for what does not exist', async () => {
    expect((await get('/levels/Na-I.9999', { headers: { 'if-none-match': '*' } })).status).toBe(404)
  })
})

describe('negotiation', () => {
  it.each([
    ['text/csv', 'text/csv'], ['application/x-ndjson', 'application/x-ndjson'], ['application/vnd.apache.arrow.stream', 'application/vnd.apache.arrow.stream'],
    ['text/csv;q=0.5, application/json;q=0.4', 'text/csv'], ['text/*', 'text/csv'], ['*/*', 'application/json'], ['image/png, */*;q=0.1', 'application/json'],
  ])('answers Accept: %s as %s', async (accept, type) => {
    const reply = await get('/levels?species=Na-I', { headers: { accept } })
    expect(reply.status).toBe(200)
    expect(reply.headers['content-type']?.split(';')[0]).toBe(type)
  })

  it('refuses what it cannot give, with the list of what it can', async () => {
    const reply = await get('/levels', { headers: { accept: 'image/png' } })
    expect(reply.status).toBe(406)
    expect(reply.json.available).toEqual(expect.arrayContaining(['application/json', 'text/csv']))
    expect((await get('/levels?format=pdf')).status).toBe(400)
  })
})

describe('editions and cursors', () => {
  it('says which editions there are when one does not exist', async () => {
    const reply = await get(`${LEVEL}?edition=77`)
    expect(reply.status).toBe(404)
    expect(reply.json.code).toBe('edition_unknown')
    expect(reply.json.detail).toContain('edition 1')
    expect((await get(`${LEVEL}?edition=two`)).status).toBe(400)
    expect((await get('/editions/77')).status).toBe(404)
  })

  it('pages through a list once, without gap or repeat, and links the next page', async () => {
    const whole = (await get('/levels?species=Fe-I&limit=1000')).json.data?.map((level: Json) => level.id)
    const seen: unknown[] = []
    let at: string | null = '/levels?species=Fe-I&limit=7'
    while (at !== null) {
      const reply = await get(at)
      expect(reply.status).toBe(200)
      seen.push(...(reply.json.data ?? []).map((level: Json) => level.id))
      const next = reply.json.page?.next_cursor
      const link = /<([^>]+)>; rel="next"/.exec(reply.headers.link ?? '')?.[1]
      expect(link !== undefined).toBe(next !== null)
      at = link === undefined ? null : link.slice(link.indexOf('/api/v1') + '/api/v1'.length)
    }
    expect(seen).toEqual(whole)
  })

  it('refuses a cursor of another query, of another edition, and one that is not ours', async () => {
    const { next_cursor: cursor } = (await get('/levels?species=Fe-I&limit=3')).json.page ?? {}
    expect((await get(`/levels?species=Fe-I&limit=5&cursor=${cursor}`)).status).toBe(200)
    const other = await get(`/levels?species=Na-I&limit=3&cursor=${cursor}`)
    expect([other.status, other.json.code]).toEqual([400, 'cursor_mismatch'])
    for (const text of ['rubbish', `${cursor}x`, 'a.b', `x${cursor}`]) {
      const reply = await get(`/levels?species=Fe-I&cursor=${encodeURIComponent(text)}`)
      expect([reply.status, reply.json.code]).toEqual([400, 'cursor_malformed'])
    }
  })
})

describe('limits', () => {
  it('tells policy and remainder on every counted answer', async () => {
    const { key } = await makeKey('reader')
    const first = await get(LEVEL, { key })
    const second = await get(LEVEL, { key })
    expect(first.headers['ratelimit-policy']).toMatch(/^"key";q=\d+;w=60$/)
    const remaining = (field: string | undefined) => Number(/r=(\d+)/.exec(field ?? '')?.[1])
    expect(remaining(second.headers.ratelimit)).toBeLessThanOrEqual(remaining(first.headers.ratelimit))
    expect((await get(LEVEL)).headers['ratelimit-policy']).toMatch(/^"anonymous";/)
  })
})
