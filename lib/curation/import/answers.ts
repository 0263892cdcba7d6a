import type { Db } from '@/db/client'
import type { Column, Table } from '@/openapi/core/table'
import type { ImportColumn, ImportRow, ImportVerdict } from '@/openapi/schemas/import'
import { importColumns } from './columns'
import { listReport, readImport } from './store'

type After = readonly (string | number | null)[] | null

const text = (name: string, description: string): Column => ({ name, type: 'text', unit: null, description })

const COLUMNS: readonly Column[] = [
  text('name', 'Name in the header of the file'), text('unit', 'Unit, where it has one'),
  { name: 'required', type: 'boolean', unit: null, description: 'Needed in a file that has no column id' }, text('description', 'What stands in it'),
]

export function importColumnList(after: After, limit: number) {
  const all = importColumns()
  const start = after === null ? 0 : all.findIndex((one) => one.name === after[0]) + 1
  const data = all.slice(start, start + limit)
  const last = data.at(-1)
  const table = (): Table => ({ name: 'import-columns', columns: COLUMNS, rows: data.map((one: ImportColumn) => [one.name, one.unit, one.required, one.description]), items: data })
  return { data, page: { limit, next: last === undefined || start + limit >= all.length ? null : [last.name] }, table }
}

const REPORT: readonly Column[] = [
  { name: 'row', type: 'integer', unit: null, description: 'Row of the file, the header being row 1' },
  text('verdict', 'new, changed, same, ambiguous or error'), text('level', 'Level that the row is about'),
  text('findings', 'Errors and warnings, each with its code and field'), text('fields', 'What changes, field by field'),
]

const shown = (value: unknown): string => (typeof value === 'string' ? value : JSON.stringify(value))

/** One row as cells of text. */
const cellsOf = ({ row, verdict, level, findings, fields }: ImportRow): unknown[] => [
  row, verdict, level,
  findings.length === 0 ? null : findings.map((one) => `${one.severity} ${one.code}${one.field === null ? '' : ` (${one.field})`}: ${one.detail}`).join('\n'),
  fields.length === 0 ? null : fields.map((one) => `${one.field}: ${shown(one.before)} -> ${shown(one.after)}`).join('\n'),
]

const PAGE = 5000

/** All rows that a download holds, read a few thousand at a time. */
async function wholeReport(db: Db, id: string, verdict: ImportVerdict | undefined, from: number): Promise<ImportRow[]> {
  const rows: ImportRow[] = []
  for (let after = from; ;) {
    const page = await listReport(db, id, verdict, after, PAGE)
    for (const row of page) rows.push(row)
    const last = page.at(-1)
    if (last === undefined || page.length < PAGE) return rows
    after = last.row
  }
}

export interface ReportAsked { amendment: string; id: string; verdict: ImportVerdict | undefined; after: After; limit: number; whole: boolean }

/** A page of a report, or all of it for a file. */
export async function importReport(db: Db, { amendment, id, verdict, after, limit, whole }: ReportAsked) {
  await readImport(db, amendment, id)
  const from = Number(after?.[0] ?? 0)
  const rows = whole ? await wholeReport(db, id, verdict, from) : await listReport(db, id, verdict, from, limit + 1)
  const data = whole ? rows : rows.slice(0, limit)
  const last = data.at(-1)
  const table = (): Table => ({ name: 'import-report', columns: REPORT, rows: data.map(cellsOf), items: data })
  return { data, page: { limit, next: rows.length > data.length && last !== undefined ? [last.row] : null }, table }
}
