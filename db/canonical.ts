import { createHash } from 'node:crypto'

export type Json = null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json }

/**
 * The one text of a JSON value: keys in order of their UTF-16 code units, no spaces, numbers and strings as ECMAScript
 * writes them (RFC 8785). A number that is not finite has no such text and is refused.
 */
export function canonicalJson(value: Json): string {
  if (typeof value === 'number' && !Number.isFinite(value)) throw new RangeError(`${value} has no JSON text`)
  if (value === null || typeof value !== 'object') return JSON.stringify(value)
  if (isList(value)) return `[${value.map(canonicalJson).join(',')}]`
  const entries = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1))
  return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${canonicalJson(item)}`).join(',')}}`
}

const isList = (value: object): value is readonly Json[] => Array.isArray(value)

/** SHA-256 of the canonical text, hexadecimal. */
export const canonicalSha256 = (value: Json): string => createHash('sha256').update(canonicalJson(value), 'utf8').digest('hex')
