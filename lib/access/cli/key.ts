// Makes an API key from the command line and prints it once: npm run key -- --role reader --name NAME [--expires ISO]
import { parseArgs } from 'node:util'
import { eq, sql } from 'drizzle-orm'
import { closeDb, type Db, getDb } from '@/db/client'
import { apiKeys, users } from '@/db/schema'
import { recordAudit } from '@/lib/access/audit'
import { ANONYMOUS } from '@/lib/access/caller'
import { mintKey } from '@/lib/access/keys'
import { type Role, ROLES } from '@/openapi/core/define'
import { Instant } from '@/openapi/schemas/session'

const USAGE = 'npm run key -- --role reader|curator|admin --name NAME [--expires 2030-01-31T12:00:00Z]'

/** The account that owns keys made here: it cannot sign in. */
const SERVICE = { email: 'command-line@localhost.invalid', name: 'Command line', role: 'admin' as const }

interface Wanted { role: Role; name: string; expiresAt: Date | null }

/** What was asked for, or every fault at once. */
function readArguments(args: readonly string[]): { wanted: Wanted } | { faults: string[] } {
  const faults: string[] = []
  let values: { role?: string; name?: string; expires?: string } = {}
  try {
    values = parseArgs({ args: [...args], options: { role: { type: 'string' }, name: { type: 'string' }, expires: { type: 'string' } }, strict: true, allowPositionals: false }).values
  } catch (error) {
    return { faults: [error instanceof Error ? error.message : String(error)] }
  }
  const role = ROLES.find((known) => known === values.role)
  if (role === undefined) faults.push(`--role is one of ${ROLES.join(', ')}`)
  const name = values.name?.trim() ?? ''
  if (name.length < 1 || name.length > 200) faults.push('--name is a text of 1 to 200 characters that tells what the key is for')
  let expiresAt: Date | null = null
  if (values.expires !== undefined) {
    const written = /^\d{4}-\d{2}-\d{2}$/.test(values.expires) ? `${values.expires}T00:00:00Z` : values.expires
    expiresAt = Instant.safeParse(written).success ? new Date(written) : null
    if (expiresAt === null || Number.isNaN(expiresAt.getTime())) faults.push('--expires is a time with zone such as 2030-01-31T12:00:00Z, or a day')
    else if (expiresAt.getTime() <= Date.now()) faults.push('--expires is past already')
  }
  return faults.length > 0 || role === undefined ? { faults } : { wanted: { role, name, expiresAt } }
}

async function makeKey(db: Db, wanted: Wanted): Promise<string> {
  const minted = mintKey()
  await db.transaction(async (tx) => {
    await tx.insert(users).values(SERVICE).onConflictDoNothing()
    const [owner] = await tx.select({ id: users.id }).from(users).where(eq(sql`lower(${users.email})`, SERVICE.email))
    if (owner === undefined) throw new Error('The account of the command line could not be made')
    const [row] = await tx.insert(apiKeys)
      .values({ userId: owner.id, createdAt: new Date(), name: wanted.name, prefix: minted.prefix, sha256: minted.sha256, role: wanted.role, expiresAt: wanted.expiresAt })
      .returning({ id: apiKeys.id })
    await recordAudit(tx, { caller: ANONYMOUS, ip: null, requestId: null }, {
      action: 'key.create', subjectKind: 'key', subjectId: row?.id ?? null, after: { name: wanted.name, role: wanted.role, expires_at: wanted.expiresAt?.toISOString() ?? null, from: 'command line' },
    })
  })
  return minted.key
}

const read = readArguments(process.argv.slice(2))
if ('faults' in read) {
  process.stderr.write(`${read.faults.join('\n')}\n\n${USAGE}\n`)
  process.exitCode = 2
} else {
  try {
    const key = await makeKey(getDb(), read.wanted)
    process.stderr.write(`A ${read.wanted.role}'s key${read.wanted.expiresAt === null ? '' : ` until ${read.wanted.expiresAt.toISOString()}`}. It is shown this once:\n`)
    process.stdout.write(`${key}\n`)
  } finally {
    await closeDb()
  }
}
