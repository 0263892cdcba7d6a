import type { z } from 'zod'
import { quoted } from '@/lib/units/number'
import type { Fault } from '@/lib/problem'
import { nearest } from '@/lib/problem/nearest'

/** Unknown keys of one place that are told one by one: no honest body has more, and a hostile one should not be answered at length. */
const MOST_KEYS = 50

type Issue = z.core.$ZodIssue
type Place = (path: readonly PropertyKey[]) => Pick<Fault, 'parameter' | 'pointer'>

export const parameterPlace: Place = (path) => ({ parameter: String(path[0] ?? '') })
/** RFC 6901 JSON pointer. */
export const pointerPlace: Place = (path) => ({ pointer: path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('') })

const ARTICLE: Record<string, string> = {
  string: 'text', number: 'a number', int: 'a whole number', boolean: 'true or false', object: 'an object', array: 'a list', null: 'null', undefined: 'nothing', nan: 'not a number',
}
const named = (type: string): string => ARTICLE[type] ?? type

function typeOf(value: unknown): string {
  if (value === null) return 'null'
  if (Array.isArray(value)) return 'a list'
  return named(typeof value)
}

const lookIn = (value: unknown, path: readonly PropertyKey[]): unknown =>
  path.reduce<unknown>((inside, part) => (typeof inside === 'object' && inside !== null ? (inside as Record<PropertyKey, unknown>)[part] : undefined), value)

interface Bound { origin?: string; minimum?: number | bigint; maximum?: number | bigint; inclusive?: boolean; exact?: boolean }

function boundFault(issue: Bound, low: boolean): { code: string; detail: string } {
  const bound = String(low ? issue.minimum : issue.maximum)
  const counted = issue.origin === 'string' ? 'characters' : issue.origin === 'array' || issue.origin === 'set' ? 'items' : null
  const side = low ? (issue.inclusive === false ? 'more than' : 'at least') : issue.inclusive === false ? 'less than' : 'at most'
  return counted === null
    ? { code: 'number_out_of_range', detail: `The number must be ${side} ${bound}.` }
    : { code: 'length_out_of_range', detail: `It must have ${side} ${bound} ${counted}.` }
}

const FORMAT_WORDS: Record<string, string> = {
  email: 'an e-mail address such as name@place.example', uuid: 'a UUID', datetime: 'a time in ISO 8601 with zone, such as 2030-01-31T12:00:00Z', url: 'an http address',
}

/** What a pattern asks for: in the schema's own words where it has any. */
const formWords = ({ format, pattern, message }: { format: string; pattern?: string; message: string }): string =>
  format === 'regex' && !message.startsWith('Invalid ') ? message : `of the form ${pattern ?? format}`

/**
 * Turns what zod found into faults with our own codes and sentences, every one of them.
 * `input` is what was parsed; `known` gives the keys that an object at a path may have, for the nearest name.
 */
export function faultsOf(issues: readonly Issue[], input: unknown, place: Place, known: (path: readonly PropertyKey[]) => readonly string[]): Fault[] {
  const parameter = place === parameterPlace
  return issues.flatMap((issue): Fault[] => {
    const at = place(issue.path)
    const value = lookIn(input, issue.path)
    switch (issue.code) {
      case 'unrecognized_keys':
        return issue.keys.slice(0, MOST_KEYS).map((key) => {
          const near = nearest(key, known(issue.path))
          return { ...place([...issue.path, key]), code: parameter ? 'unknown_parameter' : 'unknown_field', detail: `${quoted(key)} is not known here.${near === null ? '' : ` Did you mean ${near}?`}` }
        })
      case 'invalid_type':
        if (value === undefined) return [{ ...at, code: parameter ? 'missing_parameter' : 'missing_field', detail: parameter ? `${String(issue.path.at(-1) ?? '')} is needed and was not given.` : `Needed and not given: ${named(issue.expected)}.` }]
        return [{ ...at, code: 'wrong_type', detail: `Give ${named(issue.expected)}; this is ${typeOf(value)}.` }]
      case 'invalid_value':
        if (value === undefined) return [{ ...at, code: parameter ? 'missing_parameter' : 'missing_field', detail: `Needed and not given: one of ${issue.values.map(String).join(', ')}.` }]
        return [{ ...at, code: 'value_not_listed', detail: `${typeof value === 'string' ? quoted(value) : 'The value'} is not one of ${issue.values.map(String).join(', ')}.` }]
      case 'too_small':
        return [{ ...at, ...boundFault(issue as Bound, true) }]
      case 'too_big':
        return [{ ...at, ...boundFault(issue as Bound, false) }]
      case 'invalid_format':
        return [{ ...at, code: 'format_mismatch', detail: `${typeof value === 'string' ? quoted(value) : 'The value'} is not ${FORMAT_WORDS[issue.format] ?? formWords(issue)}.` }]
      case 'invalid_union':
        return unionFaults(issue, value, at, (path) => place([...issue.path, ...path]), (path) => known([...issue.path, ...path]), place)
      case 'custom': {
        const code: unknown = issue.params?.code
        return [{ ...at, code: typeof code === 'string' ? code : 'format_mismatch', detail: issue.message }]
      }
      default:
        return [{ ...at, code: 'format_mismatch', detail: issue.message }]
    }
  })
}

/** Of several shapes a value could have had, the one it comes nearest to speaks: fewest faults, none of them about its type. */
function unionFaults(
  issue: Extract<Issue, { code: 'invalid_union' }>, value: unknown, at: Pick<Fault, 'parameter' | 'pointer'>, placeInside: Place,
  known: (path: readonly PropertyKey[]) => readonly string[], place: Place,
): Fault[] {
  const branches = issue.errors
    .filter((branch) => !branch.some((inner) => inner.code === 'invalid_type' && inner.path.length === 0))
    .sort((a, b) => a.length - b.length)
  const [best] = branches
  if (best === undefined) {
    if (value === undefined) return [{ ...at, code: place === parameterPlace ? 'missing_parameter' : 'missing_field', detail: 'Needed and not given.' }]
    return [{ ...at, code: 'wrong_type', detail: `This is ${typeOf(value)}, which is none of the forms that can stand here.` }]
  }
  const inside = place === parameterPlace ? () => at : placeInside
  return faultsOf(best, value, inside, known)
}

interface Def { type?: string; shape?: Record<string, unknown>; innerType?: unknown; element?: unknown; options?: unknown[]; in?: unknown; valueType?: unknown }
const defOf = (schema: unknown): Def | undefined => (schema as { _zod?: { def?: Def } } | undefined)?._zod?.def

/** The keys that an object may have at a path inside a schema, through every wrapper and union. */
export function knownKeys(schema: unknown, path: readonly PropertyKey[]): string[] {
  const def = defOf(schema)
  if (def === undefined) return []
  if (def.innerType !== undefined) return knownKeys(def.innerType, path)
  if (def.type === 'pipe') return knownKeys(def.in, path)
  if (def.options !== undefined) return def.options.flatMap((option) => knownKeys(option, path))
  const [head, ...rest] = path
  if (def.shape !== undefined) return head === undefined ? Object.keys(def.shape) : knownKeys(def.shape[String(head)], rest)
  if (def.element !== undefined && head !== undefined) return knownKeys(def.element, rest)
  return []
}
