import type { Table } from '@/lib/http/writers/table'

/** Rows as objects: those the table brings, else made of its columns. */
export function* itemsOf(table: Table): Generator<unknown> {
  if (table.items) {
    yield* table.items
    return
  }
  for (const row of table.rows) yield Object.fromEntries(table.columns.map((column, i) => [column.name, row[i] ?? null]))
}

/** The envelope with its rows written one by one, so that a whole edition need not stand in memory as text. Numbers in shortest round-trip form. */
export function* jsonParts(table: Table, meta: unknown, page?: unknown): Generator<string> {
  yield '{"data":['
  let first = true
  for (const item of itemsOf(table)) {
    yield `${first ? '' : ','}${JSON.stringify(item)}`
    first = false
  }
  yield `],"meta":${JSON.stringify(meta)}${page === undefined ? '' : `,"page":${JSON.stringify(page)}`}}`
}

/** One row a line; the last line holds the meta and `complete`, so that a stream that was cut shows. */
export function* ndjsonParts(table: Table, meta: unknown): Generator<string> {
  for (const item of itemsOf(table)) yield `${JSON.stringify(item)}\n`
  yield `${JSON.stringify({ meta, complete: true })}\n`
}
