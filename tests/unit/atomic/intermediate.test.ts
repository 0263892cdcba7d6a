import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldMultiplet, lineNormalisation, lineShare } from '@/lib/atomic/field-multiplet'
import { fieldTerm, impureJ, withLsG } from '@/lib/atomic/field-term'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import { coupledRange } from '@/lib/atomic/half'
import { intermediateSublevels } from '@/lib/atomic/intermediate'
import { multipletGrid, multipletSolution, readSomeStrengths, readStrengths } from '@/lib/atomic/intermediate-grid'
import { intermediateLine, multipletComponents } from '@/lib/atomic/intermediate-lines'
import { symmetricEigen } from '@/lib/atomic/jacobi'
import { landeG } from '@/lib/atomic/lande'
import type { TermLevels } from '@/lib/atomic/mixing'
import { termGrid, termStateNames } from '@/lib/atomic/term-grid'
import { solveTridiagonal } from '@/lib/atomic/tridiagonal'

const term = (twoS: number, l: number, energies: number[], g: number | null = null): TermLevels => ({
  twoS,
  l,
  levels: coupledRange(twoS, 2 * l).map((twoJ, i) => ({ twoJ, energyInvcm: energies[i] ?? 0, g })),
})
const triplet = { lower: term(2, 1, [20000, 20010, 20030]), upper: term(2, 2, [40000.5, 40005.2, 40001.1]) }
const iron = { lower: term(4, 2, [978.074, 888.132, 704.007, 415.933, 0]), upper: term(4, 3, [27666.345, 27559.581, 27394.689, 27166.817, 26874.548]) }
const multipletOf = ({ lower, upper }: { lower: TermLevels; upper: TermLevels }) => fieldMultiplet(fieldTerm(lower), fieldTerm(upper))
const refusal = (act: () => unknown): PhysicsError => {
  try {
    act()
  } catch (error) {
    if (error instanceof PhysicsError) return error
  }
  throw new Error('not refused')
}

// squares of still smaller elements underflow; the physics takes such fields as zero
const entry = fc.double({ min: -100, max: 100, noNaN: true }).map((value) => (Math.abs(value) < 1e-100 ? 0 : value))

describe('eigenvalues and vectors', () => {
  it('QL of a tridiagonal matrix and Jacobi agree, and solve the matrix', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 9 }), fc.array(entry, { minLength: 9, maxLength: 9 }), fc.array(entry, { minLength: 9, maxLength: 9 }), (n, diagonal, off) => {
        const matrix = Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_u, j) => (i === j ? (diagonal[i] ?? 0) : Math.abs(i - j) === 1 ? (off[Math.min(i, j)] ?? 0) : 0)))
        const jacobi = symmetricEigen(matrix)
        const [d, e, z] = [Float64Array.from(diagonal), Float64Array.from(off), new Float64Array(n * n)]
        solveTridiagonal(n, d, e, z)
        for (let k = 0; k < n; k += 1) {
          expect(Math.abs((d[k] ?? Number.NaN) - (jacobi.values[k] ?? Number.NaN))).toBeLessThan(1e-11)
          for (const vector of [jacobi.vectors[k] ?? [], [...z.slice(k * n, k * n + n)]]) {
            matrix.forEach((row, i) => {
              const product = row.reduce((sum, element, j) => sum + element * (vector[j] ?? 0), 0)
              expect(Math.abs(product - (d[k] ?? 0) * (vector[i] ?? 0))).toBeLessThan(1e-11)
            })
          }
        }
      }),
    )
  })

  it('small couplings keep their digits: the mixing of 1e-9 over a gap of 1000', () => {
    const { vectors } = symmetricEigen([[0, 1e-9], [1e-9, 1000]])
    expect((vectors[0]?.[1] ?? 0) / 1e-12).toBeCloseTo(-1, 12)
  })
})

describe('a term in a field', () => {
  it('refuses a term with a J missing, and says which', () => {
    const error = refusal(() => fieldTerm({ ...triplet.lower, levels: triplet.lower.levels.slice(1) }))
    expect([error.code, error.detail]).toEqual(['term_incomplete', 'The term 3P lacks its level J = 0, so its levels cannot be diagonalised in a field.'])
    expect(refusal(() => fieldTerm({ ...triplet.lower, levels: triplet.lower.levels.slice(2) })).detail).toContain('J = 0, 1')
  })

  it('refuses a J twice', () => {
    expect(refusal(() => fieldTerm({ ...triplet.lower, levels: [...triplet.lower.levels, { twoJ: 2, energyInvcm: 1, g: null }] })).code).toBe('term_mixed')
  })

  it('a term of one level is linear at any field', () => {
    const states = intermediateSublevels(fieldTerm(term(2, 0, [100], 1.99)), 400)
    expect(states.map((state) => [state.twoM, state.twoJ])).toEqual([[-2, 2], [0, 2], [2, 2]])
    for (const state of states) {
      expect(state.shiftInvcm).toBeCloseTo((1.99 * state.twoM * 400 * MU_B_OVER_HC_INVCM_PER_T) / 2, 10)
      expect(state.beyondLinearInvcm).toBe(0)
    }
  })

  it('takes the adopted g on the diagonal, and LS g on request', () => {
    const adopted = term(1, 1, [0, 17], 1.1)
    const slopes = (of: TermLevels) => intermediateSublevels(fieldTerm(of), 0).map((state) => state.slope)
    slopes(adopted).forEach((slope, i) => expect(slope).toBeCloseTo((1.1 * ([-3, -1, -1, 1, 1, 3][i] ?? 0)) / 2, 12))
    expect(slopes(withLsG(adopted))).toEqual(slopes(term(1, 1, [0, 17])))
    expect(impureJ(adopted)).toEqual([1, 3])
    expect(impureJ(withLsG(adopted))).toEqual([])
  })

  it('the trace of each m block is linear in the field', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1000, noNaN: true }), (tesla) => {
        const ready = fieldTerm(iron.lower)
        const states = intermediateSublevels(ready, tesla)
        for (const block of ready.blocks) {
          const sum = states.filter((state) => state.twoM === block.twoM).reduce((all, state) => all + state.energyInvcm, 0)
          const wanted = block.diagonal.reduce((all, e, i) => all + e + ready.meanInvcm + MU_B_OVER_HC_INVCM_PER_T * tesla * (block.slopes[i] ?? 0), 0)
          expect(Math.abs(sum - wanted)).toBeLessThan(1e-9)
        }
      }),
      { numRuns: 20 },
    )
  })

  it('keeps all digits of the shift at small field, where the difference of two energies has none', () => {
    const [weak, strong] = [1e-6, 1e-3].map((tesla) => intermediateSublevels(fieldTerm(term(2, 1, [37645.08, 39412.3, 44042.977])), tesla))
    weak?.forEach((state, i) => {
      const ratio = state.beyondLinearInvcm === 0 ? 1e6 : (strong?.[i]?.beyondLinearInvcm ?? 0) / state.beyondLinearInvcm
      expect(ratio / 1e6).toBeCloseTo(1, 5)
      expect(state.shiftInvcm / (1e-6 * MU_B_OVER_HC_INVCM_PER_T)).toBeCloseTo(((landeG({ twoS: 2, l: 1, twoJ: state.nominalTwoJ }) ?? 0) * state.twoM) / 2, 8)
    })
  })

  it('Hellmann-Feynman slopes are the derivatives of the energies', () => {
    const ready = fieldTerm(triplet.upper)
    const step = 1e-4
    const [below, here, above] = [3 - step, 3, 3 + step].map((tesla) => intermediateSublevels(ready, tesla))
    here?.forEach((state, i) => {
      const difference = ((above?.[i]?.shiftInvcm ?? 0) - (below?.[i]?.shiftInvcm ?? 0)) / (2 * step)
      expect(state.derivativeInvcmPerTesla).toBeCloseTo(difference, 7)
    })
  })

  it('where zero-field energies coincide J is null, and the field chooses the states', () => {
    // C II 2s2.4f: both J of the 2F at one energy; then L and S are free at any field
    const ready = fieldTerm(term(1, 3, [100, 100]))
    for (const tesla of [0, 1e-9, 2]) {
      for (const state of intermediateSublevels(ready, tesla)) {
        expect(state.twoJ).toBe(Math.abs(state.twoM) === 7 ? 7 : null)
        expect(state.slope).toBeCloseTo(state.mL + (G_S * state.twoMS) / 2, 7)
      }
    }
  })

  it('and of three levels with two coinciding only those two lose their J', () => {
    const ready = fieldTerm(term(2, 1, [0, 50, 50]))
    const fast = termSolution(ready)
    for (const tesla of [0, 0.5]) {
      const states = intermediateSublevels(ready, tesla)
      solveTerm(ready, MU_B_OVER_HC_INVCM_PER_T * tesla, fast)
      states.forEach((state, i) => {
        expect(Math.abs(state.shiftInvcm - (fast.shifts[i] ?? Number.NaN))).toBeLessThan(1e-12)
        expect(Math.abs(state.slope - (fast.slopes[i] ?? Number.NaN))).toBeLessThan(1e-10)
      })
      expect(states.filter((state) => state.twoM === 0).map((state) => state.twoJ)).toEqual([0, null, null])
    }
  })

  it('names and energies over a grid are those of the single states', () => {
    const ready = fieldTerm(iron.lower)
    const fields = [0, 0.7, 300]
    const [names, grid] = [termStateNames(ready), termGrid(ready, fields)]
    fields.forEach((tesla, row) => {
      intermediateSublevels(ready, tesla).forEach((state, i) => {
        expect([names.twoM[i], names.twoJ[i], names.mL[i], names.twoMS[i]]).toEqual([state.twoM, state.twoJ, state.mL, state.twoMS])
        expect(Math.abs((grid.energiesInvcm[row * grid.states + i] ?? Number.NaN) - state.energyInvcm)).toBeLessThan(1e-11)
        expect(Math.abs((grid.derivatives[row * grid.states + i] ?? Number.NaN) - state.derivativeInvcmPerTesla)).toBeLessThan(1e-12)
      })
    })
  })

  it('a reversed field turns m into -m', () => {
    const ready = fieldTerm(triplet.upper)
    const [forth, back] = [termSolution(ready), termSolution(ready)]
    solveTerm(ready, 2, forth)
    solveTerm(ready, -2, back)
    const states = intermediateSublevels(ready, 0)
    states.forEach((state, i) => {
      const mirror = states.findIndex((other) => other.twoM === -state.twoM && other.k === state.k)
      expect(back.energies[i] ?? Number.NaN).toBeCloseTo(forth.energies[mirror] ?? Number.NaN, 11)
      expect(back.slopes[i] ?? Number.NaN).toBeCloseTo(-(forth.slopes[mirror] ?? Number.NaN), 11)
    })
  })
})

describe('a multiplet in a field', () => {
  it.each([['triplet', triplet], ['iron', iron]] as const)('%s: bulk and scalar functions agree', (_, terms) => {
    const multiplet = multipletOf(terms)
    const fields = [0, 1e-6, 0.01, 1, 30, 1000]
    const grid = multipletGrid(multiplet, fields, { derivatives: true, strengths: true })
    fields.forEach((tesla, row) => {
      multipletComponents(multiplet, tesla).forEach((c, i) => {
        const at = row * multiplet.count + i
        expect(Math.abs((grid.values[at] ?? Number.NaN) - c.wavenumberInvcm)).toBeLessThanOrEqual(1e-10)
        expect(Math.abs((grid.derivatives?.[at] ?? Number.NaN) - c.derivativeInvcmPerTesla)).toBeLessThanOrEqual(1e-11)
        expect(Math.abs((grid.strengths?.[at] ?? Number.NaN) - (c.strength ?? Number.NaN))).toBeLessThanOrEqual(1e-13)
      })
    })
  })

  it('lists every (m_l, J_l, m_u, J_u) with |q| <= 1 in the order q, m_lower, J_lower, J_upper', () => {
    const multiplet = multipletOf(triplet)
    const found = multipletComponents(multiplet, 1).map((c) => [c.q, c.lower.twoM, c.lower.nominalTwoJ, c.upper.nominalTwoJ])
    const wanted: number[][] = []
    for (const q of [-1, 0, 1]) for (let m = -4; m <= 4; m += 2) for (const jl of [0, 2, 4]) for (const ju of [2, 4, 6]) if (Math.abs(m) <= jl && Math.abs(m + 2 * q) <= ju) wanted.push([q, m, jl, ju])
    expect(found).toEqual(wanted)
  })

  it('strengths sum to 1 at any field, each q to a third; the line shares are those of zero field', () => {
    const multiplet = multipletOf(iron)
    const fields = [0, 0.3, 40, 900]
    const { strengths } = multipletGrid(multiplet, fields, { strengths: true })
    fields.forEach((tesla, row) => {
      const sums = [0, 0, 0]
      const shares = new Map<string, number>()
      for (let i = 0; i < multiplet.count; i += 1) {
        const strength = strengths?.[row * multiplet.count + i] ?? Number.NaN
        const place = (multiplet.q[i] ?? 0) + 1
        sums[place] = (sums[place] ?? 0) + strength
        const line = `${multiplet.twoJLower[i]} ${multiplet.twoJUpper[i]}`
        shares.set(line, (shares.get(line) ?? 0) + strength)
      }
      for (const sum of sums) expect(sum).toBeCloseTo(1 / 3, 12)
      if (tesla === 0) for (const [line, share] of shares) expect(share).toBeCloseTo(lineShare(multiplet, Number(line.split(' ')[0]), Number(line.split(' ')[1])), 12)
    })
  })

  it('derivatives of strengths are those of the strengths, at zero field and with coinciding energies too', () => {
    for (const terms of [triplet, { lower: term(2, 1, [0, 50, 50]), upper: term(2, 2, [100, 100, 130]) }]) {
      const multiplet = multipletOf(terms)
      for (const tesla of [0, 2]) {
        const step = 1e-4
        const { strengths, strengthDerivatives } = multipletGrid(multiplet, [tesla - step, tesla, tesla + step], { strengths: true, strengthDerivatives: true })
        const skip = tesla === 0 && terms !== triplet
        for (let i = 0; i < multiplet.count; i += 1) {
          // with coinciding energies the states of B -> 0- have other names, so only the side above zero is compared
          const low = strengths?.[(skip ? 1 : 0) * multiplet.count + i] ?? 0
          const difference = ((strengths?.[2 * multiplet.count + i] ?? 0) - low) / (skip ? step : 2 * step)
          expect(Math.abs((strengthDerivatives?.[multiplet.count + i] ?? Number.NaN) - difference)).toBeLessThan(skip ? 2e-5 : 1e-6)
        }
      }
    }
  })

  it('a line in the intermediate model begins as the linear model has it: each q sums to 1', () => {
    const multiplet = multipletOf(triplet)
    for (const [twoJLower, twoJUpper] of [[2, 4], [4, 6], [0, 2]] as const) {
      const line = intermediateLine(multiplet, { twoJLower, twoJUpper }, 0, 90)
      for (const q of [-1, 0, 1]) expect(line.filter((c) => c.q === q).reduce((sum, c) => sum + (c.strength ?? 0), 0)).toBeCloseTo(1, 12)
      expect(line.reduce((sum, c) => sum + (c.intensity ?? 0), 0)).toBeCloseTo(1, 12)
      expect(line.every((c) => c.shiftLorentz === null && c.shiftInvcm === 0)).toBe(true)
    }
  })

  it('a line that only the field induces has no normalisation of its own', () => {
    const multiplet = multipletOf(triplet)
    expect(lineNormalisation(multiplet, 0, 6)).toBeNull()
    expect(intermediateLine(multiplet, { twoJLower: 0, twoJUpper: 6 }, 10).every((c) => c.strength === null)).toBe(true)
    expect(multipletComponents(multiplet, 10).filter((c) => c.lower.twoJ === 0 && c.upper.twoJ === 6).some((c) => (c.strength ?? 0) > 0)).toBe(true)
  })

  it('without an LS amplitude (Hg 253.65 nm) positions are given and strengths are null', () => {
    const multiplet = fieldMultiplet(fieldTerm(term(0, 0, [0])), fieldTerm(term(2, 1, [37645.08, 39412.3, 44042.977])))
    const [line, grid] = [intermediateLine(multiplet, { twoJLower: 0, twoJUpper: 2 }, 5), multipletGrid(multiplet, [5], { strengths: true, strengthDerivatives: true })]
    expect(line.map((c) => [c.q, c.strength])).toEqual([[-1, null], [0, null], [1, null]])
    expect(line[2]?.shiftInvcm).toBeGreaterThan(3)
    expect([grid.strengths, grid.strengthDerivatives, multiplet.noAmplitude]).toEqual([null, null, expect.stringContaining('no LS amplitude')])
    expect(fieldMultiplet(multiplet.lower, multiplet.upper, 'M1').noAmplitude).toContain('M1')
  })

  it('strengths of some components are those of all', () => {
    const multiplet = multipletOf(iron)
    const room = multipletSolution(multiplet)
    solveTerm(multiplet.lower, 20, room.lower)
    solveTerm(multiplet.upper, 20, room.upper)
    const [all, some] = [new Float64Array(multiplet.count), new Float64Array(multiplet.count)]
    readStrengths(multiplet, room, all, 0, null)
    readSomeStrengths(multiplet, room, [3, 77, 200], some)
    for (const i of [3, 77, 200]) expect(some[i]).toBeCloseTo(all[i] ?? Number.NaN, 14)
  })

  it('a part of the grid is the same as the whole', () => {
    const multiplet = multipletOf(triplet)
    const fields = [0, 1, 2, 3]
    const [whole, part] = [multipletGrid(multiplet, fields), multipletGrid(multiplet, fields, {}, { from: 2, to: 4 })]
    expect([...part.values]).toEqual([...whole.values.slice(2 * multiplet.count)])
  })
})
