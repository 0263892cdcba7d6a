import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { queryFingerprint, readCursor, writeCursor } from '@/lib/http/cursor'
import { Problem } from '@/lib/problem'

const secret = new Uint8Array(32).fill(7)
const codeOf = (act: () => unknown): string => {
  try {
    act()
  } catch (error) {
    return error instanceof Problem ? error.code : 'not a problem'
  }
  return 'no error'
}

describe('cursors', () => {
  it('come back as they were given, bit for bit', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 999 }), fc.array(fc.oneof(fc.string(), fc.double({ noNaN: true, noDefaultInfinity: true }), fc.constant(null)), { maxLength: 4 }), (edition, position) => {
      const text = writeCursor(secret, 'f', { edition, position })
      // JSON has no -0
      expect(readCursor(secret, 'f', text)).toEqual({ edition, position: position.map((item) => (item === 0 ? 0 : item)) })
      expect(text).toMatch(/^[A-Za-z0-9_.-]+$/)
    }))
  })

  it('are refused when another query made them', () => {
    expect(codeOf(() => readCursor(secret, 'g', writeCursor(secret, 'f', { edition: 1, position: [1] })))).toBe('cursor_mismatch')
  })

  it('are refused when altered in any character, or signed by another secret', () => {
    const text = writeCursor(secret, 'f', { edition: 1, position: ['Na-I.3', 16973.36619] })
    for (let at = 0; at < text.length - 1; at += 1) {
      const altered = `${text.slice(0, at)}${text[at] === 'A' ? 'B' : 'A'}${text.slice(at + 1)}`
      expect(codeOf(() => readCursor(secret, 'f', altered))).toBe('cursor_malformed')
    }
    expect(codeOf(() => readCursor(new Uint8Array(32), 'f', text))).toBe('cursor_malformed')
  })

  it('are refused when they are anything else', () => {
    fc.assert(fc.property(fc.string(), (text) => { expect(codeOf(() => readCursor(secret, 'f', text))).toBe('cursor_malformed') }))
  })
})

describe('fingerprints', () => {
  it('do not depend on page, format or order, and do on everything else', () => {
    const one = queryFingerprint('list', {}, { species: ['Na-I'], sort: 'energy', limit: '10', edition: 'latest' })
    expect(queryFingerprint('list', {}, { sort: 'energy', species: ['Na-I'], limit: '99', edition: '1', cursor: 'x', format: 'csv', explain: 'true' })).toBe(one)
    expect(queryFingerprint('list', {}, { species: ['Fe-I'], sort: 'energy' })).not.toBe(one)
    expect(queryFingerprint('list', { level: 'Na-I.1' }, { species: ['Na-I'], sort: 'energy' })).not.toBe(one)
    expect(queryFingerprint('other', {}, { species: ['Na-I'], sort: 'energy' })).not.toBe(one)
  })
})
