export type Decimal = '.' | ','

/** An uncertainty in brackets after the digits, `1,3362(13)`. */
const POINT = /^\s*[+\-\u2212\u2013]?\d*\.\d+(?:[eE][+-]?\d+)?\s*(?:\(\d+\)\s*)?$/
const COMMA = /^\s*[+\-\u2212\u2013]?\d*,\d+(?:[eE][+-]?\d+)?\s*(?:\(\d+\)\s*)?$/
/** Could be one thousand or one: `1,234`. */
const GROUPED = /^\s*[+\-\u2212\u2013]?[1-9]\d{0,2},\d{3}\s*(?:\(\d+\)\s*)?$/

/** Whether a number could be read with a decimal comma as well as with one that divides thousands. */
export const isUnclear = (cell: string): boolean => GROUPED.test(cell)

/** The decimal mark that numbers use; null where every comma could as well divide thousands. */
export function decimalOf(cells: Iterable<string>): Decimal | null {
  let points = 0
  let commas = 0
  let grouped = 0
  for (const cell of cells) {
    if (POINT.test(cell)) points += 1
    else if (GROUPED.test(cell)) grouped += 1
    else if (COMMA.test(cell)) commas += 1
  }
  if (commas > points) return ','
  return points === 0 && grouped > 0 ? null : '.'
}

const COMMA_NUMBER = /^(\s*[+\-\u2212\u2013]?\d*),(\d+(?:[eE][+-]?\d+)?\s*(?:\(.*\)\s*)?)$/

/** A number with a decimal comma as one with a point; what has a point already is left for the reader of numbers to refuse. */
export const withPoint = (cell: string): string => cell.replace(COMMA_NUMBER, '$1.$2')
/** In a file of decimal commas a point may divide thousands, so it cannot be read. */
export const pointInCommaFile = (cell: string): boolean => /^\s*[+\-\u2212\u2013]?[\d.]*\.\d+/.test(cell)
