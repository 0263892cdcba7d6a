// Brings the database at DATABASE_URL to the newest schema, under a lock so that two starts cannot race.
import path from 'node:path'
import { fileURLToPath } from 'node:url'
import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'

const migrationsFolder = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../migrations')
const LOCK = 7_272_740

if (!process.env.DATABASE_URL) {
  console.error('DATABASE_URL is not set: it names the database to migrate, with a login that owns it')
  process.exit(1)
}
const client = new pg.Client({ connectionString: process.env.DATABASE_URL, application_name: 'lodeterm migrations' })
try {
  await client.connect()
  await client.query('select pg_advisory_lock($1)', [LOCK])
  await ensureAppRole()
  await migrate(drizzle(client), { migrationsFolder })
} catch (error) {
  const { message, code } = error.cause ?? error
  console.error(`The database could not be migrated: ${message || code}`)
  process.exitCode = 1
} finally {
  await client.end().catch(() => undefined)
}

/** The role that the application works as. Where it cannot log in of its own, this login must be a member, to become it. */
async function ensureAppRole() {
  const known = await client.query("select 1 from pg_roles where rolname = 'lodeterm_app'")
  try {
    if (known.rowCount === 0) await client.query('create role lodeterm_app nologin')
    if (process.env.DATABASE_APP_URL) return
    const member = await client.query("select pg_has_role(current_user, 'lodeterm_app', 'member') as yes")
    if (!member.rows[0].yes) await client.query('grant lodeterm_app to current_user')
  } catch (error) {
    if (error.code !== '42501') throw error
    throw new Error('this login may not make or join the role lodeterm_app. Let a superuser run "create role lodeterm_app nologin; grant lodeterm_app to '
      + '<this login>;" once, or give DATABASE_APP_URL with a login of the application')
  }
}
