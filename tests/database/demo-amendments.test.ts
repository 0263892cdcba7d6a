import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { migrate, root, seed } from '../../db/scripts/steps.mjs'

// On a database of its own, since other tests begin without amendments.
let db: pg.Pool
let env: Record<string, string>
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'lodeterm-demo-'))

beforeAll(async () => {
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', 'lodeterm_demo_test'], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  env = { DATABASE_URL: made.stdout.trim(), DATABASE_APP_URL: '', DEMO: '1', DEMO_ACCOUNTS_FILE: path.join(folder, 'accounts.json') }
  await migrate(env)
  db = new pg.Pool({ connectionString: env.DATABASE_URL, max: 1 })
})
afterAll(async () => {
  await db.end()
  fs.rmSync(folder, { recursive: true, force: true })
})

const made = async () => (await db.query(`
  select a.title, a.note, a.state, u.email,
    (select array_agg(distinct f ->> 'severity') from amendment_changes c, jsonb_array_elements(c.findings) f where c.amendment_id = a.id) severities
  from amendments a join users u on u.id = a.author order by a.created_at`)).rows

describe('demo amendments', () => {
  it('are made at a first start that asks for them, once, and say that they are invented', async () => {
    await seed({ ...env, DEMO_AMENDMENTS: '1' })
    const first = await made()
    expect(first).toMatchObject([
      { state: 'draft', email: 'curator@lodeterm.example', severities: ['warning'] },
      { state: 'in_review', email: 'second.curator@lodeterm.example', severities: ['warning'] },
    ])
    for (const { title, note } of first) expect(`${title} ${note}`).toMatch(/^Demo, invented: .*nobody measured/)
    const { rows } = await db.query("select kind, payload ->> 'title' title from notice_events")
    expect(rows).toEqual([{ kind: 'review.asked', title: first[1].title }])
    await seed({ ...env, DEMO_AMENDMENTS: '1' })
    expect(await made()).toEqual(first)
  })
})
