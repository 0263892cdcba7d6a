import type { z } from 'zod'
import { BODY_LIMIT_BYTES, checkContentType, hasBody, readBody, readBytes, readText } from '@/lib/http/body'
import { readIfMatch } from '@/lib/http/etag'
import { boundaryOf, readForm } from '@/lib/http/multipart'
import { type PathPlan, planPath, planQuery, type QueryPlan, readPath, readQuery } from '@/lib/http/query'
import { type Fault, faultsProblem, Problem } from '@/lib/problem'
import { bodyType, type Operation } from '@/openapi/core/define'

export const API_PREFIX = '/api/v1'

/** Path below /api/v1 and the text after `?`, as they stand in the address. */
export function splitAddress(url: string): { path: string; search: string } {
  const start = url.indexOf('/', url.indexOf('//') + 2)
  const rest = start < 0 ? '/' : url.slice(start)
  const hash = rest.indexOf('#')
  const plain = hash < 0 ? rest : rest.slice(0, hash)
  const mark = plain.indexOf('?')
  const pathname = mark < 0 ? plain : plain.slice(0, mark)
  return { path: pathname.startsWith(API_PREFIX) ? pathname.slice(API_PREFIX.length) : pathname, search: mark < 0 ? '' : plain.slice(mark + 1) }
}

export interface RequestPlan { path: PathPlan; query: QueryPlan }
export const planRequest = (operation: Operation): RequestPlan => ({ path: planPath(operation.path, operation.params), query: planQuery(operation.query) })

export interface ReadRequest {
  params: Record<string, unknown>
  query: Record<string, unknown>
  asked: Record<string, string | string[]>
  /** Path parameters as text. */
  path: Record<string, string>
  ifMatch: string | null
  body: unknown
  /** What makes two bodies the same: the text itself, or a digest of the parts of a form, whose boundary differs each time. */
  bodyIdentity: string
}

interface ReadBody { value: unknown; faults: Fault[]; identity: string }

const missingBody = (type: string): ReadBody => ({ value: undefined, faults: [{ pointer: '', code: 'body_missing', detail: `Send a body with Content-Type: ${type}.` }], identity: '' })

async function readJsonBody(schema: z.ZodType, request: Request): Promise<ReadBody> {
  const text = await readText(request)
  return text === '' ? missingBody('application/json') : { ...readBody(schema, text), identity: text }
}

async function readFormBody(schema: z.ZodType, request: Request, limitBytes: number): Promise<ReadBody> {
  const bytes = await readBytes(request, limitBytes + BODY_LIMIT_BYTES)
  return bytes.byteLength === 0 ? missingBody('multipart/form-data') : readForm(schema, bytes, boundaryOf(request.headers.get('content-type')))
}

/** Everything a request says, parsed; throws one Problem with all faults of path, query and body together. */
export async function readRequest(operation: Operation, plan: RequestPlan, request: Request, address: { path: string; search: string }): Promise<ReadRequest> {
  const sent = hasBody(request.headers)
  if (operation.body !== undefined) checkContentType(request.headers.get('content-type'), sent, bodyType(operation))
  const path = readPath(plan.path, address.path)
  const query = readQuery(plan.query, address.search)
  const faults: Fault[] = [...path.faults, ...query.faults]
  if (faults.length === 0 && operation.check !== undefined) faults.push(...operation.check(query.value as z.output<z.ZodObject>))
  const ifMatch = operation.ifMatch ? readIfMatch(request.headers.get('if-match')) : null
  let body: ReadBody | undefined
  if (operation.body !== undefined) {
    body = operation.multipart === null ? await readJsonBody(operation.body, request) : await readFormBody(operation.body, request, operation.multipart.limitBytes)
    faults.push(...body.faults)
  } else if (sent) throw new Problem('body_unexpected', 'This operation takes no body; send the request without one.')
  if (faults.length > 0) throw faultsProblem(faults)
  return { params: path.value, query: query.value, asked: query.asked, path: path.raw, ifMatch, body: body?.value, bodyIdentity: body?.identity ?? '' }
}
