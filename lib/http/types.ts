import type { z } from 'zod'
import type { Caller } from '@/lib/access/caller'
import type { HeldClaim } from '@/lib/access/idempotency'
import type { Table, WrittenTable } from '@/lib/http/writers/table'
import type { EditionUse, Format, Operation, SharedQuery } from '@/openapi/core/define'

/** Where a list goes on: the sort key and identity of the last row given, in the order of the sort. */
export type CursorPosition = readonly (string | number | null)[]

export interface Warning { code: string; detail: string }

/** What a handler is given: everything parsed, authenticated and resolved. */
export interface Call<P, Q, B, S> {
  params: P
  query: Q
  body: B
  /** The edition's content; `null` where the operation is of no edition. */
  snapshot: S
  /** Number of the edition read; the latest one (0 when nothing is published) where the operation is of no edition. */
  edition: number
  caller: Caller
  requestId: string
  /** Decoded `cursor`: the position of the last row already given. */
  after: CursorPosition | null
  format: Format
  /** The entity tag of If-Match, for operations that need one; compare it by `requireVersion`. */
  ifMatch: string | null
  /** Adds to `meta.warnings`. */
  warn: (code: string, detail: string) => void
  clientAddress: string
  /** Told when whoever asked has gone. */
  signal: AbortSignal
  /** What this request holds of its Idempotency-Key: goes into the transaction of its effect (`actingOf`, `recordAudit`). */
  claim: HeldClaim | null
  /** Fields of the request, for the few operations that need one (cookies at sign-in). */
  requestFields: Headers
}

export interface Streamed {
  /** Name of the file without its ending. */
  name: string
  body: Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array>
}

export interface Answer<D> {
  /** Left out only where `table` holds everything and no JSON but that of its rows is wanted. */
  data?: D
  /** What a repeated request with the same Idempotency-Key gets, where the first answer holds a secret that is shown once. */
  repeatData?: D
  page?: { limit: number; next: CursorPosition | null }
  /** Further members of `meta`: model, conventions, excluded, explained ... */
  meta?: Record<string, unknown>
  /** The same content as rows, for every format but JSON; a function, so that JSON does not pay for it. */
  table?: Table | (() => Table)
  /** The whole body of an operation without envelope, piece by piece, where it is JSON made elsewhere. */
  text?: AsyncIterable<string>
  /** A body made elsewhere in the format asked, given the meta that belongs into it: for answers too large to stand in memory. */
  stream?: (meta: Record<string, unknown>) => Promise<Streamed> | Streamed
  status?: number
  headers?: Record<string, string>
  /** Set-Cookie fields. */
  cookies?: readonly string[]
  /** What the entity tag is made from, for things with a version of their own (`entityTag` of etag.ts). */
  etag?: string
}

/** The shape of `data`: a list of the contract's answer where it is a list. */
type Data<R extends z.ZodType, L extends boolean> = L extends true ? z.input<R>[] : z.input<R>

export type Handler<P extends z.ZodObject, Q extends z.ZodObject, B extends z.ZodType, R extends z.ZodType, E extends EditionUse, L extends boolean, S> =
  (call: Call<z.output<P>, z.output<Q> & SharedQuery<L>, z.output<B>, E extends 'none' ? null : S>) => Promise<Answer<Data<R, L>>> | Answer<Data<R, L>>

/** An operation with its handler, types forgotten: what `resource` gathers. */
export interface Endpoint<S> {
  operation: Operation
  handle: (call: Call<never, never, never, never>) => Promise<Answer<unknown>> | Answer<unknown>
  readonly snapshotType?: S
}

export type WriteTable = (format: Format, table: Table, meta: unknown, page?: unknown) => WrittenTable | Promise<WrittenTable>
