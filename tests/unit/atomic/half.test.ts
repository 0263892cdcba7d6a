import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { coupledRange, formatHalf, formatHalfUnicode, formatHalfUrl, half, isTriangle, magneticNumbers, parseHalf } from '@/lib/atomic/half'

describe('half-integers', () => {
  it.each([
    ['3/2', 3],
    ['1.5', 3],
    ['2', 4],
    ['-1/2', -1],
    ['\u22121/2', -1],
    ['3-2', 3],
    ['4/2', 4],
    ['0', 0],
    ['-0', 0],
    [1.5, 3],
    [0, 0],
    ['2.0', 4],
    ['.5', 1],
  ])('%s is twice %i / 2', (input, two) => expect(parseHalf(input)).toEqual({ ok: true, value: two }))

  it.each(['0.7', '1/3', '', 'x', '3/0', '1e3', '1/2/2', '999999', 'NaN', '--1', 0.7, Number.NaN, Number.POSITIVE_INFINITY, 1e9, '1.5000000001'])('%s is refused', (input) => {
    const answer = parseHalf(input)
    expect(answer).toMatchObject({ ok: false, code: 'half_integer_malformed' })
  })

  it('prints and reads back, in every form', () => {
    fc.assert(
      fc.property(fc.integer({ min: -40, max: 40 }), (two) => {
        for (const text of [formatHalf(two), formatHalfUnicode(two), formatHalfUrl(two), String(half(two))]) expect(parseHalf(text)).toEqual({ ok: true, value: two })
      }),
    )
  })

  it('vector sums: the range is what the triangle rule allows, and has as many states as the two have', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 16 }), fc.integer({ min: 0, max: 16 }), (a, b) => {
        const range = coupledRange(a, b)
        const allowed = Array.from({ length: a + b + 3 }, (_, c) => c).filter((c) => isTriangle(a, b, c))
        expect(range).toEqual(allowed)
        const states = range.reduce((sum, two) => sum + magneticNumbers(two).length, 0)
        expect(states).toBe((a + 1) * (b + 1))
      }),
    )
  })
})
