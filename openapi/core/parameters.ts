import { z } from 'zod'
import { parseHalf } from '@/lib/atomic/half'
import { parseField } from '@/lib/units/field'
import { quoted, readNumber } from '@/lib/units/number'
import type { Parsed } from '@/lib/units/parsed'
import type { Format } from '@/openapi/core/formats'

/**
 * Parameters arrive as text and leave as domain values. A default is given as text too (`prefault`),
 * so that `meta.query` can show it as if it had been typed. Names and bounds for the document stand in `meta`.
 */

const LONGEST = 200

type Meta = Record<string, unknown> & { description: string }

/** Text read by a domain parser; its code and sentence become the error of the parameter. */
export const readBy = <T>(parse: (text: string) => Parsed<T>, meta: Meta) =>
  z.string().transform((text, context): T => {
    // No value of any parameter is longer, and what a parser is given stays small.
    if (text.length > LONGEST) {
      context.addIssue({ code: 'custom', message: `At most ${LONGEST} characters are read here; this has ${text.length}.`, params: { code: 'length_out_of_range' } })
      return z.NEVER
    }
    const result = parse(text)
    if (result.ok) return result.value
    context.addIssue({ code: 'custom', message: result.detail, params: { code: result.code } })
    return z.NEVER
  }).meta(meta)

export interface Bounds { min?: number; max?: number; integer?: boolean; unit?: string; example?: number }

/** A decimal number within bounds (both included). Codes `number_malformed`, `number_out_of_range`. */
export function numberParameter(description: string, { min, max, integer = false, unit, example }: Bounds = {}) {
  const inUnit = unit === undefined ? '' : ` ${unit}`
  const range = min !== undefined && max !== undefined ? `from ${min} to ${max}${inUnit}` : min !== undefined ? `of at least ${min}${inUnit}` : max !== undefined ? `of at most ${max}${inUnit}` : unit === undefined ? '' : `in ${unit}`
  const wanted = `${integer ? 'a whole number' : 'a number'}${range === '' ? '' : ` ${range}`}`
  const read = (text: string): Parsed<number> => {
    const value = readNumber(text)
    if (value === null || (integer && !Number.isSafeInteger(value))) return { ok: false, code: 'number_malformed', detail: `${quoted(text)} is not ${wanted}.` }
    if ((min !== undefined && value < min) || (max !== undefined && value > max)) return { ok: false, code: 'number_out_of_range', detail: `${quoted(text)} is out of range: give ${wanted}.` }
    return { ok: true, value: value === 0 ? 0 : value }
  }
  return readBy(read, {
    description, type: integer ? 'integer' : 'number',
    ...(min === undefined ? {} : { minimum: min }), ...(max === undefined ? {} : { maximum: max }), ...(example === undefined ? {} : { example }),
  })
}

/** J, S or m as `3/2`, `1.5` or `2`; the value is twice the number, an integer. */
export const halfParameter = (description: string, { min = 0 }: { min?: number } = {}) =>
  readBy((text) => {
    const result = parseHalf(text)
    if (result.ok && result.value < 2 * min) return { ok: false, code: 'number_out_of_range', detail: `${quoted(text)} is out of range: give a half-integer of at least ${min}.` }
    return result
  }, { description, type: 'string', pattern: '^-?[0-9]+(\\.[05]|/[12])?$', example: '3/2' })

/** A magnetic field with its unit; the value is in tesla. */
export const fieldParameter = (description = 'Magnetic field from 0 to 10000 T: a number with T, mT, µT (or uT), G or kG; a bare number is tesla.') =>
  readBy((text) => {
    const result = parseField(text)
    return result.ok ? { ok: true, value: result.tesla } : result
  }, { description, type: 'string', example: '1.5T' })

/** A flag. */
export const flagParameter = (description: string, byDefault = false) =>
  z.enum(['true', 'false']).prefault(byDefault ? 'true' : 'false').transform((text) => text === 'true')
    .meta({ description, type: 'boolean', enum: [true, false], default: byDefault })

/** Text of bounded length, trimmed. */
export const textParameter = (description: string, { max = 200, example }: { max?: number; example?: string } = {}) =>
  z.string().trim().min(1).max(max).meta({ description, ...(example === undefined ? {} : { example }) })

/** A time with zone, or a day, which is its first moment in UTC. Its code is `time_malformed`. */
export const instantParameter = (description: string) =>
  readBy((text) => {
    const written = /^\d{4}-\d{2}-\d{2}$/.test(text) ? `${text}T00:00:00Z` : text
    const time = z.iso.datetime({ offset: true }).safeParse(written).success ? new Date(written).getTime() : Number.NaN
    return Number.isNaN(time) ? { ok: false, code: 'time_malformed', detail: `${quoted(text)} is no time: write it like 2030-01-31T12:00:00Z, or a day like 2030-01-31.` } : { ok: true, value: new Date(time).toISOString() }
  }, { description, type: 'string', example: '2030-01-31' })

/** One of a few words. */
export const choiceParameter = <const T extends readonly [string, ...string[]]>(words: T, description: string, byDefault?: T[number]) => {
  const choice = z.enum(words)
  return (byDefault === undefined ? choice : choice.prefault(byDefault as never)).meta({ description }) as z.ZodType<T[number], string | undefined>
}

/** May be given several times; the value is a list. */
export const repeatable = <T extends z.ZodType>(item: T, description: string, { max = 100 }: { max?: number } = {}) =>
  z.array(item).min(1).max(max).meta({ description })

export const LATEST = 'latest'

export const editionParameter = readBy<number | typeof LATEST>((text) => {
  if (text === LATEST) return { ok: true, value: LATEST }
  if (/^[1-9][0-9]{0,8}$/.test(text)) return { ok: true, value: Number(text) }
  return { ok: false, code: 'edition_malformed', detail: `${quoted(text)} is not an edition: give its number, such as 1, or "latest".` }
}, { description: 'Edition to read: its number, or latest.', type: 'string', pattern: '^(latest|[1-9][0-9]{0,8})$', default: LATEST, example: '1' }).prefault(LATEST)

/** `edition` as a member of a body, for operations whose whole question stands there; the parameter of the same name does as well. */
export const bodyEdition = z.union([z.int().min(1).max(999_999_999), z.literal(LATEST)]).optional().meta({ description: 'Edition to read: its number, or latest, which is the default.', example: 1 })

export const LIMIT_DEFAULT = 100
export const LIMIT_MAX = 1000
export const limitParameter = numberParameter('Rows on one page.', { min: 1, max: LIMIT_MAX, integer: true }).prefault(String(LIMIT_DEFAULT))
  .meta({ description: 'Rows on one page.', type: 'integer', minimum: 1, maximum: LIMIT_MAX, default: LIMIT_DEFAULT })

export const cursorParameter = z.string().min(1).max(4000).optional()
  .meta({ description: 'Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition.' })

export const explainParameter = flagParameter('List what default filters and rules took out, not only how many, in meta.explained.')

export const formatParameter = (formats: readonly Format[]) =>
  z.enum([...formats] as [Format, ...Format[]]).optional().meta({ description: 'Representation, instead of the Accept field. Default: what Accept prefers, else json.' })
