import supertest from 'supertest'
import { expect, inject } from 'vitest'
import { type Answered, conformanceFaults } from './conformance'

export const base = inject('baseUrl')

export interface Sending {
  key?: string
  cookie?: string
  headers?: Record<string, string>
  /** Sent as JSON. */
  body?: unknown
  /** Sent as it is, with the Content-Type of `headers`. */
  raw?: string | Buffer
}

export interface Reply extends Answered {
  /** The body as JSON; empty where it is not. */
  json: Json
  cookies: string[]
}
/** JSON as the language reads it. That its shape is as documented is the validator's business; tests look at single members. */
export type Json = ReturnType<typeof JSON.parse>

type Verb = 'get' | 'head' | 'options' | 'post' | 'put' | 'patch' | 'delete'

async function askAt(agent: ReturnType<typeof supertest>, method: Verb | string, at: string, sending: Sending): Promise<Reply> {
  const url = `/api/v1${at}`
  let request = agent[method.toLowerCase() as Verb](url).redirects(0).ok(() => true).buffer(true).parse((response, done) => {
    const pieces: Buffer[] = []
    response.on('data', (piece: Buffer) => pieces.push(piece))
    response.on('end', () => done(null, Buffer.concat(pieces)))
  })
  if (sending.key !== undefined) request = request.set('authorization', `Bearer ${sending.key}`)
  if (sending.cookie !== undefined) request = request.set('cookie', sending.cookie)
  for (const [name, value] of Object.entries(sending.headers ?? {})) request = request.set(name, value)
  if (sending.raw !== undefined) request = request.serialize((value: unknown) => value as string).send(sending.raw)
  else if (sending.body !== undefined) request = request.set('content-type', 'application/json').send(JSON.stringify(sending.body))
  const response = await request
  const bytes = Buffer.isBuffer(response.body) ? response.body : Buffer.alloc(0)
  const text = bytes.toString('utf8')
  const answered: Answered = { status: response.status, headers: response.headers as Record<string, string>, text, bytes }
  expect(conformanceFaults(method, url, answered), `${method.toUpperCase()} ${url} -> ${response.status} ${text.slice(0, 300)}`).toEqual([])
  const cookies = (response.headers['set-cookie'] as unknown as string[] | undefined) ?? []
  return { ...answered, json: safeJson(text), cookies }
}

function safeJson(text: string): Json {
  try {
    return JSON.parse(text)
  } catch {
    return {}
  }
}

/** Asks a server; every answer is checked against the OpenAPI document before anyone sees it. `at` begins below /api/v1. */
export function clientAt(address: string) {
  const agent = supertest(address)
  const ask = (method: Verb | string, at: string, sending: Sending = {}): Promise<Reply> => askAt(agent, method, at, sending)
  return { ask, get: (at: string, sending?: Sending): Promise<Reply> => ask('get', at, sending) }
}
/** The server under test that all share. */
export const { ask, get } = clientAt(base)

/** The codes in a problem's `errors`, with their places. */
export const faultsOf = (reply: Reply): string[] => ((reply.json.errors ?? []) as unknown as { parameter?: string; pointer?: string; code: string }[]).map((fault) => `${fault.parameter ?? fault.pointer ?? ''} ${fault.code}`)
