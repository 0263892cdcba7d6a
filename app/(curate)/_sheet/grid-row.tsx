'use client'
import { CloudAlert, CloudUpload, GitCompareArrows, Plus, Trash2 } from 'lucide-react'
import { memo, type ReactNode } from 'react'
import { Configuration } from '../../_components/configuration'
import { TermSymbol } from '../../_components/term-symbol'
import { findingsText, Mark } from '../_parts/marks'
import { splitTerm } from '../_parts/values-text'
import { subjectName } from './change-state'
import type { SheetColumn } from './columns'
import { CellInput } from './cell-input'
import type { GridColumn } from './grid-columns'
import { findingsOf, marksOf } from './row-order'
import { isRetired, type SheetRow, shownValues } from './sheet'
import type { Editing, GridControl } from './use-grid'

export const cellId = (row: number, column: number): string => `cell-${row}-${column}`

interface RowProps {
  row: SheetRow
  index: number
  columns: readonly GridColumn[]
  /** Columns of this row that are selected. */
  from: number
  to: number
  /** The column in focus, where it is in this row. */
  head: number | null
  editing: Editing | null
  showBefore: boolean
  canEdit: boolean
  grid: GridControl | null
}

function Shown({ column, text }: { column: SheetColumn; text: string }): ReactNode {
  if (text === '') return null
  if (column.set === 'configuration') return <Configuration text={text} />
  if (column.set === 'term') return <TermSymbol term={splitTerm(text)} />
  return <span className={column.align === 'right' ? 'num' : undefined}>{text}</span>
}

/** What stands in the margin: how the row is saved where it is not, what was found, what is done to it. */
function Margin({ row }: { row: SheetRow }) {
  const findings = findingsOf(row)
  const name = subjectName(row.subject)
  const fresh = row.base === null
  const save = row.save === 'conflict' ? { icon: GitCompareArrows, tint: 'text-bad', text: 'two versions' } : row.save === 'failed' ? { icon: CloudAlert, tint: 'text-bad', text: 'could not be saved, kept here' }
    : row.save === 'saving' || row.save === 'waiting' ? { icon: CloudUpload, tint: 'text-muted', text: 'being saved' } : null
  const severity = findings.some((finding) => finding.severity === 'error') ? 'error' : 'warning'
  const Icon = save?.icon
  return (
    <>
      <span className="inline-flex w-4 shrink-0 justify-center">
        {Icon && (save.tint !== 'text-muted' || findings.length === 0) ? <Icon size={14} aria-hidden="true" className={save.tint} /> : findings.length > 0 ? <Mark severity={severity} size={14} /> : isRetired(row) ? <Trash2 size={14} aria-hidden="true" className="text-muted" /> : fresh ? <Plus size={14} aria-hidden="true" className="text-good" /> : row.wanted !== null ? <span aria-hidden="true" className="mt-0.5 size-2 rounded-full bg-lamp" /> : null}
      </span>
      <span className={`truncate font-mono text-xs ${row.wanted === null ? 'text-muted' : 'text-ink'} ${isRetired(row) ? 'line-through' : ''}`}>{fresh && row.subject.level === null ? `${row.subject.species}, new` : name}</span>
      <span className="sr-only">
        {[fresh ? 'new level' : '', isRetired(row) ? 'retired here' : row.wanted !== null && !fresh ? 'changed' : '', findingsText(findings), save?.text ?? ''].filter((part) => part !== '').map((part) => `, ${part}`).join('')}
      </span>
    </>
  )
}

export const GridRow = memo(function GridRow({ row, index, columns, from, to, head, editing, showBefore, canEdit, grid }: RowProps) {
  const values = shownValues(row)
  const marks = marksOf(row)
  const retired = isRetired(row)
  const name = subjectName(row.subject)
  return columns.map((column, place) => {
    const selected = place >= from && place <= to
    const common = {
      id: cellId(index, place), 'data-row': index, 'data-column': place, 'aria-colindex': place + 1, 'aria-selected': selected, tabIndex: head === place ? 0 : -1,
    }
    const look = `relative flex min-w-0 items-center border-r border-b border-rule px-2 outline-none focus-visible:outline-2 focus-visible:-outline-offset-2 focus-visible:outline-lamp focus-visible:z-[1] ${head === place ? 'ring-1 ring-inset ring-lamp' : ''}`
    if (column.value === null) {
      return (
        <div key={column.id} {...common} role="rowheader" style={{ width: column.width }} className={`${look} sticky left-0 z-[2] shrink-0 gap-1 border-r-rule-strong pl-1 ${selected && from !== to ? 'bg-lamp-wash' : 'bg-paper'}`}>
          <Margin row={row} />
        </div>
      )
    }
    const text = column.value.read(values)
    const before = row.base === null ? text : column.value.read(row.base)
    const changed = row.base !== null && !retired && text !== before
    const mark = marks.get(column.id)
    const edited = editing?.key === row.key && editing.column === column.id ? editing : null
    const several = column.id === 'g' && Array.isArray(values.measured_g) && values.measured_g.length > 1 ? values.measured_g.length - 1 : 0
    return (
      <div key={column.id} {...common} role="gridcell" style={{ width: column.width }} aria-readonly={!canEdit || retired || undefined} aria-invalid={mark?.severity === 'error' || undefined}
        title={mark?.text ?? (changed ? `was ${before === '' ? 'nothing' : before}` : undefined)}
        className={`${look} shrink-0 ${column.value.align === 'right' ? 'justify-end' : ''} ${selected && from !== to ? 'bg-lamp-wash' : changed ? 'bg-lamp-wash/60' : ''} ${retired ? 'text-muted line-through' : ''}`}>
        {edited && grid ? <CellInput editing={edited} column={column} name={name} grid={grid} list={column.value.offers === undefined ? undefined : column.value.offers === 'sources' ? 'sheet-sources' : `sheet-${column.id}`} /> : (
          <>
            {mark ? <span className={`mr-1 ${column.value.align === 'right' ? 'mr-auto' : ''}`}><Mark severity={mark.severity} size={12} /></span> : null}
            <span className="min-w-0">
              <span className={`block truncate ${changed ? 'underline decoration-lamp decoration-dotted decoration-2 underline-offset-3' : ''}`}><Shown column={column.value} text={text} /></span>
              {showBefore && changed ? <span className="block truncate text-2xs text-muted"><span className="sr-only">, was </span><del><Shown column={column.value} text={before} /></del>{before === '' ? 'was empty' : null}</span> : null}
            </span>
            {several > 0 ? <span className="ml-1 text-2xs text-muted" title={`and ${several} more measured`}>+{several}</span> : null}
            {mark ? <span className="sr-only">, {mark.severity}: {mark.text}</span> : changed && !showBefore ? <span className="sr-only">, changed, was {before === '' ? 'empty' : before}</span> : null}
          </>
        )}
      </div>
    )
  })
})
