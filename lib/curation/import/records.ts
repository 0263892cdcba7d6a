import { CsvError, parse } from 'csv-parse'
import type { Decoding } from './encoding'
import type { Delimiter } from './dialect'
import { refused } from './refusal'

const LONGEST_RECORD = 1_000_000
const SAMPLE = 64 * 1024

/** The beginning of the file as text, to find the delimiter in. */
export function sampleOf(decoding: Decoding): string {
  for (const slice of decoding.slices()) return new TextDecoder().decode(slice.subarray(0, SAMPLE))
  return ''
}

const WORDS: Record<string, string> = {
  CSV_QUOTE_NOT_CLOSED: 'a quotation mark is opened there or before and never closed',
  INVALID_OPENING_QUOTE: 'a quotation mark stands inside of a cell that does not begin with one; put the cell into quotation marks and double those within',
  CSV_INVALID_CLOSING_QUOTE: 'something stands between a closing quotation mark and the end of the cell; double the quotation marks within a cell',
  CSV_MAX_RECORD_SIZE: `a row is longer than ${LONGEST_RECORD} characters; a quotation mark may be missing`,
}

function syntaxRefusal(error: CsvError): Error {
  const line = typeof error.lines === 'number' ? ` (line ${error.lines})` : ''
  return refused('table_malformed', `The file cannot be divided into cells${line}: ${WORDS[error.code] ?? error.message}.`)
}

/**
 * The records of a file, one after the other, with the place of each among all (the header is 1; empty lines count). Bytes are
 * taken a slice at a time, and the event loop has its turn between slices.
 */
export async function* recordsOf(decoding: Decoding, delimiter: Delimiter): AsyncGenerator<{ row: number; cells: string[] }> {
  const parser = parse({ delimiter, record_delimiter: ['\r\n', '\n', '\r'], relax_column_count: true, skip_empty_lines: false, max_record_size: LONGEST_RECORD })
  const fail: { error: Error | null } = { error: null }
  parser.on('error', (error) => { fail.error = error })
  const failure = (): Error | null => (fail.error instanceof CsvError ? syntaxRefusal(fail.error) : fail.error)
  let row = 0
  function* ready(): Generator<{ row: number; cells: string[] }> {
    for (let cells = parser.read() as string[] | null; cells !== null; cells = parser.read() as string[] | null) {
      row += 1
      if (cells.length > 1 || cells[0] !== '') yield { row, cells }
    }
  }
  for (const slice of decoding.slices()) {
    if (slice.includes(0)) throw refused('table_nul', 'The file holds NUL characters (code 0): it is no text, or of another encoding than it is read in.')
    parser.write(slice)
    await new Promise((turn) => setImmediate(turn))
    const error = failure()
    if (error !== null) throw error
    yield* ready()
  }
  parser.end()
  while (!parser.readableEnded) {
    await new Promise((turn) => setImmediate(turn))
    const error = failure()
    if (error !== null) throw error
    yield* ready()
  }
}
