import type { Column, Table } from '@/lib/http/writers/table'

const DATATYPES = { text: 'string', integer: 'int64', number: 'float64', boolean: 'bool' } as const

/** A YAML double-quoted scalar: JSON text is one, and control characters come out escaped. */
const yamlText = (text: string): string => JSON.stringify(text)

const yamlColumn = (column: Column): string =>
  `# - {name: ${yamlText(column.name)}, ${column.unit === null ? '' : `unit: ${yamlText(column.unit)}, `}datatype: ${DATATYPES[column.type]}, description: ${yamlText(column.description)}}`

/** Booleans are capitalised in ECSV; a missing value is an empty string; text is not changed, only quoted. */
function ecsvCell(column: Column, value: unknown): string {
  if (value === null || value === undefined) return '""'
  if (column.type === 'boolean') return value === true ? 'True' : 'False'
  if (typeof value === 'number') return Number.isFinite(value) ? String(value) : '""'
  const text = String(value)
  return text === '' || /[",\s]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
}

/**
 * Enhanced character-separated values 1.0 (APE 6: T. Aldcroft, "Enhanced Character-Separated Values table format"):
 * a YAML header with names, units, types and descriptions, then comma-separated rows.
 */
export function* ecsvParts(table: Table, meta: unknown): Generator<string> {
  yield '# %ECSV 1.0\n# ---\n# delimiter: \',\'\n# datatype:\n'
  for (const column of table.columns) yield `${yamlColumn(column)}\n`
  // JSON is YAML, so the meta of the answer stands in the header as it is
  yield `# meta: ${JSON.stringify({ table: table.name, answer: meta })}\n# schema: astropy-2.0\n`
  yield `${table.columns.map((column) => column.name).join(',')}\n`
  for (const row of table.rows) yield `${table.columns.map((column, i) => ecsvCell(column, row[i])).join(',')}\n`
}
