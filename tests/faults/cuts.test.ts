import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { type Instance, startInstance } from '../support/instance'
import { addChanges, bringThrough, fingerprint, newAmendment, notedAgain, type Signed, wait, wholeEditions, withTag } from './workbench'

let instance: Instance
let author: Signed
let reviewer: Signed
let admin: Signed
let holding: pg.Client

beforeAll(async () => {
  instance = await startInstance('cuts')
  ;[author, reviewer, admin] = await Promise.all(['curator', 'second.curator', 'admin'].map(instance.signIn)) as [Signed, Signed, Signed]
  holding = new pg.Client({ connectionString: instance.env.DATABASE_URL })
  await holding.connect()
})
afterAll(async () => {
  await holding.end()
  await instance.end()
})

/** Ends every connection of the server that waits for a lock, in the middle of its transaction. */
async function cutWaiting(): Promise<number> {
  for (let patience = 0; patience < 100; patience += 1) {
    const cut = await instance.query<{ done: boolean }>(
      "select pg_terminate_backend(pid) as done from pg_stat_activity where application_name = 'lodeterm' and datname = current_database() and wait_event_type = 'Lock' and pid <> pg_backend_pid()")
    if (cut.length > 0) return cut.length
    await wait(50)
  }
  throw new Error('no connection came to wait for the lock')
}

describe('a database connection cut in the middle of a transaction', () => {
  it('is 503 with Retry-After; nothing is written, and the next request goes well without a restart', async () => {
    const amendment = await newAmendment(instance, author, 'Cut off')
    const [change] = await notedAgain(instance, ['Na-I.3'], 'cut off')
    const before = await fingerprint(instance)
    // the amendment's row is held, so that the change waits inside of its transaction
    await holding.query('begin')
    await holding.query('select 1 from amendments where id = $1 for update', [amendment])
    const asked = instance.ask('post', `/amendments/${amendment}/changes`, { ...author, body: change })
    expect(await cutWaiting()).toBe(1)
    const reply = await asked
    await holding.query('rollback')
    expect(reply.status, reply.text).toBe(503)
    expect(Number(reply.headers['retry-after'])).toBeGreaterThan(0)
    expect(await fingerprint(instance)).toEqual(before)
    const again = await instance.ask('post', `/amendments/${amendment}/changes`, { ...author, body: change })
    expect(again.status, again.text).toBe(201)
  })

  it('in the middle of publishing leaves the edition before', async () => {
    const amendment = await newAmendment(instance, author, 'Cut off while publishing')
    await addChanges(instance, author, amendment, await notedAgain(instance, ['Zn-I.1', 'Zn-I.2', 'Zn-I.3'], 'cut off'))
    await bringThrough(instance, author, reviewer, amendment)
    const before = await fingerprint(instance)
    const newest = await wholeEditions(instance)
    // the last thing publishing does is to write the edition's row, which waits for whoever reads the table under this lock
    await holding.query('begin')
    await holding.query('lock table editions in share mode')
    const asked = instance.ask('post', '/editions', { ...admin, body: { label: 'Never seen' } })
    expect(await cutWaiting()).toBe(1)
    const reply = await asked
    await holding.query('rollback')
    expect(reply.status, reply.text).toBe(503)
    expect(Number(reply.headers['retry-after'])).toBeGreaterThan(0)
    expect(await wholeEditions(instance)).toBe(newest)
    expect(await fingerprint(instance)).toEqual(before)
    const again = await instance.ask('post', '/editions', { ...admin, body: { label: 'Seen' } })
    expect(again.status, again.text).toBe(201)
    expect(await wholeEditions(instance)).toBe(newest + 1)
  })

  it('of all connections at once, the listening one too, is mended by itself, and caches do not go stale', async () => {
    const cut = await instance.query("select pg_terminate_backend(pid) from pg_stat_activity where application_name like 'lodeterm%' and datname = current_database() and pid <> pg_backend_pid()")
    expect(cut.length).toBeGreaterThan(0)
    // a request that comes in the same moment may meet a connection that does not know yet: it is told to come again
    const came: number[] = []
    await expect.poll(async () => {
      const { status } = await instance.ask('post', '/amendments', { ...author, body: { title: 'In the moment' } })
      came.push(status)
      return status
    }, { timeout: 10_000, interval: 100 }).toBe(201)
    expect(came.filter((status) => status !== 201 && status !== 503)).toEqual([])
    const amendment = await newAmendment(instance, author, 'After the cut')
    await addChanges(instance, author, amendment, await notedAgain(instance, ['Zn-I.4'], 'after the cut'))
    await bringThrough(instance, author, reviewer, amendment)
    const published = await instance.ask('post', '/editions', { ...admin, body: { label: 'After the cut' } })
    expect(published.status, published.text).toBe(201)
    expect((await instance.get('/levels/Zn-I.4')).json.data.note).toBe('after the cut')
  })
})

describe('writes that are refused', () => {
  it('leave the database byte for byte as it was', async () => {
    const amendment = await newAmendment(instance, author, 'Refused in every way')
    const [change, other] = await notedAgain(instance, ['Na-I.3', 'Na-I.4'], 'kept')
    await addChanges(instance, author, amendment, [change])
    const [row] = (await instance.get(`/amendments/${amendment}/changes`, author)).json.data as { id: string; etag: string }[]
    const { etag } = (await instance.get(`/amendments/${amendment}`, author)).json.data as { etag: string }
    const reader = await instance.signIn('reader')
    const at = `/amendments/${amendment}`
    const one = `${at}/changes/${row?.id}`
    const before = await fingerprint(instance)
    const refused: [number, () => Promise<{ status: number; text: string }>][] = [
      [400, () => instance.ask('post', `${at}/changes`, { ...author, body: { action: 'replace', level: 'Na-I.4', valuse: {} } })],
      [400, () => instance.ask('post', `${at}/changes`, { ...author, raw: '{', headers: { ...author.headers, 'content-type': 'application/json' } })],
      [401, () => instance.ask('post', `${at}/changes`, { body: other })],
      [401, () => instance.ask('post', `${at}/changes`, { key: 'ldt_no', body: other })],
      [403, () => instance.ask('post', `${at}/changes`, { ...reader, body: other })],
      [403, () => instance.ask('post', `${at}/changes`, { cookie: author.cookie ?? '', headers: { origin: 'https://elsewhere.example', 'sec-fetch-site': 'cross-site' }, body: other })],
      [403, () => instance.ask('post', '/editions', { ...author, body: { label: 'Not mine to publish' } })],
      [404, () => instance.ask('post', '/amendments/00000000-0000-4000-8000-000000000000/changes', { ...author, body: other })],
      [409, () => instance.ask('post', `${at}/changes`, { ...author, body: change })],
      [409, () => instance.ask('post', `${at}/accept`, { ...withTag(reviewer, etag), body: {} })],
      [409, () => instance.ask('post', '/editions', { ...admin, body: { label: 'Nothing to publish' } })],
      [412, () => instance.ask('put', one, { ...withTag(author, '"stale"'), body: change })],
      [412, () => instance.ask('post', `${at}/submit`, { ...withTag(author, '"stale"'), body: {} })],
      [415, () => instance.ask('post', `${at}/changes`, { ...author, raw: 'a=b', headers: { ...author.headers, 'content-type': 'application/x-www-form-urlencoded' } })],
      [428, () => instance.ask('put', one, { ...author, body: change })],
      [428, () => instance.ask('delete', one, author)],
    ]
    for (const [status, ask] of refused) {
      const reply = await ask()
      expect(reply.status, reply.text.slice(0, 300)).toBe(status)
    }
    expect(await fingerprint(instance)).toEqual(before)
  })

  it('a batch with one bad item writes none of it', async () => {
    const amendment = await newAmendment(instance, author, 'One bad item')
    const [good, bad] = await notedAgain(instance, ['Na-I.5', 'Na-I.6'], 'batch')
    const before = await fingerprint(instance)
    const reply = await instance.ask('post', `/amendments/${amendment}/changes/batch`, { ...author, body: { changes: [good, { ...(bad as object), change: '00000000-0000-4000-8000-000000000000', etag: '"none"' }] } })
    expect(reply.status, reply.text).toBe(404)
    expect(await fingerprint(instance)).toEqual(before)
  })
})
