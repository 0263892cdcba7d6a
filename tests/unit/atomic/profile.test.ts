import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { PhysicsError } from '@/lib/atomic/errors'
import { faddeeva } from '@/lib/atomic/faddeeva'
import { lineWidths, voigt, voigtDerivatives, voigtFwhm } from '@/lib/atomic/profile'
import { addVoigt, benchSentence, evenGrid, fittingGrid, type ProfileLine, stokesProfiles } from '@/lib/atomic/profile-stokes'

const code = (act: () => unknown): string => {
  try {
    act()
  } catch (error) {
    if (error instanceof PhysicsError) return error.code
  }
  return 'none'
}

/** The convolution itself: trapezoidal sum over the Gaussian, which converges faster than any power for the smooth integrand. */
function convolved(distance: number, gaussianFwhm: number, lorentzianFwhm: number): number {
  const sigma = gaussianFwhm / (2 * Math.sqrt(2 * Math.LN2))
  const step = Math.min(sigma, lorentzianFwhm) / 40
  let sum = 0
  for (let t = -9 * sigma; t <= 9 * sigma; t += step) {
    const gauss = Math.exp((-t * t) / (2 * sigma * sigma)) / (sigma * Math.sqrt(2 * Math.PI))
    sum += (gauss * lorentzianFwhm * step) / (2 * Math.PI * ((distance - t) ** 2 + (lorentzianFwhm * lorentzianFwhm) / 4))
  }
  return sum
}

describe('the Voigt profile', () => {
  it('is the numerical convolution of both parts to 1e-8', () => {
    const numbers = fc.tuple(fc.double({ min: -30, max: 30, noNaN: true }), fc.double({ min: 0.2, max: 3, noNaN: true }), fc.double({ min: 0.1, max: 3, noNaN: true }))
    fc.assert(
      fc.property(numbers, ([distance, gaussianFwhm, lorentzianFwhm]) => {
        const found = voigt(distance, { gaussianFwhm, lorentzianFwhm })
        expect(Math.abs(found / convolved(distance, gaussianFwhm, lorentzianFwhm) - 1)).toBeLessThan(1e-8)
      }),
      { numRuns: 60 },
    )
  })

  it('goes over into a Gaussian and a Lorentzian', () => {
    expect(voigt(0.3, { gaussianFwhm: 1, lorentzianFwhm: 1e-14 })).toBeCloseTo(voigt(0.3, { gaussianFwhm: 1, lorentzianFwhm: 0 }), 13)
    expect(voigt(0.3, { gaussianFwhm: 1e-7, lorentzianFwhm: 1 })).toBeCloseTo(voigt(0.3, { gaussianFwhm: 0, lorentzianFwhm: 1 }), 12)
    expect(voigtFwhm({ gaussianFwhm: 0, lorentzianFwhm: 2 })).toBe(2)
    expect(voigtFwhm({ gaussianFwhm: 2, lorentzianFwhm: 0 })).toBe(2)
  })

  it('its derivatives are those of the profile', () => {
    const at = { gaussianFwhm: 0.7, lorentzianFwhm: 0.4 }
    for (const distance of [-1.3, -0.2, 0, 0.5, 4]) {
      const found = voigtDerivatives(distance, at)
      const step = 1e-5
      const slope = (change: (by: number) => number) => (change(step) - change(-step)) / (2 * step)
      expect(found.distance).toBeCloseTo(slope((by) => voigt(distance + by, at)), 8)
      expect(found.gaussianFwhm).toBeCloseTo(slope((by) => voigt(distance, { ...at, gaussianFwhm: 0.7 + by })), 8)
      expect(found.lorentzianFwhm).toBeCloseTo(slope((by) => voigt(distance, { ...at, lorentzianFwhm: 0.4 + by })), 8)
    }
  })

  it('w(z) has the values of Abramowitz & Stegun, table 7.9 (from memory), and no seam between its parts', () => {
    expect(faddeeva(0, 0)).toEqual({ real: 1, imaginary: 0 })
    expect(faddeeva(0, 1).real).toBeCloseTo(0.427584, 6)
    expect(faddeeva(1, 1).real).toBeCloseTo(0.304744, 6)
    expect(faddeeva(1, 1).imaginary).toBeCloseTo(0.208219, 6)
    for (const [x, y] of [[0.125, 0.3], [0.375, 1e-6], [3, 2 * Math.PI], [Math.sqrt(149.99), 0.1]] as const) {
      const [here, there] = [faddeeva(x - 1e-13, y - 1e-14), faddeeva(x + 1e-13, y + 1e-14)]
      expect(Math.abs(here.real / there.real - 1)).toBeLessThan(1e-11)
    }
  })
})

describe('widths', () => {
  it('squares of Doppler, microturbulence and instrument add', () => {
    const doppler = lineWidths({ wavenumberInvcm: 15000, temperatureK: 5000, massU: 55.845 }).gaussianFwhm
    const turbulent = lineWidths({ wavenumberInvcm: 15000, microturbulenceMPerS: 1500 }).gaussianFwhm
    const all = lineWidths({ wavenumberInvcm: 15000, temperatureK: 5000, massU: 55.845, microturbulenceMPerS: 1500, resolvingPower: 100_000, lorentzianFwhmInvcm: 0.01 })
    expect(all.gaussianFwhm).toBeCloseTo(Math.hypot(doppler, turbulent, 0.15), 12)
    expect(all.lorentzianFwhm).toBe(0.01)
  })

  it('what cannot be is refused', () => {
    expect(code(() => lineWidths({ wavenumberInvcm: 15000 }))).toBe('profile_no_width')
    expect(code(() => lineWidths({ wavenumberInvcm: 15000, temperatureK: 300 }))).toBe('mass_unknown')
    expect(code(() => lineWidths({ wavenumberInvcm: 15000, instrumentFwhmInvcm: 1, resolvingPower: 10 }))).toBe('instrument_twice')
    expect(code(() => evenGrid(10, 5, 10))).toBe('grid_malformed')
    expect(code(() => evenGrid(10, 50, 1e6))).toBe('grid_malformed')
  })
})

const triplet = (weight: number, centre: number, kind: 'E1' | 'M1' = 'E1'): ProfileLine => ({
  kind,
  weight,
  widths: { gaussianFwhm: 0.4, lorentzianFwhm: 0.1 },
  components: [-1, 0, 1].map((q) => ({ positionInvcm: centre + q, q, strength: 1 })),
})

describe('Stokes profiles', () => {
  const grid = evenGrid(14900, 15100, 20_001)
  const lines = [triplet(1, 15000), triplet(0.5, 15004)]
  const at = (where: number) => grid.findIndex((value) => value >= where - 1e-9)

  it('reversing the field turns V and leaves I and Q', () => {
    const [forth, back] = [30, 150].map((thetaDeg) => stokesProfiles(lines, grid, { thetaDeg }))
    grid.forEach((_, i) => {
      expect(back?.intensity[i]).toBeCloseTo(forth?.intensity[i] ?? Number.NaN, 14)
      expect(back?.stokesQ?.[i]).toBeCloseTo(forth?.stokesQ?.[i] ?? Number.NaN, 14)
      expect(back?.stokesV?.[i]).toBeCloseTo(-(forth?.stokesV?.[i] ?? Number.NaN), 14)
    })
  })

  it('the blue component is counter-clockwise with the field towards the observer: V > 0 by IAU 1974, < 0 as solar', () => {
    const iau = stokesProfiles(lines, grid, { thetaDeg: 0 })
    const solar = stokesProfiles(lines, grid, { thetaDeg: 0, stokesSign: 'solar' })
    const absorbed = stokesProfiles(lines, grid, { thetaDeg: 0, light: 'absorption' })
    expect(iau.stokesV?.[at(15001)]).toBeGreaterThan(0)
    expect(iau.stokesV?.[at(14999)]).toBeLessThan(0)
    expect(solar.stokesV?.[at(15001)]).toBe(-(iau.stokesV?.[at(15001)] ?? 0))
    expect(absorbed.stokesV?.[at(15001)]).toBe(-(iau.stokesV?.[at(15001)] ?? 0))
    expect(absorbed.intensity[at(15001)]).toBe(iau.intensity[at(15001)])
  })

  it('the area of I is the sum of the weights but for the Lorentzian wings that the grid cuts off', () => {
    for (const thetaDeg of [0, 40, 90, null]) {
      const { intensity } = stokesProfiles(lines, grid, { thetaDeg })
      const area = intensity.reduce((sum, value) => sum + value * 0.01, 0)
      // each wing beyond 100 cm^-1 holds L/(2 pi 100)
      expect(area).toBeCloseTo(1.5 * (1 - 0.1 / (Math.PI * 100)), 5)
    }
  })

  it('an analyser across the field lets no pi through, and circular ones part the sigmas', () => {
    const across = stokesProfiles(lines, grid, { thetaDeg: 90, analyser: { kind: 'linear', angleDeg: 90 } })
    const plain = stokesProfiles([{ ...lines[0], components: lines[0]?.components.filter((c) => c.q !== 0) ?? [] } as ProfileLine], grid, { thetaDeg: 90 })
    expect(across.behindAnalyser?.[at(15000)]).toBeCloseTo((plain.intensity[at(15000)] ?? 0) + 0.5 * 0.25 * voigt(3, { gaussianFwhm: 0.4, lorentzianFwhm: 0.1 }) + 0.5 * 0.25 * voigt(5, { gaussianFwhm: 0.4, lorentzianFwhm: 0.1 }), 10)
    const [left, right] = (['counterclockwise', 'clockwise'] as const).map((kind) => stokesProfiles(lines, grid, { thetaDeg: 0, analyser: { kind } }).behindAnalyser)
    const all = stokesProfiles(lines, grid, { thetaDeg: 0 }).intensity
    expect((left?.[at(15001)] ?? 0) + (right?.[at(15001)] ?? 0)).toBeCloseTo(all[at(15001)] ?? 0, 12)
    expect(left?.[at(15001)] ?? 0).toBeGreaterThan(20 * (right?.[at(15001)] ?? 1))
    expect(code(() => stokesProfiles(lines, grid, { thetaDeg: null, analyser: { kind: 'clockwise' } }))).toBe('analyser_without_angle')
  })

  it('M1 turns Q; without an angle there is no Q or V; E2 is refused', () => {
    const [electric, magnetic] = [stokesProfiles([triplet(1, 15000)], grid, { thetaDeg: 90 }), stokesProfiles([triplet(1, 15000, 'M1')], grid, { thetaDeg: 90 })]
    expect(magnetic.stokesQ?.[at(15000)]).toBe(-(electric.stokesQ?.[at(15000)] ?? 0))
    expect(stokesProfiles(lines, grid, { thetaDeg: null })).toMatchObject({ stokesQ: null, stokesV: null, behindAnalyser: null })
    expect(code(() => stokesProfiles([{ ...triplet(1, 1), kind: 'E2' }], grid, { thetaDeg: 0 }))).toBe('profile_e2')
  })

  it('a Gaussian cut off at four widths has lost nothing', () => {
    const [whole, cut] = [new Float64Array(2001), new Float64Array(2001)]
    const near = evenGrid(990, 1010, 2001)
    addVoigt(near, 1000, 1, { gaussianFwhm: 1, lorentzianFwhm: 0 }, cut)
    near.forEach((value, i) => (whole[i] = voigt(value - 1000, { gaussianFwhm: 1, lorentzianFwhm: 0 })))
    cut.forEach((value, i) => expect(Math.abs(value - (whole[i] ?? 0))).toBeLessThan(1e-18))
  })

  it('the grid made for lines holds them with some room and enough points', () => {
    const made = fittingGrid(lines)
    expect(made[0]).toBeLessThan(14998)
    expect(made.at(-1)).toBeGreaterThan(15006)
    expect((made[1] ?? 0) - (made[0] ?? 0)).toBeLessThan(0.05)
    expect(fittingGrid(lines, 50)).toHaveLength(50)
  })

  it('tells people at the bench what they see', () => {
    expect(benchSentence({ thetaDeg: 0 })).toContain('towards the observer: pi is not seen; the sigma+ group (to the blue where g_eff is positive) is emitted turning counter-clockwise')
    expect(benchSentence({ thetaDeg: 180, light: 'absorption' })).toContain('away from the observer: pi is not seen; the sigma+ group (to the blue where g_eff is positive) is absorbed turning clockwise')
    expect(benchSentence({ thetaDeg: 90 })).toContain('across the field')
    expect(benchSentence({ thetaDeg: 30, analyser: { kind: 'clockwise' } })).toContain('turns clockwise')
    expect(benchSentence({ thetaDeg: null })).toContain('not polarised')
  })
})
