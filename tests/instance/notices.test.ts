import { createHmac } from 'node:crypto'
import http from 'node:http'
import type { AddressInfo } from 'node:net'
import { type ParsedMail, simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Json } from '../api/helpers/client'
import { type Instance, startInstance } from '../support/instance'
import { type Signed, signInAll, withTag } from '../support/signed'

// ---- the other side: a mail server that turns one address away at first, and a receiver of webhooks

const received: { to: string[]; mail: ParsedMail }[] = []
const turnedAway = new Set<string>()
const mailServer = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'], disableReverseLookup: true,
  onRcptTo({ address }, _session, done) {
    if (!turnedAway.has(address)) return done()
    turnedAway.delete(address)
    done(Object.assign(new Error('try again later'), { responseCode: 451 }))
  },
  onData(stream, session, done) {
    simpleParser(stream, {}).then((mail) => {
      received.push({ to: session.envelope.rcptTo.map(({ address }) => address), mail })
      done()
    }, done)
  },
})

interface Got { path: string; body: string; headers: http.IncomingHttpHeaders }
const got: Got[] = []
const answers = new Map<string, number[]>()
const receiver = http.createServer((request, response) => {
  let body = ''
  request.on('data', (piece: Buffer) => { body += piece.toString() })
  request.on('end', () => {
    const path = request.url ?? ''
    got.push({ path, body, headers: request.headers })
    const status = answers.get(path)?.shift() ?? 204
    response.writeHead(status, status === 302 ? { location: '/never' } : {}).end(status === 500 ? 'words of the other side' : '')
  })
})
const listening = (server: { listen: (port: number, host: string, done: () => void) => unknown }): Promise<void> => new Promise((done) => { server.listen(0, '127.0.0.1', done) })

let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed
let reader: Signed
let hooksAt = ''
beforeAll(async () => {
  await Promise.all([listening(mailServer), listening(receiver)])
  hooksAt = `http://127.0.0.1:${(receiver.address() as AddressInfo).port}`
  instance = await startInstance('notices', { WEBHOOK_PRIVATE_TARGETS: '1', SMTP_URL: `smtp://127.0.0.1:${(mailServer.server.address() as AddressInfo).port}`, MAIL_FROM: 'Levels <levels@test.example>', OUTBOX_FOLDER: '' })
  ;({ author, reviewer, admin, reader } = await signInAll(instance))
})
afterAll(async () => {
  await instance.end()
  mailServer.close()
  receiver.close()
})

const addressOf = (who: string): string => instance.accounts.find(({ email }) => email.startsWith(`${who}@`))?.email ?? ''
const mailTo = (who: string, subject: string) => received.filter(({ to, mail }) => to.includes(addressOf(who)) && (mail.subject ?? '').includes(subject))
const arrives = (who: string, subject: string) => expect.poll(() => mailTo(who, subject).length, { timeout: 20_000, interval: 100, message: `mail "${subject}" to ${who}` }).toBe(1)
const deliveries = async (id: string): Promise<Json[]> => (await instance.get(`/webhooks/${id}/deliveries`, admin)).json.data
/** Makes what waits for its next attempt due, and says so. */
const hurry = async (table: 'mails' | 'webhook_deliveries') => {
  await instance.query(`update ${table} set next_attempt_at = now() where ${table === 'mails' ? 'sent_at' : 'delivered_at'} is null and failed_at is null`)
  await instance.query('select pg_notify(\'lodeterm_notices\', \'\')')
}

const hooks = new Map<string, { id: string; secret: string }>()
const amendment = { id: '', etag: '' }
const step = async (as: Signed, what: string, comment: string): Promise<void> => {
  const reply = await instance.ask('post', `/amendments/${amendment.id}/${what}`, { ...withTag(as, amendment.etag), body: { comment } })
  expect(reply.status, reply.text).toBe(200)
  amendment.etag = reply.json.data.etag
}

describe('notices', () => {
  it('go to webhooks that were set up with a private target, where the server is told to allow it', async () => {
    for (const [name, events] of [['all', ['review.asked', 'review.returned', 'review.accepted', 'edition.published']], ['flaky', ['review.asked']], ['redirecting', ['review.asked']], ['off', ['review.asked']]] as const) {
      const made = await instance.ask('post', '/webhooks', { ...admin, body: { name, url: `${hooksAt}/${name}`, events } })
      expect(made.status, made.text).toBe(201)
      hooks.set(name, made.json.data)
    }
    const off = (await instance.get(`/webhooks/${hooks.get('off')?.id}`, admin)).json.data
    expect((await instance.ask('patch', `/webhooks/${off.id}`, { ...withTag(admin, off.etag), body: { active: false } })).status).toBe(200)
    const ping = await instance.ask('post', `/webhooks/${hooks.get('all')?.id}/test`, admin)
    expect(ping.json.data).toMatchObject({ event: 'ping', state: 'delivered', response_status: 204, attempts: 1 })
    expect(JSON.parse(got[0]?.body ?? '{}')).toMatchObject({ id: ping.json.data.id, event: 'ping' })
  })

  it('tell colleagues, and not the author, that a review is asked', async () => {
    answers.set('/flaky', [500])
    answers.set('/redirecting', [302, 302, 302, 302, 302, 302, 302, 302])
    const levels = (await instance.get('/levels?species=Na-I&sort=-energy&limit=2')).json.data as Json[]
    const [gone, stays] = [levels[0]?.id as string, levels[1]?.id as string]
    for (const subject of ['Na-I.3', 'Na-I.1~Na-I.3', gone, 'Na-I', 'Mg-I']) expect((await instance.ask('post', '/follows', { ...reader, body: { subject } })).status).toBe(201)
    expect((await instance.ask('post', '/follows', { ...author, body: { subject: 'Mg-I' } })).status).toBe(201)
    const made = await instance.ask('post', '/amendments', { ...author, body: { title: 'Sodium energies' } })
    expect(made.status, made.text).toBe(201)
    amendment.id = made.json.data.id
    const { values } = (await instance.get('/levels/Na-I.3/values')).json.data
    for (const body of [{ action: 'replace', level: 'Na-I.3', values: { ...values, energy_invcm: undefined, energy_literal: '16973.37619' } }, { action: 'retire', level: gone, reason: 'not seen again', successor: stays }]) {
      const change = await instance.ask('post', `/amendments/${amendment.id}/changes`, { ...author, body })
      expect(change.status, change.text).toBe(201)
    }
    amendment.etag = (await instance.get(`/amendments/${amendment.id}`, author)).json.data.etag
    turnedAway.add(addressOf('admin'))
    await step(author, 'submit', 'Please look.\nBcc: nobody@test.example')
    await arrives('second.curator', 'Review asked: Sodium energies')
    const [{ mail } = { mail: undefined }] = mailTo('second.curator', 'Review asked')
    expect(mail?.text).toContain('> Please look.\n> Bcc: nobody@test.example')
    expect(mail?.text).toContain(`${instance.base}/curate/${amendment.id}`)
    expect(mail?.from?.text).toBe('"Levels" <levels@test.example>')
    expect([mailTo('curator', 'Review asked'), mailTo('reader', 'Review asked')]).toEqual([[], []])
  })

  it('are sent again to a mail server that turned them away', async () => {
    const waiting = () => instance.query<{ attempts: number; last_error: string; wait: number }>('select attempts, last_error, extract(epoch from next_attempt_at - now())::int as wait from mails where recipient = $1 and sent_at is null', [addressOf('admin')])
    await expect.poll(async () => (await waiting())[0]?.last_error, { timeout: 10_000 }).toContain('451')
    const [row] = await waiting()
    expect(row?.attempts).toBe(1)
    expect(row?.wait).toBeGreaterThan(40)
    expect(mailTo('admin', 'Review asked')).toEqual([])
    await hurry('mails')
    await arrives('admin', 'Review asked')
  })

  it('reach webhooks signed, again after a 500, and follow no redirect', async () => {
    const all = () => got.filter(({ path, headers }) => path === '/all' && headers['lodeterm-event'] === 'review.asked')
    await expect.poll(() => all().length, { timeout: 10_000 }).toBe(1)
    const [told] = all()
    const timestamp = told?.headers['lodeterm-timestamp']
    expect(told?.headers['lodeterm-signature']).toBe(`v1=${createHmac('sha256', hooks.get('all')?.secret ?? '').update(`${timestamp}.${told?.body}`).digest('hex')}`)
    expect(Math.abs(Number(timestamp) - Date.now() / 1000)).toBeLessThan(60)
    const body = JSON.parse(told?.body ?? '{}')
    expect(body).toMatchObject({ id: told?.headers['lodeterm-delivery'], event: 'review.asked', data: { amendment: amendment.id, by: { name: expect.any(String) as string } } })

    await expect.poll(() => got.filter(({ path }) => path === '/flaky').length, { timeout: 10_000 }).toBeGreaterThanOrEqual(1)
    const flaky = hooks.get('flaky')?.id ?? ''
    await expect.poll(async () => (await deliveries(flaky))[0]?.last_error, { timeout: 20_000 }).toBe('answered 500')
    await new Promise((done) => setTimeout(done, 300))
    await hurry('webhook_deliveries')
    await expect.poll(async () => (await deliveries(flaky))[0]?.state, { timeout: 20_000 }).toBe('delivered')
    expect((await deliveries(flaky))[0]).toMatchObject({ attempts: 2, response_status: 204, last_error: null })
    const tries = got.filter(({ path }) => path === '/flaky')
    expect(new Set(tries.map(({ headers }) => headers['lodeterm-delivery'])).size).toBe(1)
    expect(new Set(tries.map(({ body: text }) => text)).size).toBe(1)

    const redirecting = hooks.get('redirecting')?.id ?? ''
    await expect.poll(async () => {
      await hurry('webhook_deliveries')
      return (await deliveries(redirecting))[0]?.state
    }, { timeout: 60_000, interval: 500 }).toBe('failed')
    expect((await deliveries(redirecting))[0]).toMatchObject({ attempts: 8, response_status: 302, next_attempt_at: null, last_error: 'answered 302; redirects are not followed' })
    expect(got.filter(({ path }) => path === '/redirecting')).toHaveLength(8)
    expect(got.some(({ path }) => path === '/never')).toBe(false)
    expect(got.some(({ path }) => path === '/off')).toBe(false)
    expect(JSON.stringify(await instance.query('select * from webhook_deliveries'))).not.toContain('words of the other side')
  })

  it('tell the author that a colleague returned and accepted', async () => {
    await step(reviewer, 'return', 'The second line is odd.')
    await arrives('curator', 'Returned: Sodium energies')
    expect(mailTo('curator', 'Returned')[0]?.mail.text).toContain('> The second line is odd.')
    await step(author, 'submit', 'It is meant.')
    await step(reviewer, 'accept', 'Seen.')
    await arrives('curator', 'Accepted: Sodium energies')
    expect(mailTo('second.curator', 'Accepted')).toEqual([])
  })

  it('tell a follower in one mail what an edition changed, and whoever follows other things nothing', async () => {
    const published = await instance.ask('post', '/editions', { ...admin, body: { label: 'Second edition' } })
    expect(published.status, published.text).toBe(201)
    await arrives('reader', 'Edition 2 changes')
    const text = mailTo('reader', 'Edition 2 changes')[0]?.mail.text ?? ''
    expect(text).toContain('energy: 16973.36619 cm^-1 -> 16973.37619 cm^-1')
    expect(text).toMatch(/Na-I\.1~Na-I\.3 {2}588\.99\d+ nm \(air\) -> 588\.99\d+ nm \(air\), moved by -0\.347 pm \(\+0\.01 cm\^-1\)/)
    expect(text).toMatch(/is retired: not seen again\n +Its successor is Na-I\.\d+: http/)
    for (const head of ['Level Na-I.3', 'Line Na-I.1~Na-I.3', 'Species Na-I']) expect(text).toContain(`\n${head}\n`)
    expect(text).not.toContain('Species Mg-I')
    await expect.poll(async () => (await instance.query<{ waiting: number }>('select count(*)::int as waiting from notice_events where spread_at is null'))[0]?.waiting).toBe(0)
    // the author follows nothing that changed, and hears of the amendment; so does who reviewed it, and each of them once
    await arrives('curator', 'Your amendment "Sodium energies" is published in edition 2')
    await arrives('second.curator', 'The amendment "Sodium energies" is published in edition 2')
    expect(['curator', 'second.curator', 'reader'].map((who) => mailTo(who, 'dition 2').length)).toEqual([1, 1, 1])
    await expect.poll(() => got.filter(({ path, headers }) => path === '/all' && headers['lodeterm-event'] === 'edition.published').map(({ body }) => JSON.parse(body).data), { timeout: 10_000 })
      .toMatchObject([{ edition: 2, label: 'Second edition', since: 1, url: `${instance.base}/api/v1/editions/2` }])
  })

  it('keep no text of mail that went out, and there is no outbox beside a real mail server', async () => {
    expect(await instance.query('select id from mails where sent_at is not null and text <> \'\'')).toEqual([])
    expect((await instance.get('/outbox', admin)).json.code).toBe('no_outbox')
  })

  it('survive the death of the process that spreads them', async () => {
    await instance.kill()
    await instance.query('insert into notice_events (kind, payload) values (\'invitation.made\', $1)', [{ invitation: 'x', email: 'late@test.example', name: 'Late', role: 'reader', by: 'Ada', expires_at: '2030-01-01T00:00:00.000Z', token: 'a-token' }])
    await instance.start()
    await expect.poll(() => received.filter(({ to }) => to.includes('late@test.example')).length, { timeout: 20_000 }).toBe(1)
    expect((await instance.query<{ payload: { token: string } }>('select payload from notice_events order by id desc limit 1'))[0]?.payload.token).toBe('')
  })
})
