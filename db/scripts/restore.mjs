// npm run restore -- FILE [--database NAME] [--replace]: a backup back into an empty database, whole or not at all; then every
// edition's checksum is computed anew. --replace: into one that holds something, which is lost. Stop the server first.
import fs from 'node:fs'
import path from 'node:path'
import { parseArgs } from 'node:util'
import { main, migrate, node, releaseDatabase, say, StepError } from './steps.mjs'
import { ask, tool, withDatabase } from './tools.mjs'

const USAGE = 'npm run restore -- FILE [--database NAME] [--replace]'

function readArguments() {
  try {
    const { values, positionals } = parseArgs({ options: { database: { type: 'string' }, replace: { type: 'boolean', default: false } }, allowPositionals: true })
    if (positionals.length !== 1) throw new Error('one file is meant')
    if (values.database !== undefined && !/^[a-z][a-z0-9_]{0,40}$/.test(values.database)) throw new Error('a database is named by small letters, digits and _')
    return { file: path.resolve(process.env.INIT_CWD ?? '.', positionals[0]), ...values }
  } catch (error) {
    throw new StepError(`${error.message}\n${USAGE}`)
  }
}

/** The owner's address of the database to restore into; in the private cluster it is made where it is missing. */
async function target(name) {
  if (process.env.DATABASE_URL) return name === undefined ? process.env.DATABASE_URL : withDatabase(process.env.DATABASE_URL, name)
  return node(['db/scripts/pg.mjs', 'up', name ?? 'lodeterm'], { capture: true })
}

/** The role that the backup grants to; a server where it is missing gets it. */
const APP_ROLE = "do $$ begin if not exists (select from pg_roles where rolname = 'lodeterm_app') then create role lodeterm_app nologin; end if; end $$;\n"
const EMPTY = 'set lock_timeout = \'10s\';\ndrop schema if exists drizzle cascade;\ndrop schema public cascade;\ncreate schema public;\nset lock_timeout = 0;\n'

await main(async () => {
  const { file, database, replace } = readArguments()
  if (!fs.existsSync(file)) throw new StepError(`${file} is not there`)
  const address = await target(database)
  const [{ tables }] = await ask(address, "select count(*)::integer as tables from pg_tables where schemaname not in ('pg_catalog', 'information_schema')")
  const name = new URL(address).pathname.slice(1)
  if (tables > 0 && !replace) throw new StepError(`the database ${name} is not empty (${tables} tables). Restore into another (--database NAME), or say --replace: what it holds is lost then`)
  say(`restoring ${path.basename(file)} into ${name}`)
  // The backup as text goes through psql in one transaction: what was there stays until the whole is in its place.
  const reading = tool('pg_restore', ['--no-owner', '--file=-', file], null, ['ignore', 'pipe'])
  const writing = tool('psql', ['--no-psqlrc', '--quiet', '--no-password', '--single-transaction', '--set=ON_ERROR_STOP=1', '--file=-'], address, ['pipe', 'ignore'])
  // psql may end early; what it said is told, not that nobody read on
  writing.child.stdin.on('error', () => undefined)
  writing.child.stdin.write(`${APP_ROLE}${tables > 0 ? EMPTY : ''}`)
  reading.child.stdout.pipe(writing.child.stdin, { end: false })
  const read = reading.ended.then(
    () => writing.child.stdin.end(),
    (error) => {
      // nothing is kept of half a backup
      writing.child.stdin.end('\nselect 1 / 0;\n')
      throw error
    },
  )
  const results = await Promise.allSettled([read, writing.ended])
  const failed = results.find(({ status }) => status === 'rejected')
  if (failed !== undefined) throw failed.reason
  const env = { DATABASE_URL: address, DATABASE_APP_URL: '' }
  await migrate(env)
  await node(['--import', 'tsx', 'lib/curation/cli/verify-edition.ts', '--database', '--all'], { env })
  say('restored')
  await releaseDatabase()
})
