import { arrowParts } from '@/lib/http/writers/arrow'
import { csvParts } from '@/lib/http/writers/csv'
import { ecsvParts } from '@/lib/http/writers/ecsv'
import { jsonParts, ndjsonParts } from '@/lib/http/writers/json'
import { bytesBody, textBody } from '@/lib/http/writers/stream'
import type { Table, WrittenTable } from '@/lib/http/writers/table'
import { type Format, MEDIA_TYPES } from '@/openapi/core/formats'

export type { Column, Table, WrittenTable } from '@/lib/http/writers/table'

/**
 * A table in one format. Short answers come whole, long ones as a stream that holds one piece at a time.
 * `meta` goes where the format has a place for it: NDJSON's last line, ECSV's header, Arrow's schema metadata; CSV has none.
 */
export function writeTable(format: Format, table: Table, meta: unknown, page?: unknown): WrittenTable {
  const charset = format === 'json' || format === 'arrow' ? '' : '; charset=utf-8'
  const contentType = `${MEDIA_TYPES[format]}${charset}${format === 'csv' ? '; header=present' : ''}`
  switch (format) {
    case 'json':
      return { contentType, body: textBody(jsonParts(table, meta, page)) }
    case 'csv':
      return { contentType, body: textBody(csvParts(table)) }
    case 'ndjson':
      return { contentType, body: textBody(ndjsonParts(table, meta)) }
    case 'ecsv':
      return { contentType, body: textBody(ecsvParts(table, meta)) }
    case 'arrow':
      return { contentType, body: bytesBody(arrowParts(table, meta)) }
  }
}
