import { randomUUID } from 'node:crypto'
import { and, eq } from 'drizzle-orm'
import { afterEach, describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { auditEvents, invitations, noticeEvents, passwordResets, sessions, users } from '@/db/schema'
import { ask, faultsOf, get, type Json, type Reply } from './helpers/client'
import { mailTo, nextMail, tokenIn } from './helpers/mail'
import { cookiePart, forgetAttempts, makeKey, makePerson, PASSWORD, type Person, SAME_SITE, signIn } from './helpers/people'

afterEach(forgetAttempts)

const adminSession = async () => ({ cookie: await signIn(await makePerson('admin')), headers: SAME_SITE })
type Session = Awaited<ReturnType<typeof adminSession>>

const read = async (as: Session, id: string): Promise<Json> => (await get(`/people/${id}`, as)).json.data
async function change(as: Session, id: string, body: unknown, etag?: string): Promise<Reply> {
  return ask('patch', `/people/${id}`, { ...as, headers: { ...as.headers, 'if-match': etag ?? (await read(as, id)).etag }, body })
}
const auditOf = (action: string, id: string) => getDb().select().from(auditEvents).where(and(eq(auditEvents.action, action), eq(auditEvents.subjectId, id)))
const address = (): string => `invited.${randomUUID().slice(0, 8)}@test.example`

describe('people', () => {
  it('are listed by name, searched, and paged', async () => {
    const admin = await adminSession()
    const person = await makePerson('curator')
    await getDb().update(users).set({ name: `Zoë 100%_${person.id.slice(0, 8)}` }).where(eq(users.id, person.id))
    const found = await get(`/people?q=${encodeURIComponent(`zoë 100%_${person.id.slice(0, 8)}`)}`, admin)
    expect(found.json.data.map((one: Json) => one.id)).toEqual([person.id])
    expect((await get('/people?q=%25', admin)).json.data.every((one: Json) => one.name.includes('%') || one.email.includes('%'))).toBe(true)
    const all: string[] = []
    let cursor = ''
    do {
      const page: Reply = await get(`/people?limit=7${cursor}`, admin)
      all.push(...page.json.data.map((one: Json) => one.id as string))
      cursor = page.json.page.next_cursor === null ? '' : `&cursor=${page.json.page.next_cursor}`
    } while (cursor !== '')
    expect(new Set(all).size).toBe(all.length)
    expect(all).toHaveLength(await getDb().$count(users))
    expect((await get('/people?role=reader&active=false', admin)).json.data.every((one: Json) => one.role === 'reader' && !one.active)).toBe(true)
  })

  it('are changed by an admin at a browser, with the tag last read, never by a key', async () => {
    const admin = await adminSession()
    const person = await makePerson('reader')
    const key = await makeKey('admin')
    const byKey = await ask('patch', `/people/${person.id}`, { key: key.key, headers: { 'if-match': '"x"' }, body: { role: 'admin' } })
    expect([byKey.status, byKey.json.code]).toEqual([403, 'session_required'])
    const etag = (await read(admin, person.id)).etag as string
    const done = await change(admin, person.id, { role: 'curator', name: 'Renamed' }, etag)
    expect(done.status, done.text).toBe(200)
    expect(done.json.data).toMatchObject({ role: 'curator', name: 'Renamed' })
    expect(done.headers.etag).toBe(done.json.data.etag)
    const stale = await change(admin, person.id, { role: 'reader' }, etag)
    expect([stale.status, stale.json.code]).toEqual([412, 'etag_stale'])
    expect((await auditOf('person.change', person.id)).map((row) => [row.before, row.after])).toEqual([[{ name: 'Test reader', role: 'reader' }, { name: 'Renamed', role: 'curator' }]])
    // nothing changed: nothing written
    expect((await change(admin, person.id, { role: 'curator' })).json.data.etag).toBe(done.json.data.etag)
    expect(await auditOf('person.change', person.id)).toHaveLength(1)
    expect((await get(`/people/${randomUUID()}`, admin)).json.code).toBe('person_unknown')
  })

  it('have a lowered role in force at once, in sessions and keys', async () => {
    const admin = await adminSession()
    const { key, owner } = await makeKey('admin')
    const cookie = await signIn(owner)
    expect([(await get('/people', { key })).status, (await get('/people', { cookie })).status]).toEqual([200, 200])
    expect((await change(admin, owner.id, { role: 'reader' })).status).toBe(200)
    expect([(await get('/people', { key })).status, (await get('/people', { cookie })).status]).toEqual([403, 403])
    expect((await get('/me', { key })).json.data).toMatchObject({ role: 'reader', role_in_force: 'reader' })
  })

  it('lose sessions, keys, links and invitations at once when their account is closed, and keys for good', async () => {
    const admin = await adminSession()
    const { key, owner } = await makeKey('admin')
    const as = { cookie: await signIn(owner), headers: SAME_SITE }
    const invited = (await ask('post', '/invitations', { ...as, body: { email: address(), name: 'Guest', role: 'admin' } })).json.data
    await ask('post', '/password-resets', { body: { email: owner.email } })
    const closed = await change(admin, owner.id, { active: false })
    expect(closed.json.data).toMatchObject({ active: false, keys_in_use: 0 })
    expect([(await get('/me', { key })).json.code, (await get('/me', { cookie: as.cookie })).json.code]).toEqual(['key_revoked', 'session_ended'])
    expect((await ask('post', '/session', { body: { email: owner.email, password: PASSWORD }, headers: SAME_SITE })).status).toBe(401)
    const [invitation] = await getDb().select().from(invitations).where(eq(invitations.id, invited.id))
    expect(invitation?.revokedAt).not.toBeNull()
    const [reset] = await getDb().select().from(passwordResets).where(eq(passwordResets.userId, owner.id))
    expect(reset?.expiresAt.getTime()).toBeLessThanOrEqual(Date.now())
    expect((await auditOf('person.close', owner.id))[0]?.after).toMatchObject({ active: false, sessions_ended: 1, keys_revoked: 1, invitations_revoked: 1 })
    expect((await change(admin, owner.id, { active: true })).json.data.active).toBe(true)
    expect((await get('/me', { key })).json.code).toBe('key_revoked')
    expect((await get('/me', { cookie: as.cookie })).status).toBe(401)
    expect(await signIn(owner)).toMatch(/^lodeterm=/)
  })

  it('keep one admin who can sign in, also when the last two are taken away at once', async () => {
    const others = await getDb().select({ id: users.id }).from(users).where(and(eq(users.role, 'admin'), eq(users.active, true)))
    const [one, two] = [await makePerson('admin'), await makePerson('admin')]
    const [first, second] = await Promise.all([one, two].map(async (person) => ({ cookie: await signIn(person), headers: SAME_SITE })))
    if (first === undefined || second === undefined) throw new Error('no sessions')
    const tags = [(await read(first, two.id)).etag as string, (await read(first, one.id)).etag as string]
    // an admin who cannot sign in does not count
    const [service] = await getDb().insert(users).values({ email: `service.${randomUUID()}@localhost.invalid`, name: 'Service', role: 'admin' }).returning({ id: users.id })
    for (const other of others) await getDb().update(users).set({ active: false }).where(eq(users.id, other.id))
    try {
      const replies = await Promise.all([change(first, two.id, { role: 'curator' }, tags[0]), change(second, one.id, { active: false }, tags[1])])
      expect(replies.map((reply) => reply.status).sort()).toEqual([200, 409])
      expect(replies.find((reply) => reply.status === 409)?.json.code).toBe('last_admin')
      const left: Session = replies[0]?.status === 200 ? first : second
      const leftId = left === first ? one.id : two.id
      for (const body of [{ role: 'reader' }, { active: false }, { active: false, role: 'reader' }]) expect((await change(left, leftId, body)).json.code).toBe('last_admin')
      expect((await change(left, leftId, { name: 'Still here' })).status).toBe(200)
    } finally {
      for (const other of others) await getDb().update(users).set({ active: true }).where(eq(users.id, other.id))
      if (service !== undefined) await getDb().update(users).set({ active: false }).where(eq(users.id, service.id))
    }
  })
})

describe('invitations', () => {
  const invite = (as: Session, email: string, more: object = {}) => ask('post', '/invitations', { ...as, body: { email, name: 'New Colleague', role: 'curator', ...more } })

  it('bring a person in by the link of a mail, once', async () => {
    const admin = await adminSession()
    const email = address()
    const made = await invite(admin, email)
    expect(made.status, made.text).toBe(201)
    expect(made.json.data).toMatchObject({ email, role: 'curator', state: 'open' })
    const mail = await nextMail(email, 'invitation')
    const token = tokenIn(mail)
    expect(token).toHaveLength(43)
    expect(made.text).not.toContain(token)
    const [row] = await getDb().select().from(invitations).where(eq(invitations.id, made.json.data.id))
    expect(JSON.stringify(row)).not.toContain(token)
    const events = await getDb().select().from(noticeEvents).where(eq(noticeEvents.kind, 'invitation.made'))
    expect(JSON.stringify(events)).not.toContain(token)
    expect((await ask('post', '/invitations/read', { body: { token } })).json.data).toMatchObject({ email, name: 'New Colleague', role: 'curator', invited_by: 'Test admin' })
    const poor = await ask('post', '/invitations/accept', { body: { token, password: 'short' } })
    expect([poor.status, poor.json.code]).toEqual([422, 'password_too_short'])
    const raced = await Promise.all([0, 1].map(() => ask('post', '/invitations/accept', { body: { token, name: 'Chosen Name', password: PASSWORD }, headers: SAME_SITE })))
    expect(raced.map((reply) => reply.status).sort()).toEqual([201, 410])
    const accepted = raced.find((reply) => reply.status === 201)
    const cookie = cookiePart(accepted?.cookies.find((field) => field.startsWith('lodeterm=')) ?? '')
    expect((await get('/me', { cookie })).json.data).toMatchObject({ email, name: 'Chosen Name', role: 'curator', role_in_force: 'curator' })
    expect((await ask('post', '/invitations/accept', { body: { token, password: PASSWORD } })).json.code).toBe('invitation_unusable')
    expect((await get('/invitations?state=accepted', admin)).json.data.find((one: Json) => one.id === made.json.data.id)).toMatchObject({ accepted_by: { name: 'Chosen Name' } })
    expect(await auditOf('invitation.accept', made.json.data.id)).toHaveLength(1)
    expect(await signIn({ email })).toMatch(/^lodeterm=/)
  })

  it('are refused to an address that has an account or an open invitation, whatever its letters', async () => {
    const admin = await adminSession()
    const person = await makePerson('reader')
    const known = await invite(admin, person.email.toUpperCase())
    expect([known.status, known.json.code, faultsOf(known)]).toEqual([409, 'account_exists', ['/email account_exists']])
    const email = address()
    const raced = await Promise.all([email, email.toUpperCase(), email].map((one) => invite(admin, one)))
    expect(raced.map((reply) => reply.status).sort()).toEqual([201, 409, 409])
    expect(raced.find((reply) => reply.status === 409)?.json.code).toBe('invitation_open')
    for (const bad of ['a@b@c.example', 'x y@test.example', 'a@test.example\r\nBcc: b@test.example', '', 'nobody', `${'x'.repeat(330)}@test.example`]) expect((await invite(admin, bad)).status).toBe(400)
  })

  it('are taken back with their tag, and run out', async () => {
    const admin = await adminSession()
    const email = address()
    const made = (await invite(admin, email)).json.data
    const token = tokenIn(await nextMail(email, 'invitation'))
    expect((await ask('delete', `/invitations/${made.id}`, { ...admin, headers: { ...SAME_SITE, 'if-match': '"old"' } })).status).toBe(412)
    expect((await ask('delete', `/invitations/${made.id}`, { ...admin, headers: { ...SAME_SITE, 'if-match': made.etag } })).status).toBe(204)
    expect((await ask('post', '/invitations/accept', { body: { token, password: PASSWORD } })).json.code).toBe('invitation_unusable')
    const again = (await invite(admin, email)).json.data
    await getDb().update(invitations).set({ expiresAt: new Date(Date.now() - 1000) }).where(eq(invitations.id, again.id))
    expect((await get('/invitations?state=expired', admin)).json.data.map((one: Json) => one.id)).toContain(again.id)
    expect((await invite(admin, email)).status).toBe(201)
  })

  it('are made by an admin at a browser only', async () => {
    const body = { email: address(), name: 'x', role: 'admin' }
    expect((await ask('post', '/invitations', { key: (await makeKey('admin')).key, body })).json.code).toBe('session_required')
    expect((await ask('post', '/invitations', { cookie: await signIn(await makePerson('curator')), headers: SAME_SITE, body })).json.code).toBe('role_insufficient')
  })

  it('take no name that could write into a mail\'s head', async () => {
    const reply = await invite(await adminSession(), address(), { name: 'Eve\r\nBcc: other@test.example\r\n\r\nhttps://elsewhere.example' })
    expect([reply.status, reply.json.errors[0].pointer]).toEqual([400, '/name'])
    expect(await mailTo('other@test.example')).toEqual([])
  })
})

describe('a forgotten password', () => {
  const askFor = (email: string) => ask('post', '/password-resets', { body: { email } })
  const set = (token: string, new_password: string) => ask('post', '/password-resets/use', { body: { token, new_password } })
  const linkOf = async (person: Person, known: number): Promise<string> => {
    await expect.poll(async () => (await mailTo(person.email)).length, { timeout: 10_000 }).toBe(known + 1)
    return tokenIn((await mailTo(person.email))[0])
  }

  it('is answered alike, after the same time, whether or not there is an account', async () => {
    const person = await makePerson('reader')
    const took: number[] = []
    for (const email of [person.email, `nobody.${randomUUID()}@test.example`, ` ${person.email.toUpperCase()} `, 'not an address']) {
      const from = performance.now()
      const reply = await askFor(email)
      took.push(performance.now() - from)
      expect([reply.status, reply.text]).toEqual([204, ''])
    }
    expect(Math.max(...took) - Math.min(...took)).toBeLessThan(350)
    expect(Math.min(...took)).toBeGreaterThanOrEqual(390)
  })

  it('is replaced by the newest link, once, and every session ends', async () => {
    const person = await makePerson('curator')
    const { key } = await makeKey('curator', { owner: person })
    const cookie = await signIn(person)
    await askFor(person.email)
    const first = await linkOf(person, 0)
    await askFor(person.email)
    const second = await linkOf(person, 1)
    expect(first).not.toBe(second)
    expect((await set(first, 'a quite new password')).json.code).toBe('reset_unusable')
    expect((await set(second, 'short')).json.code).toBe('password_too_short')
    const raced = await Promise.all([0, 1].map(() => set(second, 'a quite new password')))
    expect(raced.map((reply) => reply.status).sort()).toEqual([204, 410])
    expect((await get('/me', { cookie })).json.code).toBe('session_ended')
    expect((await get('/me', { key })).status).toBe(200)
    expect(await signIn(person, 'a quite new password')).toMatch(/^lodeterm=/)
    expect((await ask('post', '/session', { body: { email: person.email, password: PASSWORD }, headers: SAME_SITE })).status).toBe(401)
    expect((await auditOf('password.reset_use', person.id)).map((row) => row.after)).toEqual([{ sessions_ended: 1 }])
    await expect.poll(async () => (await mailTo(person.email)).map((mail) => mail.subject).filter((subject) => subject.includes('was changed')), { timeout: 10_000 }).toEqual(['Your password for Lodeterm was changed'])
    const kept = JSON.stringify([await getDb().select().from(passwordResets), await getDb().select().from(noticeEvents)])
    for (const token of [first, second]) expect(kept).not.toContain(token)
  })

  it('runs out after an hour, with the account, and with a changed password', async () => {
    const person = await makePerson('reader')
    await askFor(person.email)
    const late = await linkOf(person, 0)
    await getDb().update(passwordResets).set({ expiresAt: new Date(Date.now() - 1) }).where(eq(passwordResets.userId, person.id))
    expect((await set(late, 'a quite new password')).status).toBe(410)
    await askFor(person.email)
    const voided = await linkOf(person, 1)
    const cookie = await signIn(person)
    expect((await ask('post', '/password-changes', { cookie, headers: SAME_SITE, body: { password: PASSWORD, new_password: 'another new password' } })).status).toBe(204)
    const told = async () => (await mailTo(person.email)).find((mail) => mail.subject.includes('was changed'))?.text
    await expect.poll(told, { timeout: 10_000 }).toContain('by somebody who was signed in')
    for (const secret of [PASSWORD, 'another new password', voided]) expect(await told()).not.toContain(secret)
    expect((await set(voided, 'a quite new password')).status).toBe(410)
    expect((await set('x'.repeat(43), 'a quite new password')).json.code).toBe('reset_unusable')
  })

  it('is not mailed to closed accounts, and asking is slowed alike for everyone', async () => {
    const person = await makePerson('reader')
    await getDb().update(users).set({ active: false }).where(eq(users.id, person.id))
    const statuses: [number, number][] = []
    const nobody = `nobody.${randomUUID()}@test.example`
    for (let i = 0; i < 7; i += 1) statuses.push([(await askFor(person.email)).status, (await askFor(nobody)).status])
    expect(statuses.slice(0, 5)).toEqual(Array.from({ length: 5 }, () => [204, 204]))
    expect(statuses.slice(5)).toEqual([[429, 429], [429, 429]])
    // what was asked for does not slow signing in
    expect((await ask('post', '/session', { body: { email: nobody, password: 'whatever else' }, headers: SAME_SITE })).status).toBe(401)
    expect(await getDb().$count(passwordResets, eq(passwordResets.userId, person.id))).toBe(0)
    expect(await mailTo(person.email)).toEqual([])
  })
})

describe('keys made with keys', () => {
  it('name their maker and end with it, and theirs with them', async () => {
    const first = await makeKey('curator')
    const makeWith = async (key: string): Promise<Json> => (await ask('post', '/keys', { key, body: { name: 'made' } })).json.data
    const second = await makeWith(first.key)
    const third = await makeWith(second.key)
    const apart = await makeKey('curator', { owner: first.owner })
    expect([second.made_with, third.made_with]).toEqual([first.id, second.id])
    const at = `/keys/${first.id}`
    const tag = (await get(at, { key: apart.key })).headers.etag ?? ''
    expect((await ask('delete', at, { key: apart.key, headers: { 'if-match': tag } })).status).toBe(204)
    const codes = await Promise.all([first.key, second.key, third.key].map(async (key) => (await get('/me', { key })).json.code))
    expect(codes).toEqual(['key_revoked', 'key_revoked', 'key_revoked'])
    expect((await get('/me', { key: apart.key })).status).toBe(200)
    expect((await auditOf('key.revoke', third.id)).map((row) => row.after)).toMatchObject([{ along_with: first.id }])
  })

  it('are not made by a key that is revoked in the same moment', async () => {
    for (let round = 0; round < 5; round += 1) {
      const maker = await makeKey('reader')
      const apart = await makeKey('reader', { owner: maker.owner })
      const tag = (await get(`/keys/${maker.id}`, { key: apart.key })).headers.etag ?? ''
      const [made] = await Promise.all([
        ask('post', '/keys', { key: maker.key, body: { name: 'raced' } }),
        ask('delete', `/keys/${maker.id}`, { key: apart.key, headers: { 'if-match': tag } }),
      ])
      if (made.status === 201) expect((await get('/me', { key: made.json.data.key })).json.code).toBe('key_revoked')
      else expect(made.json.code).toBe('key_revoked')
    }
  })
})

describe('the audit', () => {
  it('is asked by person, key, session and time', async () => {
    const admin = await makeKey('admin')
    const { key, id, owner } = await makeKey('curator')
    const cookie = await signIn(owner)
    const from = new Date().toISOString()
    const made = await ask('post', '/keys', { key, body: { name: 'by key' } })
    await ask('post', '/keys', { cookie, headers: SAME_SITE, body: { name: 'by session' } })
    const byKey = (await get(`/audit?key=${id}`, { key: admin.key })).json.data
    expect(byKey).toHaveLength(1)
    expect(byKey[0]).toMatchObject({ subject: { id: made.json.data.id }, key: id, key_name: 'test', session: null })
    const [session] = await getDb().select({ id: sessions.id }).from(sessions).where(eq(sessions.userId, owner.id))
    expect((await get(`/audit?session=${session?.id}&action=key.create`, { key: admin.key })).json.data).toHaveLength(1)
    expect((await get(`/audit?actor=${owner.id}&from=${from}&action=key.create`, { key: admin.key })).json.data).toHaveLength(2)
    expect((await get(`/audit?actor=${owner.id}&until=${from}&action=key.create`, { key: admin.key })).json.data).toHaveLength(0)
    expect((await get('/audit?until=yesterday', { key: admin.key })).json.code).toBe('time_malformed')
    expect((await get('/audit?from=2001-01-01&until=2001-01-02', { key: admin.key })).json.data).toEqual([])
  })
})
