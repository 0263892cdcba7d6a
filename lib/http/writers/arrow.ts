import { Bool, type Builder, type DataType, Field, Float64, Int32, makeBuilder, makeData, RecordBatch, RecordBatchStreamWriter, Schema, Struct, Utf8 } from 'apache-arrow'
import type { Column, Table } from '@/lib/http/writers/table'

const ROWS_PER_BATCH = 2048
/** The end-of-stream mark: a continuation and a zero length. */
const END_BYTES = 8

function typeOf(column: Column): DataType {
  switch (column.type) {
    case 'text':
      return new Utf8()
    case 'integer':
      return new Int32()
    case 'number':
      return new Float64()
    case 'boolean':
      return new Bool()
  }
}

function fieldOf(column: Column): Field {
  const metadata = new Map([['description', column.description]])
  if (column.unit !== null) metadata.set('unit', column.unit)
  return new Field(column.name, typeOf(column), true, metadata)
}

/** One stream of the schema and these batches, ended. */
const streamOf = (schema: Schema, batches: RecordBatch[]): Uint8Array => {
  const writer = new RecordBatchStreamWriter()
  writer.reset(undefined, schema)
  for (const batch of batches) writer.write(batch)
  writer.finish()
  return writer.toUint8Array(true) as unknown as Uint8Array
}

function batchOf(schema: Schema, rows: readonly (readonly unknown[])[]): RecordBatch {
  const children = schema.fields.map((field, i) => {
    const builder: Builder = makeBuilder({ type: field.type as DataType, nullValues: [null, undefined] })
    for (const row of rows) builder.append(row[i] ?? null)
    return builder.finish().flush()
  })
  return new RecordBatch(schema, makeData({ type: new Struct(schema.fields), length: rows.length, nullCount: 0, children }))
}

/**
 * The Arrow IPC stream: schema with unit and description in each field's metadata and the answer's meta in the schema's, then
 * record batches of float64, int32, utf8 and bool columns, then the end mark. Doubles are the same bits as inside.
 * The library's writer keeps all it wrote, so each batch is written as a stream of its own and only its middle is passed on.
 */
export function* arrowParts(table: Table, meta: unknown): Generator<Uint8Array> {
  const schema = new Schema(table.columns.map(fieldOf), new Map([['table', table.name], ['meta', JSON.stringify(meta)]]))
  const empty = streamOf(schema, [batchOf(schema, [])])
  const head = schemaPart(empty)
  const middleOf = (rows: readonly (readonly unknown[])[]): Uint8Array => {
    const stream = streamOf(schema, [batchOf(schema, rows)])
    return stream.subarray(head.byteLength, stream.byteLength - END_BYTES)
  }
  yield head
  let rows: (readonly unknown[])[] = []
  for (const row of table.rows) {
    rows.push(row)
    if (rows.length === ROWS_PER_BATCH) {
      yield middleOf(rows)
      rows = []
    }
  }
  if (rows.length > 0) yield middleOf(rows)
  yield empty.subarray(empty.byteLength - END_BYTES)
}

/** The first message of a stream, which is the schema: continuation mark, length of the metadata, metadata (padded; a schema has no body). */
function schemaPart(stream: Uint8Array): Uint8Array {
  const length = new DataView(stream.buffer, stream.byteOffset, stream.byteLength).getInt32(4, true)
  return stream.subarray(0, END_BYTES + length)
}
