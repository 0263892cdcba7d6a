import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { FIELD_UNIT_NAMES, fieldForUrl, fieldFrom, fieldIn, formatField, parseField } from '@/lib/units/field'

describe('parseField', () => {
  it.each([
    ['1.5T', 1.5, 'T'],
    ['1.5', 1.5, 'T'],
    [' 15 kG ', 1.5, 'kG'],
    ['150mT', 0.15, 'mT'],
    ['150000G', 15, 'G'],
    ['300uT', 0.0003, 'µT'],
    ['300 μT', 0.0003, 'µT'],
    ['3000 gauss', 0.3, 'G'],
    ['0', 0, 'T'],
    ['-0', 0, 'T'],
    ['1e-3T', 0.001, 'T'],
    ['.5 tesla', 0.5, 'T'],
    ['10000', 10000, 'T'],
  ])('%s is %f T', (text, tesla, unit) => {
    expect(parseField(text)).toEqual({ ok: true, tesla, unit })
    expect(Object.is(parseField(text).ok && fieldFrom(0, 'T'), 0)).toBe(true)
  })

  it.each([
    ['3furlong', 'field_unit_unknown', 'T, mT, µT (or uT), G, kG'],
    ['3 MG', 'field_unit_unknown', 'T, mT'],
    ['3t', 'field_unit_unknown', 'Did you mean T?'],
    ['3MT', 'field_unit_unknown', 'Did you mean mT?'],
    ['-1T', 'field_negative', 'cannot be negative'],
    ['\u22121T', 'field_negative', 'cannot be negative'],
    ['10001', 'field_too_large', '10000 T'],
    ['1e999', 'field_not_finite', 'finite'],
    ['', 'field_malformed', '1.5T'],
    ['NaN', 'field_malformed', '1.5T'],
    ['Infinity', 'field_malformed', 'number and a unit'],
    ['T', 'field_malformed', 'number and a unit'],
    ['0x10', 'field_unit_unknown', 'known units'],
    ['1\u0000T', 'field_unit_unknown', '·'],
  ])('%j is refused as %s and says how to mend it', (text, code, says) => {
    const answer = parseField(text)
    expect(answer).toMatchObject({ ok: false, code })
    if (!answer.ok) expect(answer.detail).toContain(says)
  })

  it('never throws and never lets a bad number through', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.string({ unit: 'binary' })), (text) => {
        const answer = parseField(text)
        if (answer.ok) expect(answer.tesla >= 0 && answer.tesla <= 10_000).toBe(true)
        else expect(answer.detail.length).toBeGreaterThan(10)
      }),
    )
  })

  it('what is printed reads back', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 9999, noNaN: true }), fc.constantFrom(...FIELD_UNIT_NAMES), (tesla, unit) => {
        const [shown, linked] = [parseField(formatField(tesla, unit)), parseField(fieldForUrl(tesla, unit))]
        // twelve digits are shown, fifteen linked
        expect(shown.ok && Math.abs(shown.tesla - tesla) <= 1e-11 * tesla + 1e-300).toBe(true)
        expect(linked.ok && Math.abs(linked.tesla - tesla) <= 1e-14 * tesla + 1e-300).toBe(true)
      }),
    )
  })

  it('units are exact ratios: 15 kG is 1.5 T to the bit', () => {
    expect(fieldFrom(15, 'kG')).toBe(1.5)
    expect(fieldFrom(150, 'mT')).toBe(0.15)
    expect(fieldFrom(3000, 'G')).toBe(0.3)
    expect(fieldIn(0.3, 'G')).toBe(3000)
  })
})
