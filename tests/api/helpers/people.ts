import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import { getDb } from '@/db/client'
import { apiKeys, signInAttempts, users } from '@/db/schema'
import { mintKey } from '@/lib/access/keys'
import { hashPassword } from '@/lib/access/passwords'
import { ask, base } from './client'

export type Role = 'reader' | 'curator' | 'admin'
export const ROLES: readonly Role[] = ['reader', 'curator', 'admin']
export const PASSWORD = 'granite lantern orbit'

export interface Person { id: string; email: string; role: Role }

let hash: Promise<string> | undefined
/** An account of its own for a test, with the password PASSWORD. */
export async function makePerson(role: Role): Promise<Person> {
  hash ??= hashPassword(PASSWORD)
  const email = `${role}.${randomUUID().slice(0, 8)}@test.example`
  const [row] = await getDb().insert(users).values({ email, name: `Test ${role}`, role, passwordHash: await hash }).returning({ id: users.id })
  if (row === undefined) throw new Error('no account was made')
  return { id: row.id, email, role }
}

export interface MadeKey { key: string; id: string; owner: Person }

/** A key straight into the database; its owner is a new person of the same role unless given. */
export async function makeKey(role: Role, more: { owner?: Person; expiresAt?: Date | null; revokedAt?: Date | null } = {}): Promise<MadeKey> {
  const owner = more.owner ?? (await makePerson(role))
  const minted = mintKey()
  const [row] = await getDb().insert(apiKeys)
    .values({ userId: owner.id, name: 'test', prefix: minted.prefix, sha256: minted.sha256, role, expiresAt: more.expiresAt ?? null, revokedAt: more.revokedAt ?? null }).returning({ id: apiKeys.id })
  if (row === undefined) throw new Error('no key was made')
  return { key: minted.key, id: row.id, owner }
}

export const closeAccount = async (person: Person): Promise<void> => {
  await getDb().update(users).set({ active: false }).where(eq(users.id, person.id))
}

/** Fields that this site's own pages send with a change. */
export const SAME_SITE = { 'sec-fetch-site': 'same-origin', origin: base }

export const cookiePart = (field: string): string => field.split(';')[0] ?? ''

/** All tests come from one address: what one of them tried must not slow the next. */
export const forgetAttempts = async (): Promise<void> => {
  await getDb().delete(signInAttempts)
}

/** Signs a person in; the session's cookie as a Cookie field. */
export async function signIn(person: Pick<Person, 'email'>, password = PASSWORD): Promise<string> {
  await forgetAttempts()
  const reply = await ask('post', '/session', { body: { email: person.email, password }, headers: SAME_SITE })
  if (reply.status !== 201) throw new Error(`sign-in answered ${reply.status}: ${reply.text}`)
  return cookiePart(reply.cookies.find((cookie) => /^(__Host-)?lodeterm=/.test(cookie)) ?? '')
}
