import { type ImportReading, type ImportUpload, ROW_LIMIT } from '@/openapi/schemas/import'
import { type Reader, readerOf } from './cells'
import { type Decimal, decimalOf } from './decimal'
import { delimiterOf } from './dialect'
import { decodingOf } from './encoding'
import { layoutOf } from './layout'
import { recordsOf, sampleOf } from './records'
import { FileRefused, refused } from './refusal'

/** A file taken apart: its rows with their places, and how their cells are to be read. */
export interface ReadFile { reader: Reader; reading: ImportReading; rows: { row: number; cells: string[] }[] }

/** How a file is read where it cannot be imported: as far as that is known. */
export class UnreadableFile extends FileRefused {
  constructor(problems: FileRefused['problems'], readonly reading: ImportReading | null, readonly rowsTotal: number) {
    super(problems)
  }
}

/** Rows whose numbers vote on the decimal mark, and longest text of which one copy serves all rows. */
const VOTERS = 2000
const SHORT = 40
const MOST_TEXTS = 2000

export type Asked = Pick<ImportUpload, 'mapping' | 'defaults' | 'encoding' | 'delimiter' | 'decimal'>

/** One copy of each text that repeats in its column, as most do; a column of ever new texts is given up on. */
class Texts {
  private readonly columns: Map<string, string>[] = []

  one(text: string, column: number): string {
    if (text.length > SHORT) return text
    const kept = (this.columns[column] ??= new Map())
    const found = kept.get(text)
    if (found !== undefined) return found
    if (kept.size < MOST_TEXTS) kept.set(text, text)
    return text
  }
}

async function rowsOf(bytes: Buffer, asked: Asked, tell: (rows: number) => void): Promise<{ encoding: string; delimiter: ImportReading['delimiter']; header: string[]; rows: ReadFile['rows'] }> {
  if (bytes.byteLength === 0) throw refused('table_empty', 'The file is empty.')
  const decoding = decodingOf(bytes, asked.encoding)
  const delimiter = asked.delimiter ?? delimiterOf(sampleOf(decoding))
  const texts = new Texts()
  const rows: ReadFile['rows'] = []
  let header: string[] | null = null
  for await (const { row, cells } of recordsOf(decoding, delimiter)) {
    if (header === null) header = cells
    else rows.push({ row, cells: cells.map((cell, column) => texts.one(cell, column)) })
    if (rows.length > ROW_LIMIT) throw refused('table_too_long', `The file has more than ${ROW_LIMIT} rows; divide it and import the parts one after the other.`)
    if (rows.length % 1000 === 0) tell(rows.length)
  }
  if (header === null) throw refused('table_empty', 'The file holds no header and no rows.')
  return { encoding: decoding.encoding, delimiter, header, rows }
}

function* numbersOf(columns: Reader['layout']['columns'], rows: ReadFile['rows']): Generator<string> {
  for (const { cells } of rows.slice(0, VOTERS)) {
    for (const [i, column] of columns.entries()) if (column !== null && (column.kind === 'number' || column.kind === 'half')) yield cells[i] ?? ''
  }
}

/** Takes a file apart, or throws everything that is wrong with it as a whole. */
export async function readFile(bytes: Buffer, asked: Asked, tell: (rows: number) => void): Promise<ReadFile> {
  const { encoding, delimiter, header, rows } = await rowsOf(bytes, asked, tell)
  const layout = layoutOf(header, rows.slice(0, 3).map(({ cells }) => cells), asked.mapping ?? {}, asked.defaults ?? {})
  const problems = [...layout.problems]
  const found: Decimal | null = asked.decimal ?? decimalOf(numbersOf(layout.columns, rows))
  if (found === null) problems.push({ code: 'decimal_unclear', detail: 'The only numbers with a comma are like 1,234: it could be the decimal mark or divide thousands. Say which by decimal.' })
  if (rows.length === 0) problems.push({ code: 'table_empty', detail: 'The file has a header and no rows.' })
  const decimal = found ?? '.'
  const reading: ImportReading = { encoding, delimiter, decimal, columns: layout.shown }
  if (problems.length > 0) throw new UnreadableFile(problems, reading, rows.length)
  return { reader: readerOf(layout, decimal), reading, rows }
}
