import type { Column, Table } from '@/lib/http/writers/table'
import { escapeText, unescapeText } from '@/openapi/core/cell-text'

export { escapeText, unescapeText }

const NEEDS_QUOTES = /[",\r\n]/

const quote = (text: string): string => (text === '' || NEEDS_QUOTES.test(text) ? `"${text.replaceAll('"', '""')}"` : text)

/** One cell: numbers in shortest round-trip form; null is an empty cell, empty text is a quoted empty one. */
export function csvCell(column: Column, value: unknown): string {
  if (value === null || value === undefined) return ''
  if (column.type === 'text') return quote(escapeText(String(value)))
  if (typeof value === 'number') return Number.isFinite(value) ? String(value) : ''
  return String(value)
}

/** CSV of RFC 4180: header row (units stand in the names), CRLF line ends. */
export function* csvParts(table: Table): Generator<string> {
  yield `${table.columns.map((column) => quote(column.name)).join(',')}\r\n`
  for (const row of table.rows) yield `${table.columns.map((column, i) => csvCell(column, row[i])).join(',')}\r\n`
}
