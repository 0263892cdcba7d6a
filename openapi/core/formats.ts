/** Representations an operation can answer with. `json` is always there; the others need a table. */
export type Format = 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
export const FORMATS: readonly Format[] = ['json', 'csv', 'ndjson', 'ecsv', 'arrow']
export const MEDIA_TYPES: Record<Format, string> = {
  json: 'application/json',
  csv: 'text/csv',
  ndjson: 'application/x-ndjson',
  ecsv: 'application/x-ecsv',
  arrow: 'application/vnd.apache.arrow.stream',
}
