/** A table's visible columns as text to paste elsewhere: CSV, TSV or LaTeX, full precision, units in the header. */

export interface TextColumn<Row> {
  /** Header with the unit in its name, e.g. `energy_invcm`. */
  name: string
  /** The plain value: full precision, never rounded for show. */
  value: (row: Row) => string | number | null
}
export type TableFormat = 'csv' | 'tsv' | 'latex'

const csvCell = (value: string | number | null): string => {
  if (value === null) return ''
  if (typeof value === 'number') return String(value)
  // A spreadsheet would run these as formulas; the mark is the same as in the API's own CSV. Numbers are left alone.
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value.startsWith("'") ? `'${value}` : value
  return /[",\n\r]/.test(safe) ? `"${safe.replace(/"/g, '""')}"` : safe
}

const tsvCell = (value: string | number | null): string => (value === null ? '' : String(value).replace(/[\t\r\n]+/g, ' '))

const LATEX: Record<string, string> = {
  '\\': '\\textbackslash{}', '{': '\\{', '}': '\\}', '&': '\\&', '%': '\\%', $: '\\$', '#': '\\#', _: '\\_', '~': '\\textasciitilde{}', '^': '\\textasciicircum{}',
}
const escapeLatex = (text: string): string => text.replace(/[\\{}&%$#_~^]/g, (char) => LATEX[char] ?? char)

/** `2P*3/2` -> `$^{2}\mathrm{P}^{\circ}_{3/2}$`; other text is escaped. */
export function latexTerm(symbol: string): string {
  const ls = /^(\d+)([A-Z])(\*?)(\d+(?:\/2)?)?$/.exec(symbol)
  if (ls) return `$^{${ls[1]}}\\mathrm{${ls[2]}}${ls[3] ? '^{\\circ}' : ''}${ls[4] ? `_{${ls[4]}}` : ''}$`
  const pair = /^(\d*)\[([^\]]+)\](\*?)(\d+(?:\/2)?)?$/.exec(symbol)
  if (pair) return `$^{${pair[1]}}[${pair[2]}]${pair[3] ? '^{\\circ}' : ''}${pair[4] ? `_{${pair[4]}}` : ''}$`
  return escapeLatex(symbol)
}

const latexCell = (value: string | number | null): string => {
  if (value === null) return '--'
  if (typeof value === 'number') return `$${String(value).replace(/e([+-]?)(\d+)/, (_, sign: string, digits: string) => ` \\times 10^{${sign === '-' ? '-' : ''}${digits}}`)}$`
  return latexTerm(value)
}

/** Formats rows; lines end with CRLF in CSV (RFC 4180), with LF otherwise. */
export function tableText<Row>(format: TableFormat, columns: readonly TextColumn<Row>[], rows: readonly Row[], caption: string): string {
  if (format === 'latex') {
    const align = columns.map((column) => (rows.some((row) => typeof column.value(row) === 'number') ? 'r' : 'l')).join('')
    const head = columns.map((column) => escapeLatex(column.name)).join(' & ')
    const body = rows.map((row) => `    ${columns.map((column) => latexCell(column.value(row))).join(' & ')} \\\\`)
    return ['\\begin{table}', `  \\caption{${escapeLatex(caption)}}`, `  \\begin{tabular}{${align}}`, '    \\hline', `    ${head} \\\\`, '    \\hline', ...body, '    \\hline', '  \\end{tabular}', '\\end{table}', ''].join('\n')
  }
  const [cell, gap, end] = format === 'csv' ? [csvCell, ',', '\r\n'] : [tsvCell, '\t', '\n']
  const lines = [columns.map((column) => cell(column.name)).join(gap), ...rows.map((row) => columns.map((column) => cell(column.value(row))).join(gap))]
  return lines.join(end) + end
}
