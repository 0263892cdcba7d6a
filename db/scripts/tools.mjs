// PostgreSQL's own programs, run on the database of an address without the password among their arguments.
import { spawn, spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import pg from 'pg'
import { root, StepError } from './steps.mjs'

const majorOf = (folder) => Number(/(\d+)/.exec(spawnSync(path.join(folder, 'pg_dump'), ['--version'], { encoding: 'utf8' }).stdout ?? '')?.[1] ?? 0)

/** The folder of the newest pg_dump, pg_restore and psql: they read older servers, never newer ones. */
export function toolFolder() {
  const base = '/usr/lib/postgresql'
  const packaged = fs.existsSync(base) ? fs.readdirSync(base).map((version) => `${base}/${version}/bin`) : []
  const folders = [process.env.PG_BIN, ...packaged, ...(process.env.PATH ?? '').split(':')]
  const complete = folders.filter((folder) => folder && ['pg_dump', 'pg_restore', 'psql'].every((name) => fs.existsSync(path.join(folder, name))))
  const [newest] = process.env.PG_BIN && complete[0] === process.env.PG_BIN ? complete : complete.sort((a, b) => majorOf(b) - majorOf(a))
  if (newest === undefined) throw new StepError('pg_dump, pg_restore and psql are not found: install the Debian package postgresql-client, or set PG_BIN to their folder')
  return newest
}

/** An address without its password, and the environment that carries it. */
function split(address) {
  const url = new URL(address)
  const password = decodeURIComponent(url.password)
  url.password = ''
  return { plain: url.toString(), env: { ...process.env, ...(password === '' ? {} : { PGPASSWORD: password }), PGCONNECT_TIMEOUT: '10' } }
}

/** Starts a tool on a database; resolves when it ends with 0, else rejects with what it said. `stdin` and `stdout` may be files or pipes. */
export function tool(name, args, address, stdio = ['ignore', 'ignore']) {
  const target = address === null ? { args: [], env: process.env } : { args: ['-d', split(address).plain], env: split(address).env }
  const child = spawn(path.join(toolFolder(), name), [...target.args, ...args], { cwd: root, env: target.env, stdio: [...stdio, 'pipe'] })
  let errors = ''
  child.stderr.on('data', (piece) => { errors = `${errors}${piece}`.slice(-4000) })
  const ended = new Promise((resolve, reject) => {
    child.on('error', (error) => reject(new StepError(`${name} could not be run: ${error.message}`)))
    child.on('close', (code) => (code === 0 ? resolve() : reject(new StepError(`${name} ended with ${code}: ${errors.trim()}`))))
  })
  return { child, ended }
}

/** The same address with another database. */
export function withDatabase(address, name) {
  const url = new URL(address)
  url.pathname = `/${name}`
  return url.toString()
}

/** Asks a database one thing. */
export async function ask(address, text, values) {
  const client = new pg.Client({ connectionString: address, application_name: 'lodeterm backup', connectionTimeoutMillis: 10_000 })
  try {
    await client.connect()
    return (await client.query(text, values)).rows
  } catch (error) {
    throw new StepError(`the database ${new URL(address).pathname.slice(1)} does not answer: ${error.message}`)
  } finally {
    await client.end().catch(() => undefined)
  }
}
