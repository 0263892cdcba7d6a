import { createHash } from 'node:crypto'
import { writeCursor } from '@/lib/http/cursor'
import { entityTag } from '@/lib/entity-tag'
import { noneMatchHits } from '@/lib/http/etag'
import type { House } from '@/lib/http/house'
import { API_PREFIX, type ReadRequest } from '@/lib/http/request'
import type { Answer, Warning } from '@/lib/http/types'
import { streamedText } from '@/lib/http/writers/stream'
import { type Format, MEDIA_TYPES, type Operation } from '@/openapi/core/define'

export interface Setting {
  operation: Operation
  read: ReadRequest
  edition: number
  fingerprint: string
  format: Format
  warnings: Warning[]
  path: string
  noneMatch: string | null
}

export interface Written { status: number; headers: Record<string, string>; body: string | Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array> | null; json: unknown; cookies?: readonly string[] }

function metaOf<S>(house: House<S>, setting: Setting, answer: Answer<unknown>): Record<string, unknown> {
  const { operation } = setting
  return {
    edition: setting.edition > 0 ? setting.edition : null,
    constants: house.constants,
    ...(operation.edition === 'computed' ? { physics: house.physics } : {}),
    ...(operation.method === 'get' || Object.keys(setting.read.asked).length > 0 ? { query: setting.read.asked } : {}),
    ...answer.meta,
    warnings: setting.warnings,
  }
}

/** Address of the next page: the same query with the new cursor. */
function nextAddress(setting: Setting, cursor: string, baseUrl: string): string {
  const search = new URLSearchParams()
  for (const [name, value] of Object.entries(setting.read.asked)) {
    if (name === 'cursor') continue
    for (const text of Array.isArray(value) ? value : [value]) search.append(name, text)
  }
  search.append('cursor', cursor)
  return `${baseUrl}${API_PREFIX}${setting.path}?${search.toString()}`
}


/** Puts a handler's answer into its envelope and representation, with its validators. */
export async function writeAnswer<S>(house: House<S>, setting: Setting, answer: Answer<unknown>, derivedTag: string | null): Promise<Written> {
  const { operation, format } = setting
  const headers: Record<string, string> = { ...answer.headers }
  const status = answer.status ?? operation.status
  const cookies = answer.cookies ?? []
  if (status === 204) return { status, headers, body: null, json: null, cookies }
  const meta = metaOf(house, setting, answer)
  let page: { limit: number; next_cursor: string | null } | undefined
  if (answer.page !== undefined) {
    const cursor = answer.page.next === null ? null : writeCursor(house.secret(), setting.fingerprint, { edition: setting.edition, position: answer.page.next })
    page = { limit: answer.page.limit, next_cursor: cursor }
    if (cursor !== null) headers.link = `<${nextAddress(setting, cursor, house.baseUrl)}>; rel="next"`
  }
  let body: Written['body']
  let json: unknown = null
  const table = answer.table === undefined ? undefined : typeof answer.table === 'function' ? (format === 'json' && answer.data !== undefined ? undefined : answer.table()) : answer.table
  if (answer.stream !== undefined) {
    const streamed = await answer.stream(meta)
    headers['content-type'] = `${MEDIA_TYPES[format]}${format === 'ndjson' ? '; charset=utf-8' : ''}`
    if (format !== 'json') headers['content-disposition'] = `inline; filename="${streamed.name}.${format}"`
    if (streamed.body instanceof Uint8Array) headers['content-length'] = String(streamed.body.byteLength)
    body = streamed.body
  } else if (answer.text !== undefined) {
    headers['content-type'] ??= 'application/json'
    body = streamedText(answer.text)
  } else if (format !== 'json' || answer.data === undefined) {
    if (table === undefined) throw new Error(`${operation.id} gave no table for ${format}`)
    const written = await house.writeTable(format, table, meta, page)
    headers['content-type'] = written.contentType
    if (operation.editionIn === 'path' || format !== 'json') headers['content-disposition'] = `inline; filename="${table.name}.${format}"`
    body = written.body
  } else {
    json = operation.bare ? answer.data : { data: answer.data, meta, ...(page === undefined ? {} : { page }) }
    headers['content-type'] ??= 'application/json'
    body = JSON.stringify(json)
  }
  const tag = derivedTag ?? answer.etag ?? (operation.method === 'get' && typeof body === 'string' ? entityTag(operation.id, createHash('sha256').update(body).digest('base64')) : null)
  if (tag !== null) headers.etag = tag
  if (operation.method === 'get' && tag !== null && noneMatchHits(setting.noneMatch, tag)) return { status: 304, headers: { etag: tag, ...(headers.link === undefined ? {} : { link: headers.link }) }, body: null, json: null }
  return { status, headers, body, json, cookies }
}
