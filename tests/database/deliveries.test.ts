import { spawnSync } from 'node:child_process'
import { once } from 'node:events'
import http from 'node:http'
import type { AddressInfo } from 'node:net'
import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { applicationUrl, type Db } from '@/db/client'
import * as schema from '@/db/schema'
import { migrate, root } from '../../db/scripts/steps.mjs'

const DATABASE = 'lodeterm_deliveries_test'
let pool: pg.Pool
let db: Db
let owner: pg.Client
let send: (db: Db) => Promise<number>
const servers: http.Server[] = []
const inside: http.ServerResponse[] = []
let most = 0

async function target(answer: (response: http.ServerResponse) => void): Promise<string> {
  const server = http.createServer((_, response) => answer(response)).listen(0, '127.0.0.1')
  await once(server, 'listening')
  servers.push(server)
  return `http://127.0.0.1:${(server.address() as AddressInfo).port}/`
}

async function webhook(userId: string, url: string, deliveries: number): Promise<string> {
  const { rows: [hook] } = await owner.query<{ id: string }>("insert into webhooks (owner, name, url, secret, events) values ($1, 'w', $2, 's', '[\"edition.published\"]') returning id", [userId, url])
  // older than those of others
  for (let i = 0; i < deliveries; i += 1) await owner.query("insert into webhook_deliveries (webhook_id, event, body, next_attempt_at) values ($1, 'edition.published', '{}', now() - $2 * interval '1 second')", [hook?.id, deliveries])
  return hook?.id ?? ''
}

beforeAll(async () => {
  vi.stubEnv('WEBHOOK_PRIVATE_TARGETS', '1')
  send = (await import('@/lib/notices/deliveries')).sendDeliveries
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', DATABASE], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  const address = made.stdout.trim()
  await migrate({ ...process.env, DATABASE_URL: address, DATABASE_APP_URL: '' })
  pool = new pg.Pool({ connectionString: applicationUrl({ databaseUrl: address, databaseAppUrl: undefined }), max: 4 })
  db = drizzle(pool, { schema })
  owner = new pg.Client({ connectionString: address })
  await owner.connect()
})
afterAll(async () => {
  for (const server of servers) server.close()
  await pool.end()
  await owner.end()
  vi.unstubAllEnvs()
})

describe('deliveries', () => {
  it('to one slow target hold up no other, and come to it two at a time', async () => {
    const { rows: [user] } = await owner.query<{ id: string }>("insert into users (email, name, role) values ('a@b.example', 'A', 'admin') returning id")
    const slow = await webhook(user?.id ?? '', await target((response) => {
      inside.push(response)
      most = Math.max(most, inside.length)
    }), 12)
    const quick = await webhook(user?.id ?? '', await target((response) => response.end()), 3)
    const delivered = async (id: string) => (await owner.query('select from webhook_deliveries where webhook_id = $1 and delivered_at is not null', [id])).rowCount
    const begun = Date.now()
    const sent = send(db)
    while ((await delivered(quick)) !== 3 && Date.now() - begun < 8000) await new Promise((done) => setTimeout(done, 50))
    expect([await delivered(quick), await delivered(slow)]).toEqual([3, 0])
    expect(inside).toHaveLength(2)
    // one that comes now goes out as well
    await owner.query("insert into webhook_deliveries (webhook_id, event, body) values ($1, 'edition.published', '{}')", [quick])
    while ((await delivered(quick)) !== 4 && Date.now() - begun < 9000) await new Promise((done) => setTimeout(done, 50))
    expect(await delivered(quick)).toBe(4)
    const answering = setInterval(() => { for (const response of inside.splice(0)) response.end() }, 20)
    expect(await sent).toBe(16)
    clearInterval(answering)
    expect(await delivered(slow)).toBe(12)
    expect(most).toBe(2)
  })
})
