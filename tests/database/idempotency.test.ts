import { spawnSync } from 'node:child_process'
import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { applicationUrl, type Db } from '@/db/client'
import * as schema from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { type Begun, type HeldClaim, idempotencyStore } from '@/lib/access/idempotency'
import { migrate, root } from '../../db/scripts/steps.mjs'

const DATABASE = 'lodeterm_idempotency_test'
let pool: pg.Pool
let db: Db
let owner: pg.Client
let userId = ''
let n = 0
const store = idempotencyStore(() => db)
const wanted = () => ({ userId, operation: 'createThing', key: `key-${n}`, requestSha256: 'the same' })
const acting = (claim: HeldClaim): Acting => ({ caller: { kind: 'session', role: 'admin', userId, sessionId: null as never, name: 'n' }, ip: null, requestId: `request-${n}`, claim })
const ENTRY = { action: 'thing.create', subjectKind: 'thing', subjectId: 't' }
/** What a domain function does: its writes and its audit row in one transaction. */
const effect = (claim: HeldClaim) => db.transaction((tx) => recordAudit(tx, acting(claim), ENTRY))
const effects = async () => (await owner.query('select id from audit_events where request_id = $1', [`request-${n}`])).rowCount
const held = (begun: Begun): HeldClaim => {
  if (begun.state !== 'new') throw new Error(`it is ${begun.state}`)
  return begun.claim
}
const later = (minutes: number) => owner.query('update idempotency_keys set created_at = created_at - $1 * interval \'1 minute\' where key = $2', [minutes, `key-${n}`])

beforeAll(async () => {
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', DATABASE], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  const address = made.stdout.trim()
  await migrate({ ...process.env, DATABASE_URL: address, DATABASE_APP_URL: '' })
  pool = new pg.Pool({ connectionString: applicationUrl({ databaseUrl: address, databaseAppUrl: undefined }), max: 8 })
  db = drizzle(pool, { schema })
  owner = new pg.Client({ connectionString: address })
  await owner.connect()
  userId = (await owner.query<{ id: string }>("insert into users (email, name, role) values ('a@b.example', 'A', 'admin') returning id")).rows[0]?.id ?? ''
})
afterAll(async () => {
  await pool.end()
  await owner.end()
})
beforeEach(() => void (n += 1))

describe('an Idempotency-Key', () => {
  it('is never performed again where the process was killed between effect and answer', async () => {
    await effect(held(await store.begin(wanted())))
    await later(11)
    expect((await store.begin(wanted())).state).toBe('lost')
    await later(600)
    expect((await store.begin(wanted())).state).toBe('lost')
    expect(await effects()).toBe(1)
  })

  it('is taken over where the process was killed before its effect, and then the first has none', async () => {
    const first = held(await store.begin(wanted()))
    expect((await store.begin(wanted())).state).toBe('running')
    await later(11)
    const second = held(await store.begin(wanted()))
    // the first was slow, not dead
    await expect(effect({ ...first, claimedAt: new Date(first.claimedAt.getTime() - 11 * 60_000) })).rejects.toMatchObject({ code: 'idempotency_running' })
    await effect(second)
    expect(await effects()).toBe(1)
  })

  it('stays claimed where the acknowledgement of the commit was lost', async () => {
    const claim = held(await store.begin(wanted()))
    await effect(claim)
    expect(await store.abandon(claim)).toBe(false)
    expect((await store.begin(wanted())).state).toBe('lost')
  })

  it('is free again after an effect that was taken back', async () => {
    const claim = held(await store.begin(wanted()))
    await db.transaction(async (tx) => {
      await recordAudit(tx, acting(claim), ENTRY)
      throw new Error('refused')
    }).catch(() => undefined)
    expect(await store.abandon(claim)).toBe(true)
    expect((await store.begin(wanted())).state).toBe('new')
    expect(await effects()).toBe(0)
  })

  it('waits for a commit that is under way before it is given back or taken over', async () => {
    const claim = held(await store.begin(wanted()))
    let abandoned: Promise<boolean> | undefined
    await db.transaction(async (tx) => {
      await recordAudit(tx, acting(claim), ENTRY)
      abandoned = store.abandon(claim)
      await new Promise((done) => setTimeout(done, 100))
    })
    expect(await abandoned).toBe(false)
    expect(await effects()).toBe(1)
  })

  it('gives the answer that comes a moment after the effect, and is claimed by one of many', async () => {
    const begun = await Promise.all(Array.from({ length: 6 }, () => store.begin(wanted())))
    expect(begun.map(({ state }) => state).sort()).toEqual(['new', ...Array.from({ length: 5 }, () => 'running')])
    const claim = held(begun.find(({ state }) => state === 'new') ?? { state: 'running' })
    await effect(claim)
    const again = store.begin(wanted())
    await new Promise((done) => setTimeout(done, 200))
    await store.finish(claim, { status: 201, headers: {}, body: { data: 1 } })
    expect(await again).toMatchObject({ state: 'stored', answer: { status: 201, body: { data: 1 } } })
  })
})
