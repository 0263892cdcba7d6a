import { ANONYMOUS, type Caller } from '@/lib/access/caller'
import { isKeyShaped, KEY_MARK, keyDigest } from '@/lib/access/keys'
import { readCookie, readSessionToken, sessionCookieName } from '@/lib/access/sessions'
import { findKey, findSession, noteKeyUse, noteSessionUse, rememberedKey, rememberedSession, type VerifiedKey } from '@/lib/access/verified'
import { Problem, type ProblemCode } from '@/lib/problem'

const refuse = (code: ProblemCode, detail: string): Problem =>
  new Problem(code, detail, { headers: { 'www-authenticate': 'Bearer realm="lodeterm", error="invalid_token"' } })

const expired = (at: Date): Problem => refuse('key_expired', `This key expired at ${at.toISOString()}; make a new one.`)

/**
 * Who is asking, by the Authorization and Cookie fields. Answers at once where the caller is remembered, else after asking
 * the database. Throws a Problem: 400 for both at once, 401 for a key or session that does not hold.
 */
export function callerFor({ authorization, cookie }: { authorization: string | null; cookie: string | null }): Caller | Promise<Caller> {
  const session = cookie === null ? null : readCookie(cookie, sessionCookieName())
  if (authorization !== null) {
    if (session !== null && session !== '') throw new Problem('two_credentials', 'Send either a key or the session cookie, not both.')
    return byKey(authorization)
  }
  return session === null || session === '' ? ANONYMOUS : bySession(session)
}

function byKey(authorization: string): Caller | Promise<Caller> {
  const [scheme, key, ...rest] = authorization.trim().split(/\s+/)
  if (scheme === undefined || scheme.toLowerCase() !== 'bearer' || key === undefined || rest.length > 0) {
    throw refuse('authorization_malformed', `Authorization must be "Bearer ${KEY_MARK}...", with one key.`)
  }
  if (!isKeyShaped(key)) throw refuse('key_malformed', key.startsWith(KEY_MARK) ? 'The checksum of this key does not fit: it was cut short or mistyped.' : `A key begins with ${KEY_MARK}; this does not.`)
  const digest = keyDigest(key)
  const remembered = rememberedKey(digest.toString('base64'))
  return remembered === undefined ? askKey(digest) : accept(remembered)
}

/** Expiry is looked at on each use, remembered or not. */
function accept(key: VerifiedKey): Caller {
  const now = Date.now()
  const { expiresAt } = key.caller
  if (expiresAt !== null && expiresAt.getTime() <= now) throw expired(expiresAt)
  noteKeyUse(key, now)
  return key.caller
}

async function askKey(digest: Buffer): Promise<Caller> {
  const finding = await findKey(digest)
  switch (finding.state) {
    case 'unknown':
      throw refuse('key_refused', 'This key is not known here; it may belong to another server.')
    case 'revoked':
      throw refuse('key_revoked', 'This key was revoked; make a new one.')
    case 'expired':
      throw expired(finding.at)
    case 'good':
      return accept(finding.verified)
  }
}

const ended = (): Problem => new Problem('session_ended', 'The session has ended; sign in again.', { headers: { 'www-authenticate': 'Bearer realm="lodeterm"' } })

async function bySession(token: string): Promise<Caller> {
  let session = rememberedSession(token) ?? null
  if (session === null) {
    const id = await readSessionToken(token)
    session = id === null ? null : await findSession(id, token)
  }
  const now = Date.now()
  if (session === null || session.expiresAt.getTime() <= now) throw ended()
  noteSessionUse(session, now)
  return session.caller
}
