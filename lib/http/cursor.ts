import { createHash, createHmac, timingSafeEqual } from 'node:crypto'
import { parameterProblem } from '@/lib/problem'
import type { CursorPosition } from '@/lib/http/types'

export interface Cursor { edition: number; position: CursorPosition }

/** What a cursor belongs to: the operation, its path and every parameter that decides which rows come and in which order. */
export function queryFingerprint(operation: string, path: Readonly<Record<string, string>>, asked: Readonly<Record<string, string | string[]>>): string {
  const filters = Object.entries(asked).filter(([name]) => !['cursor', 'limit', 'format', 'edition', 'explain'].includes(name)).sort(([a], [b]) => (a < b ? -1 : 1))
  return createHash('sha256').update(JSON.stringify([operation, path, filters])).digest('base64url').slice(0, 16)
}

const sign = (secret: Uint8Array, payload: string): Buffer => createHmac('sha256', secret).update('cursor:').update(payload).digest().subarray(0, 16)

/** Opaque text: edition, fingerprint and position, signed so that only what we gave out comes back. */
export function writeCursor(secret: Uint8Array, fingerprint: string, cursor: Cursor): string {
  const payload = Buffer.from(JSON.stringify([1, cursor.edition, fingerprint, cursor.position])).toString('base64url')
  return `${payload}.${sign(secret, payload).toString('base64url')}`
}

const malformed = () => parameterProblem('cursor', 'cursor_malformed', 'This is not a cursor of this server; take page.next_cursor as it is, or begin without one.')

/** Codes `cursor_malformed` and `cursor_mismatch`, both 400. */
export function readCursor(secret: Uint8Array, fingerprint: string, text: string): Cursor {
  const [payload, mac, ...rest] = text.split('.')
  if (payload === undefined || mac === undefined || rest.length > 0) throw malformed()
  const expected = sign(secret, payload)
  const given = Buffer.from(mac, 'base64url')
  if (given.length !== expected.length || !timingSafeEqual(given, expected)) throw malformed()
  const [version, edition, owner, position] = JSON.parse(Buffer.from(payload, 'base64url').toString()) as [number, number, string, CursorPosition]
  if (version !== 1) throw malformed()
  if (owner !== fingerprint) throw parameterProblem('cursor', 'cursor_mismatch', 'This cursor was given out for another query; keep filters and sort the same while paging, or begin without a cursor.')
  return { edition, position }
}
