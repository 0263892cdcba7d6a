import { describe, expect, it } from 'vitest'
import { parseConfiguration } from '@/lib/atomic/configuration'
import { R_INF_INVCM } from '@/lib/atomic/constants'
import { diamagnetic, DIAMAGNETIC_INVCM_PER_T2, diamagneticLimit, diamagneticShift, effectiveQuantumNumber, meanSquareRadius, outerElectron, sinSquared, stateSinSquared, termDiamagneticShifts } from '@/lib/atomic/diamagnetic'
import { fieldTerm } from '@/lib/atomic/field-term'
import { intermediateSublevels } from '@/lib/atomic/intermediate'

/** <r^2> of hydrogen n l by numerical integration of r^(2l+2) exp(-2r/n) [associated Laguerre]^2, in a_0^2. */
function integrated(n: number, l: number): number {
  // L_k^(a)(x) by its recurrence: Abramowitz & Stegun 22.7.12
  const laguerre = (k: number, a: number, x: number) => {
    let [before, now] = [0, 1]
    for (let i = 0; i < k; i += 1) [before, now] = [now, ((2 * i + 1 + a - x) * now - (i + a) * before) / (i + 1)]
    return now
  }
  let [norm, sum] = [0, 0]
  const step = n / 400
  for (let r = step; r < 30 * n * n; r += step) {
    const density = r ** (2 * l + 2) * Math.exp((-2 * r) / n) * laguerre(n - l - 1, 2 * l + 1, (2 * r) / n) ** 2
    norm += density
    sum += density * r * r
  }
  return sum / norm
}

const configuration = (text: string) => {
  const read = parseConfiguration(text)
  if (!read.ok) throw new Error(read.detail)
  return outerElectron(read.value)
}

describe('quadratic shift', () => {
  it.each([[1, 0], [2, 0], [2, 1], [4, 2], [6, 5]])('<r^2> of hydrogen n = %i, l = %i is that of the wave function', (n, l) => {
    expect(meanSquareRadius(n, l, 1) / integrated(n, l)).toBeCloseTo(1, 6)
    expect(meanSquareRadius(n, l, 2)).toBe(meanSquareRadius(n, l, 1) / 4)
  })

  it('sin^2 theta is 2/3 over all m, and that of the spherical harmonics', () => {
    for (const l of [0, 1, 2, 3]) {
      let sum = 0
      for (let m = -l; m <= l; m += 1) sum += sinSquared(l, m)
      expect(sum / (2 * l + 1)).toBeCloseTo(2 / 3, 14)
    }
    // Y_10^2 = 3 cos^2/4pi: <sin^2> = 2/5; Y_11^2 = 3 sin^2/8pi: 4/5
    expect([sinSquared(0, 0), sinSquared(1, 0), sinSquared(1, 1)]).toEqual([2 / 3, 2 / 5, 4 / 5])
  })

  it('the ground level of hydrogen goes up by B^2/4 in atomic units', () => {
    // textbook (from memory): E = B^2 <x^2 + y^2>/8 with <x^2 + y^2> = 2 a_0^2; the atomic unit of field is 2.350 517 57e5 T (CODATA 2022, from memory)
    const hartree = 2 * R_INF_INVCM
    expect(diamagneticShift(meanSquareRadius(1, 0, 1), sinSquared(0, 0), 235051.757) / (hartree / 4)).toBeCloseTo(1, 8)
    // Jenkins & Segre, Phys. Rev. 55, 52 (1939), from memory: 4.98e-15 cm^-1/gauss^2 for n^4 (1 + m^2) = 1
    expect(DIAMAGNETIC_INVCM_PER_T2 * 1e-8).toBeCloseTo(4.97e-15, 16)
  })

  it('coupled states take the mean over M_L, and at high field that of their own', () => {
    const p = fieldTerm({ twoS: 1, l: 1, levels: [{ twoJ: 1, energyInvcm: 0, g: null }, { twoJ: 3, energyInvcm: 0.3353, g: null }] })
    const [weak, strong] = [intermediateSublevels(p, 0), intermediateSublevels(p, 2000)]
    // J = 1/2 of p: 2/3 of M_L = +-1 and 1/3 of 0, which is round
    for (const state of weak.filter((one) => one.twoJ === 1)) expect(stateSinSquared(p, state)).toBeCloseTo(2 / 3, 14)
    for (const state of strong) expect(stateSinSquared(p, state)).toBeCloseTo(sinSquared(1, state.mL), 6)
    const shifts = termDiamagneticShifts(p, strong, 20, 2000)
    expect(shifts[0]?.shiftInvcm ?? 0).toBeCloseTo(DIAMAGNETIC_INVCM_PER_T2 * 20 * 0.8 * 4e6, 8)
    expect(shifts[0]?.derivativeInvcmPerTesla ?? 0).toBeCloseTo((shifts[0]?.shiftInvcm ?? 0) / 1000, 12)
  })

  it('says where it applies', () => {
    // energies of the table; limits 41449.451 (Na I) and 109678.77 (H I)
    const sodium = diamagnetic({ n: 3, l: 0, energyInvcm: 0, limitInvcm: 41449.451, coreCharge: 1 })
    expect(sodium).toMatchObject({ applies: true, warnings: ['penetrating'] })
    expect(sodium.nStar ?? 0).toBeCloseTo(1.627, 3)
    expect(diamagnetic({ n: 3, l: 2, energyInvcm: 97492.32, limitInvcm: 109678.77174, coreCharge: 1, massU: 1.00783 })).toMatchObject({ applies: true, warnings: ['l_mixing'] })
    expect(diamagnetic({ n: 2, l: 1, energyInvcm: 82259, limitInvcm: 109678.77174, coreCharge: 1 })).toMatchObject({ applies: true, warnings: [] })
    expect(diamagnetic({ n: 4, l: 0, energyInvcm: 50000, limitInvcm: 41449, coreCharge: 1 }).reason).toContain('above its limit')
    expect(diamagnetic({ n: 3, l: 0, energyInvcm: 41000, limitInvcm: 41449, coreCharge: 1 }).reason).toContain('above n = 3')
    expect(diamagnetic({ n: 3, l: 2, energyInvcm: 0, limitInvcm: 60000, coreCharge: 1 }).reason).toContain('not above l')
    expect(effectiveQuantumNumber({ energyInvcm: 0, limitInvcm: 4 * R_INF_INVCM, coreCharge: 2 })).toBeCloseTo(1, 14)
  })

  it('knows the one outer electron of a configuration', () => {
    expect([configuration('1s2.2p'), configuration('1s.2p'), configuration('[Ne].3s')]).toEqual([{ n: 2, l: 1 }, { n: 2, l: 1 }, { n: 3, l: 0 }])
    expect([configuration('4p2'), configuration('5d.6p'), configuration('2p5.3s')]).toEqual([null, null, null])
    expect(configuration('3d10.4s.20p')).toEqual({ n: 20, l: 1 })
  })

  it('and at which field it passes the tolerance', () => {
    const coefficient = DIAMAGNETIC_INVCM_PER_T2 * meanSquareRadius(20, 1, 1) * sinSquared(1, 0)
    const limit = diamagneticLimit(coefficient, 0.01) ?? Number.NaN
    expect(diamagneticShift(meanSquareRadius(20, 1, 1), sinSquared(1, 0), limit) / (0.46686447719 * limit)).toBeCloseTo(0.01, 14)
    expect(diamagneticLimit(0, 0.01)).toBeNull()
  })
})
