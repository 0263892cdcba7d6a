import { spawnSync } from 'node:child_process'
import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { applicationUrl, type Db } from '@/db/client'
import * as schema from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { mintKey } from '@/lib/access/keys'
import { createAmendment } from '@/lib/curation/amendments'
import { readImport, startImport } from '@/lib/curation/import'
import type { ImportUpload } from '@/openapi/schemas/import'
import { migrate, root, seed } from '../../db/scripts/steps.mjs'

const DATABASE = 'lodeterm_imports_test'
let pool: pg.Pool
let db: Db
let owner: pg.Client
let holder: pg.Client
let curator = ''
let n = 0

beforeAll(async () => {
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', DATABASE], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  const address = made.stdout.trim()
  const env = { ...process.env, DATABASE_URL: address, DATABASE_APP_URL: '', DEMO: '1', DEMO_ACCOUNTS_FILE: `/tmp/lodeterm-imports-${process.pid}.json` }
  await migrate(env)
  await seed(env)
  pool = new pg.Pool({ connectionString: applicationUrl({ databaseUrl: address, databaseAppUrl: undefined }), max: 4 })
  db = drizzle(pool, { schema })
  owner = new pg.Client({ connectionString: address })
  holder = new pg.Client({ connectionString: address })
  await Promise.all([owner.connect(), holder.connect()])
  curator = (await owner.query<{ id: string }>("select id from users where email = 'curator@lodeterm.example'")).rows[0]?.id ?? ''
})
afterAll(async () => {
  await pool.end()
  await Promise.all([owner.end(), holder.end()])
})

const upload = () => ({ file: { name: 'levels.csv', mediaType: null, bytes: Buffer.from(`id;note\nNa-I.3;by import ${n += 1}\n`) } }) as ImportUpload

async function withKey(): Promise<{ acting: Acting; key: string }> {
  const { prefix, sha256 } = mintKey()
  const key = (await owner.query<{ id: string }>("insert into api_keys (user_id, name, prefix, sha256, role) values ($1, 'k', $2, $3, 'curator') returning id", [curator, prefix, sha256])).rows[0]?.id ?? ''
  return { key, acting: { caller: { kind: 'key', role: 'curator', userId: curator, keyId: key, name: 'k', expiresAt: null }, ip: null, requestId: null } }
}

/** Runs an import, doing `meanwhile` before it can write. */
async function during(meanwhile: (key: string) => Promise<unknown>) {
  const { acting, key } = await withKey()
  const { id: amendment } = await createAmendment(db, acting, { title: `Import ${n}` })
  const { id, finished } = await startImport(db, acting, amendment, upload(), false, () => undefined)
  await holder.query('begin')
  await holder.query('select from amendments where id = $1 for update', [amendment])
  await meanwhile(key)
  await holder.query('commit')
  await finished
  const { rows } = await owner.query('select id from amendment_changes where amendment_id = $1', [amendment])
  return { end: await readImport(db, amendment, id), changes: rows.length }
}

describe('an import that is running', () => {
  it('is written where nothing happens', async () => {
    expect(await during(() => Promise.resolve())).toMatchObject({ end: { state: 'done' }, changes: 1 })
  })

  it.each([
    ['whose key is revoked', (key: string) => owner.query('update api_keys set revoked_at = now() where id = $1', [key]), /key .* revoked/],
    ['whose key expires', (key: string) => owner.query('update api_keys set expires_at = now() where id = $1', [key]), /key .* expired/],
    ['whose author is a reader now', () => owner.query("update users set role = 'reader' where id = $1", [curator]), /role reader now/],
    ['whose author is closed', () => owner.query("update users set role = 'curator', active = false where id = $1", [curator]), /account .* closed/],
  ] as const)('%s writes nothing, and says so', async (_, meanwhile, words) => {
    const { end, changes } = await during(meanwhile)
    expect([end.state, changes]).toEqual(['refused', 0])
    expect(end.problems).toEqual([{ code: 'standing_lost', detail: expect.stringMatching(words) as string }])
    await owner.query("update users set role = 'curator', active = true where id = $1", [curator])
  })

  it('that fails as none should is told of, with its identifier', async () => {
    const { acting } = await withKey()
    const { id: amendment } = await createAmendment(db, acting, { title: 'Fails' })
    const told: [string, unknown][] = []
    const broken = upload()
    Object.defineProperty(broken, 'mapping', { get: () => { throw new Error('a fault') } })
    const { id, finished } = await startImport(db, acting, amendment, broken, false, (failed, error) => told.push([failed, error]))
    await expect(finished).rejects.toThrow('a fault')
    expect(told).toEqual([[id, expect.objectContaining({ message: 'a fault' })]])
    expect(await readImport(db, amendment, id)).toMatchObject({ state: 'failed' })
  })
})
