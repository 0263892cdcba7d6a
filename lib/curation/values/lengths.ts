import { z } from 'zod'
import { type ChangeKind, VALUES } from '@/openapi/schemas/change'
import type { Findings } from './findings'

/** How long the text of a field may be; for a list how many it may hold, and the same of each of them. */
type Limit = { text: number } | { items: number; each: ReadonlyMap<string, Limit> }

function limitOf(schema: unknown): Limit | null {
  if (schema instanceof z.ZodOptional || schema instanceof z.ZodNullable) return limitOf(schema.unwrap())
  if (schema instanceof z.ZodUnion) return schema.options.map(limitOf).find((limit) => limit !== null) ?? null
  if (schema instanceof z.ZodString) return schema.maxLength === null ? null : { text: schema.maxLength }
  if (!(schema instanceof z.ZodArray)) return null
  const { element } = schema
  const items = z.toJSONSchema(schema, { unrepresentable: 'any' }).maxItems
  return element instanceof z.ZodObject && items !== undefined ? { items, each: limitsOf(element) } : null
}

const limitsOf = (schema: z.ZodObject): ReadonlyMap<string, Limit> =>
  new Map(Object.entries(schema.shape).flatMap(([field, of]): [string, Limit][] => { const limit = limitOf(of); return limit === null ? [] : [[field, limit]] }))

const LIMITS = new Map((Object.keys(VALUES) as ChangeKind[]).map((kind) => [kind, limitsOf(VALUES[kind])]))

function check(findings: Findings, limits: ReadonlyMap<string, Limit>, given: Readonly<Record<string, unknown>>, prefix: string): void {
  for (const [field, limit] of limits) {
    const value = given[field]
    if ('text' in limit) {
      if (typeof value === 'string' && value.length > limit.text) findings.error('too_long', `${prefix}${field}`, `${field} has ${value.length} characters; it may have at most ${limit.text}.`)
    } else if (Array.isArray(value)) {
      if (value.length > limit.items) findings.error('too_long', `${prefix}${field}`, `${field} holds ${value.length} values; it may hold at most ${limit.items}.`)
      value.forEach((one: unknown, at) => { if (typeof one === 'object' && one !== null) check(findings, limit.each, one as Record<string, unknown>, `${prefix}${field}.${at}.`) })
    }
  }
}

/** The lengths that the contract allows, for values on whatever way they come: a file brings longer ones than a request can. */
export const checkLengths = (findings: Findings, kind: ChangeKind, given: object): void => check(findings, LIMITS.get(kind) ?? new Map<string, Limit>(), given as Readonly<Record<string, unknown>>, '')
