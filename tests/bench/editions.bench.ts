import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { applicationUrl, closeDb } from '@/db/client'
import { verifyEdition } from '@/db/edition-content'
import * as schema from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { publishEdition } from '@/lib/curation/publish'
import { changeList } from '@/lib/prediction/answers/editions'
import { inventedChanges, storeAccepted } from './invented-levels'

const SIZE = { species: 100, levels: 1000 }
const LIMITS = { publishMs: 10_000, compareMs: 1_000 }

interface Timed<T> { ms: number; processorMs: number; result: T }

/** With the processor time of this process, which does not depend on what else the machine does. */
async function timed<T>(task: () => Promise<T>): Promise<Timed<T>> {
  const [begin, before] = [performance.now(), process.cpuUsage()]
  const result = await task()
  const { user, system } = process.cpuUsage(before)
  return { ms: performance.now() - begin, processorMs: (user + system) / 1000, result }
}

/** Publishes 100 000 new levels, then a new energy for each of them, and compares the two editions. Needs an empty database of its own, migrated and seeded. */
export async function reportEditions(): Promise<boolean> {
  const owner = new pg.Client({ connectionString: process.env.DATABASE_URL })
  await owner.connect()
  const pool = new pg.Pool({ connectionString: applicationUrl({ databaseUrl: process.env.DATABASE_URL, databaseAppUrl: process.env.DATABASE_APP_URL }), max: 4 })
  const db = drizzle(pool, { schema })
  const { rows } = await owner.query<{ id: string }>("select id from users where role = 'admin' and password_hash is not null limit 1")
  const acting: Acting = { caller: { kind: 'session', userId: rows[0]?.id, role: 'admin', sessionId: null } as never, ip: null, requestId: null }
  const kept: boolean[] = []
  const tell = (what: string, { ms, processorMs }: Timed<unknown>, limitMs: number | null): void => {
    kept.push(limitMs === null || ms <= limitMs)
    console.log(`${what}: ${(ms / 1000).toFixed(2)} s${limitMs === null ? '' : `, ${(ms / limitMs).toFixed(2)} of the ${limitMs / 1000} s allowed`} (processor time beside the database's: ${(processorMs / 1000).toFixed(2)} s)`)
  }
  try {
    await storeAccepted(owner, 'Invented levels', inventedChanges(SIZE, 'create'))
    await owner.query('analyze amendment_changes')
    const first = await timed(() => publishEdition(db, acting, { label: 'Invented levels' }))
    tell('publishing an edition of 100 000 new levels, every check run again', first, LIMITS.publishMs)
    await storeAccepted(owner, 'Invented energies', inventedChanges(SIZE, 'replace', 0.5))
    const second = await timed(() => publishEdition(db, acting, { label: 'Invented energies' }))
    tell('publishing a new energy for 99 900 of them', second, null)
    const query = { limit: 100 } as never
    const cold = await timed(() => changeList(second.result, query, null))
    tell(`comparing the two editions, ${cold.result.meta.total} differences, first page`, cold, LIMITS.compareMs)
    const page = await timed(() => changeList(second.result, query, cold.result.page.next))
    tell('the next page', page, null)
    const back = await timed(() => changeList(first.result, { limit: 100, since: second.result } as never, null))
    tell('the same backwards', back, LIMITS.compareMs)
    const sums = await timed(() => verifyEdition(db, second.result))
    if (sums.result?.stored !== sums.result?.computed) throw new Error('the checksum does not agree')
    tell('computing the checksum anew', sums, null)
    console.log(`most memory of the process: ${(process.resourceUsage().maxRSS / 1024).toFixed(0)} MB`)
  } finally {
    await owner.end()
    await pool.end()
    await closeDb()
  }
  return kept.every(Boolean)
}
