import { createHash, randomUUID } from 'node:crypto'
import type { z } from 'zod'
import { ANONYMOUS, atLeast, type Caller } from '@/lib/access/caller'
import type { HeldClaim } from '@/lib/access/idempotency'
import { writeAnswer, type Setting, type Written } from '@/lib/http/answer'
import { queryFingerprint, readCursor } from '@/lib/http/cursor'
import { entityTag } from '@/lib/entity-tag'
import { FORM_VERSION, noneMatchNames } from '@/lib/http/etag'
import { cacheControl, crossOriginFields, openToOtherSites, preflightFields, VARY } from '@/lib/http/fields'
import type { House } from '@/lib/http/house'
import { chooseFormat } from '@/lib/http/negotiate'
import { clientAddress } from '@/lib/http/peer'
import { asProblem, problemDocument } from '@/lib/http/problem-response'
import { type Allowance, rateFields } from '@/lib/http/rate-limit'
import { planRequest, readRequest, type ReadRequest, type RequestPlan, splitAddress } from '@/lib/http/request'
import type { Call, Endpoint, Handler, Warning } from '@/lib/http/types'
import { checkSameSite } from '@/lib/access/same-site'
import { bodyProblem, parameterProblem, Problem } from '@/lib/problem'
import { type EditionUse, type Operation, writes } from '@/openapi/core/define'

type Route = (request: Request) => Promise<Response>
export interface Routes { GET: Route; HEAD: Route; OPTIONS: Route; POST: Route; PUT: Route; PATCH: Route; DELETE: Route }

interface Planned<S> extends Endpoint<S> { plan: RequestPlan }
/** What is known of a request when its answer is sent, whether it went well or not. */
interface Progress { requestId: string; headers: Record<string, string>; caller: Caller; operation: Operation | null; started: number }

interface Acted { written: Written; repeat: unknown }

const CODINGS = /\b(br|gzip|deflate|zstd)\b/g

/**
 * Makes the two functions that route files use: `endpoint` joins a contract to a handler, `resource` gathers the endpoints
 * of one address into the methods a route file exports. Everything that is not the domain's business happens in here, in
 * this order: authenticate, authorise, cheap refusals (404, 405, 415), preconditions, body, act.
 */
export function createEndpoint<S>(open: () => House<S>) {
  const endpoint = <P extends z.ZodObject, Q extends z.ZodObject, B extends z.ZodType, R extends z.ZodType, E extends EditionUse, L extends boolean>(
    operation: Operation<P, Q, B, R, E, L>, handle: Handler<P, Q, B, R, E, L, S>,
  ): Endpoint<S> => ({ operation: operation as unknown as Operation, handle: handle as unknown as Endpoint<S>['handle'] })

  const resource = (...endpoints: Endpoint<S>[]): Routes => {
    const planned = new Map<string, Planned<S>>()
    for (const one of endpoints) planned.set(one.operation.method.toUpperCase(), { ...one, plan: planRequest(one.operation) })
    const allowed = [...(planned.has('GET') ? ['GET', 'HEAD'] : []), ...[...planned.keys()].filter((method) => method !== 'GET'), 'OPTIONS']
    const route: Route = (request) => serve(open(), planned, allowed, request)
    return { GET: route, HEAD: route, OPTIONS: (request) => options(open(), planned, allowed, request), POST: route, PUT: route, PATCH: route, DELETE: route }
  }
  return { endpoint, resource }
}

function options<S>(house: House<S>, planned: Map<string, Planned<S>>, allowed: readonly string[], request: Request): Promise<Response> {
  const shown = [...planned.values()].filter((one) => openToOtherSites(one.operation)).map((one) => one.operation.method.toUpperCase())
  const cross = shown.length === 0 || !request.headers.has('origin') ? {} : preflightFields(shown.includes('GET') ? [...shown, 'HEAD'] : shown)
  return Promise.resolve(new Response(null, { status: 204, headers: { allow: allowed.join(', '), 'x-request-id': randomUUID(), vary: VARY, ...cross } }))
}

async function serve<S>(house: House<S>, planned: Map<string, Planned<S>>, allowed: readonly string[], request: Request): Promise<Response> {
  const method = request.method === 'HEAD' ? 'GET' : request.method
  const one = planned.get(method)
  const progress: Progress = { requestId: randomUUID(), headers: { vary: VARY }, caller: ANONYMOUS, operation: one?.operation ?? null, started: performance.now() }
  const open = one === undefined ? [...planned.values()].some((other) => openToOtherSites(other.operation)) : openToOtherSites(one.operation)
  if (open || planned.size === 0) Object.assign(progress.headers, crossOriginFields())
  try {
    const written = await perform(house, planned, one, allowed, request, progress)
    return finish(house, progress, request, written.status, { ...progress.headers, ...written.headers }, request.method === 'HEAD' ? null : written.body, written.body, written.cookies)
  } catch (error) {
    const problem = asProblem(error)
    if (problem.status >= 500) house.log.error({ requestId: progress.requestId, code: problem.code, err: problem.cause ?? problem }, problem.detail)
    const body = JSON.stringify(problemDocument(problem, house.baseUrl, progress.requestId))
    const headers = { ...progress.headers, 'cache-control': 'no-store', 'content-type': 'application/problem+json', ...problem.headers }
    return finish(house, progress, request, problem.status, headers, request.method === 'HEAD' ? null : body, body)
  }
}

function finish<S>(house: House<S>, progress: Progress, request: Request, status: number, headers: Record<string, string>, body: Written['body'], whole: Written['body'], cookies: readonly string[] = []): Response {
  headers['x-request-id'] = progress.requestId
  if (typeof whole === 'string') headers['content-length'] = String(Buffer.byteLength(whole))
  const level = status >= 400 || (progress.operation !== null && writes(progress.operation)) ? 'info' : 'debug'
  if (house.log.isLevelEnabled(level)) {
    const { caller } = progress
    house.log[level]({
      requestId: progress.requestId, method: request.method, operation: progress.operation?.id ?? null, status, ms: Math.round((performance.now() - progress.started) * 100) / 100,
      caller: caller.kind, ...(caller.kind === 'key' ? { key: caller.keyId } : caller.kind === 'session' ? { user: caller.userId } : {}),
    }, 'answered')
  }
  const response = new Response(body, { status, headers })
  for (const cookie of cookies) response.headers.append('set-cookie', cookie)
  return response
}

async function perform<S>(house: House<S>, planned: Map<string, Planned<S>>, one: Planned<S> | undefined, allowed: readonly string[], request: Request, progress: Progress): Promise<Written> {
  const { headers } = request
  const address = clientAddress(headers, house.trustedProxies)
  await admit(house, one?.operation, planned, request, progress, address)
  if (one === undefined) {
    const path = splitAddress(request.url).path
    if (planned.size === 0) throw new Problem('not_found', `Nothing answers at /api/v1${path.slice(0, 200)}; the API documentation lists every path.`)
    throw new Problem('method_not_allowed', `${request.method} is not possible here; possible: ${allowed.join(', ')}.`, { headers: { allow: allowed.join(', ') } })
  }
  const { operation } = one
  const where = splitAddress(request.url)
  const read = await readRequest(operation, one.plan, request, where)
  const format = chooseFormat(operation.formats, read.query.format, headers.get('accept'))
  const fingerprint = operation.list ? queryFingerprint(operation.id, read.path, read.asked) : ''
  const { edition, pinned, after } = await resolveEdition(house, operation, read, fingerprint)
  progress.headers['cache-control'] = cacheControl(operation, pinned, progress.caller, house.openReading)
  const derived = operation.method === 'get' && operation.edition !== 'none' ? derivedTag(house, operation, read, edition, format, headers) : null
  const noneMatch = headers.get('if-none-match')
  if (derived !== null && noneMatch !== null && noneMatchNames(noneMatch, derived)) return { status: 304, headers: { etag: derived }, body: null, json: null }
  const kept = derived === null || noneMatch?.trim() === '*' ? undefined : house.kept?.get(derived)
  if (kept !== undefined) return kept
  const warnings: Warning[] = []
  const setting: Setting = { operation, read, edition, fingerprint, format, warnings, path: where.path, noneMatch }
  const call = {
    params: read.params, query: read.query, body: read.body, edition, after, format, caller: progress.caller, requestId: progress.requestId, ifMatch: read.ifMatch, clientAddress: address, requestFields: headers, claim: null,
    get signal() { return request.signal },
    snapshot: operation.edition === 'none' || operation.numberOnly === true ? null : await house.snapshotFor(edition),
    warn: (code: string, detail: string) => void (warnings.some((warning) => warning.code === code && warning.detail === detail) || warnings.push({ code, detail })),
  } as unknown as Call<never, never, never, never>
  const act = async (claim: HeldClaim | null): Promise<Acted> => {
    const answer = await one.handle(claim === null ? call : { ...call, claim })
    const written = await writeAnswer(house, setting, answer, derived)
    if (derived !== null) house.kept?.keep(derived, written)
    const repeat = answer.repeatData === undefined ? written.json : { ...(written.json as Record<string, unknown>), data: answer.repeatData }
    return { written, repeat }
  }
  const key = operation.idempotent ? headers.get('idempotency-key') : null
  return key === null || progress.caller.userId === null ? (await act(null)).written : actOnce(house, operation, { key, userId: progress.caller.userId, path: where.path, search: where.search, body: read.bodyIdentity }, act)
}

/** Authenticates, counts and authorises. A request whose key does not hold counts against its address. */
async function admit<S>(house: House<S>, operation: Operation | undefined, planned: Map<string, Planned<S>>, request: Request, progress: Progress, address: string): Promise<void> {
  const { headers } = request
  const uncounted = operation?.bare === true && operation.role === 'public'
  let refused: unknown = null
  try {
    const known = house.callerFor({ authorization: headers.get('authorization'), cookie: headers.get('cookie'), userAgent: headers.get('user-agent') })
    progress.caller = known instanceof Promise ? await known : known
  } catch (error) {
    refused = error
  }
  // a session that has ended must not keep anyone from signing in, nor from what is open to all
  const openToAll = operation?.role === 'public' || (operation?.role === 'reader' && house.openReading)
  if (refused instanceof Problem && refused.code === 'session_ended' && openToAll) refused = null
  const { caller } = progress
  if (!uncounted) {
    const anonymous = caller.kind === 'anonymous'
    const policy = anonymous ? 'anonymous' : caller.kind
    const name = caller.kind === 'anonymous' ? `a:${address}` : caller.kind === 'key' ? `k:${caller.keyId}` : `u:${caller.userId}`
    const allowance = count(house, operation, name, anonymous ? house.ratePerMinute.anonymous : house.ratePerMinute.known)
    if (allowance !== null) Object.assign(progress.headers, rateFields(policy, allowance))
    if (allowance?.allowed === false) throw new Problem('rate_limited', `${allowance.limit} requests a minute are allowed; wait ${allowance.retryAfter} s.`, { headers: { 'retry-after': String(allowance.retryAfter) } })
  }
  if (refused !== null) throw refused
  if (caller.kind === 'session') checkSameSite(request.method, headers, house.baseUrl)
  else if (operation !== undefined && operation.role === 'public') checkSameSite(request.method, headers, house.baseUrl, false)
  authorise(operation, [...planned.values()].map((other) => other.operation), caller, house.openReading)
}

/** A limiter that fails lets reads pass, and nothing else. */
function count<S>(house: House<S>, operation: Operation | undefined, name: string, perMinute: number): Allowance | null {
  try {
    return house.limiter.take(name, perMinute)
  } catch (error) {
    house.log.error({ err: error }, 'The rate limiter failed')
    if (operation !== undefined && writes(operation)) throw new Problem('unavailable', 'Requests cannot be counted at the moment, so nothing is changed.', { headers: { 'retry-after': '5' }, cause: error })
    return null
  }
}

const CHALLENGE = { 'www-authenticate': 'Bearer realm="lodeterm"' }

function authorise(operation: Operation | undefined, others: readonly Operation[], caller: Caller, openReading: boolean): void {
  // a method or path that does not exist shows itself to whoever may read
  const role = operation?.role ?? (others.some((other) => other.role === 'public') ? 'public' : 'reader')
  if (role === 'public') return
  if (caller.kind === 'anonymous') {
    if (role === 'reader' && openReading) return
    throw new Problem('credentials_missing', 'This is not open to strangers: send Authorization: Bearer ldt_... or sign in.', { headers: CHALLENGE })
  }
  if (operation?.sessionOnly === true && caller.kind !== 'session') throw new Problem('session_required', 'A key may not do this; sign in in a browser.')
  const needed = role === 'account' ? 'reader' : role
  if (!atLeast(caller.role, needed)) throw new Problem('role_insufficient', `This needs the role ${needed}; ${caller.kind === 'key' ? 'this key' : 'your account'} has the role ${caller.role}.`)
}

/** The edition that a body names as its member `edition` (`bodyEdition`); null for the latest or none. */
const editionInBody = (body: unknown): number | null => {
  const given = typeof body === 'object' && body !== null ? (body as { edition?: unknown }).edition : undefined
  return typeof given === 'number' ? given : null
}

/** The edition that a request is pinned to, by its parameter or in its body; named in both it must be one. */
function askedEdition({ query, body }: ReadRequest): number | null {
  const [parameter, inBody] = [typeof query.edition === 'number' ? query.edition : null, editionInBody(body)]
  if (parameter !== null && inBody !== null && parameter !== inBody) {
    throw bodyProblem('/edition', 'repeated_parameter', `The body names edition ${inBody} and the address edition ${parameter}: name one of them, or leave one out.`)
  }
  return parameter ?? inBody
}

async function resolveEdition<S>(house: House<S>, operation: Operation, read: ReadRequest, fingerprint: string): Promise<{ edition: number; pinned: boolean; after: Call<never, never, never, never>['after'] }> {
  const cursor = typeof read.query.cursor === 'string' ? readCursor(house.secret(), fingerprint, read.query.cursor) : null
  if (operation.edition === 'none') return { edition: operation.bare ? 0 : await house.editions.latest(), pinned: false, after: cursor?.position ?? null }
  const asked = operation.editionIn === 'path' ? Number(read.params.n) : askedEdition(read)
  const latest = await house.editions.latest()
  if (latest === 0) throw new Problem('not_ready', 'No edition has been published yet.', { headers: { 'retry-after': '30' } })
  const edition = asked ?? cursor?.edition ?? latest
  if (cursor !== null && cursor.edition !== edition) throw parameterProblem('cursor', 'cursor_mismatch', `This cursor belongs to edition ${cursor.edition}; page on in that one, or begin without a cursor.`)
  if (edition !== latest && !(await house.editions.exists(edition))) {
    const detail = `There is no edition ${edition}; there ${latest === 1 ? 'is edition 1' : `are editions 1 to ${latest}`}.`
    if (editionInBody(read.body) === edition) throw bodyProblem('/edition', 'edition_unknown', detail)
    throw parameterProblem(operation.editionIn === 'path' ? 'n' : 'edition', 'edition_unknown', detail)
  }
  return { edition, pinned: asked !== null, after: cursor?.position ?? null }
}

/** The tag of an answer that edition, query and program decide: no content need be made to know that it has not changed. */
function derivedTag<S>(house: House<S>, operation: Operation, read: ReadRequest, edition: number, format: string, headers: Headers): string {
  const codings = (headers.get('accept-encoding') ?? '').match(CODINGS)?.sort().join() ?? ''
  return entityTag(FORM_VERSION, operation.id, edition, house.physics, house.constants, JSON.stringify(read.path), JSON.stringify(Object.entries(read.asked).sort()), format, codings)
}

const answerLost = (): Problem => new Problem('idempotency_answer_lost', 'The request with this Idempotency-Key took effect, and its answer was lost; read what it was about. It is not performed again.')

/** Performs a write once per Idempotency-Key: a repeat gets the stored answer, another request under the same key is refused. */
async function actOnce<S>(
  house: House<S>, operation: Operation, asked: { key: string; userId: string; path: string; search: string; body: string }, act: (claim: HeldClaim) => Promise<Acted>,
): Promise<Written> {
  if (!/^[\x21-\x7e]{1,200}$/.test(asked.key)) throw new Problem('idempotency_key_malformed', 'Idempotency-Key must be 1 to 200 visible ASCII characters.')
  const requestSha256 = createHash('sha256').update(JSON.stringify([operation.method, asked.path, asked.search, asked.body])).digest('hex')
  const begun = await house.idempotency.begin({ userId: asked.userId, operation: operation.id, key: asked.key, requestSha256 })
  if (begun.state === 'mismatch') throw new Problem('idempotency_mismatch', 'This Idempotency-Key was used before with another request; use a new one.')
  if (begun.state === 'running') throw new Problem('idempotency_running', 'A request with this Idempotency-Key is still running.', { headers: { 'retry-after': '1' } })
  if (begun.state === 'lost') throw answerLost()
  if (begun.state === 'stored') {
    const { status, headers, body } = begun.answer
    return { status, headers: { ...headers, 'idempotency-replayed': 'true' }, body: body === null ? null : JSON.stringify(body), json: body }
  }
  const { claim } = begun
  let done: Acted
  try {
    done = await act(claim)
  } catch (error) {
    // where even this cannot be asked, the error stands, and a repeat finds out
    const without = await house.idempotency.abandon(claim).catch((failure: unknown) => {
      house.log.error({ err: failure }, 'the claim of an Idempotency-Key was not given back')
      return true
    })
    if (without) throw error
    house.log.error({ err: error }, 'a request took effect, and its answer was lost')
    throw answerLost()
  }
  // what was written is written, whatever becomes of the note of it
  await house.idempotency.finish(claim, { status: done.written.status, headers: done.written.headers, body: done.repeat }).catch((error: unknown) => house.log.error({ err: error }, 'the answer under an Idempotency-Key was not kept'))
  return done.written
}

