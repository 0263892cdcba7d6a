import { inArray, type SQL, sql } from 'drizzle-orm'
import type { AnyPgColumn } from 'drizzle-orm/pg-core'

const MANY = 50

/**
 * Whether a column is one of a list; without a list, no condition. A long list goes as one parameter whatever its length, and is joined
 * like a table, so that neither the limit on parameters nor a search for each value stands in its way.
 */
export const among = (column: AnyPgColumn, list: readonly string[] | undefined): SQL | undefined =>
  list === undefined ? undefined
    : list.length === 0 ? sql`false`
      : list.length < MANY ? inArray(column, [...list])
        : sql`${column} in (select jsonb_array_elements_text(${JSON.stringify(list)}::jsonb))`
