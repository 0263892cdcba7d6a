import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { AIR_FORMULA_IDS, airToVac, airWavelength, conventionalWavelength, vacToAir } from '@/lib/atomic/air'

describe('air and vacuum', () => {
  it('there and back to the last bits, by every formula', () => {
    fc.assert(
      fc.property(fc.double({ min: 185, max: 20000, noNaN: true }), fc.constantFrom(...AIR_FORMULA_IDS), (nm, formula) => {
        // two roundings there, two back
        expect(Math.abs(airToVac(vacToAir(nm, formula), formula) / nm - 1)).toBeLessThan(5e-16)
      }),
    )
  })

  it('200 nm begins, 1690 nm is the end of what was measured, 2000 nm the end of the custom', () => {
    expect(airWavelength(199.999)).toEqual({ nm: null, extrapolated: false })
    expect(airWavelength(200)).toEqual({ nm: vacToAir(200), extrapolated: false })
    expect(airWavelength(1690).extrapolated).toBe(false)
    expect(airWavelength(1690.001)).toEqual({ nm: vacToAir(1690.001), extrapolated: true })
    expect(airWavelength(Number.NaN).nm).toBeNull()
    expect(conventionalWavelength(199.999)).toEqual({ nm: 199.999, medium: 'vacuum' })
    expect(conventionalWavelength(200)).toEqual({ nm: vacToAir(200), medium: 'air' })
    expect(conventionalWavelength(2000)).toEqual({ nm: vacToAir(2000), medium: 'air' })
    expect(conventionalWavelength(2000.001)).toEqual({ nm: 2000.001, medium: 'vacuum' })
  })

  it('air shortens, and the formulas agree within 2e-8 over the visible', () => {
    for (let nm = 380; nm <= 780; nm += 10) {
      const values = AIR_FORMULA_IDS.map((formula) => vacToAir(nm, formula))
      expect(Math.max(...values)).toBeLessThan(nm)
      expect((Math.max(...values) - Math.min(...values)) / nm).toBeLessThan(2e-8)
    }
  })
})
