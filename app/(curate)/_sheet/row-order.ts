import { columnOfField, COLUMNS } from './columns'
import { subjectName } from './change-state'
import { isDirty, type SheetRow, shownValues } from './sheet'

export interface RowFilter { words: string; changed: boolean; findings: boolean }
export const NO_FILTER: RowFilter = { words: '', changed: false, findings: false }
export const isFiltering = (filter: RowFilter): boolean => filter.words.trim() !== '' || filter.changed || filter.findings

const energy = ({ base }: SheetRow): number => {
  const number = Number(base?.energy_invcm ?? base?.energy_literal ?? Number.NaN)
  return Number.isFinite(number) ? number : Number.POSITIVE_INFINITY
}

export const findingsOf = (row: SheetRow) => (row.wanted === null ? [] : (row.server?.findings ?? []))
export const isChanged = (row: SheetRow): boolean => row.wanted !== null || row.server !== null || isDirty(row)

function matches(row: SheetRow, words: readonly string[]): boolean {
  if (words.length === 0) return true
  const values = shownValues(row)
  const text = [subjectName(row.subject), row.subject.species ?? '', ...COLUMNS.map((column) => column.read(values))].join(' ').toLowerCase()
  return words.every((word) => text.includes(word))
}

/** Levels by species and published energy, so that a row stays in its place while it is edited; new ones stand below. */
export function orderedLevels(rows: readonly SheetRow[], filter: RowFilter): string[] {
  const words = filter.words.toLowerCase().split(/\s+/).filter((word) => word !== '')
  return rows
    .map((row, place) => ({ row, place }))
    .filter(({ row }) => row.subject.kind === 'level' && matches(row, words) && (!filter.changed || isChanged(row)) && (!filter.findings || findingsOf(row).length > 0))
    .sort((a, b) => {
      const bySpecies = (a.row.subject.species ?? '').localeCompare(b.row.subject.species ?? '', 'en')
      if (bySpecies !== 0) return bySpecies
      const [x, y] = [energy(a.row), energy(b.row)]
      return x === y ? a.place - b.place : x - y
    })
    .map(({ row }) => row.key)
}

/** What is said of each cell of a row. Findings without a column of their own stand in the margin only. */
export function marksOf(row: SheetRow): Map<string, { severity: 'error' | 'warning'; text: string }> {
  const marks = new Map<string, { severity: 'error' | 'warning'; text: string }>()
  for (const { severity, field, detail } of findingsOf(row)) {
    const id = columnOfField(field)?.id
    if (id === undefined) continue
    const before = marks.get(id)
    marks.set(id, { severity: before?.severity === 'error' ? 'error' : severity, text: before === undefined ? detail : `${before.text} ${detail}` })
  }
  return marks
}
