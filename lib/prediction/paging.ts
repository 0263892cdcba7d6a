import { LIMIT_DEFAULT } from '@/openapi/core/parameters'

/** Position of the last row given, as a cursor holds it. */
export type Position = readonly (string | number | null)[] | null

export interface Page<T> {
  rows: readonly T[]
  next: readonly (string | number | null)[] | null
}

/**
 * A page of a short list that is made whole for each request: at most `limit` rows after the one whose key the cursor holds.
 * Keys are unique and the list keeps its order, so that pages to the end make the whole list.
 */
export function pageOf<T>(rows: readonly T[], limit: number, after: Position, keyOf: (row: T) => string | number): Page<T> {
  const start = after === null ? 0 : rows.findIndex((row) => keyOf(row) === after[0]) + 1
  const page = rows.slice(start, start + limit)
  const last = page[page.length - 1]
  return { rows: page, next: last === undefined || start + limit >= rows.length ? null : [keyOf(last)] }
}

/** The shared `limit` parameter, which every list has beside its own ones. */
export const limitOf = (query: object): number => ('limit' in query && typeof query.limit === 'number' ? query.limit : LIMIT_DEFAULT)
