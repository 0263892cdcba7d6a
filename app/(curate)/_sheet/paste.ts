import type { Decimal } from '@/lib/curation/import/decimal'
import type { BatchItem, CheckedChange, Finding } from '@/openapi/schemas/change'
import { type ChangeState, requestOf, type Subject, type Values } from './change-state'
import { plainText } from './clipboard'
import { columnOfField, type SheetColumn } from './columns'
import { blockDecimal, isNumeric, takeNumber } from './paste-decimal'
import type { Block } from './selection'

/** A row that cells are pasted into: one of the sheet, or (key null) a level to be made. */
export interface PasteTarget { key: string | null; subject: Subject; name: string; values: Values; locked: boolean }
/** `pasted` is what stood in the block where its comma was read as a decimal point. */
export interface PastedCell { column: SheetColumn; before: string; after: string; pasted: string | null }
export interface PastedRow { target: PasteTarget; cells: PastedCell[]; values: Values }
export interface PastePlan {
  rows: PastedRow[]
  cells: number
  same: number
  /** Pasted columns and rows that found no place, in words. */
  left: string[]
  /** Whether the first row was read as headings. */
  headed: boolean
  /** A number of the block whose comma may be the decimal mark or divide thousands, and whoever pastes has to say which; else null. */
  unclear: string | null
}

const key = (text: string): string => text.toLowerCase().replace(/[^a-z0-9]/g, '')

/** The columns that a first row of headings names; null where it is not one. */
export function headings(row: readonly string[], columns: readonly SheetColumn[]): (SheetColumn | null)[] | null {
  const named = row.map((text) => columns.find((column) => [column.id, column.label, ...column.fields, `${column.label} ${column.unit ?? ''}`].some((name) => key(name) === key(text))) ?? null)
  const filled = row.filter((text) => text.trim() !== '').length
  return filled > 1 && named.filter((column) => column !== null).length === filled ? named : null
}

/** One value fills a selected block; else the block goes down and right from the first cell. */
export function spread(cells: readonly (readonly string[])[], block: Block): string[][] {
  const [first] = cells
  const [width, height] = [block.right - block.left + 1, block.bottom - block.top + 1]
  if (cells.length === 1 && first?.length === 1) return Array.from({ length: height }, () => Array.from({ length: width }, () => first[0] ?? ''))
  return cells.map((row) => [...row])
}

/**
 * What pasting would do, cell by cell. `targets` are the rows from the first selected one on, `fresh` makes those below the last. `told` is
 * the decimal mark where the block alone does not tell it; a point then says that commas divide thousands.
 */
export function planPaste(
  pasted: readonly (readonly string[])[], columns: readonly SheetColumn[], left: number, targets: readonly PasteTarget[], fresh: (() => PasteTarget) | null,
  told: Decimal | null = null,
): PastePlan {
  const named = headings(pasted[0] ?? [], columns)
  const body = named === null ? pasted : pasted.slice(1)
  const plan: PastePlan = { rows: [], cells: 0, same: 0, left: [], headed: named !== null, unclear: null }
  const width = Math.max(0, ...body.map((row) => row.length))
  const placed = Array.from({ length: width }, (_, index) => (named === null ? (columns[left + index] ?? null) : (named[index] ?? null)))
  const outside = placed.filter((column) => column === null).length
  if (outside > 0) plan.left.push(`${outside === 1 ? 'One column' : `${outside} columns`} of the block ${outside === 1 ? 'has' : 'have'} no place to the right of the table.`)
  const found = blockDecimal(body, placed)
  const decimal = told ?? found.decimal
  if (decimal === null) return { ...plan, unclear: found.example }
  const refused: string[] = []
  let locked = 0
  let homeless = 0
  body.forEach((row, index) => {
    const target = targets[index] ?? fresh?.()
    if (target === undefined) { homeless += 1; return }
    if (target.locked) { locked += 1; return }
    const cells: PastedCell[] = []
    let values = target.values
    row.forEach((text, place) => {
      const column = placed[place]
      if (!column) return
      const taken = isNumeric(column) ? takeNumber(text, decimal, told === '.') : { text: plainText(text), comma: false, refused: false }
      if (taken.refused) { refused.push(text.trim()); return }
      const [before, after] = [column.read(target.values), taken.text]
      if (before === after) { plan.same += 1; return }
      values = column.write(values, after)
      cells.push({ column, before, after, pasted: taken.comma ? text.trim() : null })
    })
    if (cells.length === 0) return
    plan.rows.push({ target, cells, values })
    plan.cells += cells.length
  })
  if (refused.length > 0) {
    const [mark, other] = decimal === ',' ? ['comma', 'point'] : ['point', 'comma']
    const [one, named] = [refused.length === 1, refused.slice(0, 3).join(', ')]
    plan.left.push(`${one ? `One number has a ${other}` : `${refused.length} numbers have a ${other}`} where the block writes decimal ${mark}s, and ${one ? 'is' : 'are'} left out (${named}): a ${other} may divide thousands. Write ${one ? 'it' : 'them'} with a decimal ${mark}, or without the ${other}, and paste again.`)
  }
  if (locked > 0) plan.left.push(`${locked === 1 ? 'One row is' : `${locked} rows are`} retired here and cannot be pasted into.`)
  if (homeless > 0) plan.left.push(`${homeless === 1 ? 'One row of the block has' : `${homeless} rows of the block have`} no row to go to: choose a species first, and they become new levels.`)
  return plan
}

/** What POST changes/check is asked about. */
export const checkItem = (subject: Subject, state: ChangeState, server: { id: string; etag: string } | null): BatchItem => ({
  ...requestOf(subject, state), ...(server === null ? {} : { change: server.id, etag: server.etag }),
})

/** Findings of a checked row by the column they are about; those of the row as a whole under ''. */
export function findingsByColumn(findings: readonly Finding[]): Map<string, Finding[]> {
  const found = new Map<string, Finding[]>()
  for (const finding of findings) {
    const id = columnOfField(finding.field)?.id ?? ''
    found.set(id, [...(found.get(id) ?? []), finding])
  }
  return found
}

export const countFindings = (checked: readonly CheckedChange[], severity: Finding['severity']): number =>
  checked.reduce((sum, one) => sum + one.findings.filter((finding) => finding.severity === severity).length, 0)
