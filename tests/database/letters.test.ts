import { spawnSync } from 'node:child_process'
import os from 'node:os'
import path from 'node:path'
import { eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeDb, type Db, getDb } from '@/db/client'
import { follows, users } from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { createAmendment, readAmendment } from '@/lib/curation/amendments'
import { addChange } from '@/lib/curation/changes'
import { publishEdition } from '@/lib/curation/publish'
import { acceptAmendment, submitAmendment } from '@/lib/curation/reviews'
import { loadPublishedTable } from '@/lib/curation/table'
import { writeValues } from '@/lib/curation/values'
import { editionLetters } from '@/lib/notices/edition-letters'
import type { ChangeRequest } from '@/openapi/schemas/change'
import { migrate, root, seed } from '../../db/scripts/steps.mjs'

// On a database of its own: it publishes editions.
const DATABASE = 'lodeterm_letters_test'
let db: Db
let people: { id: string; email: string; role: string }[] = []
const before = { url: process.env.DATABASE_URL, app: process.env.DATABASE_APP_URL }

beforeAll(async () => {
  const made = spawnSync(process.execPath, ['db/scripts/pg.mjs', 'fresh', DATABASE], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: '', DATABASE_APP_URL: '' } })
  expect(made.status, made.stderr).toBe(0)
  const env = { ...process.env, DATABASE_URL: made.stdout.trim(), DATABASE_APP_URL: '', DEMO: '1', DEMO_ACCOUNTS_FILE: path.join(os.tmpdir(), `lodeterm-letters-${process.pid}.json`) }
  await migrate(env)
  await seed(env)
  // the letters read snapshots and comparisons by the application's own connection
  process.env.DATABASE_URL = env.DATABASE_URL
  delete process.env.DATABASE_APP_URL
  db = getDb()
  people = await db.select({ id: users.id, email: users.email, role: users.role }).from(users).orderBy(users.email)
})
afterAll(async () => {
  await closeDb()
  process.env.DATABASE_URL = before.url
  if (before.app !== undefined) process.env.DATABASE_APP_URL = before.app
})

const named = (start: string) => {
  const found = people.find(({ email }) => email.startsWith(`${start}@`))
  if (found === undefined) throw new Error(`there is no ${start}`)
  return found
}
const as = (start: string): Acting => ({ caller: { kind: 'session', userId: named(start).id, role: named(start).role, sessionId: null } as never, ip: '127.0.0.1', requestId: null })

async function publish(edition: number, title: string, changes: readonly ChangeRequest[]): Promise<void> {
  const { id } = await createAmendment(db, as('curator'), { title })
  for (const change of changes) await addChange(db, as('curator'), id, change)
  const step = async (start: string) => ({ acting: as(start), id, given: { comment: 'seen' }, ifMatch: (await readAmendment(db, id, as(start).caller)).etag }) as never
  await submitAmendment(db, await step('curator'))
  await acceptAmendment(db, await step('second.curator'))
  expect(await publishEdition(db, as('admin'), { label: `edition ${edition}` })).toBe(edition)
}

describe('letters about an edition', () => {
  it('go once to each who wrote, reviewed or follows what it changed, with every value', async () => {
    const table = await loadPublishedTable(db, 1, ['Na-I'])
    const level = writeValues('level', table.levels.get('Na-I.3')?.row as never)
    const hyperfine = [...table.hyperfine.keys()].find((subject) => subject.startsWith('Na-I.3/')) ?? ''
    const constants = writeValues('hyperfine', table.hyperfine.get(hyperfine)?.row as never)
    const isotope = writeValues('isotope', table.isotopes.get('Na-I/23')?.row as never)
    const [mass] = hyperfine.split('/').slice(1).map(Number)
    await db.insert(follows).values([
      { userId: named('reader').id, kind: 'level', subject: 'Na-I.3' }, { userId: named('reader').id, kind: 'species', subject: 'Na-I' },
      { userId: named('curator').id, kind: 'line', subject: 'Na-I.1~Na-I.3' }, { userId: named('admin').id, kind: 'species', subject: 'Mg-I' },
    ])
    await publish(2, 'Sodium anew', [
      { action: 'replace', level: 'Na-I.3', values: { ...level, note: 'seen anew', repeat_index: 1 } as never, comment: 'meant' },
      { kind: 'hyperfine', action: 'replace', level: 'Na-I.3', mass_number: mass, values: { ...constants, a_mhz: 18.6 } as never, comment: 'meant' },
      { kind: 'isotope', action: 'replace', species: 'Na-I', mass_number: 23, values: { ...isotope, note: 'weighed again' } as never, comment: 'meant' },
    ])
    const letters = await editionLetters(db, { edition: 2, label: 'edition 2', since: 1 })
    expect(letters.map(({ to }) => to.split('@')[0]).sort()).toEqual(['curator', 'reader', 'second.curator'])
    const textTo = (start: string): string => letters.find(({ to }) => to.startsWith(`${start}@`))?.text ?? ''
    const subjectTo = (start: string): string => letters.find(({ to }) => to.startsWith(`${start}@`))?.subject ?? ''
    for (const start of ['reader', 'curator']) {
      expect(textTo(start)).toContain('note: none -> seen anew')
      expect(textTo(start)).toMatch(/hyperfine constants of isotope 23, A: [\d.]+ MHz -> 18\.6 MHz/)
    }
    expect(textTo('reader')).toContain('isotope 23, note: none -> weighed again')
    expect(textTo('reader')).not.toContain('amendment')
    expect(subjectTo('curator')).toBe('Edition 2 changes Na-I.1~Na-I.3, and holds your amendment "Sodium anew"')
    expect(subjectTo('second.curator')).toBe('The amendment "Sodium anew" is published in edition 2')
    expect(textTo('second.curator')).toContain('which you reviewed, is published in edition 2')
  })

  it('leave out whoever cannot be reached', async () => {
    await db.update(users).set({ active: false }).where(eq(users.id, named('second.curator').id))
    expect((await editionLetters(db, { edition: 2, label: 'edition 2', since: 1 })).map(({ to }) => to.split('@')[0]).sort()).toEqual(['curator', 'reader'])
  })
})
