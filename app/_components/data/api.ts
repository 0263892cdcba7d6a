/**
 * The pages' way to the API: the same /api/v1 that scripts use, over fetch, typed by the contract's schemas
 * (types only: no validator reaches the browser).
 */
import { queryOptions, infiniteQueryOptions } from '@tanstack/react-query'

export type QueryValue = string | number | boolean | null | undefined | readonly string[]
export type ApiQuery = Readonly<Record<string, QueryValue>>

export interface ApiWarning { code: string; detail: string }
export interface ApiMeta {
  edition?: number
  constants?: string
  model?: string
  conventions?: Record<string, unknown>
  warnings?: ApiWarning[]
  excluded?: Record<string, number>
  query?: Record<string, unknown>
  [key: string]: unknown
}
export interface ApiAnswer<T> { data: T; meta: ApiMeta; page?: { limit: number; next_cursor: string | null } }

export interface ProblemPlace { pointer?: string; parameter?: string; code: string; detail: string }
export interface ProblemDocument {
  type: string
  title: string
  status: number
  detail: string
  instance?: string
  code?: string
  errors?: ProblemPlace[]
  [key: string]: unknown
}

/** A refusal or failure of the API. `problem.status` is 0 when no answer came at all. */
export class ApiError extends Error {
  readonly problem: ProblemDocument
  readonly retryAfterSeconds: number | null
  constructor(problem: ProblemDocument, retryAfterSeconds: number | null = null) {
    super(problem.detail)
    this.name = 'ApiError'
    this.problem = problem
    this.retryAfterSeconds = retryAfterSeconds
  }
}

export const API_BASE = '/api/v1'

/** Query string in a fixed order of names, empty values left out: equal views give equal addresses. */
export function queryString(query: ApiQuery = {}): string {
  const search = new URLSearchParams()
  for (const name of Object.keys(query).sort()) {
    const value = query[name]
    if (value === undefined || value === null || value === '') continue
    if (Array.isArray(value)) for (const item of value) search.append(name, item)
    else search.append(name, String(value))
  }
  const text = search.toString()
  return text === '' ? '' : `?${text}`
}

/** Address of a request below the site's root, e.g. `/api/v1/levels?species=Na-I`. */
export const apiPath = (path: string, query?: ApiQuery): string => `${API_BASE}${path}${queryString(query)}`

export async function readAnswer<T>(response: Response): Promise<T> {
  if (response.status === 204) return undefined as T
  const text = await response.text()
  let body: unknown = null
  try {
    body = JSON.parse(text)
  } catch {
    body = null
  }
  if (response.ok && body !== null) return body as T
  const retry = Number(response.headers.get('retry-after'))
  throw new ApiError(asProblem(body, response.status), Number.isFinite(retry) && retry > 0 ? retry : null)
}

function asProblem(body: unknown, status: number): ProblemDocument {
  if (typeof body === 'object' && body !== null && 'title' in body && 'status' in body) return body as ProblemDocument
  return {
    type: 'about:blank',
    title: 'The answer could not be read',
    status,
    detail: `The server answered with status ${status} and something that is not a problem document.`,
  }
}

async function send(input: string, init?: RequestInit): Promise<Response> {
  try {
    return await fetch(input, { ...init, credentials: 'same-origin' })
  } catch (cause) {
    if (cause instanceof DOMException && cause.name === 'AbortError') throw cause
    throw new ApiError({
      type: 'about:blank',
      title: 'No answer',
      status: 0,
      detail: 'The server could not be reached from this browser.',
    })
  }
}

export async function apiGet<T>(path: string, query?: ApiQuery, signal?: AbortSignal): Promise<ApiAnswer<T>> {
  return readAnswer(await send(apiPath(path, query), { signal, headers: { accept: 'application/json' } }))
}

/** A browser finishes at most this much for a page that has gone. */
export const KEEPALIVE_BYTES = 60_000

/**
 * A write by the signed-in person. The browser's own Origin and Sec-Fetch-Site fields answer the forgery check.
 * `outlive`: it goes on when the page closes meanwhile, where it is not too long for that.
 */
export async function apiSend<T>(
  method: 'POST' | 'PUT' | 'PATCH' | 'DELETE', path: string, body?: unknown, headers: Record<string, string> = {}, { outlive = false } = {},
): Promise<ApiAnswer<T>> {
  const init: RequestInit = { method, headers: { accept: 'application/json', ...headers } }
  if (body !== undefined) {
    init.body = JSON.stringify(body)
    init.headers = { ...init.headers, 'content-type': 'application/json' }
  }
  if (outlive) init.keepalive = new Blob([typeof init.body === 'string' ? init.body : '']).size <= KEEPALIVE_BYTES
  return readAnswer(await send(apiPath(path), init))
}

/** The key under which a request is kept: the same for the server's prefetch and the browser's query. */
export const apiKey = (path: string, query?: ApiQuery) => ['api', path, queryString(query)] as const

/** Options for useQuery and prefetchQuery alike: `useQuery(apiQuery<Level>(`/levels/${id}`, { edition }))`. */
export const apiQuery = <T>(path: string, query?: ApiQuery) =>
  queryOptions({
    queryKey: apiKey(path, query),
    queryFn: ({ signal }) => apiGet<T>(path, query, signal),
  })

/** Options for useInfiniteQuery over a list with cursors; a page is one answer. */
export const apiPages = <T>(path: string, query?: ApiQuery) =>
  infiniteQueryOptions({
    queryKey: [...apiKey(path, query), 'pages'] as const,
    queryFn: ({ signal, pageParam }) => apiGet<T[]>(path, { ...query, cursor: pageParam }, signal),
    initialPageParam: null as string | null,
    getNextPageParam: (last) => last.page?.next_cursor ?? null,
  })

export const problemOf = (error: unknown): ProblemDocument =>
  error instanceof ApiError
    ? error.problem
    : { type: 'about:blank', title: 'This view failed', status: 0, detail: error instanceof Error ? error.message : 'An unexpected fault in this page.' }

/** The entity tag of a thing as it is now, to be sent as If-Match with the change made from it. */
export async function apiEtag(path: string): Promise<string> {
  const response = await send(apiPath(path), { headers: { accept: 'application/json' }, cache: 'no-store' })
  await readAnswer<unknown>(response)
  return response.headers.get('etag') ?? ''
}
