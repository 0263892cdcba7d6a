import { parseHalf } from '@/lib/atomic/half'
import { quoted, readNumber } from '@/lib/units/number'
import { unescapeText } from '@/openapi/core/cell-text'
import type { Finding } from '@/openapi/schemas/change'
import { type OwnColumn, ownColumn } from './columns'
import { type Decimal, pointInCommaFile, withPoint } from './decimal'
import type { Layout } from './layout'

export const fault = (code: string, field: string | null, detail: string): Finding => ({ severity: 'error', code, field, detail })

/** Where each of our columns stands in a row, and how its cells are written. */
export interface Reader {
  layout: Layout
  decimal: Decimal
  /** Index of each column in a row's cells. */
  places: ReadonlyMap<string, number>
  /** Columns that say something, from the file or for every row alike. */
  has: (name: string) => boolean
  /** Whether any column says again what others say. */
  controlled: boolean
  /** What is made of cells that repeat all over a file, by their text. */
  remembered: Map<string, unknown>
}

export function readerOf(layout: Layout, decimal: Decimal): Reader {
  const places = new Map(layout.columns.flatMap((column, i): [string, number][] => (column === null ? [] : [[column.name, i]])))
  return {
    layout, decimal, places, has: (name) => places.has(name) || layout.defaults.has(name), controlled: layout.columns.some((column) => column?.use === 'control' && column.name !== 'revision'), remembered: new Map(),
  }
}

const REMEMBERED = 20_000

const isBlank = (text: string): boolean => text.trim() === ''

/** Numbers and printed digits have one decimal mark, whatever the file writes. */
const isNumeric = (column: OwnColumn): boolean => column.kind === 'number' || column.kind === 'half' || column.name === 'energy_literal'

/** The cells of one row by our names, as text in the table's own way of writing. */
export class RowCells {
  constructor(private readonly reader: Reader, private readonly cells: readonly string[]) {}

  has(name: string): boolean {
    return this.reader.has(name)
  }

  get controlled(): boolean {
    return this.reader.controlled
  }

  /** Makes something of the cells of some columns, once for all rows where they are the same. */
  once<T>(columns: readonly string[], make: () => T): T {
    const key = JSON.stringify(columns.map((name) => this.text(name)))
    const { remembered } = this.reader
    const known = remembered.get(key)
    if (known !== undefined) return known as T
    const made = make()
    if (remembered.size < REMEMBERED) remembered.set(key, made)
    return made
  }

  /** Null where the cell is empty or there is no such column. */
  text(name: string): string | null {
    const at = this.reader.places.get(name)
    const raw = at === undefined ? this.reader.layout.defaults.get(name) : this.cells[at]
    if (raw === undefined || raw === '') return null
    const column = ownColumn(name)
    if (column === undefined) return null
    if (isNumeric(column)) {
      if (isBlank(raw)) return null
      const plain = column.name === 'energy_literal' ? unescapeText(raw) : raw
      return this.reader.decimal === ',' && at !== undefined ? withPoint(plain) : plain
    }
    const text = column.kind === 'text' ? unescapeText(raw) : raw
    return isBlank(text) ? null : text
  }

  /** What is wrong with the row whatever it says: cells too many or too few, decimal marks mixed, a cell under no header. */
  faults(): Finding[] {
    const { layout, decimal, places } = this.reader
    const { length } = this.cells
    if (length !== layout.columns.length) return [fault('row_length', null, `The row has ${length} cells and the header ${layout.columns.length}: a cell is missing, or holds a delimiter and is not in quotation marks.`)]
    const found: Finding[] = []
    for (const [i, shown] of layout.shown.entries()) {
      if (shown.header.trim() === '' && !isBlank(this.cells[i] ?? '')) found.push(fault('cell_without_column', null, `Cell ${i + 1}, ${quoted(this.cells[i] ?? '')}, stands under no header.`))
    }
    if (decimal === '.') return found
    for (const [name, at] of places) {
      const column = ownColumn(name)
      const cell = this.cells[at] ?? ''
      if (column !== undefined && isNumeric(column) && pointInCommaFile(cell)) found.push(fault('decimal_mixed', name, `${quoted(cell)} has a point, and this file writes decimals with a comma.`))
    }
    return found
  }
}

const YES = new Set(['true', '1', 'yes', 'y', 'x'])
const NO = new Set(['false', '0', 'no', 'n', ''])

/** A flag as a spreadsheet may write it; undefined where it is none. */
export function readFlag(text: string | null): boolean | undefined {
  const word = text?.trim().toLowerCase() ?? ''
  return YES.has(word) ? true : NO.has(word) ? false : undefined
}

/** Whether a cell says what a level already has. */
export function says(column: OwnColumn, text: string | null, own: string | number | boolean | null): boolean {
  if (column.kind === 'flag') return readFlag(text) === (own ?? false)
  if (text === null || own === null || own === '') return text === null && (own === null || own === '')
  if (text === String(own)) return true
  if (column.kind === 'number') return readNumber(text) === own
  if (column.kind === 'half') {
    const half = parseHalf(text)
    return half.ok && half.value === 2 * Number(own)
  }
  return false
}
