import type { Column, Table } from '@/lib/http/writers/table'

const FORMULA = /^[=+\-@\t\r]/
const ESCAPED = /^'['=+\-@\t\r]/
const NEEDS_QUOTES = /[",\r\n]/

/**
 * Text that a spreadsheet would run as a formula (it begins with = + - @ tab or CR) gets an apostrophe before it, and an
 * apostrophe that stands first is doubled, so that `unescapeText` undoes exactly this. Text cells only: negative numbers stay numbers.
 */
export const escapeText = (text: string): string => (text.startsWith("'") || FORMULA.test(text) ? `'${text}` : text)

/** The inverse of `escapeText`, for import. */
export const unescapeText = (text: string): string => (ESCAPED.test(text) ? text.slice(1) : text)

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
