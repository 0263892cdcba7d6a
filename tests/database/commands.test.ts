import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { applicationUrl } from '@/db/client'
import { verifyPassword } from '@/lib/access/passwords'
import { node as start, root } from '../../db/scripts/steps.mjs'

// On a database of its own: other tests sign in with the demo accounts of the common one.
const DATABASE = 'lodeterm_commands_test'
let folder = ''
let db: pg.Client
let environment = process.env

const node = (args: string[], env = environment) => {
  const result = spawnSync(process.execPath, args, { cwd: root, encoding: 'utf8', env })
  return { code: result.status, out: result.stdout.trim(), said: result.stderr }
}
const typescript = (file: string, args: string[] = [], env: Record<string, string> = {}) => node(['--import', 'tsx', file, ...args], { ...environment, ...env })
const people = async () => (await db.query('select email, role, active, demo, password_hash from users where password_hash is not null order by email')).rows

beforeAll(async () => {
  folder = fs.mkdtempSync(path.join(os.tmpdir(), 'lodeterm-commands-'))
  const rest = { ...process.env, DATABASE_APP_URL: '', DEMO: '', HOST: '' }
  const made = node(['db/scripts/pg.mjs', 'fresh', DATABASE], rest)
  expect(made.code, made.said).toBe(0)
  environment = { ...rest, DATABASE_URL: made.out, DEMO_ACCOUNTS_FILE: path.join(folder, 'demo.json') }
  const migrated = node(['db/scripts/migrate.mjs'])
  expect(migrated.code, migrated.said).toBe(0)
  db = new pg.Client({ connectionString: applicationUrl({ databaseUrl: made.out, databaseAppUrl: undefined }) })
  await db.connect()
})
afterAll(async () => {
  await db.end()
  fs.rmSync(folder, { recursive: true, force: true })
})

describe('with nothing but the address of a database', () => {
  it('works as lodeterm_app, and stays it', async () => {
    await db.query('reset role')
    expect((await db.query('select current_user as name')).rows).toEqual([{ name: 'lodeterm_app' }])
    await expect(db.query('create table mine (x int)')).rejects.toMatchObject({ code: '42501' })
  })

  it('migrates again without a change, several at once', async () => {
    const before = (await db.query('select count(*)::int as n from drizzle.__drizzle_migrations')).rows
    const env = { DATABASE_URL: environment.DATABASE_URL ?? '', DATABASE_APP_URL: '' }
    expect(await Promise.all([1, 2, 3].map(() => start(['db/scripts/migrate.mjs'], { env, capture: true })))).toEqual(['', '', ''])
    expect((await db.query('select count(*)::int as n from drizzle.__drizzle_migrations')).rows).toEqual(before)
  })
})

describe('npm run key', () => {
  it('makes a key, prints it once, and keeps only its SHA-256', async () => {
    const { code, out } = typescript('lib/access/cli/key.ts', ['--role', 'reader', '--name', 'nightly fit', '--expires', '2100-01-01T00:00:00Z'])
    expect(code).toBe(0)
    expect(out).toMatch(/^ldt_[0-9A-Za-z]+$/)
    const { rows } = await db.query("select name, role, sha256, expires_at from api_keys where name = 'nightly fit'")
    expect(rows).toEqual([{ name: 'nightly fit', role: 'reader', sha256: createHash('sha256').update(out).digest(), expires_at: new Date('2100-01-01T00:00:00Z') }])
  })

  it('says what is wrong, all of it, and makes none', async () => {
    const { code, out, said } = typescript('lib/access/cli/key.ts', ['--role', 'owner', '--expires', 'soon'])
    expect([code, out]).toEqual([2, ''])
    for (const flag of ['--role', '--name', '--expires']) expect(said).toContain(flag)
    const nobody = typescript('lib/access/cli/key.ts', ['--role', 'curator', '--name', 'desk'])
    expect([nobody.code, nobody.out]).toEqual([2, ''])
    expect(nobody.said).toContain('--owner')
    expect((await db.query('select count(*)::int as n from api_keys')).rows).toEqual([{ n: 1 }])
  })
})

describe('demo accounts', () => {
  it('are not made beyond loopback', async () => {
    expect(typescript('seeds/run.ts', [], { HOST: '0.0.0.0' })).toMatchObject({ code: 0, out: '' })
    expect(typescript('seeds/run.ts', [], { DEMO: '0' })).toMatchObject({ code: 0, out: '' })
    expect(await people()).toEqual([])
  })

  it('are made and printed at the first start on loopback, and only then', async () => {
    const first = typescript('seeds/run.ts')
    expect(first.code).toBe(0)
    const made = await people()
    expect(made.map(({ role, active, demo }) => ({ role, active, demo }))).toEqual(['admin', 'curator', 'reader', 'curator'].map((role) => ({ role, active: true, demo: true })))
    for (const { email, password_hash } of made) {
      const password = new RegExp(`${email}\\s+(\\S+)`).exec(first.out)?.[1] ?? ''
      expect(email).toMatch(/\.example$/)
      expect(await verifyPassword(password_hash, password)).toBe(true)
    }
    expect(typescript('seeds/run.ts')).toMatchObject({ code: 0, out: '' })
    expect(await people()).toEqual(made)
  })

  it('are printed again from a file that others cannot read', async () => {
    expect(fs.statSync(path.join(folder, 'demo.json')).mode & 0o077).toBe(0)
    const again = typescript('seeds/demo-accounts.ts')
    expect(again.code).toBe(0)
    for (const { email } of await people()) expect(again.out).toContain(email)
  })

  it('get new passwords when that file is lost', async () => {
    const before = await people()
    fs.rmSync(path.join(folder, 'demo.json'))
    const { out, said } = typescript('seeds/demo-accounts.ts')
    expect(said).toContain('new passwords')
    const [admin] = await people()
    expect(admin.password_hash).not.toBe(before[0].password_hash)
    expect(await verifyPassword(admin.password_hash, /admin@\S+\s+(\S+)/.exec(out)?.[1] ?? '')).toBe(true)
  })

  it('own the keys that speak for them, none above its owner', async () => {
    const key = (role: string, owner: string) => typescript('lib/access/cli/key.ts', ['--role', role, '--name', `of ${owner}`, '--owner', owner])
    expect(key('curator', 'Curator@lodeterm.example')).toMatchObject({ code: 0 })
    const { rows } = await db.query("select u.email, k.role from api_keys k join users u on u.id = k.user_id where k.name = 'of Curator@lodeterm.example'")
    expect(rows).toEqual([{ email: 'curator@lodeterm.example', role: 'curator' }])
    for (const [role, owner] of [['admin', 'curator@lodeterm.example'], ['curator', 'nobody@lodeterm.example'], ['reader', 'command-line@localhost.invalid']] as const) {
      const refused = key(role, owner)
      expect([refused.code, refused.out]).toEqual([2, ''])
      expect(refused.said).toContain(`--owner: `)
    }
  })

  it('are closed as soon as the instance leaves loopback, and open again with DEMO=1', async () => {
    const open = async () => (await people()).map(({ active }) => active)
    typescript('seeds/run.ts', [], { HOST: '0.0.0.0' })
    expect(await open()).toEqual([false, false, false, false])
    typescript('seeds/run.ts', [], { HOST: '0.0.0.0', DEMO: '1' })
    expect(await open()).toEqual([true, true, true, true])
  })

  it('stay closed where a person closed them, and rise in version where the setting turns them', async () => {
    const read = async () => (await db.query("select email, active, closed_by_setting as marked, version from users where demo and role <> 'reader' order by email")).rows
    await db.query("update users set active = false, version = version + 1 where email = 'admin@lodeterm.example'")
    const before = await read()
    typescript('seeds/run.ts', [], { HOST: '0.0.0.0' })
    expect((await read()).map(({ active, marked }) => [active, marked])).toEqual([[false, false], [false, true], [false, true]])
    typescript('seeds/run.ts')
    const after = await read()
    expect(after.map(({ active, marked }) => [active, marked])).toEqual([[false, false], [true, false], [true, false]])
    expect(after.map(({ version }, at) => version - before[at].version)).toEqual([0, 2, 2])
    expect(typescript('lib/access/cli/key.ts', ['--role', 'admin', '--name', 'x', '--owner', 'admin@lodeterm.example'])).toMatchObject({ code: 2, out: '' })
  })
})
