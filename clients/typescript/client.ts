import { OPERATIONS, type Operations } from './api'
import { BrokenAnswerError, ProblemError } from './problem'
import { PATIENCE, type Patience, withPatience } from './retry'

export type OperationId = keyof Operations
type Using<Method extends string> = { [Id in OperationId]: Operations[Id]['method'] extends Method ? Id : never }[OperationId]
export type GetId = Using<'get'>
export type PostId = Using<'post'>
/** Operations that answer with pages. */
export type ListId = { [Id in GetId]: Operations[Id]['answer'] extends { data: unknown[]; page: unknown } ? Id : never }[GetId]

export type Parameters<Id extends OperationId> = Operations[Id]['parameters']
export type Body<Id extends OperationId> = Operations[Id]['body']
export type Answer<Id extends OperationId> = Operations[Id]['answer']
export type Row<Id extends ListId> = Answer<Id> extends { data: (infer Item)[] } ? Item : never
export type Format = 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'

export interface Settings {
  /** API key, `ldt_...`; strangers may read where the instance lets them. */
  key?: string
  /** Edition that every request reads unless it names another; `latest` follows what is published. */
  edition?: number | 'latest'
  patience?: Partial<Patience>
  fetch?: typeof globalThis.fetch
}

export interface Sending {
  signal?: AbortSignal
  /** Entity tag last read, for a write: a stale one is 412. */
  ifMatch?: string
  /** Entity tag last read, for a read: `ask` then resolves to a 304 where nothing changed. */
  ifNoneMatch?: string
  /** Makes a POST that writes safe to be asked again. */
  idempotencyKey?: string
  /** Representation of the answer, for `ask`. */
  format?: Format
}

interface Entry { method: string; path: string; inPath: readonly string[]; inQuery: readonly string[]; formats: readonly string[]; safe: boolean }
type Given = Record<string, unknown>

const MEDIA_TYPES: Record<Format, string> = {
  json: 'application/json', csv: 'text/csv', ndjson: 'application/x-ndjson', ecsv: 'application/x-ecsv', arrow: 'application/vnd.apache.arrow.stream',
}

/**
 * A table of levels at an address. Parameters of path and query stand in one object, named as in the API:
 *
 *   const table = new Lodeterm('https://lodeterm.example', { edition: 1 })
 *   const { data } = await table.get('getComponents', { transition: 'Na-I.1~Na-I.2', field: '1.5T' })
 *   for await (const level of table.each('listLevels', { species: 'Na-I' })) ...
 *
 * A refusal is thrown as ProblemError with everything that is wrong. Works wherever there is `fetch`.
 */
export class Lodeterm {
  readonly api: string
  readonly edition: number | 'latest' | undefined
  readonly #settings: Settings
  readonly #patience: Patience

  /** `address` is where the instance answers, with or without /api/v1. */
  constructor(address: string, settings: Settings = {}) {
    const trimmed = address.replace(/\/+$/, '')
    this.api = /\/api\/v\d+$/.test(trimmed) ? trimmed : `${trimmed}/api/v1`
    this.edition = settings.edition
    this.#settings = settings
    this.#patience = { ...PATIENCE, ...settings.patience }
  }

  /** The same table held at an edition: the one given, or the newest published by now. */
  async pinned(edition?: number): Promise<Lodeterm> {
    const number = edition ?? (await this.get('listEditions', { limit: 1 })).data[0]?.number
    if (number === undefined) throw new BrokenAnswerError('Nothing is published yet: there is no edition to hold to.')
    return new Lodeterm(this.api, { ...this.#settings, edition: number })
  }

  get<Id extends GetId>(operation: Id, ...[parameters, sending]: Arguments<Id>): Promise<Answer<Id>> {
    return this.#json(operation, parameters, undefined, sending)
  }

  post<Id extends PostId>(operation: Id, body: Body<Id>, ...[parameters, sending]: Arguments<Id>): Promise<Answer<Id>> {
    return this.#json(operation, parameters, body, sending)
  }

  /** Any operation, writes included, as JSON. */
  send<Id extends OperationId>(operation: Id, parameters: Parameters<Id>, body: Body<Id>, sending?: Sending): Promise<Answer<Id>> {
    return this.#json(operation, parameters, body, sending)
  }

  /** Page after page of a list. All are of one edition, also where another is published meanwhile. */
  async *pages<Id extends ListId>(operation: Id, parameters?: Parameters<Id>, sending?: Sending): AsyncGenerator<Answer<Id>> {
    let cursor: string | null | undefined
    let edition: number | null | undefined
    do {
      const page = await this.#json(operation, { ...(parameters as Given), ...(typeof cursor === 'string' ? { cursor } : {}) } as Parameters<Id>, undefined, sending)
      const { meta, page: { next_cursor: next } } = page as unknown as { meta: { edition: number | null }; page: { next_cursor: string | null } }
      if (edition !== undefined && meta.edition !== edition) throw new BrokenAnswerError(`A page of edition ${String(meta.edition)} came after pages of edition ${String(edition)}.`)
      edition = meta.edition
      cursor = next
      yield page
    } while (cursor !== null)
  }

  /** Row after row of a list. */
  async *each<Id extends ListId>(operation: Id, parameters?: Parameters<Id>, sending?: Sending): AsyncGenerator<Row<Id>> {
    for await (const page of this.pages(operation, parameters, sending)) yield* (page as unknown as { data: Row<Id>[] }).data
  }

  /** The answer as it came, for another format, its bytes or its fields. Refusals are thrown; 304 is not one. */
  async ask<Id extends OperationId>(operation: Id, parameters?: Parameters<Id>, body?: Body<Id>, sending: Sending = {}): Promise<Response> {
    const entry: Entry = OPERATIONS[operation]
    const given: Given = { ...(parameters as Given) }
    const pinned = this.edition
    const inBody = body !== undefined && !(body instanceof FormData) && typeof body === 'object' && body !== null && 'edition' in body
    if (pinned !== undefined && entry.inQuery.includes('edition') && given.edition === undefined && !inBody) given.edition = pinned
    const headers = new Headers({ accept: `${MEDIA_TYPES[sending.format ?? 'json']}, application/problem+json;q=0.9` })
    if (this.#settings.key !== undefined) headers.set('authorization', `Bearer ${this.#settings.key}`)
    if (sending.ifMatch !== undefined) headers.set('if-match', sending.ifMatch)
    if (sending.ifNoneMatch !== undefined) headers.set('if-none-match', sending.ifNoneMatch)
    if (sending.idempotencyKey !== undefined) headers.set('idempotency-key', sending.idempotencyKey)
    const form = typeof FormData !== 'undefined' && (body as unknown) instanceof FormData
    if (body !== undefined && !form) headers.set('content-type', 'application/json')
    const init: RequestInit = { method: entry.method.toUpperCase(), headers, signal: sending.signal ?? null, ...(body === undefined ? {} : { body: form ? (body as unknown as FormData) : JSON.stringify(body) }) }
    const url = this.#address(entry, given)
    const send = this.#settings.fetch ?? globalThis.fetch
    const response = await withPatience(() => send(url, init), entry.safe || sending.idempotencyKey !== undefined, this.#patience, sending.signal)
    if (response.ok || response.status === 304) return response
    throw await ProblemError.of(response)
  }

  #address(entry: Entry, given: Given): string {
    const at = entry.path.replace(/\{([^}]+)\}/g, (_, name: string) => encodeURIComponent(String(given[name])))
    const query = new URLSearchParams()
    for (const [name, value] of Object.entries(given)) {
      if (entry.inPath.includes(name) || value === undefined || value === null) continue
      // what is unknown goes along too: the server refuses it with the nearest name
      for (const one of Array.isArray(value) ? (value as unknown[]) : [value]) query.append(name, String(one))
    }
    return `${this.api}${at}${query.size === 0 ? '' : `?${query.toString()}`}`
  }

  async #json<Id extends OperationId>(operation: Id, parameters?: Parameters<Id>, body?: Body<Id>, sending?: Sending): Promise<Answer<Id>> {
    const response = await this.ask(operation, parameters, body, sending)
    return (response.status === 204 ? undefined : await response.json()) as Answer<Id>
  }
}

/** Parameters may be left out where none is required. */
type Arguments<Id extends OperationId> = Record<string, never> extends Parameters<Id>
  ? [parameters?: Parameters<Id>, sending?: Sending]
  : Partial<Parameters<Id>> extends Parameters<Id> ? [parameters?: Parameters<Id>, sending?: Sending] : [parameters: Parameters<Id>, sending?: Sending]
