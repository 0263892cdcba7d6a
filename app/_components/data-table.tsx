'use client'
import { ArrowDown, ArrowUp, ChevronsUpDown } from 'lucide-react'
import { useMemo, useState, type ReactNode } from 'react'
import { copyText } from './copy-button'
import { Menu } from './menu'
import { tableText, type TableFormat, type TextColumn } from './table-text'

export interface Column<Row> extends TextColumn<Row> {
  /** What stands in the head. */
  header: ReactNode
  /** What a reader sees; default: the plain value. */
  cell?: (row: Row) => ReactNode
  align?: 'right'
  /** Long text that may break over lines. */
  wrap?: boolean
  /** Sort by the plain value in the browser, or by this. */
  sort?: boolean | ((row: Row) => number | string | null)
  /** The cell that names the row. */
  rowHeader?: boolean
  /** In copies only, or on screen only. */
  only?: 'copy' | 'screen'
}
export interface Sorting { name: string; descending: boolean }
export interface DataTableProps<Row> {
  columns: readonly Column<Row>[]
  rows: readonly Row[]
  rowKey: (row: Row) => string
  caption: string
  /** Shown beside the copy menu, e.g. a count. */
  summary?: ReactNode
  hideCaption?: boolean
  /** Sorting done elsewhere (by the API); without it the rows given are sorted here. */
  sorting?: Sorting | null
  onSort?: (sorting: Sorting) => void
  initialSort?: Sorting
  /** Extra actions beside the copy menu. */
  actions?: ReactNode
  rowClassName?: (row: Row) => string
  empty?: ReactNode
}

function order<Row>(rows: readonly Row[], column: Column<Row>, descending: boolean): Row[] {
  const key = typeof column.sort === 'function' ? column.sort : column.value
  const way = descending ? -1 : 1
  return [...rows].sort((a, b) => {
    const x = key(a)
    const y = key(b)
    // What is not known stands last either way.
    if (x === null || y === null) return x === y ? 0 : x === null ? 1 : -1
    return way * (typeof x === 'number' && typeof y === 'number' ? x - y : String(x).localeCompare(String(y), 'en', { numeric: true }))
  })
}

/** A native table with a caption, sortable heads, and a menu that copies what is shown, in full precision. */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const { columns, rows, rowKey, caption, summary, hideCaption = false, onSort, actions, rowClassName, empty } = props
  const [own, setOwn] = useState<Sorting | null>(props.initialSort ?? null)
  const sorting = onSort ? (props.sorting ?? null) : own
  const shown = columns.filter((column) => column.only !== 'copy')
  const sorted = useMemo(() => {
    const column = own && !onSort ? columns.find((candidate) => candidate.name === own.name) : undefined
    return column && own ? order(rows, column, own.descending) : rows
  }, [rows, columns, own, onSort])
  const press = (name: string) => {
    const next = { name, descending: sorting?.name === name ? !sorting.descending : false }
    if (onSort) onSort(next)
    else setOwn(next)
  }
  const [said, setSaid] = useState('')
  const copy = (format: TableFormat) => async () => {
    const done = await copyText(tableText(format, columns.filter((column) => column.only !== 'screen'), sorted, caption))
    setSaid(done ? `Copied ${sorted.length} rows` : 'Could not copy')
  }
  return (
    <div className="w-fit min-w-[min(100%,44rem)] max-w-full">
      <div className="mb-1.5 flex flex-wrap items-end justify-between gap-x-4 gap-y-2">
        <div className="note min-w-0">{summary}</div>
        <div className="no-print flex flex-wrap items-center gap-2">
          <span role="status" className="note">{said}</span>
          {actions}
          {rows.length > 0 ? (
            <Menu label="Copy table" items={[
              { label: 'as CSV', onSelect: copy('csv') },
              { label: 'as TSV', hint: 'spreadsheet', onSelect: copy('tsv') },
              { label: 'as LaTeX', onSelect: copy('latex') },
            ]} />
          ) : null}
        </div>
      </div>
      <div className="scroll-x" tabIndex={0} role="region" aria-label={`${caption}, scrolls sideways`}>
        <table className="ruled">
          <caption className={hideCaption ? 'sr-only' : 'note pb-1 text-left'}>{caption}</caption>
          <thead>
            <tr>
              {shown.map((column) => {
                const active = sorting?.name === column.name
                return (
                  <th key={column.name} scope="col" className={column.align === 'right' ? 'right' : undefined}
                    aria-sort={column.sort ? (active ? (sorting.descending ? 'descending' : 'ascending') : 'none') : undefined}>
                    {column.sort ? (
                      <button type="button" onClick={() => press(column.name)}
                        className={`inline-flex min-h-6 items-end gap-1 rounded-sm text-left hover:text-ink ${active ? 'text-ink' : ''}`}>
                        <span>{column.header}</span>
                        {active ? (sorting.descending ? <ArrowDown size={13} aria-hidden="true" className="mb-0.5 text-lamp-ink" /> : <ArrowUp size={13} aria-hidden="true" className="mb-0.5 text-lamp-ink" />)
                          : <ChevronsUpDown size={12} aria-hidden="true" className="no-print mb-0.5 opacity-55" />}
                      </button>
                    ) : column.header}
                  </th>
                )
              })}
            </tr>
          </thead>
          <tbody>
            {sorted.map((row) => (
              <tr key={rowKey(row)} className={rowClassName?.(row)}>
                {shown.map((column) => {
                  const content = column.cell ? column.cell(row) : (column.value(row) ?? <span className="text-muted">not known</span>)
                  const look = `${column.align === 'right' ? 'right ' : ''}${column.wrap ? 'wrap' : ''}`
                  return column.rowHeader ? <th key={column.name} scope="row" className={look}>{content}</th> : <td key={column.name} className={look}>{content}</td>
                })}
              </tr>
            ))}
          </tbody>
        </table>
        {rows.length === 0 && empty ? empty : null}
      </div>
    </div>
  )
}
