import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { levelValidity } from '@/lib/atomic/validity'
import { findLevel, gOf, type ListedLevel, two } from './levels'

// Common practice: figures of the trade, computed from the listed levels and rounded as they are usually told.

describe('common practice: the field where mu_B B equals a fine-structure interval', () => {
  it.each([
    ['H 2p', 0.3658881, 0.784],
    ['Li 2p', 0.335, 0.718],
    ['He 2 3P, J = 1 to 2', 0.0764254, 0.164],
    ['He 2 3P, J = 0 to 1', 0.987915, 2.116],
    ['Na 3p', 17.19594, 36.833],
    ['K 4p', 57.7103, 123.613],
    ['Rb 5p', 237.595, 508.916],
    ['Cs 6p', 554.0389, 1186.723],
    ['O I 3p 5P, J = 2 to 3', 3.676, 7.874],
    ['Hg 6p 3P, J = 1 to 2', 4630.7, 9918.724],
  ])('%s: %f cm^-1 is %f T', (_, interval, tesla) => {
    expect(Math.abs(interval / MU_B_OVER_HC_INVCM_PER_T - tesla)).toBeLessThanOrEqual(0.0006)
  })
})

const endOf = (levels: ListedLevel[], twoJ: number) => {
  const [first] = levels
  const term = {
    twoS: two(first?.S),
    l: first?.L ?? 0,
    levels: levels.map((level) => ({ twoJ: two(level.J), energyInvcm: level.energy_invcm, g: gOf(level).g })),
  }
  return { twoJ, g: term.levels.find((level) => level.twoJ === twoJ)?.g ?? null, term }
}

describe('common practice: sodium 3p in a field', () => {
  const levels = ['1/2', '3/2'].map((j) => findLevel('Na I', '3p', '2P', j))

  it('the quadratic shift at 1 T is (mu_B B)^2 (2/9) / 17.2 cm^-1, 0.0028 cm^-1', () => {
    const { errorInvcm } = levelValidity(endOf(levels, 1), 1)
    // rounded to two figures in the rule of thumb; m = +1/2 and -1/2 differ by a few per cent from it
    expect(Math.abs((errorInvcm ?? Number.NaN) - 0.0028)).toBeLessThan(0.0001)
  })

  it('at 1.5 T the linear law is 0.00646 cm^-1 off for J = 1/2, 2.8 % of its own splitting', () => {
    const validity = levelValidity(endOf(levels, 1), 1.5)
    expect(Math.abs((validity.errorInvcm ?? Number.NaN) - 0.00646)).toBeLessThan(0.00001)
    expect(Math.abs((validity.relativeToShift ?? Number.NaN) - 0.028)).toBeLessThan(0.0005)
    expect(Math.abs((validity.relativeError ?? Number.NaN) - 0.0092)).toBeLessThan(0.00005)
    expect(validity.status).toBe('valid')
  })
})

describe('the wavelength form of the Lorentz unit', () => {
  it('4.668645e-5 x lambda^2 (um) x B (T), the usual 4.67e-13 with angstrom and gauss', () => {
    // d lambda = lambda^2 d sigma: mu_B/hc in 1/cm per T, lambda in um (1e-4 cm)
    expect(Math.abs(MU_B_OVER_HC_INVCM_PER_T * 1e-4 - 4.668645e-5)).toBeLessThan(5e-12)
    expect(Math.abs(MU_B_OVER_HC_INVCM_PER_T * 1e-4 * 1e-8 - 4.67e-13)).toBeLessThan(5e-16)
  })
})
