import { describe, expect, it } from 'vitest'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { faddeeva } from '@/lib/atomic/faddeeva'
import { dopplerRatio, lineWidths, voigt, voigtFwhm } from '@/lib/atomic/profile'
import { stokesProfiles } from '@/lib/atomic/profile-stokes'
import { readCases } from './read'

interface VoigtCase {
  kind: 'voigt'
  fwhmG: number
  fwhmL: number
  fwhm: number
  peak: number
  values: [number, number][]
}
interface DopplerCase {
  kind: 'doppler'
  name: string
  T_K: number
  mass_u: number
  lambda_nm: number
  ratio: number
  fwhm_nm: number
  fwhm_GHz: number
  'fwhm_cm-1': number
}

const cases = readCases<VoigtCase | DopplerCase>('09-profiles.json')
const relative = (found: number, wanted: number) => Math.abs(found / wanted - 1)

describe('Voigt profiles (vectors 09)', () => {
  it.each(cases.filter((row) => row.kind === 'voigt'))('Gauss $fwhmG, Lorentz $fwhmL', ({ fwhmG, fwhmL, fwhm, peak, values }) => {
    const widths = { gaussianFwhm: fwhmG, lorentzianFwhm: fwhmL }
    // header: 1e-12 of the profile and of the width
    expect(relative(voigtFwhm(widths), fwhm)).toBeLessThanOrEqual(1e-12)
    expect(relative(voigt(0, widths), peak)).toBeLessThanOrEqual(1e-12)
    for (const [x, value] of values) {
      expect(relative(voigt(x, widths), value)).toBeLessThanOrEqual(1e-12)
      expect(voigt(-x, widths)).toBe(voigt(x, widths))
    }
  })
})

describe('Doppler widths (vectors 09)', () => {
  it.each(cases.filter((row) => row.kind === 'doppler'))('$name at $T_K K', (row) => {
    const wavenumberInvcm = 1e7 / row.lambda_nm
    const of = { wavenumberInvcm, temperatureK: row.T_K, massU: row.mass_u }
    // header: 1e-13
    expect(relative(dopplerRatio(of), row.ratio)).toBeLessThanOrEqual(1e-13)
    expect(relative(lineWidths(of).gaussianFwhm, row['fwhm_cm-1'])).toBeLessThanOrEqual(1e-13)
    expect(relative(lineWidths(of).gaussianFwhm * GHZ_PER_INVCM, row.fwhm_GHz)).toBeLessThanOrEqual(1e-13)
    expect(relative(dopplerRatio(of) * row.lambda_nm, row.fwhm_nm)).toBeLessThanOrEqual(1e-13)
  })
})

describe('the Faddeeva function (50-digit values)', () => {
  it.each(readCases<[number, number, number, number]>('faddeeva.json'))('w(%f + i %f)', (x, y, real, imaginary) => {
    const w = faddeeva(x, y)
    // header: 1e-13 of the real part, 1e-14 of |w|
    expect(relative(w.real, real)).toBeLessThanOrEqual(1e-13)
    expect(Math.abs(w.imaginary - imaginary)).toBeLessThanOrEqual(1e-14 * Math.hypot(real, imaginary))
  })
})

interface GeometryCase {
  line: string
  thetaDeg: number
  components: [twoMLower: number, twoMUpper: number, q: number, shiftExact: string, shift: number, strengthExact: string, i: number, q: number, vh: number][]
}

describe('Stokes profiles have the areas of the geometry vectors (11)', () => {
  const rational = (text: string) => text.split('/').map(Number).reduce((a, b) => a / b)
  it.each(readCases<GeometryCase>('11-geometry.json'))('$line at $thetaDeg degrees', ({ thetaDeg, components }) => {
    const grid = Float64Array.from({ length: 4001 }, (_, i) => 15980 + i * 0.01)
    const line = {
      kind: 'E1' as const,
      weight: 2,
      widths: { gaussianFwhm: 0.3, lorentzianFwhm: 0 },
      components: components.map((row) => ({ positionInvcm: 16000 + 3 * row[4], q: row[2], strength: rational(row[5]) })),
    }
    const area = (values: Float64Array | null) => (values ?? new Float64Array()).reduce((sum, value) => sum + value * 0.01, 0)
    const sum = (at: number, q?: number) => components.filter((row) => q === undefined || row[2] === q).reduce((all, row) => all + Number(row[at]), 0)
    const { intensity, stokesQ, stokesV } = stokesProfiles([line], grid, { thetaDeg })
    // the trapezoidal sum of a Gaussian with 30 points on its width is exact to rounding
    expect(area(intensity)).toBeCloseTo(2, 11)
    expect(area(stokesQ)).toBeCloseTo(2 * sum(7), 11)
    expect(area(stokesV)).toBeCloseTo(2 * sum(8), 11)
    const onlyPlus = { ...line, components: line.components.filter((c) => c.q === 1) }
    expect(area(stokesProfiles([onlyPlus], grid, { thetaDeg }).stokesV)).toBeCloseTo(2 * sum(8, 1), 11)
  })
})
