import { randomInt } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { and, count, eq, isNotNull, sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { auditEvents, users } from '@/db/schema'
import { hashPassword } from '@/lib/access/passwords'

/** Invented people at an address that no mail reaches. */
const PEOPLE = [
  { email: 'admin@lodeterm.example', name: 'Mirela Horvat', role: 'admin' },
  { email: 'curator@lodeterm.example', name: 'Tomas Lindqvist', role: 'curator' },
  { email: 'second.curator@lodeterm.example', name: 'Ingrid Oyelaran', role: 'curator' },
  { email: 'reader@lodeterm.example', name: 'Jun Castellan', role: 'reader' },
] as const

export interface DemoAccount {
  email: string
  name: string
  role: 'reader' | 'curator' | 'admin'
  password: string
}

const LOCK = 7_272_743
// Without letters and digits that are mistaken for each other; 20 of them are 98 bits.
const ALPHABET = 'abcdefghjkmnpqrstuvwxyz23456789'
const group = () => Array.from({ length: 5 }, () => ALPHABET[randomInt(ALPHABET.length)]).join('')
const newPassword = () => [group(), group(), group(), group()].join('-')

/** The private file that keeps the demo passwords, so that they can be printed again. */
export const demoFile = (): string => path.resolve(process.env.DEMO_ACCOUNTS_FILE || '.data/demo-accounts.json')

function writeAccounts(accounts: DemoAccount[]): void {
  const file = demoFile()
  fs.mkdirSync(path.dirname(file), { recursive: true })
  const temporary = `${file}.${process.pid}`
  fs.writeFileSync(temporary, `${JSON.stringify(accounts, null, 2)}\n`, { mode: 0o600 })
  fs.renameSync(temporary, file)
}

function readAccounts(): DemoAccount[] {
  try {
    return JSON.parse(fs.readFileSync(demoFile(), 'utf8')) as DemoAccount[]
  } catch {
    return []
  }
}

const withPasswords = () => Promise.all(PEOPLE.map(async (person) => {
  const password = newPassword()
  return { account: { ...person, password }, passwordHash: await hashPassword(password) }
}))

/**
 * Keeps the demo accounts as the instance is set: made once, where there is no account to sign in with and demo accounts are allowed;
 * open while they are allowed and closed while they are not, except that what a person has closed stays closed. Answers the accounts just
 * made, or null.
 */
export async function setDemoAccounts(db: Db, allowed: boolean): Promise<DemoAccount[] | null> {
  const made = allowed && (await isEmpty(db)) ? await withPasswords() : null
  return db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK})`)
    if (made !== null && (await isEmpty(tx))) {
      await tx.insert(users).values(made.map(({ account: { email, name, role }, passwordHash }) => ({ email, name, role, passwordHash, demo: true })))
      await tx.insert(auditEvents).values({ action: 'user.create', subjectKind: 'demo accounts', after: PEOPLE.map(({ email, role }) => ({ email, role })) })
      writeAccounts(made.map(({ account }) => account))
      return made.map(({ account }) => account)
    }
    const turned = allowed ? and(eq(users.active, false), eq(users.closedBySetting, true)) : eq(users.active, true)
    const changed = await tx.update(users).set({ active: allowed, closedBySetting: !allowed, version: sql`${users.version} + 1`, updatedAt: new Date() })
      .where(and(eq(users.demo, true), turned)).returning({ email: users.email })
    if (changed.length > 0) await tx.insert(auditEvents).values({ action: allowed ? 'user.open' : 'user.close', subjectKind: 'demo accounts', after: changed })
    return null
  })
}

/** Whether nobody can sign in; the account that owns keys made on the command line is nobody in this sense. */
const isEmpty = async (db: Pick<Db, 'select'>) => ((await db.select({ n: count() }).from(users).where(isNotNull(users.passwordHash)))[0]?.n ?? 0) === 0

/** The demo accounts with their passwords; where the private file is lost or tells of other accounts, new passwords are set. */
export async function demoAccounts(db: Db): Promise<{ accounts: DemoAccount[]; renewed: boolean }> {
  const present = await db.select({ id: users.id, email: users.email, name: users.name, role: users.role }).from(users).where(eq(users.demo, true)).orderBy(users.createdAt, users.email)
  const kept = new Map(readAccounts().map((account) => [account.email, account.password]))
  if (present.every(({ email }) => kept.has(email))) return { accounts: present.map(({ email, name, role }) => ({ email, name, role, password: kept.get(email) ?? '' })), renewed: false }
  const renewed = await Promise.all(present.map(async (user) => {
    const password = newPassword()
    return { ...user, password, passwordHash: await hashPassword(password) }
  }))
  await db.transaction(async (tx) => {
    for (const { id, passwordHash } of renewed) await tx.update(users).set({ passwordHash, updatedAt: new Date() }).where(eq(users.id, id))
    await tx.insert(auditEvents).values({ action: 'user.password', subjectKind: 'demo accounts', after: renewed.map(({ email }) => ({ email })) })
    writeAccounts(renewed.map(({ email, name, role, password }) => ({ email, name, role, password })))
  })
  return { accounts: renewed.map(({ email, name, role, password }) => ({ email, name, role, password })), renewed: true }
}

/** A plain table for the terminal. */
export function printAccounts(accounts: readonly DemoAccount[]): string {
  const width = Math.max(...accounts.map(({ email }) => email.length))
  return accounts.map(({ email, role, password }) => `  ${role.padEnd(8)} ${email.padEnd(width)}  ${password}`).join('\n')
}
