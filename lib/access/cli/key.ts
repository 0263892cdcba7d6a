// Makes an API key from the command line and prints it once: npm run key -- --role curator --owner EMAIL --name NAME [--expires ISO]
import { parseArgs } from 'node:util'
import { eq, sql } from 'drizzle-orm'
import { closeDb, type Db, getDb, type Tx } from '@/db/client'
import { apiKeys, users } from '@/db/schema'
import { recordAudit } from '@/lib/access/audit'
import { ANONYMOUS, atLeast } from '@/lib/access/caller'
import { mintKey } from '@/lib/access/keys'
import { type Role, ROLES } from '@/openapi/core/define'
import { Instant } from '@/openapi/schemas/session'

const USAGE = `npm run key -- --role reader|curator|admin --name NAME [--owner EMAIL] [--expires 2030-01-31T12:00:00Z]

--owner is the account that the key speaks for: an open one, of that role or a higher one. A curator's or an admin's key needs it, since
nobody accepts what they wrote themselves; a reader's key without it belongs to the command line.`

/** The account that owns keys made here for readers: it cannot sign in. */
const SERVICE = { email: 'command-line@localhost.invalid', name: 'Command line', role: 'admin' as const }

interface Wanted { role: Role; name: string; owner: string | null; expiresAt: Date | null }

/** Why an account cannot own the key. */
class NoOwner extends Error {}

/** What was asked for, or every fault at once. */
function readArguments(args: readonly string[]): { wanted: Wanted } | { faults: string[] } {
  const faults: string[] = []
  let values: { role?: string; name?: string; owner?: string; expires?: string } = {}
  try {
    values = parseArgs({ args: [...args], options: { role: { type: 'string' }, name: { type: 'string' }, owner: { type: 'string' }, expires: { type: 'string' } }, strict: true, allowPositionals: false }).values
  } catch (error) {
    return { faults: [error instanceof Error ? error.message : String(error)] }
  }
  const role = ROLES.find((known) => known === values.role)
  if (role === undefined) faults.push(`--role is one of ${ROLES.join(', ')}`)
  const name = values.name?.trim() ?? ''
  if (name.length < 1 || name.length > 200) faults.push('--name is a text of 1 to 200 characters that tells what the key is for')
  const owner = values.owner?.trim() ?? null
  if (owner === '') faults.push('--owner is the mail address of an account')
  if (owner === null && (role === 'curator' || role === 'admin')) faults.push(`--owner EMAIL is needed for the key of ${role === 'admin' ? 'an admin' : 'a curator'}: the account that it speaks for`)
  let expiresAt: Date | null = null
  if (values.expires !== undefined) {
    const written = /^\d{4}-\d{2}-\d{2}$/.test(values.expires) ? `${values.expires}T00:00:00Z` : values.expires
    expiresAt = Instant.safeParse(written).success ? new Date(written) : null
    if (expiresAt === null || Number.isNaN(expiresAt.getTime())) faults.push('--expires is a time with zone such as 2030-01-31T12:00:00Z, or a day')
    else if (expiresAt.getTime() <= Date.now()) faults.push('--expires is past already')
  }
  return faults.length > 0 || role === undefined ? { faults } : { wanted: { role, name, owner, expiresAt } }
}

/** The account of that address, if it may have such a key; locked, so that it is not closed or lowered meanwhile. */
async function ownerOf(tx: Tx, { role, owner }: Wanted): Promise<{ id: string; email: string }> {
  const email = owner ?? SERVICE.email
  if (owner === null) await tx.insert(users).values(SERVICE).onConflictDoNothing()
  const [found] = await tx.select().from(users).where(eq(sql`lower(${users.email})`, email.toLowerCase())).for('share')
  if (found === undefined) throw new NoOwner(`--owner: there is no account ${email}`)
  if (owner !== null && found.passwordHash === null) throw new NoOwner(`--owner: nobody signs in to ${email}; name a person's account`)
  if (!found.active) throw new NoOwner(`--owner: the account ${email} is closed`)
  if (!atLeast(found.role, role)) throw new NoOwner(`--owner: ${email} has the role ${found.role}, and a key never stands above its owner`)
  return found
}

async function makeKey(db: Db, wanted: Wanted): Promise<string> {
  const minted = mintKey()
  await db.transaction(async (tx) => {
    const owner = await ownerOf(tx, wanted)
    const [row] = await tx.insert(apiKeys)
      .values({ userId: owner.id, createdAt: new Date(), name: wanted.name, prefix: minted.prefix, sha256: minted.sha256, role: wanted.role, expiresAt: wanted.expiresAt })
      .returning({ id: apiKeys.id })
    await recordAudit(tx, { caller: ANONYMOUS, ip: null, requestId: null }, {
      action: 'key.create', subjectKind: 'key', subjectId: row?.id ?? null, after: { name: wanted.name, role: wanted.role, expires_at: wanted.expiresAt?.toISOString() ?? null, owner: owner.email, from: 'command line' },
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
  } catch (error) {
    if (!(error instanceof NoOwner)) throw error
    process.stderr.write(`${error.message}\n`)
    process.exitCode = 2
  } finally {
    await closeDb()
  }
}
