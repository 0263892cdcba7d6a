import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fieldMarks, LAST_STOP, placeOf, stepped, stopOf, teslaAt } from '@/app/_components/field/field-scale'
import { readAngle } from '@/app/_components/field/use-field'

describe('the slider of the field', () => {
  it('returns to the stop that a field came from, over its whole length', () => {
    for (let stop = 0; stop <= LAST_STOP; stop += 1) expect(stopOf(teslaAt(stop))).toBe(stop)
  })
  it('has zero below everything and 100 T at its end', () => {
    expect(teslaAt(0)).toBe(0)
    expect(teslaAt(LAST_STOP)).toBe(100)
    expect(stopOf(10_000)).toBe(LAST_STOP)
    expect(placeOf(0)).toBe(0)
    expect(placeOf(100)).toBe(1)
  })
  it('stands where its marks stand', () => {
    for (const { tesla } of fieldMarks('T')) expect(Math.abs(placeOf(tesla) - stopOf(tesla) / LAST_STOP)).toBeLessThanOrEqual(0.5 / LAST_STOP + 1e-9)
  })
  it('labels the powers of ten in the unit shown', () => {
    const labels = fieldMarks('kG').flatMap((mark) => (mark.label === null ? [] : [mark.label]))
    expect(labels).toContain('10')
    expect(labels[labels.length - 1]).toBe('1000')
  })
})

describe('keyboard steps', () => {
  it('change the second significant digit, and below a power of ten go on in its finer steps', () => {
    expect(stepped(1.5, 1, false)).toBe(1.6)
    expect(stepped(1.5, -1, false)).toBe(1.4)
    expect(stepped(1, -1, false)).toBe(0.99)
    expect(stepped(0.99, 1, false)).toBe(1)
    expect(stepped(1.5, 1, true)).toBe(3)
    expect(stepped(0, -1, false)).toBe(0)
  })
  it('never leave the field negative or unmoved upwards', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 9000, noNaN: true }), fc.boolean(), (tesla, coarse) => {
        expect(stepped(tesla, 1, coarse)).toBeGreaterThan(tesla * (1 - 1e-9))
        expect(stepped(tesla, -1, coarse)).toBeGreaterThanOrEqual(0)
      }),
    )
  })
})

describe('the angle', () => {
  it('reads degrees with or without their sign', () => {
    expect(readAngle('45')).toEqual({ ok: true, degrees: 45 })
    expect(readAngle(' 90° ')).toEqual({ ok: true, degrees: 90 })
    expect(readAngle('-0')).toEqual({ ok: true, degrees: 0 })
  })
  it.each(['', 'north', '181', '-1', 'NaN', '1e400'])('refuses %j and says how to write it', (text) => {
    const read = readAngle(text)
    expect(read.ok).toBe(false)
    if (!read.ok) expect(read.detail).toMatch(/180/)
  })
})
