// What a test run sets, wherever it begins: its own database, secret and demo accounts, beside those of the running table.
import fs from 'node:fs'
import path from 'node:path'
import { database, freePort, mailStandIn, migrate, root, seed, serve, sessionSecret } from '../../db/scripts/steps.mjs'

export const folder = path.join(root, '.data/test')
export const DATABASE = 'lodeterm_test'

/**
 * The test database, made anew, migrated and seeded. TEST_DATABASE_URL names another server's, which must be for tests only;
 * DATABASE_URL is left alone, since it may name a table that people use.
 */
export async function testDatabase() {
  delete process.env.DATABASE_URL
  delete process.env.DATABASE_APP_URL
  if (process.env.TEST_DATABASE_URL) process.env.DATABASE_URL = process.env.TEST_DATABASE_URL
  fs.mkdirSync(folder, { recursive: true })
  const env = {
    ...(await database(DATABASE, { fresh: true })),
    DEMO: '1',
    DEMO_ACCOUNTS_FILE: path.join(folder, 'demo-accounts.json'),
    SESSION_SECRET_FILE: sessionSecret(path.join(folder, 'session-secret')),
    // Stated, since vitest sets a BASE_URL of its own that is no address.
    BASE_URL: 'http://127.0.0.1:3000',
    LOG_LEVEL: 'warn',
    // Limits have tests of their own, which count what they send; no other test should meet them.
    RATE_ANONYMOUS_PER_MINUTE: '1000000',
    RATE_KEY_PER_MINUTE: '1000000',
  }
  await migrate(env)
  await seed(env)
  return env
}

/** The built server on a free port, with those settings. */
export async function testServer(env) {
  const port = await freePort()
  const base = `http://127.0.0.1:${port}`
  const mail = await mailStandIn(path.join(folder, 'outbox'))
  const { child } = await serve('127.0.0.1', port, { ...env, ...mail.env, BASE_URL: base })
  child.once('exit', () => mail.child.kill())
  return { child, env: { ...env, BASE_URL: base, TEST_BASE_URL: base } }
}
