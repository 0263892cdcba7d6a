import { describe, expect, it } from 'vitest'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { fieldMultiplet, lineShare } from '@/lib/atomic/field-multiplet'
import { fieldTerm } from '@/lib/atomic/field-term'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import { intermediateSublevels } from '@/lib/atomic/intermediate'
import { multipletGrid } from '@/lib/atomic/intermediate-grid'
import { intermediateLine, multipletComponents } from '@/lib/atomic/intermediate-lines'
import { landeG } from '@/lib/atomic/lande'
import type { TermLevels } from '@/lib/atomic/mixing'
import { findLevel } from './levels'
import { readCases } from './read'

type State = [twoM: number, k: number, energy: number, twoJ: number | null, mL: number, twoMS: number, slope: number]
interface LevelsCase {
  term: string
  twoS: number
  L: number
  levels: [number, number][]
  gL: number
  gS: number
  B: number
  states: State[]
}
type Line = [q: number, twoMLower: number, kLower: number, twoJLower: number, twoMUpper: number, kUpper: number, twoJUpper: number, wavenumber: number, strength: number]
interface LinesCase {
  lines: string
  twoS: number
  gL: number
  gS: number
  B: number
  lower: { L: number; levels: [number, number][] }
  upper: { L: number; levels: [number, number][] }
  components: Line[]
}

const termOf = (twoS: number, l: number, levels: [number, number][]): TermLevels => ({ twoS, l, levels: levels.map(([twoJ, energyInvcm]) => ({ twoJ, energyInvcm, g: null })) })

// header of 05: energies 1e-9 cm^-1, slopes 1e-9
const ENERGY = 1e-9
const SLOPE = 1e-9

describe('states of a term in a field of any strength (vectors 05)', () => {
  const cases = readCases<LevelsCase>('05-full-field-levels.json')
  it.each(cases)('$term, g_s $gS, $B T', ({ twoS, L, levels, gL, gS, B, states }) => {
    const term = fieldTerm(termOf(twoS, L, levels), { gS, gL })
    const found = intermediateSublevels(term, B)
    const fast = termSolution(term)
    solveTerm(term, MU_B_OVER_HC_INVCM_PER_T * B, fast)
    expect(found).toHaveLength(states.length)
    states.forEach(([twoM, k, energy, twoJ, mL, twoMS, slope], i) => {
      const state = found[i]
      expect([state?.twoM, state?.k, state?.twoJ, state?.mL, state?.twoMS]).toEqual([twoM, k, twoJ, mL, twoMS])
      expect(Math.abs((state?.energyInvcm ?? Number.NaN) - energy)).toBeLessThanOrEqual(ENERGY)
      expect(Math.abs((state?.slope ?? Number.NaN) - slope)).toBeLessThanOrEqual(SLOPE)
      expect(Math.abs((fast.energies[i] ?? Number.NaN) + term.meanInvcm - energy)).toBeLessThanOrEqual(ENERGY)
      expect(Math.abs((fast.slopes[i] ?? Number.NaN) - slope)).toBeLessThanOrEqual(SLOPE)
    })
  })

  it('are there', () => expect(cases).toHaveLength(84))
})

// header of 06: wavenumbers 1e-9 cm^-1, strengths 1e-10; a component that is not listed is below 2e-9. Wavenumbers near 2e4 carry a
// rounding of 4e-12 in the file itself.
describe('lines between two terms in a field of any strength (vectors 06)', () => {
  const cases = readCases<LinesCase>('06-full-field-lines.json')
  it.each(cases)('$lines, $B T', ({ twoS, lower, upper, gS, gL, B, components }) => {
    const multiplet = fieldMultiplet(fieldTerm(termOf(twoS, lower.L, lower.levels), { gS, gL }), fieldTerm(termOf(twoS, upper.L, upper.levels), { gS, gL }))
    const found = multipletComponents(multiplet, B)
    const grid = multipletGrid(multiplet, [B], { strengths: true })
    let listed = 0
    found.forEach((c, i) => {
      const wanted = components.find((row) => row[1] === c.lower.twoM && row[2] === c.lower.k && row[4] === c.upper.twoM && row[5] === c.upper.k)
      const strengths = [c.strength ?? Number.NaN, grid.strengths?.[i] ?? Number.NaN]
      if (!wanted) return strengths.forEach((strength) => expect(strength).toBeLessThan(2e-9))
      listed += 1
      expect([c.q, c.lower.twoJ, c.upper.twoJ]).toEqual([wanted[0], wanted[3], wanted[6]])
      strengths.forEach((strength) => expect(Math.abs(strength - wanted[8])).toBeLessThanOrEqual(1e-10))
      for (const wavenumber of [c.wavenumberInvcm, grid.values[i] ?? Number.NaN]) expect(Math.abs(wavenumber - wanted[7])).toBeLessThanOrEqual(1e-9)
    })
    expect(listed).toBe(components.length)
  })

  it('are there', () => expect(cases).toHaveLength(25))
})

interface AdoptedCase {
  lines: string
  B: number
  lower: { twoS: number; L: number; levels: [twoJ: number, energy: number, g: number][] }
  upper: AdoptedCase['lower']
  components: [twoMLower: number, kLower: number, twoMUpper: number, kUpper: number, wavenumber: number, strength: number, derivative: number][]
}

describe('lines of terms with g_J of their own (adopted g on the diagonal)', () => {
  const adopted = ({ twoS, L, levels }: AdoptedCase['lower']) => fieldTerm({ twoS, l: L, levels: levels.map(([twoJ, energyInvcm, g]) => ({ twoJ, energyInvcm, g: twoJ === 0 ? null : g })) })
  it.each(readCases<AdoptedCase>('adopted-g-lines.json'))('$lines at $B T', ({ lower, upper, B, components }) => {
    const multiplet = fieldMultiplet(adopted(lower), adopted(upper))
    const found = multipletComponents(multiplet, B)
    const grid = multipletGrid(multiplet, [B], { strengths: true, derivatives: true })
    expect(found).toHaveLength(components.length)
    found.forEach((c, i) => {
      const wanted = components.find((row) => row[0] === c.lower.twoM && row[1] === c.lower.k && row[2] === c.upper.twoM && row[3] === c.upper.k)
      // header: 1e-9 cm^-1, 1e-10, 1e-9 cm^-1/T
      for (const wavenumber of [c.wavenumberInvcm, grid.values[i] ?? Number.NaN]) expect(Math.abs(wavenumber - (wanted?.[4] ?? Number.NaN))).toBeLessThanOrEqual(1e-9)
      for (const strength of [c.strength ?? Number.NaN, grid.strengths?.[i] ?? Number.NaN]) expect(Math.abs(strength - (wanted?.[5] ?? Number.NaN))).toBeLessThanOrEqual(1e-10)
      for (const derivative of [c.derivativeInvcmPerTesla, grid.derivatives?.[i] ?? Number.NaN]) expect(Math.abs(derivative - (wanted?.[6] ?? Number.NaN))).toBeLessThanOrEqual(1e-9)
    })
  })
})

describe('Li I 670.8 nm from the anomalous pattern to the triplet', () => {
  const ground = { twoJ: 1, energyInvcm: findLevel('Li I', '2s', '2S', '1/2').energy_invcm, g: null }
  const p = ['1/2', '3/2'].map((j, i) => ({ twoJ: 2 * i + 1, energyInvcm: findLevel('Li I', '2p', '2P', j).energy_invcm, g: null }))
  const multiplet = fieldMultiplet(fieldTerm({ twoS: 1, l: 0, levels: [ground] }), fieldTerm({ twoS: 1, l: 1, levels: p }))
  const interval = (p[1]?.energyInvcm ?? 0) - (p[0]?.energyInvcm ?? 0)

  it('at 1 mT each line has its own anomalous pattern: g m of D1 and D2 with strengths 3j squared', () => {
    for (const twoJUpper of [1, 3]) {
      const line = intermediateLine(multiplet, { twoJLower: 1, twoJUpper }, 0.001)
      const g = landeG({ twoS: 1, l: 1, twoJ: twoJUpper }) ?? 0
      expect(line.filter((c) => (c.strength ?? 0) > 1e-3)).toHaveLength(twoJUpper === 1 ? 4 : 6)
      for (const c of line) {
        // the quadratic term is of the order x / interval = 1.4e-3 of the shift
        expect(c.shiftLorentz ?? Number.NaN).toBeCloseTo((g * c.upper.twoM - G_S * c.lower.twoM) / 2, 2)
      }
      for (const q of [-1, 0, 1]) expect(line.filter((c) => c.q === q).reduce((sum, c) => sum + (c.strength ?? 0), 0)).toBeCloseTo(1, 2)
    }
  })

  it('at 5 T the whole doublet is a Lorentz triplet: three groups at -1, 0, +1, each split by spin-orbit coupling', () => {
    // Paschen & Back, Ann. Phys. 39, 897 (1912), from memory: the anomalous patterns of a narrow doublet go over into a normal triplet
    const centre = ((p[0]?.energyInvcm ?? 0) + 2 * (p[1]?.energyInvcm ?? 0)) / 3
    const x = 5 * MU_B_OVER_HC_INVCM_PER_T
    const strong = multipletComponents(multiplet, 5).filter((c) => (c.strength ?? 0) > 0.01)
    expect(strong).toHaveLength(6)
    for (const c of strong) {
      expect(c.strength ?? 0).toBeCloseTo(1 / 6, 2)
      expect(Math.abs(c.wavenumberInvcm - centre - c.q * x)).toBeLessThan(interval / 2)
      expect([c.lower.twoMS, c.upper.mL - c.lower.mL]).toEqual([c.upper.twoMS, c.q])
      // first order at high field: a M_L M_S with a = 2/3 of the interval, here +-interval/3 (Condon & Shortley, ch. XVI); next order interval^2/x
      expect(Math.abs(c.wavenumberInvcm - centre - c.q * x - ((2 / 3) * interval * c.upper.mL * c.upper.twoMS) / 2)).toBeLessThan((interval * interval) / x / 3)
    }
  })

  it('between them strength flows, and keeps its sum', () => {
    let last = Number.POSITIVE_INFINITY
    for (const tesla of [0, 0.1, 0.3, 0.7, 1.5, 3, 5]) {
      const all = multipletComponents(multiplet, tesla)
      expect(all.reduce((sum, c) => sum + (c.strength ?? 0), 0)).toBeCloseTo(1, 12)
      const outer = all.find((c) => c.q === 1 && c.lower.twoM === -1 && c.upper.nominalTwoJ === 3)
      const strength = (outer?.strength ?? Number.NaN) / lineShare(multiplet, 1, 3)
      expect(strength).toBeLessThan(last)
      last = strength
    }
    expect(last).toBeLessThan(0.01)
  })
})
