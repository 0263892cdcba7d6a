import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import { getConfig } from '@/lib/config'
import * as schema from './schema'

export type Db = NodePgDatabase<typeof schema>
/** What a transaction's callback receives; functions that may run inside or outside of one take `Db | Tx`. */
export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0]

/** The role the application works as: it owns nothing, and may not change or delete what is published. */
export const APP_ROLE = 'lodeterm_app'

/**
 * The address the application connects with: its own login where one is configured, else the owner's login with
 * `role=lodeterm_app` set while connecting, so that even RESET ROLE falls back to it.
 */
export function applicationUrl(config: { databaseUrl: string | undefined; databaseAppUrl: string | undefined }): string {
  if (config.databaseAppUrl !== undefined) return config.databaseAppUrl
  if (config.databaseUrl === undefined) {
    throw new Error('No database: set DATABASE_URL, or begin with npm start, which keeps a private PostgreSQL and sets it')
  }
  const url = new URL(config.databaseUrl)
  url.searchParams.set('options', `${url.searchParams.get('options') ?? ''} -c role=${APP_ROLE}`.trim())
  return url.toString()
}

interface Held {
  pool: pg.Pool
  db: Db
}
// On globalThis: the server's bundles may each hold a copy of this module, and they must share one pool.
const holder: { [key: symbol]: Held | undefined } = globalThis as never
const slot = Symbol.for('lodeterm.database')

function held(): Held {
  const existing = holder[slot]
  if (existing !== undefined) return existing
  const pool = new pg.Pool({
    connectionString: applicationUrl(getConfig()),
    application_name: 'lodeterm',
    max: 10,
    idleTimeoutMillis: 30_000,
    connectionTimeoutMillis: 5_000,
    statement_timeout: 30_000,
    idle_in_transaction_session_timeout: 30_000,
  })
  // An idle connection that breaks is replaced at next use; without a listener its error would end the process.
  pool.on('error', () => undefined)
  // The same for one that breaks while a transaction holds it between two statements: the next statement says so.
  pool.on('connect', (client) => void client.on('error', () => undefined))
  const made = { pool, db: drizzle(pool, { schema }) }
  holder[slot] = made
  return made
}

export const getPool = (): pg.Pool => held().pool
export const getDb = (): Db => held().db

/** Ends the pool, for scripts and tests; the next use opens a new one. */
export async function closeDb(): Promise<void> {
  const existing = holder[slot]
  holder[slot] = undefined
  await existing?.pool.end()
}

export interface Listener {
  close: () => Promise<void>
}

/** How often a silent connection is asked whether it still lives, and how long it may take to answer, in milliseconds. */
const HEARTBEAT = 2_000
const PATIENCE = 2_000
const BACKOFF = [100, 250, 500, 1_000, 2_000]

/**
 * Listens on PostgreSQL notification channels over a connection of its own, for as long as the process lives.
 *
 * `onState(true)` comes each time the channels are open, `onState(false)` as soon as that is in doubt (at most
 * HEARTBEAT + PATIENCE after a silent loss): whoever holds a cache kept fresh by these messages must distrust it until the
 * next `true`, and drop it then, since messages may have been missed. Lost connections are opened again, with growing pauses.
 */
export function listen(channels: readonly string[], onMessage: (channel: string, payload: string) => void, onState: (connected: boolean) => void = () => undefined): Listener {
  let closed = false
  let client: pg.Client | undefined
  let timer: NodeJS.Timeout | undefined
  let failures = 0

  const later = (milliseconds: number, task: () => Promise<void>) => {
    timer = setTimeout(() => void task(), milliseconds)
    timer.unref()
  }
  const lose = (lost: pg.Client) => {
    if (client !== lost) return
    client = undefined
    clearTimeout(timer)
    void lost.end().catch(() => undefined)
    if (closed) return
    onState(false)
    later(BACKOFF[Math.min(failures++, BACKOFF.length - 1)] ?? 2_000, open)
  }
  const beat = async (asked: pg.Client) => {
    try {
      await asked.query('select 1')
      if (client === asked && !closed) later(HEARTBEAT, () => beat(asked))
    } catch {
      lose(asked)
    }
  }
  const open = async () => {
    const opening = new pg.Client({
      connectionString: applicationUrl(getConfig()),
      application_name: 'lodeterm listener',
      connectionTimeoutMillis: PATIENCE,
      query_timeout: PATIENCE,
      keepAlive: true,
    })
    client = opening
    opening.on('error', () => lose(opening))
    opening.on('end', () => lose(opening))
    opening.on('notification', (message) => onMessage(message.channel, message.payload ?? ''))
    try {
      await opening.connect()
      for (const channel of channels) await opening.query(`listen ${pg.escapeIdentifier(channel)}`)
    } catch {
      lose(opening)
      return
    }
    if (closed || client !== opening) return
    failures = 0
    onState(true)
    later(HEARTBEAT, () => beat(opening))
  }
  void open()
  return {
    close: async () => {
      closed = true
      clearTimeout(timer)
      await client?.end().catch(() => undefined)
    },
  }
}
