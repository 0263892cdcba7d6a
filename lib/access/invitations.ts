import { randomUUID } from 'node:crypto'
import { and, desc, eq, gt, isNull, lt, lte, or, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { Db, Tx } from '@/db/client'
import { recordEvent } from '@/db/events'
import { invitations, users } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { knownCaller } from '@/lib/access/accounts'
import type { Caller } from '@/lib/access/caller'
import { checkPassword, hashPassword } from '@/lib/access/passwords'
import { enter, type SignInFrom } from '@/lib/access/sign-in'
import { mintToken, tokenDigest } from '@/lib/access/tokens'
import { entityTag } from '@/lib/entity-tag'
import { bodyProblem, Problem } from '@/lib/problem'
import type { Invitation, InvitationAcceptance, InvitationOffer, NewInvitation } from '@/openapi/schemas/people'
import type { SignedIn } from '@/openapi/schemas/session'

const GOOD_FOR_MS = 7 * 86_400_000

type State = Invitation['state']
interface Row { invitation: typeof invitations.$inferSelect; by: { id: string; name: string }; accepted: { id: string; name: string } | null }

const stateOf = (row: Row['invitation']): State =>
  row.acceptedAt !== null ? 'accepted' : row.revokedAt !== null ? 'revoked' : row.expiresAt.getTime() <= Date.now() ? 'expired' : 'open'

const shown = ({ invitation: row, by, accepted }: Row): Invitation => ({
  id: row.id, email: row.email, name: row.name, role: row.role, state: stateOf(row), invited_by: by, created_at: row.createdAt.toISOString(), expires_at: row.expiresAt.toISOString(),
  accepted_at: row.acceptedAt?.toISOString() ?? null, accepted_by: accepted, revoked_at: row.revokedAt?.toISOString() ?? null,
  etag: entityTag('invitation', row.id, row.acceptedAt?.toISOString() ?? null, row.revokedAt?.toISOString() ?? null),
})

const inviter = alias(users, 'inviter')
const accepter = alias(users, 'accepter')
const chosen = (db: Db | Tx) =>
  db.select({ invitation: invitations, by: { id: inviter.id, name: inviter.name }, accepted: { id: accepter.id, name: accepter.name } })
    .from(invitations).innerJoin(inviter, eq(inviter.id, invitations.invitedBy)).leftJoin(accepter, eq(accepter.id, invitations.acceptedBy))

function ofState(state: State): SQL | undefined {
  const open = and(isNull(invitations.acceptedAt), isNull(invitations.revokedAt))
  const now = new Date()
  return { accepted: sql`${invitations.acceptedAt} is not null`, revoked: sql`${invitations.revokedAt} is not null`, open: and(open, gt(invitations.expiresAt, now)), expired: and(open, lte(invitations.expiresAt, now)) }[state]
}

/** Newest first. `after` is [creation time, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listInvitations(db: Db, filter: { state?: State }, after: readonly (string | number | null)[] | null, limit: number): Promise<Invitation[]> {
  const conditions: (SQL | undefined)[] = []
  if (filter.state !== undefined) conditions.push(ofState(filter.state))
  if (after !== null) {
    const [at, id] = [new Date(String(after[0])), String(after[1])]
    conditions.push(or(lt(invitations.createdAt, at), and(eq(invitations.createdAt, at), gt(invitations.id, id))))
  }
  const rows = await chosen(db).where(and(...conditions)).orderBy(desc(invitations.createdAt), invitations.id).limit(limit + 1)
  return rows.map(shown)
}

async function readInvitation(db: Db | Tx, id: string): Promise<Invitation> {
  const [row] = await chosen(db).where(eq(invitations.id, id))
  if (row === undefined) throw new Problem('invitation_unknown', 'There is no invitation of this identifier; GET /invitations lists them.')
  return shown(row)
}

/** Whoever writes about an address waits for whoever does the same. */
const addressLock = (email: string) => sql`select pg_advisory_xact_lock(hashtext(${`invitation ${email.toLowerCase()}`}))`

async function requireNoAccount(tx: Tx, email: string, pointer: string): Promise<void> {
  const [user] = await tx.select({ active: users.active }).from(users).where(eq(sql`lower(${users.email})`, email.toLowerCase()))
  if (user === undefined) return
  throw bodyProblem(pointer, 'account_exists', user.active ? 'This address has an account; change its role instead.' : 'This address has an account that is closed; open it again instead.')
}

/** Invites a person. The token goes into the mail and nowhere else. An older invitation to the address that has run out gives way. */
export async function createInvitation(db: Db, acting: Acting, given: NewInvitation): Promise<Invitation> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    await tx.execute(addressLock(given.email))
    await requireNoAccount(tx, given.email, '/email')
    const now = new Date()
    const [earlier] = await tx.select().from(invitations).where(and(eq(sql`lower(${invitations.email})`, given.email.toLowerCase()), isNull(invitations.acceptedAt), isNull(invitations.revokedAt))).for('update')
    if (earlier !== undefined && earlier.expiresAt > now) throw bodyProblem('/email', 'invitation_open', `This address was invited at ${earlier.createdAt.toISOString()}, and that invitation is still open.`)
    if (earlier !== undefined) await tx.update(invitations).set({ revokedAt: now }).where(eq(invitations.id, earlier.id))
    const { token, sha256 } = mintToken()
    const expiresAt = new Date(now.getTime() + GOOD_FOR_MS)
    const [row] = await tx.insert(invitations).values({ ...given, sha256, invitedBy: caller.userId, createdAt: now, expiresAt }).returning({ id: invitations.id })
    if (row === undefined) throw new Error('The invitation was not stored')
    const made = await readInvitation(tx, row.id)
    await recordEvent(tx, 'invitation.made', { invitation: made.id, email: made.email, name: made.name, role: made.role, by: made.invited_by.name, expires_at: made.expires_at, token })
    await recordAudit(tx, acting, { action: 'invitation.create', subjectKind: 'invitation', subjectId: made.id, after: { email: made.email, name: made.name, role: made.role, expires_at: made.expires_at } })
    return made
  })
}

/** Takes an invitation back. `check` sees it as it is, under lock, and may refuse. Doing so twice is no error. */
export async function revokeInvitation(db: Db, acting: Acting, id: string, check: (invitation: Invitation) => void): Promise<void> {
  await db.transaction(async (tx) => {
    await tx.select({ id: invitations.id }).from(invitations).where(eq(invitations.id, id)).for('update')
    const invitation = await readInvitation(tx, id)
    check(invitation)
    if (invitation.state === 'accepted') throw new Problem('invitation_accepted', 'This invitation has become an account; close that instead.')
    if (invitation.state === 'revoked') return
    await tx.update(invitations).set({ revokedAt: new Date() }).where(eq(invitations.id, id))
    await recordAudit(tx, acting, { action: 'invitation.revoke', subjectKind: 'invitation', subjectId: id, before: { state: invitation.state }, after: { state: 'revoked' } })
  })
}

async function offerOf(db: Db | Tx, token: string): Promise<Row> {
  const [row] = await chosen(db).where(eq(invitations.sha256, tokenDigest(token)))
  if (row === undefined || stateOf(row.invitation) !== 'open') throw new Problem('invitation_unusable', 'This link is not known, was used or taken back, or is more than seven days old.')
  return row
}

/** What the holder of a link is offered. */
export async function readOffer(db: Db, token: string): Promise<InvitationOffer> {
  const { invitation, by } = await offerOf(db, token)
  return { email: invitation.email, name: invitation.name, role: invitation.role, invited_by: by.name, expires_at: invitation.expiresAt.toISOString() }
}

/** Makes the account that an invitation offers, and signs in to it. */
export async function acceptInvitation(db: Db, given: InvitationAcceptance, from: SignInFrom): Promise<{ data: SignedIn; cookies: string[] }> {
  const { invitation: offered } = await offerOf(db, given.token)
  checkPassword(given.password, '/password')
  const passwordHash = await hashPassword(given.password)
  return db.transaction(async (tx) => {
    await tx.execute(addressLock(offered.email))
    await tx.select({ id: invitations.id }).from(invitations).where(eq(invitations.id, offered.id)).for('update')
    const { invitation } = await offerOf(tx, given.token)
    await requireNoAccount(tx, invitation.email, '/token')
    const now = new Date()
    const [user] = await tx.insert(users).values({ email: invitation.email, name: given.name ?? invitation.name, role: invitation.role, passwordHash, createdAt: now, updatedAt: now }).returning()
    if (user === undefined) throw new Error('The account was not stored')
    await tx.update(invitations).set({ acceptedAt: now, acceptedBy: user.id }).where(eq(invitations.id, invitation.id))
    const entered = await enter(tx, user, from, randomUUID())
    const caller: Caller = { kind: 'session', role: user.role, userId: user.id, sessionId: entered.session, name: user.name }
    const acting = { caller, ip: from.ip, requestId: from.requestId }
    await recordAudit(tx, acting, { action: 'invitation.accept', subjectKind: 'invitation', subjectId: invitation.id, before: { state: 'open' }, after: { state: 'accepted' } })
    await recordAudit(tx, acting, { action: 'person.create', subjectKind: 'user', subjectId: user.id, after: { email: user.email, name: user.name, role: user.role } })
    return entered
  })
}
