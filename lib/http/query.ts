import type { z } from 'zod'
import { faultsOf, knownKeys, parameterPlace } from '@/lib/http/faults'
import { nearest } from '@/lib/problem/nearest'
import type { Fault } from '@/lib/problem'
import { quoted } from '@/lib/units/number'

interface Def { type?: string; innerType?: unknown; in?: unknown; defaultValue?: unknown }
const defOf = (schema: unknown): Def | undefined => (schema as { _zod?: { def?: Def } } | undefined)?._zod?.def

function isRepeatable(schema: unknown): boolean {
  const def = defOf(schema)
  if (def === undefined) return false
  if (def.type === 'array') return true
  return isRepeatable(def.innerType ?? def.in)
}

/** The text that stands for a parameter that is not given, or undefined. */
function defaultText(schema: unknown): string | string[] | undefined {
  const def = defOf(schema)
  if (def === undefined) return undefined
  if (def.type === 'prefault' || def.type === 'default') {
    const value = def.defaultValue
    return Array.isArray(value) ? value.map(String) : value === undefined ? undefined : String(value)
  }
  return defaultText(def.innerType ?? def.in)
}

/** A query schema taken apart once, when its operation is made. */
export interface QueryPlan { schema: z.ZodObject; names: readonly string[]; repeatable: ReadonlySet<string>; defaults: Readonly<Record<string, string | string[]>> }

export function planQuery(schema: z.ZodObject): QueryPlan {
  const names = Object.keys(schema.shape)
  const defaults: Record<string, string | string[]> = {}
  for (const name of names) {
    const text = defaultText(schema.shape[name])
    if (text !== undefined) defaults[name] = text
  }
  return { schema, names, repeatable: new Set(names.filter((name) => isRepeatable(schema.shape[name]))), defaults }
}

export interface ReadQuery {
  value: Record<string, unknown>
  /** What was asked, defaults included, as text: `meta.query`. */
  asked: Record<string, string | string[]>
  faults: Fault[]
}

const NUL: string = String.fromCharCode(0)

function decode(part: string): string | null {
  if (!part.includes('%') && !part.includes('+')) return part
  try {
    return decodeURIComponent(part.replaceAll('+', ' '))
  } catch {
    return null
  }
}

/** Reads the text after `?`: unknown, repeated, badly encoded and ill-formed parameters are all reported at once. */
export function readQuery(plan: QueryPlan, search: string): ReadQuery {
  const faults: Fault[] = []
  const given: Record<string, string | string[]> = Object.create(null) as Record<string, string | string[]>
  const refused = new Set<string>()
  if (search !== '') {
    for (const pair of search.split('&')) {
      if (pair === '') continue
      const split = pair.indexOf('=')
      const written = split < 0 ? pair : pair.slice(0, split)
      const name = decode(written)
      const text = decode(split < 0 ? '' : pair.slice(split + 1))
      // U+FFFD is what some servers on the way make of bytes that are not UTF-8
      if (name === null || text === null || text.includes('\ufffd')) {
        faults.push({ parameter: name ?? written.slice(0, 60), code: 'encoding_malformed', detail: 'The percent-encoding of this part of the address is not valid UTF-8.' })
        if (name !== null) refused.add(name)
      } else if (name.includes(NUL) || text.includes(NUL)) {
        faults.push({ parameter: name.replaceAll(NUL, ''), code: 'nul_byte', detail: 'A parameter cannot hold a NUL character.' })
        refused.add(name)
      } else if (!plan.names.includes(name)) {
        const near = nearest(name, plan.names)
        const instead = near === null ? (plan.names.length === 0 ? ' This operation has no parameters.' : ` Known: ${plan.names.join(', ')}.`) : ` Did you mean ${near}?`
        faults.push({ parameter: name.slice(0, 100), code: 'unknown_parameter', detail: `${quoted(name)} is not a parameter of this operation.${instead}` })
      } else if (plan.repeatable.has(name)) {
        const list = given[name]
        if (Array.isArray(list)) list.push(text)
        else given[name] = [text]
      } else if (given[name] !== undefined) {
        if (!refused.has(name)) faults.push({ parameter: name, code: 'repeated_parameter', detail: `${name} is given more than once; give it once.` })
        refused.add(name)
      } else {
        given[name] = text
      }
    }
  }
  const asked = { ...plan.defaults, ...given }
  const result = plan.schema.safeParse(asked)
  if (result.success) return { value: result.data, asked, faults }
  // a parameter that was refused above has had its say
  const more = faultsOf(result.error.issues, asked, parameterPlace, (path) => knownKeys(plan.schema, path)).filter((fault) => !refused.has(fault.parameter ?? ''))
  return { value: {}, asked, faults: [...faults, ...more] }
}

export interface PathPlan { segments: readonly string[]; names: readonly (string | null)[]; schema: z.ZodObject }

export function planPath(path: string, schema: z.ZodObject): PathPlan {
  const segments = path.split('/').filter((segment) => segment !== '')
  return { segments, names: segments.map((segment) => (segment.startsWith('{') ? segment.slice(1, -1) : null)), schema }
}

/** Reads the path parameters out of the part of a path below /api/v1. */
export function readPath(plan: PathPlan, path: string): { value: Record<string, unknown>; raw: Record<string, string>; faults: Fault[] } {
  const raw: Record<string, string> = {}
  const faults: Fault[] = []
  const parts = path.split('/').filter((segment) => segment !== '')
  plan.names.forEach((name, index) => {
    if (name === null) return
    let text: string | null = null
    try {
      text = decodeURIComponent(parts[index] ?? '')
    } catch {
      faults.push({ parameter: name, code: 'encoding_malformed', detail: 'The percent-encoding of this part of the path is not valid UTF-8.' })
    }
    if (text !== null && text.includes(NUL)) faults.push({ parameter: name, code: 'nul_byte', detail: 'A path cannot hold a NUL character.' })
    else if (text !== null) raw[name] = text
  })
  if (faults.length > 0) return { value: {}, raw, faults }
  const result = plan.schema.safeParse(raw)
  if (result.success) return { value: result.data, raw, faults }
  const found = faultsOf(result.error.issues, raw, parameterPlace, () => [])
  return { value: {}, raw, faults: found.map((fault) => (fault.code === 'format_mismatch' ? { ...fault, code: 'identifier_malformed' } : fault)) }
}
