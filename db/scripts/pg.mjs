// The project's private PostgreSQL.
//
//   node db/scripts/pg.mjs up [database ...]      make what is missing and start it (default database: lodeterm)
//   node db/scripts/pg.mjs down [--if-idle]       stop it; --if-idle: only when nobody is connected
//   node db/scripts/pg.mjs status                 what runs, as JSON
//   node db/scripts/pg.mjs url [database] [--app] address of the owner's login, or of the application's
//   node db/scripts/pg.mjs fresh DATABASE_test    drop and make a database for tests
//
// PG_HOME: another folder than .data/pg. PG_PORT: first port to try. PG_BIN: folder of the binaries.
import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { ClusterError, down, fresh, home, say, status, up, url } from './cluster.mjs'

const [verb = 'up', ...rest] = process.argv.slice(2)
const flags = rest.filter((word) => word.startsWith('--'))
const names = rest.filter((word) => !word.startsWith('--'))

// One at a time. The kernel lets go of the lock even after kill -9; with -o the server does not inherit it.
if (['up', 'down', 'fresh'].includes(verb) && process.env.PG_LOCKED === undefined) {
  try {
    fs.mkdirSync(home, { recursive: true })
    fs.closeSync(fs.openSync(path.join(home, 'lock'), 'a'))
  } catch (error) {
    say(`${home} cannot be written to (${error.code}). It belongs to whoever began with it: start as that user, or set PG_HOME to a folder of your own, or DATABASE_URL`)
    process.exit(1)
  }
  const held = spawnSync('flock', ['-o', '-w', '180', path.join(home, 'lock'), process.execPath, ...process.argv.slice(1)], {
    stdio: 'inherit', env: { ...process.env, PG_LOCKED: '1' },
  })
  if (!held.error) process.exit(held.status ?? 1)
}

try {
  if (verb === 'up') {
    const databases = names.length > 0 ? names : ['lodeterm']
    await up(databases)
    process.stdout.write(`${url(databases[0], 'owner')}\n`)
  } else if (verb === 'down') down(flags.includes('--if-idle'))
  else if (verb === 'status') process.stdout.write(`${JSON.stringify(status())}\n`)
  else if (verb === 'url') process.stdout.write(`${url(names[0] ?? 'lodeterm', flags.includes('--app') ? 'app' : 'owner')}\n`)
  else if (verb === 'fresh') {
    await fresh(names[0] ?? '')
    process.stdout.write(`${url(names[0], 'owner')}\n`)
  } else throw new ClusterError(`unknown verb "${verb}": up, down, status, url or fresh`)
} catch (error) {
  if (!(error instanceof ClusterError)) throw error
  say(error.message)
  process.exit(1)
}
