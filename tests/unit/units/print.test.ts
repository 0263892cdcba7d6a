import { describe, expect, it } from 'vitest'
import { printFixed, printScientific, printSignificant, printWithUncertainty, trueMinus } from '@/lib/units/print'

describe('printing for reading', () => {
  it.each([
    [-1.5, 2, '\u22121.50'],
    [-0.0001, 2, '0.00'],
    [0, 1, '0.0'],
    [16973.36619, 3, '16973.366'],
  ])('%f with %i digits is %s', (value, digits, text) => expect(printFixed(value, digits)).toBe(text))

  it('groups thousands with thin spaces and writes a plus when asked', () => {
    expect(printFixed(16973.36619, 2, { grouped: true })).toBe('16\u2009973.37')
    expect(printFixed(1.5, 1, { sign: true })).toBe('+1.5')
    expect(printFixed(0, 1, { sign: true })).toBe('0.0')
  })

  it.each([
    [0.0000123, 3, '1.23 × 10⁻⁵'],
    [-4.5e12, 2, '\u22124.5 × 10¹²'],
    [3, 2, '3.0'],
    [0, 3, '0'],
  ])('%f scientific is %s', (value, digits, text) => expect(printScientific(value, digits)).toBe(text))

  it.each([
    [0.00645, 3, '0.00645'],
    [2.77, 2, '2.8'],
    [1e-7, 2, '1.0 × 10⁻⁷'],
    [123456, 3, '123456'],
  ])('%f to %i significant digits is %s', (value, digits, text) => expect(printSignificant(value, digits)).toBe(text))

  it.each([
    [1.3362, 0.0013, '1.3362(13)'],
    [0.66581, 0.00012, '0.66581(12)'],
    [2.002296, 7e-7, '2.0022960(7)'],
    [16956.17025, 0.00004, '16956.17025(4)'],
    [12.34, 1.4, '12.3(1.4)'],
    [1234, 25, '1234(25)'],
    [12345, 250, '12350(250)'],
    [-1.5, 0.1, '\u22121.50(10)'],
    [1.5, null, '1.5'],
    [0.5, 0.00996, '0.500(10)'],
  ])('%f with deviation %s is %s', (value, deviation, text) => expect(printWithUncertainty(value, deviation)).toBe(text))

  it('turns a hyphen into a minus only before a number', () => {
    expect(trueMinus('-1 of Na-I')).toBe('\u22121 of Na-I')
  })
})
