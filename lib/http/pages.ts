import type { CursorPosition } from '@/lib/http/types'

/**
 * A page out of rows that were asked for with one more than `limit`: the extra row only tells that there is a next page.
 * `positionOf` gives the sort key and identity of a row.
 */
export function pageOf<T>(rows: readonly T[], limit: number, positionOf: (row: T) => CursorPosition): { data: T[]; page: { limit: number; next: CursorPosition | null } } {
  const data = rows.slice(0, limit)
  const last = data.at(-1)
  return { data, page: { limit, next: rows.length > limit && last !== undefined ? positionOf(last) : null } }
}
