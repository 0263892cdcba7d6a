/** Numbers as people type and paste them. */

/** A number as typed, with a decimal point, a plain minus and no spaces between thousands; what is no number yet stays as it is. */
export function tidyNumber(text: string): string {
  const plain = text.trim().replace(/[\u2212\u2013]/g, '-').replace(/[\s\u2009\u202f\u00a0']/g, '').replace(/^\+/, '')
  // a comma alone is the decimal one; commas beside a point part thousands
  if (/^-?\d*,\d*(?:[eE][-+]?\d+)?$/.test(plain)) return plain.replace(',', '.')
  if (/^-?\d{1,3}(?:,\d{3})+\.\d*$/.test(plain)) return plain.replace(/,/g, '')
  return plain
}

/** The number a text means; null where it means none. */
export function readTyped(text: string): number | null {
  const tidy = tidyNumber(text)
  if (tidy === '' || !/^-?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?$/.test(tidy)) return null
  const value = Number(tidy)
  return Number.isFinite(value) ? value : null
}

export interface PastedRow {
  value: string
  unc: string
}

/** The cells of one pasted line: by tab, else by semicolon, else by white space, else one cell. */
const cells = (line: string): string[] => {
  if (line.includes('\t')) return line.split('\t')
  if (line.includes(';')) return line.split(';')
  // a space may also part thousands, so it separates only where both sides are numbers with a decimal mark
  const spaced = line.trim().split(/\s+/)
  return spaced.length > 1 && spaced.every((cell) => /[.,]\d/.test(cell)) ? spaced : [line]
}

/** Whether a pasted text is more than one number. */
export const isBlock = (text: string): boolean => /[\n\r\t;]/.test(text.trim()) || cells(text).length > 1

/**
 * Rows of a pasted block: the first number of each line is the position, the second its uncertainty; `12.345(67)` is read with its
 * uncertainty in the last digits. Lines without a number (heads, remarks) are left out and counted.
 */
export function readBlock(text: string): { rows: PastedRow[]; leftOut: number } {
  const rows: PastedRow[] = []
  let leftOut = 0
  for (const line of text.split(/\r\n|\n|\r/)) {
    if (line.trim() === '') continue
    const numbers = cells(line).flatMap((cell) => {
      const withUnc = /^(.*?)[\s\u202f]*(?:\((\d+)\)|±\s*(.+))\s*$/.exec(cell.trim())
      if (!withUnc) return readTyped(cell) === null ? [] : [tidyNumber(cell)]
      const value = tidyNumber(withUnc[1] ?? '')
      if (readTyped(value) === null) return []
      if (withUnc[3] !== undefined) return [value, tidyNumber(withUnc[3])]
      const decimals = (value.split('.')[1] ?? '').length
      return [value, String(Number(`${withUnc[2]}e-${decimals}`))]
    })
    const [value, unc = ''] = numbers
    if (value === undefined) leftOut += 1
    else rows.push({ value, unc })
  }
  return { rows, leftOut }
}
