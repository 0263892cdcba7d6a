export type { Column, Table } from '@/openapi/core/table'

export interface WrittenTable {
  contentType: string
  body: string | Uint8Array<ArrayBuffer> | ReadableStream<Uint8Array>
}
