import { parse } from 'csv-parse/sync'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { csvParts, escapeText, unescapeText } from '@/lib/http/writers/csv'
import type { Column } from '@/openapi/core/table'

const column = (name: string, type: Column['type'], unit: string | null = null): Column => ({ name, type, unit, description: name })
const written = (columns: Column[], rows: unknown[][]): string => [...csvParts({ name: 't', columns, rows })].join('')

describe('escaping of formula characters', () => {
  it.each([
    ['=1+1', "'=1+1"],
    ['+1', "'+1"],
    ['-2', "'-2"],
    ['@a', "'@a"],
    ['\tx', "'\tx"],
    ['\rx', "'\rx"],
    ["'x", "''x"],
    ["'", "''"],
    ['3p', '3p'],
    ['a=b', 'a=b'],
    ['', ''],
  ])('writes %j as %j and reads it back', (plain, escaped) => {
    expect(escapeText(plain)).toBe(escaped)
    expect(unescapeText(escaped)).toBe(plain)
  })

  it('is undone exactly for any text', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), (text) => unescapeText(escapeText(text)) === text))
  })

  it('leaves numbers alone, negative ones too', () => {
    expect(written([column('shift_invcm', 'number', 'cm-1'), column('q', 'integer')], [[-0.5, -1]])).toBe('shift_invcm,q\r\n-0.5,-1\r\n')
  })
})

describe('CSV', () => {
  it('follows RFC 4180: CRLF, quotes doubled, quotes only where needed', () => {
    expect(written([column('a', 'text'), column('b', 'boolean'), column('c', 'text')], [['say "yes", twice', true, '4s 2S1/2'], [null, false, '']])).toBe(
      'a,b,c\r\n"say ""yes"", twice",true,4s 2S1/2\r\n,false,""\r\n',
    )
  })

  it('writes numbers in shortest round-trip form and never NaN', () => {
    expect(written([column('x', 'number')], [[0.1 + 0.2], [1e21], [5e-324], [Number.NaN]])).toBe('x\r\n0.30000000000000004\r\n1e+21\r\n5e-324\r\n\r\n')
  })

  it('gives every cell back bit for bit through a general CSV reader', () => {
    const cell = fc.tuple(
      fc.option(fc.string({ unit: 'binary', maxLength: 12 })),
      fc.option(fc.double({ noNaN: true, noDefaultInfinity: true })),
      fc.option(fc.boolean()),
    )
    fc.assert(
      fc.property(fc.array(cell, { minLength: 1, maxLength: 8 }), (rows) => {
        const text = written([column('t', 'text'), column('n', 'number'), column('b', 'boolean')], rows)
        const read = parse(text, { from_line: 2, relax_column_count: false, record_delimiter: '\r\n', cast: (value, { quoting }) => (value === '' && !quoting ? null : value) }) as (string | null)[][]
        const back = read.map(([t, n, b]) => [t === null || t === undefined ? null : unescapeText(t), n === null || n === undefined ? null : Number(n), b === null || b === undefined ? null : b === 'true'])
        // JSON writes -0 as 0 and so does CSV: compare numbers as written
        const wanted = rows.map(([t, n, b]) => [t, n === null ? null : n === 0 ? 0 : n, b])
        expect(back).toEqual(wanted)
      }),
      { numRuns: 300 },
    )
  })
})
