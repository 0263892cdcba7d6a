import { z } from 'zod'
import { cursorParameter, editionParameter, formatParameter, limitParameter } from '@/openapi/core/parameters'
import type { Format } from '@/openapi/core/formats'

export { FORMATS, MEDIA_TYPES, type Format } from '@/openapi/core/formats'

export type Role = 'reader' | 'curator' | 'admin'
export const ROLES: readonly Role[] = ['reader', 'curator', 'admin']

/**
 * Who may perform an operation.
 * - `public`: anyone, with no key and no session, whatever the instance's settings
 * - `reader`: reads and computes; strangers too while open reading is on
 * - `account`: any signed-in person or key, never a stranger
 * - `curator`, `admin`: that role or a higher one
 */
export type Access = 'public' | 'reader' | 'account' | 'curator' | 'admin'

/** `stored`: published data as they are; `computed`: physics on top of them; `none`: no edition is involved. */
export type EditionUse = 'stored' | 'computed' | 'none'

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete'

/** Something wrong between several parameters, found by an operation's `check`. */
export interface ParameterFault { parameter: string; code: string; detail: string }

/** A worked request and answer: shown in the documentation, and the starting point of generated test requests. */
export interface Example { params?: Record<string, string>; query?: Record<string, string | string[]>; body?: unknown; data?: unknown }

export interface Operation<
  P extends z.ZodObject = z.ZodObject, Q extends z.ZodObject = z.ZodObject, B extends z.ZodType = z.ZodType,
  R extends z.ZodType = z.ZodType, E extends EditionUse = EditionUse, L extends boolean = boolean,
> {
  /** operationId, camelCase: `listLevels`. */
  readonly id: string
  readonly method: Method
  /** Below /api/v1, with `{name}` for path parameters: `/levels/{level}`. */
  readonly path: string
  readonly summary: string
  readonly description?: string
  readonly tag: string
  readonly role: Access
  /** Only for a person signed in in a browser; a key is refused. */
  readonly sessionOnly: boolean
  readonly params: P
  /** All query parameters, the shared ones included; every input is text, or an array of text where repeatable. */
  readonly query: Q
  readonly check?: (query: z.output<Q>) => ParameterFault[]
  readonly body?: B
  /** The body is multipart/form-data, its parts the members of `body`; a file of at most so many bytes may be among them. */
  readonly multipart: { readonly limitBytes: number } | null
  /** The shape of `data` in the envelope; for a list, of its array. */
  readonly answer: R
  readonly list: L
  readonly edition: E
  /** Where the edition's number stands: the `edition` parameter, or path parameter `n`. */
  readonly editionIn: 'query' | 'path'
  /** Only the edition's number counts: its table is not brought into memory for it. */
  readonly numberOnly?: boolean
  readonly formats: readonly Format[]
  readonly status: 200 | 201 | 204
  /** May also answer 202, with the same shape: begun and not yet done. */
  readonly accepts202: boolean
  /** Needs If-Match with the entity tag last read. */
  readonly ifMatch: boolean
  /** Accepts Idempotency-Key. */
  readonly idempotent: boolean
  /** Problem codes the operation itself can answer with; those of the wrapper are added to the document by themselves. */
  readonly problems: readonly string[]
  readonly example: Example
  /** Answer exactly the schema, without envelope and in this media type (health checks and the OpenAPI document). */
  readonly bare: boolean
}

type Given<P extends z.ZodObject, Q extends z.ZodObject, B extends z.ZodType, R extends z.ZodType, E extends EditionUse, L extends boolean> =
  Pick<Operation<P, Q, B, R, E, L>, 'id' | 'method' | 'path' | 'summary' | 'tag' | 'role' | 'answer' | 'edition'>
  & Partial<Omit<Operation<P, Q, B, R, E, L>, 'answer' | 'edition' | 'formats'>> & { formats?: readonly Format[] }


const NO_PARAMETERS = z.strictObject({})

/**
 * Makes one operation's contract whole: the shared parameters of its kind are added to its query
 * (`edition` where an edition is read, `format` where there is more than JSON, `limit` and `cursor` for a list)
 * and everything not said takes its usual value.
 */
export function defineOperation<
  R extends z.ZodType, E extends EditionUse, P extends z.ZodObject = typeof NO_PARAMETERS,
  Q extends z.ZodObject = typeof NO_PARAMETERS, B extends z.ZodType = z.ZodUndefined, const L extends boolean = false,
>(given: Given<P, Q, B, R, E, L>): Operation<P, Q, B, R, E, L> {
  const formats: readonly Format[] = ['json', ...(given.formats ?? []).filter((format) => format !== 'json')]
  const list = given.list ?? (false as L)
  const editionIn = given.editionIn ?? 'query'
  const shared: Record<string, z.ZodType> = {}
  if (list) Object.assign(shared, { limit: limitParameter, cursor: cursorParameter })
  if (given.edition !== 'none' && editionIn === 'query') shared.edition = editionParameter
  if (formats.length > 1) shared.format = formatParameter(formats)
  const own = given.query ?? (NO_PARAMETERS as unknown as Q)
  const missing = Object.fromEntries(Object.entries(shared).filter(([name]) => !(name in own.shape)))
  return {
    description: undefined,
    sessionOnly: false,
    params: NO_PARAMETERS as unknown as P,
    multipart: null,
    status: 200,
    accepts202: false,
    ifMatch: false,
    idempotent: false,
    problems: [],
    example: {},
    bare: false,
    ...given,
    query: (Object.keys(missing).length === 0 ? own : own.safeExtend(missing)) as Q,
    formats,
    list,
    editionIn,
  }
}

/** The parameters that `defineOperation` adds, as they come to a handler. */
export type SharedQuery<L extends boolean> = L extends true ? { limit: number } : unknown

/** Media type of an operation's body. */
export const bodyType = (operation: Pick<Operation, 'multipart'>): string => (operation.multipart === null ? 'application/json' : 'multipart/form-data')

/** Whether an operation changes anything; a POST that reads an edition or only computes does not. */
export const writes = (operation: Pick<Operation, 'method' | 'edition' | 'role'>): boolean =>
  operation.method !== 'get' && operation.edition === 'none'
