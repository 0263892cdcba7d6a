import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fromWavenumber, parseSpectral, SPECTRAL_UNIT_NAMES, toWavenumber } from '@/lib/units/spectral'

describe('parseSpectral', () => {
  it.each([
    ['589.0nm', 'wavelength', 'nm'],
    ['5889.95 Å', 'wavelength', 'Å'],
    ['5889.95A', 'wavelength', 'Å'],
    ['589000 pm', 'wavelength', 'pm'],
    ['1.083um', 'wavelength', 'µm'],
    ['16973.366 cm-1', 'wavenumber', 'cm-1'],
    ['16973 cm⁻¹', 'wavenumber', 'cm-1'],
    ['2.1eV', 'energy', 'eV'],
    ['2100 meV', 'energy', 'meV'],
    ['508.8 THz', 'frequency', 'THz'],
    ['508848GHz', 'frequency', 'GHz'],
  ])('%s is a %s in %s', (text, quantity, unit) => {
    const answer = parseSpectral(text)
    expect(answer).toMatchObject({ ok: true, quantity, unit })
    expect(answer).not.toHaveProperty('ambiguous')
  })

  it('a bare number is nm and says that it might be something else', () => {
    expect(parseSpectral('589')).toMatchObject({ ok: true, unit: 'nm', ambiguous: true, wavenumberInvcm: 1e7 / 589 })
  })

  it.each([
    ['589 parsec', 'spectral_unit_unknown'],
    ['-5nm', 'spectral_not_positive'],
    ['0nm', 'spectral_not_positive'],
    ['1e-320nm', 'spectral_not_positive'],
    ['red', 'spectral_malformed'],
    ['', 'spectral_malformed'],
  ])('%j is refused as %s', (text, code) => expect(parseSpectral(text)).toMatchObject({ ok: false, code }))
})

describe('conversion chains', () => {
  it('h, c, e are exact: 1 cm^-1 is 29.9792458 GHz, 1 eV is 8065.543937349211 cm^-1', () => {
    expect(fromWavenumber(1, 'GHz')).toBeCloseTo(29.9792458, 13)
    // CODATA 2022 prints the eV in wavenumbers with ten more digits than doubles of this size resolve: 1e-15 relative is 8e-12
    expect(Math.abs(toWavenumber(1, 'eV') - 8065.543937349211)).toBeLessThan(8e-12)
    expect(toWavenumber(5000, 'Å')).toBe(20000)
    expect(fromWavenumber(20000, 'nm')).toBe(500)
  })

  it('there and back keeps the number, whatever the unit', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e9, noNaN: true }), fc.constantFrom(...SPECTRAL_UNIT_NAMES), (value, unit) => {
        const back = fromWavenumber(toWavenumber(value, unit), unit)
        // at most six roundings of 1.1e-16
        expect(Math.abs(back / value - 1)).toBeLessThan(1e-15)
      }),
    )
  })
})
