import { isProblemCode, kindOf, PROBLEMS, type ProblemCode } from '@/lib/problem/catalogue'

export { isProblemCode, kindOf, PROBLEMS, type ProblemCode, type ProblemKind } from '@/lib/problem/catalogue'

/** One thing that is wrong: its place in the body (`pointer`, RFC 6901) or the name of a parameter, a code, and what to do. */
export interface Fault { parameter?: string; pointer?: string; code: string; detail: string }

export interface ProblemOptions {
  errors?: Fault[]
  headers?: Record<string, string>
  /** Further members of the problem document, such as `successor` of a retired level. */
  extra?: Record<string, unknown>
  cause?: unknown
}

/** The one family of errors a user can cause. The endpoint wrapper turns it into an RFC 9457 document. */
export class Problem extends Error {
  readonly code: ProblemCode
  readonly status: number
  readonly title: string
  readonly detail: string
  readonly errors: readonly Fault[]
  readonly headers: Readonly<Record<string, string>>
  readonly extra: Readonly<Record<string, unknown>>

  constructor(code: ProblemCode, detail: string, options: ProblemOptions = {}) {
    super(detail, options.cause === undefined ? undefined : { cause: options.cause })
    this.name = 'Problem'
    this.code = code
    this.status = PROBLEMS[code].status
    this.title = PROBLEMS[code].title
    this.detail = detail
    this.errors = options.errors ?? []
    this.headers = options.headers ?? {}
    this.extra = options.extra ?? {}
  }
}

/** A problem in one query or path parameter. */
export const parameterProblem = (parameter: string, code: ProblemCode, detail: string): Problem =>
  new Problem(code, detail, { errors: [{ parameter, code, detail }] })

/** A problem at one place of the body; `pointer` is an RFC 6901 JSON pointer such as `/upper/j`. */
export const bodyProblem = (pointer: string, code: ProblemCode, detail: string): Problem =>
  new Problem(code, detail, { errors: [{ pointer, code, detail }] })

/** Nothing of this name; `near` are spellings that do exist. */
export const notFound = (code: ProblemCode, detail: string, near: readonly string[] = []): Problem =>
  new Problem(code, near.length === 0 ? detail : `${detail} Did you mean ${near.slice(0, 3).join(' or ')}?`)

/** Bounds of what one answer tells; a request with more faults than this was not made by hand. */
const MOST_PLACES = 20
const MOST_ERRORS = 200

/**
 * The problem that a list of faults makes: of their own kind where there is one fault, else `invalid_input`
 * (or, where every fault is well formed and impossible, `physics_impossible`).
 */
export function faultsProblem(faults: readonly Fault[]): Problem {
  const [first] = faults
  if (first !== undefined && faults.length === 1 && isProblemCode(first.code)) return new Problem(first.code, first.detail, { errors: [first] })
  const impossible = faults.length > 0 && faults.every((fault) => kindOf(fault.code)?.status === 422)
  const places = [...new Set(faults.map((fault) => fault.parameter ?? fault.pointer ?? 'body'))]
  const named = places.length > MOST_PLACES ? `${places.slice(0, MOST_PLACES).join(', ')} and ${places.length - MOST_PLACES} more` : places.join(', ')
  return new Problem(impossible ? 'physics_impossible' : 'invalid_input', `${faults.length} things are wrong: ${named}.`, { errors: faults.slice(0, MOST_ERRORS) })
}
