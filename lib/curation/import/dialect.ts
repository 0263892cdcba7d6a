import { DELIMITERS } from '@/openapi/schemas/import'

export type Delimiter = (typeof DELIMITERS)[number]

/** How many records of the sample are looked at. */
const RECORDS = 60

/** Delimiters outside of quotes in each record; the last one of a sample may be cut and is left out where there are others. */
function counts(sample: string): Record<Delimiter, number>[] {
  const none = (): Record<Delimiter, number> => ({ ',': 0, ';': 0, '\t': 0, '|': 0 })
  const records: Record<Delimiter, number>[] = []
  let current = none()
  let inQuotes = false
  let empty = true
  for (const c of sample) {
    if (c === '"') inQuotes = !inQuotes
    else if (!inQuotes && (c === '\n' || c === '\r')) {
      if (!empty) records.push(current)
      if (records.length === RECORDS) return records
      current = none()
      empty = true
      continue
    } else if (!inQuotes && c in current) current[c as Delimiter] += 1
    empty = false
  }
  if (!empty && records.length === 0) records.push(current)
  return records
}

/** The delimiter that divides the header and most records alike, of several the one that makes the most cells; a comma where none does. */
export function delimiterOf(sample: string): Delimiter {
  const records = counts(sample)
  const header = records[0]
  if (header === undefined) return ','
  let best: { delimiter: Delimiter; alike: number; cells: number } | null = null
  for (const delimiter of DELIMITERS) {
    const cells = header[delimiter]
    if (cells === 0) continue
    const alike = records.filter((record) => record[delimiter] === cells).length / records.length
    if (best === null || alike > best.alike + 0.1 || (alike > best.alike - 0.1 && cells > best.cells)) best = { delimiter, alike, cells }
  }
  return best?.delimiter ?? ','
}
