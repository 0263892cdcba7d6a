import { OpenApiGeneratorV31, OpenAPIRegistry, type ResponseConfig, type RouteConfig } from '@asteasolutions/zod-to-openapi'
import { z } from 'zod'
import { bodyType, MEDIA_TYPES, type Operation, writes } from '@/openapi/core/define'
import { Meta, Page, ProblemDocument } from '@/openapi/schemas/envelope'
import { kindOf, type ProblemKind } from '@/lib/problem'

type Doc = Record<string, unknown>
type Responses = Record<string, ResponseConfig>
/** One operation's place in the finished document. */
interface PathItemOperation { security?: Doc[]; parameters?: Doc[]; responses: Record<string, Doc>; [member: string]: unknown }

const header = (description: string, schema: Doc = { type: 'string' }, required = true): Doc => ({ description, schema, ...(required ? { required: true } : {}) })

const ALWAYS = { 'X-Request-Id': header('Identifier of the request, for whoever runs the server.', { type: 'string', format: 'uuid' }) }
const LIMITS = {
  'RateLimit-Policy': header('Quota and window in seconds.', { type: 'string', pattern: '^"[a-z]+";q=[0-9]+;w=60$' }),
  'RateLimit': header('Requests that remain and seconds until the quota is whole.', { type: 'string', pattern: '^"[a-z]+";r=[0-9]+;t=[0-9]+$' }),
}
const CACHE = { 'Cache-Control': header('How long the answer keeps.'), Vary: header('What the answer depends on.', { type: 'string', pattern: 'Accept, Authorization, Cookie' }) }

/** Codes that the wrapper itself can answer with, by what an operation is. */
function wrapperCodes(operation: Operation): string[] {
  const codes = ['unknown_parameter', 'invalid_input', 'nul_byte', 'encoding_malformed', 'two_credentials', 'internal', 'unavailable']
  const has = (name: string) => name in operation.query.shape
  codes.push('authorization_malformed', 'key_malformed', 'key_refused', 'key_expired', 'key_revoked')
  if (Object.keys(operation.query.shape).length > 0) codes.push('repeated_parameter', 'value_not_listed', 'number_malformed', 'number_out_of_range')
  if (Object.keys(operation.params.shape).length > 0) codes.push('identifier_malformed')
  if (has('cursor')) codes.push('cursor_malformed', 'cursor_mismatch')
  if (operation.edition !== 'none') codes.push('edition_malformed', 'edition_unknown', 'not_ready')
  if (operation.role !== 'public') codes.push('credentials_missing', 'session_ended')
  if (operation.role !== 'public' && operation.role !== 'reader') codes.push('role_insufficient')
  if (operation.sessionOnly) codes.push('session_required')
  if (writes(operation) && operation.role !== 'public') codes.push('cross_site')
  if (operation.body === undefined) codes.push('body_unexpected')
  else codes.push('body_missing', ...(operation.multipart === null ? ['body_not_json'] : ['multipart_malformed', 'part_repeated']), 'missing_field', 'unknown_field', 'wrong_type', 'body_too_large', 'unsupported_media_type')
  codes.push('not_acceptable')
  if (operation.ifMatch) codes.push('if_match_missing', 'if_match_malformed')
  if (operation.idempotent) codes.push('idempotency_key_malformed', 'idempotency_running', 'idempotency_answer_lost', 'idempotency_mismatch')
  if (!(operation.bare && operation.role === 'public')) codes.push('rate_limited')
  return codes
}

const EXTRA_HEADERS: Record<number, Doc> = {
  401: { 'WWW-Authenticate': header('How to authenticate.') },
  405: { Allow: header('Methods that are possible.') },
  429: { 'Retry-After': header('Seconds to wait.', { type: 'string', pattern: '^[0-9]+$' }) },
  503: { 'Retry-After': header('Seconds to wait.', { type: 'string', pattern: '^[0-9]+$' }) },
}

function problemResponses(operation: Operation): Responses {
  const byStatus = new Map<number, [string, ProblemKind][]>()
  for (const code of new Set([...operation.problems, ...wrapperCodes(operation)])) {
    const kind = kindOf(code)
    if (kind === undefined) throw new Error(`${operation.id}: no problem has the code ${code}; add it to lib/problem`)
    byStatus.set(kind.status, [...(byStatus.get(kind.status) ?? []), [code, kind]])
  }
  return Object.fromEntries([...byStatus].sort(([a], [b]) => a - b).map(([status, kinds]) => [
    String(status),
    {
      description: kinds.map(([code, kind]) => `\`${code}\`: ${kind.title}`).join('\n\n'),
      headers: { ...ALWAYS, ...EXTRA_HEADERS[status] } as never,
      content: { 'application/problem+json': { schema: ProblemDocument } },
    } satisfies ResponseConfig,
  ]))
}

function goodResponse(operation: Operation): ResponseConfig {
  const list = operation.list ? z.array(operation.answer) : operation.answer
  const schema = operation.bare ? operation.answer : z.strictObject({ data: list, meta: Meta, ...(operation.list ? { page: Page } : {}) })
  const limited = !(operation.bare && operation.role === 'public')
  const headers: Doc = { ...ALWAYS, ...(limited ? LIMITS : {}), ...CACHE }
  if (operation.method === 'get') headers.ETag = header('Strong entity tag of this representation.', { type: 'string', pattern: '^"[^"]+"$' })
  if (operation.list) headers.Link = header('The next page, rel="next"; absent on the last.', { type: 'string' }, false)
  if (operation.status === 201 && operation.id !== 'signIn') headers.Location = header('Address of what was made.')
  if (operation.status === 204) return { description: 'Done.', headers: headers as never }
  const example = operation.example.data === undefined ? {} : { example: operation.example.data }
  const others = operation.formats.filter((format) => format !== 'json').map((format) => [MEDIA_TYPES[format], { schema: z.string() }])
  return {
    description: operation.list ? 'One page.' : 'The answer.',
    headers: headers as never,
    content: { 'application/json': { schema, ...example }, ...(Object.fromEntries(others) as Record<string, { schema: z.ZodString }>) },
  }
}

/** Header parameters of an operation: not part of what zod parses. */
function headerParameters(operation: Operation): Doc[] {
  const parameters: Doc[] = []
  if (operation.method === 'get') parameters.push({ name: 'If-None-Match', in: 'header', required: false, schema: { type: 'string' }, description: 'Entity tag last had: 304 where nothing changed.' })
  if (operation.ifMatch) parameters.push({ name: 'If-Match', in: 'header', required: true, schema: { type: 'string' }, description: 'Entity tag last read: 412 where it has changed since.' })
  if (operation.idempotent) parameters.push({ name: 'Idempotency-Key', in: 'header', required: false, schema: { type: 'string', minLength: 1, maxLength: 200 }, description: 'A repeat under the same key gets the first answer, and nothing is done twice.' })
  return parameters
}

/** Sessions and keys serve alike; strangers read while open reading is on. */
function security(operation: Operation): Doc[] {
  if (operation.role === 'public') return [{}]
  if (operation.sessionOnly) return [{ session: [] }]
  return [...(operation.role === 'reader' ? [{}] : []), { key: [] }, { session: [] }]
}

const NOT_MODIFIED: ResponseConfig = { description: 'Not changed since the entity tag given; validators are repeated.', headers: { ...ALWAYS, ETag: header('The same tag.'), ...CACHE } as never }

function routeOf(operation: Operation): RouteConfig {
  const example = operation.example.body
  return {
    method: operation.method,
    path: operation.path,
    operationId: operation.id,
    summary: operation.summary,
    ...(operation.description === undefined ? {} : { description: operation.description }),
    tags: [operation.tag],
    request: {
      ...(Object.keys(operation.params.shape).length > 0 ? { params: operation.params } : {}),
      ...(Object.keys(operation.query.shape).length > 0 ? { query: operation.query } : {}),
      ...(operation.body === undefined ? {} : { body: { required: true, content: { [bodyType(operation)]: { schema: operation.body, ...(example === undefined ? {} : { example }) } } } }),
    },
    responses: { [operation.status]: goodResponse(operation), ...(operation.accepts202 ? { 202: { ...goodResponse(operation), description: 'Begun: the answer tells how far it is, and where to ask again.' } } : {}), ...(operation.method === 'get' ? { 304: NOT_MODIFIED } : {}), ...problemResponses(operation) },
  }
}

/** What the generator leaves out or gets wrong: security, header parameters, the role, examples of parameters, required paths. */
function complete(place: PathItemOperation, operation: Operation): void {
  place.security = security(operation)
  place['x-role'] = operation.role
  for (const parameter of place.parameters ?? []) {
    const name = String(parameter.name)
    if (parameter.in === 'path') parameter.required = true
    const given = parameter.in === 'path' ? operation.example.params?.[name] : operation.example.query?.[name]
    if (given !== undefined) parameter.example = given
  }
  const more = headerParameters(operation)
  if (more.length > 0) place.parameters = [...(place.parameters ?? []), ...more]
}

/**
 * A named schema that may also be null comes from the generator as "the schema and (text or null)", which null never meets:
 * it is made "the schema or null". Everything else is left as it is.
 */
function mendNullable(node: unknown): unknown {
  if (Array.isArray(node)) return node.map(mendNullable)
  if (typeof node !== 'object' || node === null) return node
  const { allOf, ...rest } = node as { allOf?: Doc[] }
  const mended = Object.fromEntries(Object.entries(rest).map(([name, value]) => [name, mendNullable(value)]))
  if (allOf === undefined) return mended
  const named = allOf.find((part) => '$ref' in part)
  const open = allOf.find((part) => Array.isArray(part.type) && part.type.includes('null'))
  if (allOf.length !== 2 || named === undefined || open === undefined) return { ...mended, allOf: mendNullable(allOf) }
  const about = Object.fromEntries(Object.entries(open).filter(([name]) => name !== 'type'))
  return { ...mended, ...about, anyOf: [named, { type: 'null' }] }
}

/** The OpenAPI 3.1 document of all operations. */
export function buildDocument(operations: readonly Operation[]): Doc {
  const registry = new OpenAPIRegistry()
  registry.registerComponent('securitySchemes', 'key', { type: 'http', scheme: 'bearer', bearerFormat: 'ldt_...', description: 'An API key, made on the account page or by POST /keys.' })
  registry.registerComponent('securitySchemes', 'session', { type: 'apiKey', in: 'cookie', name: 'lodeterm', description: 'The cookie of a browser session (__Host-lodeterm on https).' })
  for (const operation of operations) registry.registerPath(routeOf(operation))
  const document = new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Lodeterm API', version: '1.0.0', license: { name: 'MIT', identifier: 'MIT' },
      description: 'A reviewed table of atomic levels that computes its own magnetic splitting. Every answer is of a numbered edition; add `edition=N` to get the same numbers for ever. Strict input: an unknown or repeated parameter is refused. Errors are RFC 9457 problem documents, each code with its page.',
    },
    servers: [{ url: '/api/v1' }],
    tags: [...new Set(operations.map((operation) => operation.tag))].map((name) => ({ name })),
  })
  const paths = document.paths as unknown as Record<string, Record<string, PathItemOperation>>
  for (const operation of operations) {
    const place = paths[operation.path]?.[operation.method]
    if (place !== undefined) complete(place, operation)
  }
  return mendNullable(document) as Doc
}

/** The document as it is committed. */
export const documentText = (operations: readonly Operation[]): string => `${JSON.stringify(buildDocument(operations), null, 1)}\n`
