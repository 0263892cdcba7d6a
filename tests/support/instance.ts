import type { ChildProcess } from 'node:child_process'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import pg from 'pg'
import { inject } from 'vitest'
import { endServer, freePort, mailStandIn, migrate, node, root, seed, serve, sessionSecret } from '../../db/scripts/steps.mjs'
import { clientAt, type Reply, type Sending } from '../api/helpers/client'
import type { DemoAccount } from './environment'

/**
 * A table of its own: database, demo accounts and built server, for tests that publish editions, kill processes or cut connections.
 *
 *   const instance = await startInstance('editions')
 *   afterAll(() => instance.end())
 *   const curator = await instance.signIn('curator')            // a Cookie field with what a browser sends along
 *   await instance.ask('post', '/amendments', { ...curator, body: { title: 'Sodium' } })
 *
 * `name` is a word; the database is called after it and made anew. Needs the tests' environment, so the vitest project must be one
 * with a server.
 */
export interface Instance {
  /** Where it answers, without /api/v1. */
  base: string
  env: Record<string, string>
  accounts: DemoAccount[]
  ask: (method: string, at: string, sending?: Sending) => Promise<Reply>
  get: (at: string, sending?: Sending) => Promise<Reply>
  /** Signs one of the demo accounts in (`admin`, `curator`, `second.curator`, `reader`). */
  signIn: (who: string) => Promise<{ cookie: string; headers: Record<string, string> }>
  /** Asks the database as its owner, past the application. */
  query: <R extends pg.QueryResultRow>(text: string, values?: unknown[]) => Promise<R[]>
  /** Process of the server, to be killed. */
  child: () => ChildProcess
  /** Ends the server at once, as a power cut would. */
  kill: () => Promise<void>
  /** Starts it again, on the same port. */
  start: () => Promise<void>
  /** Ends server, connections and database. */
  end: () => Promise<void>
}

const withDatabase = (url: string, name: string): string => {
  const changed = new URL(url)
  changed.pathname = `/${name}`
  return changed.toString()
}

const gone = (child: ChildProcess): Promise<void> =>
  child.exitCode !== null || child.signalCode !== null ? Promise.resolve() : new Promise((done) => void child.once('exit', () => done()))

/** In the private cluster databases are made by its own script, since the owner's login may not; another server's login has to be able to. */
async function makeDatabase(owner: string, database: string): Promise<void> {
  if (!process.env.TEST_DATABASE_URL) {
    await node(['db/scripts/pg.mjs', 'fresh', database], { capture: true })
    return
  }
  const server = new pg.Client({ connectionString: owner })
  await server.connect()
  await server.query(`drop database if exists ${pg.escapeIdentifier(database)} with (force)`)
  await server.query(`create database ${pg.escapeIdentifier(database)} template template0 encoding 'UTF8'`)
  await server.end()
}

export async function startInstance(name: string, settings: Record<string, string> = {}): Promise<Instance> {
  const common = inject('environment')
  const owner = common.DATABASE_URL ?? ''
  const database = `lodeterm_test_${name.replace(/[^a-z0-9]/g, '')}`
  await makeDatabase(owner, database)

  const folder = fs.mkdtempSync(path.join(os.tmpdir(), `lodeterm-${name}-`))
  const port = await freePort()
  const base = `http://127.0.0.1:${port}`
  const env: Record<string, string> = {
    ...common,
    DATABASE_URL: withDatabase(owner, database),
    ...(common.DATABASE_APP_URL ? { DATABASE_APP_URL: withDatabase(common.DATABASE_APP_URL, database) } : {}),
    DEMO: '1',
    DEMO_ACCOUNTS_FILE: path.join(folder, 'demo-accounts.json'),
    SESSION_SECRET_FILE: sessionSecret(path.join(folder, 'session-secret')),
    OUTBOX_FOLDER: path.join(folder, 'outbox'),
    BASE_URL: base,
    ...settings,
  }
  // mail goes to a stand-in, unless the test has a mail server of its own
  const mail = settings.SMTP_URL === undefined ? await mailStandIn(env.OUTBOX_FOLDER ?? '') : undefined
  Object.assign(env, mail?.env)
  await migrate(env)
  await seed(env)
  const accounts = JSON.parse(fs.readFileSync(env.DEMO_ACCOUNTS_FILE ?? '', 'utf8')) as DemoAccount[]
  let pool = new pg.Pool({ connectionString: env.DATABASE_URL, max: 2 })
  // a test may cut it: the next question opens another
  pool.on('error', () => undefined)
  let { child } = await serve('127.0.0.1', port, env)
  const { ask, get } = clientAt(base)
  return {
    base, env, accounts, ask, get,
    signIn: async (who) => {
      const account = accounts.find(({ email }) => email.startsWith(`${who}@`))
      if (account === undefined) throw new Error(`there is no demo account ${who}`)
      const sameSite = { 'sec-fetch-site': 'same-origin', origin: base }
      const reply = await ask('post', '/session', { body: { email: account.email, password: account.password }, headers: sameSite })
      const cookie = reply.cookies.find((field) => /^(__Host-)?lodeterm=/.test(field))?.split(';')[0]
      if (cookie === undefined) throw new Error(`sign-in answered ${reply.status}: ${reply.text}`)
      return { cookie, headers: sameSite }
    },
    query: async (text, values) => (await pool.query(text, values)).rows,
    child: () => child,
    kill: async () => {
      child.kill('SIGKILL')
      await gone(child)
    },
    start: async () => {
      child = (await serve('127.0.0.1', port, env)).child
    },
    end: async () => {
      await endServer(child)
      mail?.child.kill()
      await pool.end()
      pool = new pg.Pool({ connectionString: owner, max: 1 })
      await pool.query(`drop database if exists ${pg.escapeIdentifier(database)} with (force)`)
      await pool.end()
      fs.rmSync(folder, { recursive: true, force: true })
    },
  }
}

/** For programs that an instance runs beside its server. */
export const projectFolder = root
