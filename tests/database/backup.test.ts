import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { applicationUrl } from '@/db/client'
import { root } from '../../db/scripts/steps.mjs'
import { DENIED, GUARDED, refusal } from './connections'

const DATABASE = 'lodeterm_restored_test'
let folder = ''
let file = ''
let restored = ''

const node = (args: string[], env: NodeJS.ProcessEnv = process.env) => {
  const result = spawnSync(process.execPath, args, { cwd: root, encoding: 'utf8', env: { ...env, INIT_CWD: folder } })
  return { code: result.status, out: result.stdout.trim(), said: result.stderr }
}
const rowsOf = async (address: string, text: string) => {
  const client = new pg.Client({ connectionString: address })
  await client.connect()
  try {
    return (await client.query(text)).rows
  } finally {
    await client.end()
  }
}
const owner = () => process.env.DATABASE_URL ?? ''

beforeAll(() => {
  folder = fs.mkdtempSync(path.join(os.tmpdir(), 'lodeterm-backup-'))
  file = path.join(folder, 'table.dump')
  const made = node(['db/scripts/pg.mjs', 'fresh', DATABASE], { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' })
  expect(made.code, made.said).toBe(0)
  restored = made.out
})
afterAll(() => fs.rmSync(folder, { recursive: true, force: true }))

describe('npm run backup', () => {
  it('writes one file, for its owner alone, and never over another', () => {
    const first = node(['db/scripts/backup.mjs', 'table.dump'])
    expect(first.code, first.said).toBe(0)
    expect(first.out).toBe(file)
    expect(fs.statSync(file).mode & 0o077).toBe(0)
    const bytes = fs.readFileSync(file)
    expect(node(['db/scripts/backup.mjs', 'table.dump'])).toMatchObject({ code: 1, out: '' })
    expect(fs.readFileSync(file).equals(bytes)).toBe(true)
    expect(fs.readdirSync(folder)).toEqual(['table.dump'])
  })
})

describe('npm run restore', () => {
  it('brings every edition back with its checksum, and every count with it', async () => {
    const done = node(['db/scripts/restore.mjs', file, '--database', DATABASE])
    expect(done.code, done.said).toBe(0)
    expect(done.said).toContain('edition 1: ')
    expect(done.said).toContain('agrees')
    const sums = 'select number, checksum, counts from editions order by number'
    expect(await rowsOf(restored, sums)).toEqual(await rowsOf(owner(), sums))
    for (const table of ['users', 'level_revisions', 'source_revisions', 'audit_events', 'drizzle.__drizzle_migrations']) {
      const count = `select count(*)::int as n from ${table}`
      expect(await rowsOf(restored, count), table).toEqual(await rowsOf(owner(), count))
    }
  })

  it('with the rights and guards that it had', async () => {
    const app = new pg.Client({ connectionString: applicationUrl({ databaseUrl: restored, databaseAppUrl: undefined }) })
    const client = new pg.Client({ connectionString: restored })
    await app.connect()
    await client.connect()
    try {
      await app.query('begin')
      await client.query('begin')
      expect(await refusal(app, "update level_revisions set note = 'x'")).toMatchObject({ code: DENIED })
      expect(await refusal(app, "update level_revisions set published_until = 2 where level_id = 'Na-I.3'")).toBeNull()
      expect(await refusal(client, 'delete from level_revisions')).toMatchObject({ code: GUARDED })
      expect(await refusal(client, "update audit_events set action = 'x'")).toMatchObject({ code: GUARDED })
    } finally {
      await app.end()
      await client.end()
    }
  })

  it('refuses a database that holds something, unless it is told that this is lost', async () => {
    const again = node(['db/scripts/restore.mjs', file, '--database', DATABASE])
    expect(again.code).toBe(1)
    expect(again.said).toContain('not empty')
    const replaced = node(['db/scripts/restore.mjs', file, '--database', DATABASE, '--replace'])
    expect(replaced.code, replaced.said).toBe(0)
    expect(await rowsOf(restored, 'select count(*)::int as n from editions')).toEqual([{ n: 1 }])
  })

  it('keeps what was there where the file is no backup, or only half of one', async () => {
    fs.writeFileSync(path.join(folder, 'half.dump'), fs.readFileSync(file).subarray(0, Math.floor(fs.statSync(file).size / 2)))
    fs.writeFileSync(path.join(folder, 'text.dump'), 'no backup')
    for (const name of ['half.dump', 'text.dump']) {
      expect(node(['db/scripts/restore.mjs', name, '--database', DATABASE, '--replace']).code, name).toBe(1)
      expect(await rowsOf(restored, 'select count(*)::int as n from editions'), name).toEqual([{ n: 1 }])
    }
    expect(node(['db/scripts/restore.mjs', 'nothing.dump']).code).toBe(1)
  })
})

describe('npm run verify-edition', () => {
  const verify = (args: string[], env: NodeJS.ProcessEnv = { ...process.env, DATABASE_URL: restored, DATABASE_APP_URL: '' }) => node(['--import', 'tsx', 'lib/curation/cli/verify-edition.ts', ...args], env)

  it('agrees with what is stored, and differs as soon as a value does', async () => {
    expect(verify(['1', '--database'])).toMatchObject({ code: 0, out: expect.stringContaining('agrees') })
    // as nobody can who does not own the table and switch its guards off
    await rowsOf(restored, "alter table level_revisions disable trigger user; update level_revisions set note = 'changed' where level_id = 'Na-I.3'; alter table level_revisions enable trigger user")
    expect(verify(['1', '--database'])).toMatchObject({ code: 1, out: expect.stringContaining('DIFFERS') })
  })

  it('says what it cannot do', () => {
    expect(verify([])).toMatchObject({ code: 2 })
    expect(verify(['x'])).toMatchObject({ code: 2 })
    expect(verify(['7', '--database'])).toMatchObject({ code: 2, said: expect.stringContaining('no edition 7') })
    expect(verify(['1', '--url', 'http://127.0.0.1:9'])).toMatchObject({ code: 2 })
  })
})
