import { describe, expect, it } from 'vitest'
import { sameRow, storedAs } from '@/lib/curation/stored-row'

const row = { configuration: '3p', l: 1, note: 'a "quoted" word', energyInvcm: 16956.17025, lineChecked: false, measured: [{ value: 0.66581, source: 'a', note: null }] }

describe('a row and what the database wrote out of it', () => {
  it('are the same to the letter in the order of jsonb', () => {
    expect(storedAs('{"l": 1, "note": "a \\"quoted\\" word", "measured": [{"note": null, "value": 0.66581, "source": "a"}], "energyInvcm": 16956.17025, "lineChecked": false, "configuration": "3p"}', row)).toBe(true)
  })

  it('are the same where a value is written otherwise', () => {
    expect(storedAs(JSON.stringify(row), row)).toBe(true)
    expect(storedAs('{"massU": 0.0000001}', { massU: 1e-7 })).toBe(true)
    expect(storedAs('{"massU": 1000000000000000000000}', { massU: 1e21 })).toBe(true)
    expect(storedAs('{"massU": 12.50}', { massU: 12.5 })).toBe(true)
  })

  it('are not the same with another value, another member, or none', () => {
    const stored = JSON.stringify(row)
    expect(storedAs(stored, { ...row, l: 2 })).toBe(false)
    expect(storedAs(stored, { ...row, l: null })).toBe(false)
    expect(storedAs(stored, { ...row, more: null })).toBe(false)
    expect(storedAs(stored, { ...row, measured: [] })).toBe(false)
    expect(storedAs(stored, { ...row, measured: [{ value: 0.66581, source: 'b', note: null }] })).toBe(false)
    expect(storedAs('{"l": 1, "m": 2}', { l: 1, k: 2 })).toBe(false)
  })

  it('are the same where there is neither', () => {
    expect(storedAs(null, null)).toBe(true)
    expect(storedAs('{}', null)).toBe(false)
    expect(storedAs(null, {})).toBe(false)
  })

  it('differ in a list of another length', () => {
    expect(sameRow([1, 2], [1])).toBe(false)
    expect(sameRow({ a: [1, { b: 2 }] }, { a: [1, { b: 2 }] })).toBe(true)
  })
})
