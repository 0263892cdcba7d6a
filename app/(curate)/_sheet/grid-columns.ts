import { COLUMNS, type SheetColumn } from './columns'
import { subjectName } from './change-state'
import { type SheetRow, shownValues } from './sheet'

/** A column of the grid: the first names the row and is only read. */
export type GridColumn = { id: 'id'; label: string; hint: string; width: number; value: null } | { id: string; label: string; hint: string; width: number; value: SheetColumn }

const NAME: GridColumn = { id: 'id', label: 'Level', hint: 'Identifier; a new level has one from its first saving on', width: 132, value: null }

export const gridColumns = (shown: ReadonlySet<string>): GridColumn[] => [
  NAME, ...COLUMNS.filter((column) => column.spare !== true || shown.has(column.id)).map((column): GridColumn => ({ id: column.id, label: column.label, hint: column.hint, width: column.width, value: column })),
]
export const valueColumns = (columns: readonly GridColumn[]): SheetColumn[] => columns.flatMap((column) => column.value ?? [])

export const readCell = (row: SheetRow | undefined, column: GridColumn | undefined): string =>
  row === undefined || column === undefined ? '' : column.value === null ? subjectName(row.subject) : column.value.read(shownValues(row))

/** Where each column begins, and where the last one ends. */
export const offsets = (columns: readonly GridColumn[]): number[] => columns.reduce<number[]>((sums, column) => [...sums, (sums.at(-1) ?? 0) + column.width], [0])
