import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { expect } from 'vitest'
import { verifyEdition } from '@/db/edition-content'
import * as schema from '@/db/schema'
import type { Sending } from '../api/helpers/client'
import type { Instance } from '../support/instance'

export type Signed = Pick<Sending, 'cookie' | 'headers'>

/** Small and seeded, so that a failure can be run again (mulberry32, public domain). */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
}

export const wait = (milliseconds: number): Promise<void> => new Promise((done) => setTimeout(done, milliseconds))

export const withTag = (signed: Signed, etag: string, more: Record<string, string> = {}): Signed => ({ ...signed, headers: { ...signed.headers, 'if-match': etag, ...more } })

export async function newAmendment(instance: Instance, signed: Signed, title: string): Promise<string> {
  const reply = await instance.ask('post', '/amendments', { ...signed, body: { title } })
  expect(reply.status, reply.text).toBe(201)
  return reply.json.data.id as string
}

/** So many at once as a person's browser would ask, so that what is tested is the kill and not a full queue for connections. */
const AT_ONCE = 12

/** Replacements of levels by themselves with another note, from what the table says of them. */
export async function notedAgain(instance: Instance, levels: readonly string[], note: string): Promise<unknown[]> {
  const changes: unknown[] = []
  for (let from = 0; from < levels.length; from += AT_ONCE) {
    changes.push(...await Promise.all(levels.slice(from, from + AT_ONCE).map(async (level) => {
      const reply = await instance.get(`/levels/${level}/values`)
      expect(reply.status, reply.text.slice(0, 500)).toBe(200)
      return { action: 'replace', level, values: { ...(reply.json.data as { values: Record<string, unknown> }).values, note } }
    })))
  }
  return changes
}

export async function addChanges(instance: Instance, signed: Signed, amendment: string, changes: unknown[]): Promise<void> {
  const reply = await instance.ask('post', `/amendments/${amendment}/changes/batch`, { ...signed, body: { changes } })
  expect(reply.status, reply.text.slice(0, 500)).toBe(200)
}

/** Asks one step of the way (submit, accept, return, withdraw) on the version there is now. */
export async function step(instance: Instance, signed: Signed, amendment: string, verb: string): Promise<void> {
  const { etag } = (await instance.get(`/amendments/${amendment}`, signed)).json.data as { etag: string }
  const reply = await instance.ask('post', `/amendments/${amendment}/${verb}`, { ...withTag(signed, etag), body: { comment: 'invented for a test' } })
  expect(reply.status, reply.text.slice(0, 500)).toBe(200)
}

/** Submitted by one curator and accepted by the other. */
export async function bringThrough(instance: Instance, author: Signed, reviewer: Signed, amendment: string): Promise<void> {
  await step(instance, author, amendment, 'submit')
  await step(instance, reviewer, amendment, 'accept')
}

const REVISIONS = ['species_revisions', 'isotope_revisions', 'source_revisions', 'level_revisions', 'measured_g_revisions', 'hyperfine_revisions']

/** How many editions there are, after making sure that each of them is whole and nothing stands outside of them. */
export async function wholeEditions(instance: Instance): Promise<number> {
  const numbers = (await instance.query<{ number: number }>('select number from editions order by number')).map((row) => row.number)
  expect(numbers).toEqual(numbers.map((_, index) => index + 1))
  const newest = numbers.length
  const pool = new pg.Pool({ connectionString: instance.env.DATABASE_URL, max: 1 })
  try {
    for (const n of numbers) {
      const sums = await verifyEdition(drizzle(pool, { schema }), n)
      expect(sums?.computed, `checksum of edition ${n}`).toBe(sums?.stored)
    }
  } finally {
    await pool.end()
  }
  for (const table of REVISIONS) {
    const [row] = await instance.query<{ beyond: number }>(`select count(*)::int as beyond from ${table} where published_from > $1 or published_until > $1`, [newest])
    expect(row?.beyond, table).toBe(0)
  }
  const halves = await instance.query(
    `select a.id from amendments a where a.state = 'published' and (
       not exists (select 1 from editions e where e.number = a.published_in)
       or (select count(*) from amendment_changes c where c.amendment_id = a.id) <> (select count(*) from edition_changes f where f.amendment_id = a.id and f.edition = a.published_in))`)
  expect(halves).toEqual([])
  const strays = await instance.query('select f.sequence from edition_changes f join amendments a on a.id = f.amendment_id where a.published_in is distinct from f.edition')
  expect(strays).toEqual([])
  return newest
}

/** When a key or session was last used is no content; attempts to sign in and claims of Idempotency-Keys keep themselves. */
const NOT_CONTENT: Record<string, string[]> = { api_keys: ['last_used_at'], sessions: ['last_seen_at'] }

/** Until whatever is on its way by mail or webhook has gone: it is told of after the fact, in its own time. */
async function settled(instance: Instance): Promise<void> {
  for (let patience = 0; patience < 200; patience += 1) {
    const [row] = await instance.query<{ waiting: number }>(
      'select ((select count(*) from notice_events where spread_at is null) + (select count(*) from mails where sent_at is null and failed_at is null))::int as waiting')
    if (row?.waiting === 0) return
    await wait(50)
  }
  throw new Error('mails are still waiting')
}

/** One sum for each table, over all that its rows hold. */
export async function fingerprint(instance: Instance): Promise<Record<string, string | null>> {
  await settled(instance)
  const tables = await instance.query<{ name: string }>("select tablename as name from pg_tables where schemaname = 'public' order by 1")
  const sums: Record<string, string | null> = {}
  for (const { name } of tables) {
    const without = (NOT_CONTENT[name] ?? []).map((column) => ` - '${column}'`).join('')
    const [row] = await instance.query<{ sum: string | null }>(`select md5(string_agg(r, '|' order by r)) as sum from (select (to_jsonb(t)${without})::text as r from ${pg.escapeIdentifier(name)} t) rows`)
    sums[name] = row?.sum ?? null
  }
  return sums
}
