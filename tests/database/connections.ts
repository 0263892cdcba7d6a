import pg from 'pg'
import { applicationUrl } from '@/db/client'

/** The application's connection, and the owner's (who migrates); end both after use. */
export async function connect(): Promise<{ app: pg.Client; owner: pg.Client; end: () => Promise<void> }> {
  const app = new pg.Client({ connectionString: applicationUrl({ databaseUrl: process.env.DATABASE_URL, databaseAppUrl: process.env.DATABASE_APP_URL }) })
  const owner = new pg.Client({ connectionString: process.env.DATABASE_URL })
  await app.connect()
  await owner.connect()
  return { app, owner, end: async () => void (await Promise.all([app.end(), owner.end()])) }
}

/** Runs the body in a transaction that is always rolled back: nothing a test writes is seen by another. */
export async function rolledBack<T>(client: pg.Client, body: () => Promise<T>): Promise<T> {
  await client.query('begin')
  try {
    return await body()
  } finally {
    await client.query('rollback')
  }
}

/** The SQLSTATE with which a statement is refused, or null when it is not; the transaction goes on either way. */
export async function refusal(client: pg.Client, text: string, values: unknown[] = []): Promise<{ code: string; message: string } | null> {
  await client.query('savepoint attempt')
  try {
    await client.query(text, values)
    return null
  } catch (error) {
    if (error instanceof pg.DatabaseError) return { code: error.code ?? '', message: error.message }
    throw error
  } finally {
    await client.query('rollback to savepoint attempt')
  }
}

export const DENIED = '42501'
export const GUARDED = 'LD001'
export const EXCLUDED = '23505'
export const CHECKED = '23514'

/** Inserts a revision of a level like the one named, with some columns changed. */
export async function insertLevelRevision(client: pg.Client, like: string, changes: Record<string, unknown>): Promise<void> {
  const names = await client.query<{ column_name: string }>(
    "select column_name from information_schema.columns where table_name = 'level_revisions' and column_name not in ('id', 'created_at') order by ordinal_position",
  )
  const columns = names.rows.map((row) => row.column_name)
  const values: unknown[] = [like]
  const picked = columns.map((column) => {
    if (!(column in changes)) return pg.escapeIdentifier(column)
    values.push(changes[column])
    return `(select ${`$${values.length}`}::text)::${TYPES[column] ?? 'text'}`
  })
  await client.query(
    `insert into level_revisions (${columns.map((c) => pg.escapeIdentifier(c)).join(', ')}) select ${picked.join(', ')} from level_revisions where level_id = $1 and published_until is null`,
    values.map((value) => (typeof value === 'number' ? String(value) : value)),
  )
}
const INTEGERS = ['revision', 'published_from', 'published_until', 'two_s', 'l', 'two_j', 'two_k', 'core_two_s', 'core_l', 'core_two_j', 'l_outer', 'outer_two_j', 'repeat_index']
const TYPES: Record<string, string> = {
  ...Object.fromEntries(INTEGERS.map((name) => [name, 'integer'])),
  amendment_id: 'uuid', energy_invcm: 'double precision', energy_unc_invcm: 'double precision', g_chosen: 'double precision', line_checked: 'boolean',
}
