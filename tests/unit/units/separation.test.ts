import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { deviationToInvcm, readSeparationUnit, SEPARATION_UNIT_NAMES, separationFromInvcm, separationToInvcm } from '@/lib/units/separation'

describe('separations', () => {
  it('go there and back in every unit', () => {
    fc.assert(
      fc.property(fc.constantFrom(...SEPARATION_UNIT_NAMES), fc.double({ min: -50, max: 50, noNaN: true }), fc.double({ min: 5000, max: 50_000, noNaN: true }), (unit, invcm, reference) => {
        const back = separationToInvcm(separationFromInvcm(invcm, unit, reference), unit, reference)
        expect(Math.abs(back - invcm)).toBeLessThan(1e-13 * Math.abs(invcm) + 1e-300)
      }),
    )
  })

  it('wavelengths are turned exactly, to the red below zero', () => {
    const reference = 1e7 / 589
    expect(separationToInvcm(10, 'pm', reference)).toBeCloseTo(1e7 / 589.01 - 1e7 / 589, 9)
    expect(separationToInvcm(0.01, 'nm', reference)).toBeLessThan(0)
    expect(separationToInvcm(29.9792458, 'GHz', reference)).toBeCloseTo(1, 15)
    expect(separationToInvcm(250, 'mcm-1', reference)).toBe(0.25)
    expect(deviationToInvcm(1, 'pm', reference)).toBeCloseTo(-separationToInvcm(1, 'pm', reference), 6)
    expect(deviationToInvcm(29.9792458, 'MHz', reference)).toBeCloseTo(1e-3, 15)
  })

  it('units are read as they are written', () => {
    expect(['pm', 'mK', '10^-3 cm^-1', 'GHz', 'ghz', 'furlong'].map(readSeparationUnit)).toEqual(['pm', 'mcm-1', 'mcm-1', 'GHz', null, null])
  })
})
