import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { coupledRange } from '@/lib/atomic/half'
import { TERM_LETTERS } from '@/lib/atomic/letters'
import { lsTerm, parseTerm, type Parity, printLabelledTerm, printTerm, type Term } from '@/lib/atomic/term'

const P32: Term = lsTerm(1, 1, 3, 'odd')

describe('term symbols in every notation', () => {
  it.each(['2P*3/2', '2Po3/2', '2P°3/2', '²P°₃/₂', '2P*3-2', ' 2P*_3/2 ', '2P* 3/2', '2Po 3/2', '²Pᵒ₃⁄₂', '2P*1.5'])('%s', (text) => {
    expect(parseTerm(text)).toEqual({ ok: true, value: P32 })
  })

  it.each([
    ['3P2', lsTerm(2, 1, 4, null)],
    ['5D4', lsTerm(4, 2, 8, null)],
    ['2P', lsTerm(1, 1, null, null)],
    ['z5P*', lsTerm(4, 1, null, 'odd', 'z')],
    ['z 5P*2', lsTerm(4, 1, 4, 'odd', 'z')],
    ['a 5D', lsTerm(4, 2, null, null, 'a')],
    ['1S0', lsTerm(0, 0, 0, null)],
    ['2[3/2]*2', { kind: 'J1K', twoK: 3, twoJ: 4, parity: 'odd', label: null }],
    ['²[3/2]°₂', { kind: 'J1K', twoK: 3, twoJ: 4, parity: 'odd', label: null }],
    ['2[3-2]*2', { kind: 'J1K', twoK: 3, twoJ: 4, parity: 'odd', label: null }],
    ['[5/2]3', { kind: 'J1K', twoK: 5, twoJ: 6, parity: null, label: null }],
    ['2[2]5/2', { kind: 'J1K', twoK: 4, twoJ: 5, parity: null, label: null }],
    ['(3/2,1/2)*1', { kind: 'jj', twoJ1: 3, twoJ2: 1, twoJ: 2, parity: 'odd', label: null }],
    ['(3-2,1-2)*1', { kind: 'jj', twoJ1: 3, twoJ2: 1, twoJ: 2, parity: 'odd', label: null }],
    ['(2, 3/2)°₇/₂', { kind: 'jj', twoJ1: 4, twoJ2: 3, twoJ: 7, parity: 'odd', label: null }],
    ['3O', lsTerm(2, 11, null, null)],
    ['3Oo', lsTerm(2, 11, null, 'odd')],
  ])('%s', (text, value) => expect(parseTerm(text)).toEqual({ ok: true, value }))

  it.each([
    ['2P*5/2', 'J = 1/2 or 3/2'],
    ['3P1/2', 'J = 0, 1 or 2'],
    ['1S1', 'J = 0'],
    ['5D9', '0, 1 ... 4'],
    ['2[3/2]3', 'J is 1 or 2'],
    ['3[3/2]2', '2s + 1 of one outer electron'],
    ['(3/2,1/2)3', 'J = 1 or 2'],
  ])('%s is well formed and cannot be', (text, says) => {
    const answer = parseTerm(text)
    expect(answer).toMatchObject({ ok: false, code: 'term_impossible' })
    if (!answer.ok) expect(answer.detail).toContain(says)
  })

  it.each([
    ['2p', 'capital'],
    ['2J', 'S P D F G H I K L M N O Q'],
    ['P2', 'before the letter'],
    ['2', 'letter for L must follow'],
    ['0P', 'at least 1'],
    ['2[x]2', 'K in square brackets'],
    ['2[3/2', 'K in square brackets'],
    ['(3/2)1', 'with a comma'],
    ['', 'missing'],
    ['hello', 'none of the known forms'],
    ['2P*0.7', '0.7'],
    ['2P'.padEnd(80, '2'), 'too long'],
  ])('%j is no symbol, and the sentence says why', (text, says) => {
    const answer = parseTerm(text)
    expect(answer).toMatchObject({ ok: false, code: 'term_malformed' })
    if (!answer.ok) expect(answer.detail).toContain(says)
  })

  it('refuses a J where none is wanted', () => {
    expect(parseTerm('2P*3/2', { allowJ: false })).toMatchObject({ ok: false, code: 'term_malformed' })
    expect(parseTerm('2P*', { allowJ: false })).toMatchObject({ ok: true })
  })

  it('prints in three styles, the label apart', () => {
    expect([printTerm(P32, 'ascii'), printTerm(P32, 'unicode'), printTerm(P32, 'url')]).toEqual(['2P*3/2', '²P°₃/₂', '2P*3-2'])
    const pair: Term = { kind: 'J1K', twoK: 3, twoJ: 4, parity: 'odd', label: null }
    expect([printTerm(pair, 'ascii'), printTerm(pair, 'unicode'), printTerm(pair, 'url')]).toEqual(['2[3/2]*2', '²[3/2]°₂', '2[3-2]*2'])
    expect(printLabelledTerm(lsTerm(4, 1, 4, 'odd', 'z'), 'unicode')).toBe('z ⁵P°₂')
  })

  const parities = fc.constantFrom<Parity | null>('odd', null)
  const labels = fc.constantFrom(null, 'a', 'e', 'o', 'z')
  const lsTerms = fc
    .record({ twoS: fc.integer({ min: 0, max: 10 }), l: fc.integer({ min: 0, max: TERM_LETTERS.length - 1 }), pick: fc.nat(), parity: parities, label: labels, withJ: fc.boolean() })
    .map(({ twoS, l, pick, parity, label, withJ }): Term => {
      const range = coupledRange(twoS, 2 * l)
      return lsTerm(twoS, l, withJ ? (range[pick % range.length] ?? 0) : null, parity, label)
    })
  const pairTerms = fc
    .record({ twoK: fc.integer({ min: 0, max: 14 }), pick: fc.nat(), parity: parities, label: labels })
    .map(({ twoK, pick, parity, label }): Term => {
      const range = coupledRange(twoK, 1)
      return { kind: 'J1K', twoK, twoJ: range[pick % range.length] ?? 1, parity, label }
    })
  const jjTerms = fc
    .record({ twoJ1: fc.integer({ min: 0, max: 12 }), twoJ2: fc.integer({ min: 0, max: 12 }), pick: fc.nat(), parity: parities, label: labels })
    .map(({ twoJ1, twoJ2, pick, parity, label }): Term => {
      const range = coupledRange(twoJ1, twoJ2)
      return { kind: 'jj', twoJ1, twoJ2, twoJ: range[pick % range.length] ?? 0, parity, label }
    })

  it('whatever is printed reads back, in every style and coupling', () => {
    fc.assert(
      fc.property(fc.oneof(lsTerms, pairTerms, jjTerms), (term) => {
        for (const style of ['ascii', 'unicode', 'url'] as const) expect(parseTerm(printTerm(term, style))).toEqual({ ok: true, value: { ...term, label: null } })
        for (const style of ['ascii', 'unicode'] as const) expect(parseTerm(printLabelledTerm(term, style))).toEqual({ ok: true, value: term })
      }),
      { numRuns: 500 },
    )
  })

  it('never throws on any text', () => {
    fc.assert(fc.property(fc.oneof(fc.string(), fc.string({ unit: 'binary' }), fc.string({ unit: fc.constantFrom(...'2P*o[](),/.- °²₃zSD') })), (text) => {
      const answer = parseTerm(text)
      expect(answer.ok || answer.detail.length > 10).toBe(true)
    }))
  })
})
