/** Text of a block of cells to a spreadsheet and back. */

const needsQuotes = (text: string): boolean => /["\t\r\n]/.test(text)

/** Cells with tabs between them, as spreadsheets take them; a cell with a line break is quoted. */
export const blockText = (cells: readonly (readonly string[])[]): string =>
  cells.map((row) => row.map((text) => (needsQuotes(text) ? `"${text.replace(/"/g, '""')}"` : text)).join('\t')).join('\n')

/** Reads tab-separated text as spreadsheets write it. Quotes count only where they open a cell and are closed before its end. */
export function parseBlock(text: string): string[][] {
  const source = text.replace(/\r\n?/g, '\n').replace(/\n$/, '')
  if (source === '') return []
  const rows: string[][] = [[]]
  let place = 0
  while (place <= source.length) {
    const quoted = source[place] === '"' ? closed(source, place) : null
    const end = quoted?.end ?? nextBreak(source, place)
    rows[rows.length - 1]?.push(quoted?.text ?? source.slice(place, end))
    if (end >= source.length) break
    if (source[end] === '\n') rows.push([])
    place = end + 1
  }
  return rows
}

const nextBreak = (source: string, from: number): number => {
  const found = source.slice(from).search(/[\t\n]/)
  return found === -1 ? source.length : from + found
}

function closed(source: string, from: number): { text: string; end: number } | null {
  let text = ''
  for (let place = from + 1; place < source.length; place++) {
    if (source[place] !== '"') text += source[place]
    else if (source[place + 1] === '"') { text += '"'; place++ }
    else {
      const end = place + 1
      return end === source.length || source[end] === '\t' || source[end] === '\n' ? { text, end } : null
    }
  }
  return null
}

/** Minus signs, spaces and marks that typesetting puts into numbers and terms, as the table writes them. Other text is left alone. */
export function plainText(text: string): string {
  const trimmed = text.replace(/[\u200b\ufeff]/g, '').replace(/[\u00a0\u2007\u2009\u202f]/g, ' ').trim()
  return /^[\u2212\u2013-]?[\d\s.]+(\(\d+\))?$/.test(trimmed) ? trimmed.replace(/[\u2212\u2013]/g, '-').replace(/\s/g, '') : trimmed
}

/** Rows of the first table of clipboard HTML; null where it has none. Needs a browser's parser. */
export function parseHtmlTable(html: string): string[][] | null {
  const table = new DOMParser().parseFromString(html, 'text/html').querySelector('table')
  if (table === null) return null
  return [...table.querySelectorAll('tr')].map((row) => [...row.querySelectorAll('th,td')].map((cell) => (cell.textContent ?? '').trim()))
}

/** The block that was copied: tabs or lines in the plain text say more than the HTML beside it, which may be coloured source code. */
export function clipboardBlock(data: Pick<DataTransfer, 'getData'>): string[][] {
  const text = data.getData('text/plain')
  if (/[\t\n]/.test(text.replace(/\r?\n$/, ''))) return parseBlock(text)
  const html = data.getData('text/html')
  return (/<table/i.test(html) ? parseHtmlTable(html) : null) ?? parseBlock(text)
}
