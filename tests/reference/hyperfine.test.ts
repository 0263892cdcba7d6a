import { describe, expect, it } from 'vitest'
import { hyperfineFeatures } from '@/lib/atomic/crossings'
import { hyperfineLevel, hyperfineSublevels, MU_B_OVER_H_MHZ_PER_T } from '@/lib/atomic/hyperfine'
import { hyperfineGrid } from '@/lib/atomic/hyperfine-grid'
import { readCases } from './read'

interface Case {
  level: string
  twoJ: number
  twoI: number
  A_MHz: number
  Bquad_MHz: number
  gJ: number
  gIprime: number
  B: number
  states: [twoMF: number, k: number, energy: number, twoF: number | null, twoMJ: number, twoMI: number][]
}

const cases = readCases<Case>('07-hyperfine.json')
const readyOf = (row: Case) => hyperfineLevel({ twoJ: row.twoJ, gJ: row.gJ, twoI: row.twoI, aMhz: row.A_MHz, bMhz: row.Bquad_MHz, gI: row.gIprime })

/**
 * Energy of F = I +- 1/2, m_F of a J = 1/2 level, MHz: -D/2(2I+1) + g_I' mu_B m B +- D/2 sqrt(1 + 4 m x/(2I+1) + x^2) with D = A(I + 1/2),
 * x = (g_J - g_I') mu_B B/D. G. Breit & I. I. Rabi, Phys. Rev. 38, 2082 (1931), from memory.
 */
function breitRabi({ twoI, A_MHz, gJ, gIprime, B }: Case, twoF: number, twoMF: number): number {
  const [i, m, muB] = [twoI / 2, twoMF / 2, MU_B_OVER_H_MHZ_PER_T * B]
  const interval = A_MHz * (i + 0.5)
  const x = ((gJ - gIprime) * muB) / interval
  const common = -interval / (2 * (twoI + 1)) + gIprime * m * muB
  // the stretched states have 1 + 4mx/(2I+1) + x^2 = (1 +- x)^2, whose root must not be taken as positive
  if (Math.abs(twoMF) === twoI + 1) return common + (interval / 2) * (1 + Math.sign(m) * x)
  return common + ((twoF > twoI ? 1 : -1) * interval * Math.sqrt(1 + (4 * m * x) / (twoI + 1) + x * x)) / 2
}

describe('hyperfine levels in a field (vectors 07)', () => {
  it.each(cases)('$level at $B T', (row) => {
    const found = hyperfineSublevels(readyOf(row), row.B)
    expect(found).toHaveLength(row.states.length)
    row.states.forEach(([twoMF, k, energy, twoF, twoMJ, twoMI], i) => {
      const state = found[i]
      expect([state?.twoMF, state?.k, state?.twoF, state?.twoMJ, state?.twoMI]).toEqual([twoMF, k, twoF, twoMJ, twoMI])
      // header: 1e-7 MHz
      expect(Math.abs((state?.energyMhz ?? Number.NaN) - energy)).toBeLessThanOrEqual(1e-7)
    })
  })

  it.each(cases.filter((row) => row.twoJ === 1))('$level at $B T equals Breit-Rabi to rounding', (row) => {
    for (const state of hyperfineSublevels(readyOf(row), row.B)) {
      const scale = Math.abs(row.A_MHz) * (row.twoI + 1) + MU_B_OVER_H_MHZ_PER_T * row.B
      expect(Math.abs(state.energyMhz - breitRabi(row, state.twoF ?? 0, state.twoMF))).toBeLessThanOrEqual(4 * Number.EPSILON * scale)
    }
  })
})

describe('the ground level of 87Rb up to 1 T', () => {
  const row = cases.find((one) => one.level === '87Rb 5S1/2' && one.B === 0)
  if (!row) throw new Error('no row of 87Rb')
  const ready = readyOf(row)

  it('follows Breit-Rabi over the whole way, and its slopes are the derivatives', () => {
    const fields = Array.from({ length: 501 }, (_, i) => i / 500)
    const { energiesMhz, derivatives, states } = hyperfineGrid(ready, fields)
    const names = hyperfineSublevels(ready, 0)
    const step = 1e-6
    fields.forEach((B, i) => {
      names.forEach(({ twoF, twoMF }, n) => {
        expect(Math.abs((energiesMhz[i * states + n] ?? Number.NaN) - breitRabi({ ...row, B }, twoF ?? 0, twoMF))).toBeLessThan(1e-10)
        const at = (field: number) => breitRabi({ ...row, B: field }, twoF ?? 0, twoMF)
        expect(Math.abs((derivatives[i * states + n] ?? Number.NaN) - (at(B + step) - at(B - step)) / (2 * step))).toBeLessThan(1e-2)
      })
    })
  })

  it('ends in four and four states of m_J = -1/2 and +1/2, ordered by m_I', () => {
    const top = hyperfineSublevels(ready, 1)
    expect(top.filter((state) => state.twoMJ === -1 && state.energyMhz < 0)).toHaveLength(4)
    for (const state of top) {
      const main = state.amplitudes.find((one) => one.twoMJ === state.twoMJ)
      expect((main?.amplitude ?? 0) ** 2).toBeGreaterThan(0.95)
      expect(state.twoMJ + state.twoMI).toBe(state.twoMF)
    }
  })

  it('the clock interval is 6834.682 610 904 MHz, and (1,-1) - (2,+1) is stationary near 3.229 G', () => {
    const [one, two] = [hyperfineSublevels(ready, 0).find((s) => s.twoF === 2), hyperfineSublevels(ready, 0).find((s) => s.twoF === 4)]
    // Steck, Rubidium 87 D Line Data, from memory
    expect((two?.energyMhz ?? 0) - (one?.energyMhz ?? 0)).toBeCloseTo(6834.682610904, 8)
    const { stationary, crossings, anticrossings } = hyperfineFeatures(ready, { twoF: 4, twoMF: 2 }, { twoF: 2, twoMF: -2 }, 0, 0.1)
    expect([stationary.length, crossings.length, anticrossings.length]).toEqual([1, 0, 0])
    const [point] = stationary
    // D. M. Harber et al., Phys. Rev. A 66, 053616 (2002), from memory: 3.228 917(3) G, 431.359 57(9) Hz/G^2, 6 834 678 113.59 Hz
    expect((point?.fieldTesla ?? Number.NaN) * 1e4).toBeCloseTo(3.2289, 3)
    expect(((point?.curvature ?? Number.NaN) / 2) * 1e6 * 1e-8).toBeCloseTo(431.36, 1)
    expect((point?.value ?? Number.NaN) * 1e6 - 6834678113.59).toBeLessThan(5)
    expect((point?.value ?? Number.NaN) * 1e6 - 6834678113.59).toBeGreaterThan(-5)
    expect(point?.kind).toBe('minimum')
  })
})
