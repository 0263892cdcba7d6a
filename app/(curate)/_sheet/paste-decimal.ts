import { type Decimal, decimalOf, isUnclear, pointInCommaFile, withPoint } from '@/lib/curation/import/decimal'
import { plainText } from './clipboard'
import type { SheetColumn } from './columns'

/** Columns of numbers are those set to the right. */
export const isNumeric = (column: SheetColumn | null | undefined): boolean => column?.align === 'right'

/** A number as it was pasted, without the minus signs and spaces of typesetting; other text as it is. */
function compact(text: string): string {
  const plain = plainText(text)
  return /^[+\u2212\u2013-]?[\d\s.,]+(\(\d+\))?$/.test(plain) ? plain.replace(/[\u2212\u2013]/g, '-').replace(/\s/g, '') : plain
}

/** The decimal mark of a block, as all its numbers together tell; null where every comma could as well divide thousands. */
export function blockDecimal(rows: readonly (readonly string[])[], placed: readonly (SheetColumn | null)[]): { decimal: Decimal | null; example: string | null } {
  const numbers = rows.flatMap((row) => row.flatMap((text, place) => (isNumeric(placed[place]) ? [compact(text)] : [])))
  return { decimal: decimalOf(numbers), example: numbers.find(isUnclear) ?? null }
}

/** What a cell is taken as; `comma` where a comma of it became a decimal point, `refused` where its mark cannot be read. */
export interface TakenCell { text: string; comma: boolean; refused: boolean }

/** Reads a cell of numbers in a block of this decimal mark. `thousands`: whoever pastes it says that commas divide thousands. */
export function takeNumber(text: string, decimal: Decimal, thousands: boolean): TakenCell {
  const plain = compact(text)
  const as = (taken: string, more: Partial<TakenCell> = {}): TakenCell => ({ text: taken, comma: false, refused: false, ...more })
  if (decimal === ',') {
    // it may divide thousands: a number a thousand times too small must not slip in
    if (pointInCommaFile(plain)) return as(plain, { refused: true })
    const read = withPoint(plain)
    return as(read, { comma: read !== plain })
  }
  if (isUnclear(plain)) return thousands ? as(plain.replace(',', '')) : as(plain, { refused: true })
  return as(plain, { refused: /^[+-]?[\d.,]*,\d/.test(plain) })
}
