import type { ChildProcess } from 'node:child_process'
import fs from 'node:fs'
import type { TestProject } from 'vitest/node'
import { build, type Environment, endServer, migrate, releaseDatabase } from '../../db/scripts/steps.mjs'
import { chromium } from './chromium.mjs'
import { testDatabase, testServer } from './settings.mjs'

export interface DemoAccount {
  email: string
  name: string
  role: 'reader' | 'curator' | 'admin'
  password: string
}

declare module 'vitest' {
  export interface ProvidedContext {
    /** Variables that code under test reads: addresses of the database, secret, settings. */
    environment: Record<string, string>
    /** Where the server under test answers; empty in projects that have none. */
    baseUrl: string
    demoAccounts: DemoAccount[]
  }
}

interface Shared {
  users: number
  database: Promise<Environment> | undefined
  server: Promise<{ child: ChildProcess; env: Environment }> | undefined
}
// Several projects set up in one process: they share one database and one server.
const holder: { [key: symbol]: Shared | undefined } = globalThis as never
const slot = Symbol.for('lodeterm.tests')
const shared = (): Shared => (holder[slot] ??= { users: 0, database: undefined, server: undefined })

const GIVEN = ['DATABASE_URL', 'DATABASE_APP_URL', 'DEMO', 'DEMO_ACCOUNTS_FILE', 'SESSION_SECRET_FILE', 'LOG_LEVEL', 'RATE_ANONYMOUS_PER_MINUTE', 'RATE_KEY_PER_MINUTE', 'BASE_URL', 'CHROMIUM']
/** What npm test has put in place, or undefined when vitest runs on its own. */
function given(): Environment | undefined {
  if (!process.env.TEST_BASE_URL) return undefined
  return Object.fromEntries(GIVEN.flatMap((name) => (process.env[name] ? [[name, process.env[name]]] : [])))
}

const readAccounts = (env: Environment): DemoAccount[] =>
  env.DEMO_ACCOUNTS_FILE && fs.existsSync(env.DEMO_ACCOUNTS_FILE) ? (JSON.parse(fs.readFileSync(env.DEMO_ACCOUNTS_FILE, 'utf8')) as DemoAccount[]) : []

function provide(project: TestProject, env: Environment, baseUrl: string): void {
  project.provide('environment', env)
  project.provide('baseUrl', baseUrl)
  project.provide('demoAccounts', readAccounts(env))
}

/** Sets a project up with the database, and with the built server where it wants one; returns its teardown. */
export async function setUp(project: TestProject, wants: { server: boolean }): Promise<() => Promise<void>> {
  const before = given()
  if (before !== undefined) {
    provide(project, before, process.env.TEST_BASE_URL ?? '')
    return async () => undefined
  }
  const all = shared()
  all.users += 1
  all.database ??= testDatabase()
  const env = await all.database
  if (wants.server) {
    all.server ??= (async () => {
      await build()
      await migrate(env)
      return testServer({ ...env, CHROMIUM: await chromium() })
    })()
    const server = await all.server
    provide(project, server.env, server.env.TEST_BASE_URL ?? '')
  } else provide(project, env, '')
  return async () => {
    all.users -= 1
    if (all.users > 0) return
    if (all.server !== undefined) await endServer((await all.server).child)
    await releaseDatabase()
  }
}
