import { eq } from 'drizzle-orm'
import { afterEach, describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { apiKeys, auditEvents, sessions } from '@/db/schema'
import { ask, faultsOf, get, type Json } from './helpers/client'
import { closeAccount, cookiePart, forgetAttempts, makeKey, makePerson, PASSWORD, SAME_SITE, signIn } from './helpers/people'

afterEach(forgetAttempts)

const wrong = (email: string, more: Record<string, string> = {}) => ask('post', '/session', { body: { email, password: 'not the password' }, headers: { ...SAME_SITE, ...more } })

describe('keys on a request', () => {
  it('lets a good key in and says who it is', async () => {
    const { key, owner } = await makeKey('curator')
    const reply = await get('/me', { key })
    expect(reply.status).toBe(200)
    expect(reply.json.data).toMatchObject({ id: owner.id, role: 'curator', role_in_force: 'curator', signed_in_by: 'key' })
  })

  it.each([
    ['Basic abc', 'authorization_malformed'], ['Bearer', 'authorization_malformed'], ['Bearer a b', 'authorization_malformed'],
    ['Bearer hello', 'key_malformed'], ['Bearer ldt_short', 'key_malformed'], [`Bearer ldt_${'A'.repeat(30)}`, 'key_malformed'],
  ])('refuses "%s" as %s', async (authorization, code) => {
    const reply = await get('/levels', { headers: { authorization } })
    expect([reply.status, reply.json.code]).toEqual([401, code])
    expect(reply.headers['www-authenticate']).toContain('invalid_token')
  })

  it('tells an unknown, an expired and a revoked key apart, and a key whose owner left', async () => {
    const { mintKey } = await import('@/lib/access/keys')
    const [expired, revoked, orphan] = [await makeKey('reader', { expiresAt: new Date(Date.now() - 1000) }), await makeKey('reader', { revokedAt: new Date() }), await makeKey('reader')]
    await closeAccount(orphan.owner)
    const codes = await Promise.all([mintKey().key, expired.key, revoked.key, orphan.key].map(async (key) => {
      const reply = await get('/levels', { key })
      return [reply.status, reply.json.code]
    }))
    expect(codes).toEqual([[401, 'key_refused'], [401, 'key_expired'], [401, 'key_revoked'], [401, 'key_revoked']])
  })

  it('looks at the expiry on each use', async () => {
    const { key } = await makeKey('reader', { expiresAt: new Date(Date.now() + 1500) })
    expect((await get('/me', { key })).status).toBe(200)
    await new Promise((done) => setTimeout(done, 1700))
    const reply = await get('/me', { key })
    expect([reply.status, reply.json.code]).toEqual([401, 'key_expired'])
  })

  it('stops a key the moment another process revokes it in the database', async () => {
    const { key, id } = await makeKey('reader')
    for (let i = 0; i < 3; i += 1) expect((await get('/me', { key })).status).toBe(200)
    await getDb().update(apiKeys).set({ revokedAt: new Date() }).where(eq(apiKeys.id, id))
    // the message travels by itself; what is asked for is that no one has to wait for a cache to run out
    await expect.poll(async () => (await get('/me', { key })).status, { timeout: 2000, interval: 20 }).toBe(401)
  })

  it('narrows at once when the owner\'s role is lowered', async () => {
    const { users } = await import('@/db/schema')
    const { key, owner } = await makeKey('curator')
    expect((await get('/amendments', { key })).status).toBe(200)
    await getDb().update(users).set({ role: 'reader' }).where(eq(users.id, owner.id))
    await expect.poll(async () => (await get('/amendments', { key })).status, { timeout: 2000, interval: 20 }).toBe(403)
  })

  it('refuses a key and a session cookie on one request', async () => {
    const { key, owner } = await makeKey('reader')
    const reply = await get('/me', { key, cookie: await signIn(owner) })
    expect([reply.status, reply.json.code]).toEqual([400, 'two_credentials'])
  })
})

describe('own keys', () => {
  it('shows a new key once, keeps its hash only, notes its use', async () => {
    const { key, owner } = await makeKey('curator')
    const made = await ask('post', '/keys', { key, body: { name: 'fit notebook', role: 'reader' } })
    expect(made.status).toBe(201)
    const { id, key: secret } = made.json.data as unknown as { id: string; key: string }
    expect(secret).toMatch(/^ldt_[0-9A-Za-z]{30}$/)
    expect(made.headers.location).toMatch(new RegExp(`/api/v1/keys/${id}$`))
    const [row] = await getDb().select().from(apiKeys).where(eq(apiKeys.id, id))
    expect(JSON.stringify(row)).not.toContain(secret.slice(12))
    expect(row?.userId).toBe(owner.id)
    expect((await get('/me', { key: secret })).json.data).toMatchObject({ role: 'curator', role_in_force: 'reader' })
    await expect.poll(async () => (await get(`/keys/${id}`, { key })).json.data?.last_used_at, { timeout: 3000 }).toBeTypeOf('string')
    expect((await get('/keys', { key })).text).not.toContain(secret)
  })

  it('never makes a key of a higher role, nor one that is past, nor one that outlives its maker', async () => {
    const soon = new Date(Date.now() + 3_600_000)
    const reader = await makeKey('reader', { expiresAt: soon })
    const higher = await ask('post', '/keys', { key: reader.key, body: { name: 'x', role: 'admin' } })
    expect([higher.status, higher.json.code, faultsOf(higher)]).toEqual([403, 'role_above_owner', ['/role role_above_owner']])
    const past = await ask('post', '/keys', { key: reader.key, body: { name: 'x', expires_at: '2001-01-01T00:00:00Z' } })
    expect([past.status, past.json.code]).toEqual([422, 'expiry_past'])
    const later = await ask('post', '/keys', { key: reader.key, body: { name: 'x', expires_at: new Date(soon.getTime() + 1000).toISOString() } })
    expect([later.status, later.json.code]).toEqual([403, 'expiry_beyond_own'])
    const open = await ask('post', '/keys', { key: reader.key, body: { name: 'x' } })
    expect(open.json.data?.expires_at).toBe(soon.toISOString())
  })

  it('revokes with the tag last read, and not without, nor with a stale one', async () => {
    const { key, owner } = await makeKey('reader')
    const victim = await makeKey('reader', { owner })
    const at = `/keys/${victim.id}`
    expect((await ask('delete', at, { key })).status).toBe(428)
    expect((await ask('delete', at, { key, headers: { 'if-match': 'plain' } })).status).toBe(400)
    const stale = await ask('delete', at, { key, headers: { 'if-match': '"old"' } })
    expect([stale.status, stale.json.code]).toEqual([412, 'etag_stale'])
    expect((await get('/me', { key: victim.key })).status).toBe(200)
    const tag = (await get(at, { key })).headers.etag ?? ''
    expect((await ask('delete', at, { key, headers: { 'if-match': tag } })).status).toBe(204)
    const after = await get('/me', { key: victim.key })
    expect([after.status, after.json.code]).toEqual([401, 'key_revoked'])
    expect((await get(at, { key })).json.data?.state).toBe('revoked')
  })

  it('hides other people\'s keys, except from an admin', async () => {
    const [mine, theirs, admin] = [await makeKey('curator'), await makeKey('reader'), await makeKey('admin')]
    expect((await get(`/keys/${theirs.id}`, { key: mine.key })).status).toBe(404)
    expect((await ask('delete', `/keys/${theirs.id}`, { key: mine.key, headers: { 'if-match': '"x"' } })).status).toBe(404)
    expect((await get(`/keys/${theirs.id}`, { key: admin.key })).status).toBe(200)
  })

  it('answers a repeated Idempotency-Key with the first answer, without the secret', async () => {
    const { key } = await makeKey('reader')
    const headers = { 'idempotency-key': `once-${Date.now()}` }
    const first = await ask('post', '/keys', { key, headers, body: { name: 'one' } })
    const again = await ask('post', '/keys', { key, headers, body: { name: 'one' } })
    expect([first.status, again.status]).toEqual([201, 201])
    expect(again.json.data?.id).toBe(first.json.data?.id)
    expect(again.json.data?.key).toBeNull()
    expect(again.headers.location).toBe(first.headers.location)
    const other = await ask('post', '/keys', { key, headers, body: { name: 'two' } })
    expect([other.status, other.json.code]).toEqual([422, 'idempotency_mismatch'])
    expect((await get('/keys', { key })).json.data?.filter((one: Json) => one.name === 'one')).toHaveLength(1)
    expect((await ask('post', '/keys', { key, headers: { 'idempotency-key': 'a b' }, body: { name: 'one' } })).status).toBe(400)
  })

  it('performs two simultaneous requests of one Idempotency-Key once', async () => {
    const { key } = await makeKey('reader')
    const headers = { 'idempotency-key': `race-${Date.now()}` }
    const replies = await Promise.all(Array.from({ length: 4 }, () => ask('post', '/keys', { key, headers, body: { name: 'raced' } })))
    expect(replies.every((reply) => reply.status === 201 || reply.status === 409)).toBe(true)
    expect((await get('/keys', { key })).json.data?.filter((one: Json) => one.name === 'raced')).toHaveLength(1)
  })
})

describe('signing in and out', () => {
  it('sets a cookie that scripts of a page cannot read, and ends at once on signing out', async () => {
    const person = await makePerson('curator')
    const reply = await ask('post', '/session', { body: { email: person.email.toUpperCase(), password: PASSWORD }, headers: SAME_SITE })
    expect(reply.status).toBe(201)
    expect(reply.json.data).toMatchObject({ user: { id: person.id, role: 'curator' } })
    const set = reply.cookies.find((cookie) => cookie.startsWith('lodeterm=')) ?? ''
    expect(set).toMatch(/HttpOnly/)
    expect(set).toMatch(/SameSite=Lax/)
    expect(set).toMatch(/Path=\//)
    const cookie = cookiePart(set)
    expect((await get('/me', { cookie })).json.data).toMatchObject({ signed_in_by: 'session', role_in_force: 'curator' })
    const out = await ask('delete', '/session', { cookie, headers: SAME_SITE })
    expect(out.status).toBe(204)
    expect(out.cookies[0]).toMatch(/^lodeterm=; .*Max-Age=0/)
    const after = await get('/me', { cookie })
    expect([after.status, after.json.code]).toEqual([401, 'session_ended'])
    // what is open to all stays open to a browser whose session has ended
    expect((await get('/levels/Na-I.3', { cookie })).status).toBe(200)
  })

  it('refuses a change with a session that does not come from the site itself', async () => {
    const cookie = await signIn(await makePerson('curator'))
    for (const headers of [{}, { origin: 'https://elsewhere.example' }, { 'sec-fetch-site': 'cross-site', ...{ origin: SAME_SITE.origin } }, { 'sec-fetch-site': 'same-site' }, { origin: 'null' }]) {
      const reply = await ask('post', '/amendments', { cookie, headers: headers as Record<string, string>, body: { title: 'forged' } })
      expect([reply.status, reply.json.code]).toEqual([403, 'cross_site'])
    }
    expect((await ask('post', '/amendments', { cookie, headers: { origin: SAME_SITE.origin }, body: { title: 'ours' } })).status).toBe(201)
    expect((await ask('post', '/amendments', { cookie, headers: { 'sec-fetch-site': 'same-origin' }, body: { title: 'ours' } })).status).toBe(201)
    const forced = await ask('post', '/session', { body: { email: 'a@b.example', password: 'whatever else' }, headers: { 'sec-fetch-site': 'cross-site' } })
    expect(forced.status).toBe(403)
  })

  it('refuses a cookie that was altered, and one of a session that another process ended', async () => {
    const person = await makePerson('reader')
    const cookie = await signIn(person)
    expect((await get('/me', { cookie })).status).toBe(200)
    expect((await get('/me', { cookie: `${cookie}x` })).status).toBe(401)
    expect((await get('/me', { cookie: 'lodeterm=abc' })).status).toBe(401)
    await getDb().update(sessions).set({ endedAt: new Date() }).where(eq(sessions.userId, person.id))
    await expect.poll(async () => (await get('/me', { cookie })).status, { timeout: 2000, interval: 20 }).toBe(401)
  })

  it('answers alike for a wrong password and an address that is nobody\'s', async () => {
    const person = await makePerson('reader')
    const [known, unknown] = [await wrong(person.email), await wrong(`nobody.${Date.now()}@test.example`)]
    expect([known.status, known.json.code, known.json.detail]).toEqual([401, 'sign_in_refused', unknown.json.detail])
    expect(unknown.status).toBe(401)
  })

  it('slows guessing down, and lets the owner\'s own browser in all the same', async () => {
    const person = await makePerson('reader')
    const first = await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE })
    const known = cookiePart(first.cookies.find((cookie) => cookie.startsWith('lodeterm-known=')) ?? '')
    const statuses: number[] = []
    for (let i = 0; i < 7; i += 1) statuses.push((await wrong(person.email)).status)
    expect(statuses.slice(0, 5)).toEqual([401, 401, 401, 401, 401])
    expect(statuses.slice(5)).toEqual([429, 429])
    const throttled = await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE })
    expect([throttled.status, throttled.json.code]).toEqual([429, 'sign_in_throttled'])
    expect(Number(throttled.headers['retry-after'])).toBeLessThanOrEqual(900)
    const owner = await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE, cookie: known })
    expect(owner.status).toBe(201)
  })

  it('slows an address that tries many accounts, and nobody who is known there', async () => {
    const person = await makePerson('reader')
    const first = await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE })
    const known = cookiePart(first.cookies.find((cookie) => cookie.startsWith('lodeterm-known=')) ?? '')
    const statuses: number[] = []
    for (let i = 0; i < 22; i += 1) statuses.push((await wrong(`guess${i}.${Date.now()}@test.example`)).status)
    expect(statuses.slice(0, 20).every((status) => status === 401)).toBe(true)
    expect(statuses.slice(20)).toEqual([429, 429])
    const owner = await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE, cookie: known })
    expect(owner.status).toBe(201)
  })

  it('does not let guesses side by side pass the count', async () => {
    const person = await makePerson('reader')
    const replies = await Promise.all(Array.from({ length: 12 }, () => wrong(person.email)))
    expect(replies.filter((reply) => reply.status === 401).length).toBeLessThanOrEqual(5)
  })
})

describe('own password', () => {
  it('changes with the present one, ends other sessions, and refuses poor ones with their reason', async () => {
    const person = await makePerson('reader')
    const [here, there] = [await signIn(person), await signIn(person)]
    const change = (password: string, new_password: string) => ask('post', '/password-changes', { cookie: here, headers: SAME_SITE, body: { password, new_password } })
    for (const [poor, code] of [['short', 'password_too_short'], ['password123', 'password_common'], ['x'.repeat(129), 'password_too_long'], [PASSWORD, 'password_unchanged']] as const) {
      const reply = await change(PASSWORD, poor)
      expect([reply.status, reply.json.code]).toEqual([422, code])
    }
    expect((await change('not it at all', 'a quite new password')).status).toBe(403)
    expect((await change(PASSWORD, 'a quite new password')).status).toBe(204)
    expect((await get('/me', { cookie: here })).status).toBe(200)
    expect((await get('/me', { cookie: there })).status).toBe(401)
    expect(await signIn(person, 'a quite new password')).toMatch(/^lodeterm=/)
  })

  it('is not for keys', async () => {
    const { key } = await makeKey('admin')
    const reply = await ask('post', '/password-changes', { key, body: { password: PASSWORD, new_password: 'a quite new password' } })
    expect([reply.status, reply.json.code]).toEqual([403, 'session_required'])
  })
})

describe('audit', () => {
  it('tells an admin who did what, and nobody else', async () => {
    const { key, owner, id } = await makeKey('curator')
    const made = await ask('post', '/keys', { key, body: { name: 'audited' } })
    const admin = await makeKey('admin')
    const reply = await get(`/audit?action=key.create&subject_id=${made.json.data?.id}`, { key: admin.key })
    expect(reply.json.data).toHaveLength(1)
    expect(reply.json.data?.[0]).toMatchObject({ actor: { id: owner.id }, key: id, subject: { kind: 'key' }, after: { name: 'audited', role: 'curator' }, request_id: made.headers['x-request-id'] })
    expect(reply.text).not.toContain(String(made.json.data?.key))
    expect((await get('/audit', { key })).status).toBe(403)
    const page = await get('/audit?limit=1', { key: admin.key })
    expect((await get(`/audit?limit=1&cursor=${page.json.page?.next_cursor}`, { key: admin.key })).json.data?.[0]?.id).toBeLessThan(Number(page.json.data?.[0]?.id))
  })

  it('names the address of the connection, not what a client says of itself', async () => {
    const { key } = await makeKey('curator')
    const made = await ask('post', '/keys', { key, body: { name: 'from where' }, headers: { 'x-forwarded-for': '203.0.113.9', 'x-lodeterm-peer': '203.0.113.9' } })
    const [row] = await getDb().select({ ip: auditEvents.ip }).from(auditEvents).where(eq(auditEvents.subjectId, String(made.json.data.id)))
    expect(row?.ip).toBe('127.0.0.1')
  })

  it('leaves nothing of a refused change', async () => {
    const { key } = await makeKey('reader')
    const before = await getDb().$count(auditEvents)
    expect((await ask('post', '/keys', { key, body: { name: 'x', role: 'admin' } })).status).toBe(403)
    expect((await ask('post', '/amendments', { key, body: { title: 'x' } })).status).toBe(403)
    expect(await getDb().$count(auditEvents)).toBe(before)
  })
})
