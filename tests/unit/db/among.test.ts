import { PgDialect } from 'drizzle-orm/pg-core'
import { describe, expect, it } from 'vitest'
import { among } from '@/db/among'
import { levels } from '@/db/schema'

const asked = (list: readonly string[] | undefined) => {
  const condition = among(levels.id, list)
  return condition === undefined ? undefined : new PgDialect().sqlToQuery(condition)
}

describe('a column that is one of a list', () => {
  it('is no condition without a list, and never so with an empty one', () => {
    expect(asked(undefined)).toBeUndefined()
    expect(asked([])).toMatchObject({ sql: 'false', params: [] })
  })
  it('takes one parameter however long the list is', () => {
    expect(asked(['Na-I.1', 'Na-I.2'])?.params).toEqual(['Na-I.1', 'Na-I.2'])
    const long = Array.from({ length: 100_000 }, (_, i) => `Na-I.${i + 1}`)
    expect(asked(long)?.params).toEqual([JSON.stringify(long)])
  })
})
