import { eq, and, isNull, ne } from 'drizzle-orm'
import { jwtVerify, SignJWT } from 'jose'
import type { Db, Tx } from '@/db/client'
import { sessions } from '@/db/schema'
import { sessionSecret } from '@/lib/access/secret'
import { getConfig } from '@/lib/config'

/** How long a sign-in lasts. */
const SESSION_SECONDS = 7 * 86_400
/** How long a browser is known to have signed in to an account. */
const DEVICE_SECONDS = 365 * 86_400

const isHttps = (): boolean => getConfig().baseUrl.startsWith('https:')
/** The __Host- prefix binds a cookie to this host, https and path /; on plain loopback http a browser would refuse it. */
export const sessionCookieName = (): string => (isHttps() ? '__Host-lodeterm' : 'lodeterm')
export const deviceCookieName = (): string => (isHttps() ? '__Host-lodeterm-known' : 'lodeterm-known')

const attributes = (seconds: number): string => `; Path=/; Max-Age=${seconds}; HttpOnly; SameSite=Lax${isHttps() ? '; Secure' : ''}`

export const sessionCookie = (token: string): string => `${sessionCookieName()}=${token}${attributes(SESSION_SECONDS)}`
export const deviceCookie = (token: string): string => `${deviceCookieName()}=${token}${attributes(DEVICE_SECONDS)}`
export const clearedSessionCookie = (): string => `${sessionCookieName()}=${attributes(0)}`

/** One cookie's value out of a Cookie field. */
export function readCookie(field: string | null, name: string): string | null {
  if (field === null) return null
  for (const part of field.split(';')) {
    const at = part.indexOf('=')
    if (at > 0 && part.slice(0, at).trim() === name) return part.slice(at + 1).trim()
  }
  return null
}

type Purpose = 'session' | 'device'

const sign = (purpose: Purpose, subject: string, id: string, seconds: number): Promise<string> =>
  new SignJWT({}).setProtectedHeader({ alg: 'HS256' }).setAudience(purpose).setSubject(subject).setJti(id).setIssuedAt().setExpirationTime(`${seconds}s`).sign(sessionSecret())

async function verify(purpose: Purpose, token: string): Promise<{ subject: string; id: string } | null> {
  try {
    const { payload } = await jwtVerify(token, sessionSecret(), { algorithms: ['HS256'], audience: purpose })
    return payload.sub === undefined || payload.jti === undefined ? null : { subject: payload.sub, id: payload.jti }
  } catch {
    return null
  }
}

/** The session that a cookie names, if the signature and its time hold; whether the session goes on, only the database knows. */
export const readSessionToken = async (token: string): Promise<string | null> => (await verify('session', token))?.id ?? null

/** The account and device that a long-lived cookie tells of. */
export const readDeviceToken = (token: string): Promise<{ subject: string; id: string } | null> => verify('device', token)

export const deviceToken = (userId: string, deviceId: string): Promise<string> => sign('device', userId, deviceId, DEVICE_SECONDS)

/** Begins a session: its row, and the token for the cookie. */
export async function beginSession(db: Db | Tx, userId: string, from: { ip: string; userAgent: string | null }): Promise<{ id: string; token: string; expiresAt: Date }> {
  const expiresAt = new Date(Date.now() + SESSION_SECONDS * 1000)
  const [row] = await db.insert(sessions).values({ userId, expiresAt, ip: from.ip, userAgent: from.userAgent?.slice(0, 300) ?? null }).returning({ id: sessions.id })
  if (row === undefined) throw new Error('The session was not stored')
  return { id: row.id, token: await sign('session', userId, row.id, SESSION_SECONDS), expiresAt }
}

export const endSession = async (db: Db | Tx, id: string): Promise<void> => {
  await db.update(sessions).set({ endedAt: new Date() }).where(and(eq(sessions.id, id), isNull(sessions.endedAt)))
}

/** Ends every other session of an account, after its password changed. */
export const endOtherSessions = async (db: Db | Tx, userId: string, but: string): Promise<void> => {
  await db.update(sessions).set({ endedAt: new Date() }).where(and(eq(sessions.userId, userId), ne(sessions.id, but), isNull(sessions.endedAt)))
}
