import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { landeG } from '@/lib/atomic/lande'
import { mixedAmplitudes, mixedLevel, type TermLevels } from '@/lib/atomic/mixing'
import { hasLsDipole, lsDipoleAmplitude, spinZElement } from '@/lib/atomic/term-coupling'
import { levelValidity, lineValidity } from '@/lib/atomic/validity'
import { validitySentence } from '@/lib/atomic/validity-sentence'
import { squared3jNumber } from '@/lib/atomic/wigner'

const term = (twoS: number, l: number, energies: Record<number, number>): TermLevels => ({
  twoS,
  l,
  levels: Object.entries(energies).map(([twoJ, energyInvcm]) => ({ twoJ: Number(twoJ), energyInvcm, g: landeG({ twoS, l, twoJ: Number(twoJ) }) })),
})
const end = (of: TermLevels, twoJ: number) => ({ twoJ, g: of.levels.find((level) => level.twoJ === twoJ)?.g ?? null, term: of })

const sodium = { ground: term(1, 0, { 1: 0 }), p: term(1, 1, { 1: 16956.17025, 3: 16973.36619 }) }
const mercury = { ground: term(0, 0, { 0: 0 }), p: term(2, 1, { 0: 37645.08, 2: 39412.3, 4: 44042.977 }) }
const singlet = term(0, 1, { 2: 23652.304 })

describe('elements within a term', () => {
  it('S_z between J and J - 1 is the closed form of Condon & Shortley', () => {
    for (let twoS = 1; twoS <= 5; twoS += 1) {
      for (let l = 1; l <= 4; l += 1) {
        for (let twoJ = Math.abs(twoS - 2 * l) + 2; twoJ <= twoS + 2 * l; twoJ += 2) {
          for (let twoM = -(twoJ - 2); twoM <= twoJ - 2; twoM += 2) {
            const [s, j, m] = [twoS / 2, twoJ / 2, twoM / 2]
            const square = ((j * j - m * m) * (j - l + s) * (j + l - s) * (l + s + 1 + j) * (l + s + 1 - j)) / (4 * j * j * (4 * j * j - 1))
            expect(spinZElement(twoS, l, twoJ, twoJ - 2, twoM) ** 2).toBeCloseTo(square, 12)
          }
        }
      }
    }
  })

  it('its diagonal is (g_J - g_L) m / (g_s - g_L), as the projection theorem has it', () => {
    for (const [twoS, l, twoJ] of [[1, 1, 3], [2, 2, 4], [4, 2, 6], [3, 1, 5]] as const) {
      const g = landeG({ twoS, l, twoJ }) ?? Number.NaN
      for (let twoM = -twoJ; twoM <= twoJ; twoM += 2) expect(spinZElement(twoS, l, twoJ, twoJ, twoM)).toBeCloseTo(((g - 1) * twoM) / 2 / (G_S - 1), 12)
    }
  })

  it('dipole amplitudes of a line go as its 3j symbols', () => {
    const [lower, upper] = [{ l: 1, twoJ: 3 }, { l: 2, twoJ: 5 }]
    const ratios: number[] = []
    for (let m = -3; m <= 3; m += 2) {
      for (let n = m - 2; n <= m + 2; n += 2) {
        const square = squared3jNumber(5, 2, 3, -n, n - m, m)
        if (square > 0) ratios.push(lsDipoleAmplitude(1, { ...lower, twoM: m }, { ...upper, twoM: n }) ** 2 / square)
      }
    }
    expect(ratios).toHaveLength(12)
    for (const ratio of ratios) expect(ratio).toBeCloseTo(ratios[0] ?? Number.NaN, 12)
    expect([hasLsDipole({ twoS: 1, l: 0 }, { twoS: 1, l: 0 }), hasLsDipole({ twoS: 1, l: 1 }, { twoS: 1, l: 1 }), hasLsDipole({ twoS: 0, l: 0 }, { twoS: 2, l: 1 })]).toEqual([false, true, false])
    expect(lsDipoleAmplitude(1, { ...lower, twoM: -3 }, { ...upper, twoM: 3 })).toBe(0)
  })
})

describe('validity of the linear law', () => {
  it('a term of one level: error 0, no limit', () => {
    const validity = lineValidity({ kind: 'E1', lower: end(mercury.ground, 0), upper: end(singlet, 2), fieldTesla: 10_000 })
    expect(validity.positions).toEqual({ status: 'valid', errorInvcm: 0, relativeError: 0, tolerance: 0.01, fieldLimitTesla: null, reason: null })
    expect(validity.strengths).toMatchObject({ status: 'valid', relativeError: 0, fieldLimitTesla: null })
    expect(validitySentence(validity, { lower: 'ground', upper: '1P1' })).toBe('Positions: the linear law is exact within the term. Strengths: the linear law is exact within the term.')
  })

  it('zero field is always valid, and the limit is told all the same', () => {
    const validity = lineValidity({ kind: 'E1', lower: end(sodium.ground, 1), upper: end(sodium.p, 1), fieldTesla: 0 })
    expect(validity.positions).toMatchObject({ status: 'valid', errorInvcm: 0, relativeError: 0 })
    expect(validity.positions.fieldLimitTesla).toBeGreaterThan(2)
  })

  it('the limits are where the tolerance is passed: just below valid, just above not', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.001, max: 0.05, noNaN: true }), (tolerance) => {
        const ask = (fieldTesla: number) => lineValidity({ kind: 'E1', lower: end(sodium.ground, 1), upper: end(sodium.p, 3), fieldTesla, tolerance })
        for (const aspect of ['positions', 'strengths'] as const) {
          const limit = ask(1)[aspect].fieldLimitTesla ?? Number.NaN
          expect(ask(limit * (1 - 1e-9))[aspect].status).toBe('valid')
          expect(ask(limit * (1 + 1e-9))[aspect].status).toBe('not_valid')
        }
      }),
      { numRuns: 20 },
    )
  })

  it('strengths go wrong with the first power of the field, positions with the second', () => {
    const at = (fieldTesla: number) => lineValidity({ kind: 'E1', lower: end(sodium.ground, 1), upper: end(sodium.p, 1), fieldTesla })
    const [weak, strong] = [at(0.01), at(0.1)]
    expect((strong.strengths.relativeError ?? 0) / (weak.strengths.relativeError ?? 1)).toBeCloseTo(10, 0)
    expect((strong.positions.errorInvcm ?? 0) / (weak.positions.errorInvcm ?? 1)).toBeCloseTo(100, -1)
    expect((strong.positions.relativeError ?? 0) / (weak.positions.relativeError ?? 1)).toBeCloseTo(10, 0)
  })

  it('a missing J makes it unknown, never valid, with a lower bound and the missing J named', () => {
    const incomplete = term(2, 1, { 2: 39412.3, 4: 44042.977 })
    const validity = levelValidity(end(incomplete, 4), 1)
    expect(validity).toMatchObject({ status: 'unknown', missingTwoJ: [0], fieldLimitTesla: null })
    expect(validity.errorInvcm).toBeGreaterThan(0)
    expect(validity.reason).toContain('J = 0')
    const line = lineValidity({ kind: 'E1', lower: end(mercury.ground, 0), upper: end(incomplete, 2), fieldTesla: 1000 })
    expect([line.positions.status, line.strengths.status]).toEqual(['unknown', 'unknown'])
    expect(validitySentence(line, { lower: 'ground', upper: '3P1' })).toContain('validity not known')
  })

  it('a level without S and L makes it unknown with nothing to tell', () => {
    const pair = { twoJ: 4, g: 1.5, term: null }
    const line = lineValidity({ kind: 'E1', lower: pair, upper: { twoJ: 2, g: 1.2, term: null }, fieldTesla: 1 })
    expect(line.positions).toMatchObject({ status: 'unknown', errorInvcm: null, relativeError: null, fieldLimitTesla: null })
    expect(line.levels.lower).toMatchObject({ status: 'unknown', errorInvcm: null })
    expect(validitySentence(line, { lower: 'a', upper: 'b' })).toContain('no S and L')
  })

  it('a line without an LS amplitude (Hg 253.65 nm): positions told, strengths unknown', () => {
    const line = lineValidity({ kind: 'E1', lower: end(mercury.ground, 0), upper: end(mercury.p, 2), fieldTesla: 1 })
    expect(line.positions.status).toBe('valid')
    expect(line.strengths).toMatchObject({ status: 'unknown', relativeError: null })
    expect(line.strengths.reason).toContain('no LS amplitude')
  })

  it('without an LS amplitude but with one level in each term nothing is mixed: strengths stay valid', () => {
    const [a, b] = [term(4, 0, { 4: 0 }), term(0, 1, { 2: 30000 })]
    expect(lineValidity({ kind: 'E1', lower: end(a, 4), upper: end(b, 2), fieldTesla: 10 }).strengths).toMatchObject({ status: 'valid', relativeError: 0, reason: null })
    expect(lineValidity({ kind: 'M1', lower: end(a, 4), upper: end(b, 2), fieldTesla: 10 }).strengths.status).toBe('valid')
    expect(lineValidity({ kind: 'M1', lower: end(mercury.p, 2), upper: end(mercury.p, 4), fieldTesla: 10 }).strengths.status).toBe('unknown')
  })

  it('two J of one energy are never linear: the limit is 0', () => {
    const carbon = term(1, 3, { 5: 168978.34, 7: 168978.34 })
    const validity = levelValidity(end(carbon, 5), 0.001)
    expect(validity).toMatchObject({ status: 'not_valid', fieldLimitTesla: 0 })
  })

  it('beyond a crossing the state keeps its name by continuity, and the error says so', () => {
    const close = term(1, 1, { 1: 0, 3: 0.05 })
    const x = 2
    const validity = levelValidity(end(close, 1), x / MU_B_OVER_HC_INVCM_PER_T)
    expect(validity.status).toBe('not_valid')
    // the lower state of m = +1/2 tends to M_S = -1/2: about -x/2 g_s + x, below the linear +x/3 by two thirds of x or so
    expect(validity.errorInvcm).toBeGreaterThan(0.3 * x)
  })

  it('mixed states stay normalised at any field', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1e4, noNaN: true }), fc.integer({ min: 0, max: 4 }), (x, mIndex) => {
        const level = mixedLevel(mercury.p, 4)
        const amplitudes = level === null ? [] : mixedAmplitudes(level, mIndex, x)
        expect(amplitudes.reduce((sum, a) => sum + a * a, 0)).toBeCloseTo(1, 12)
      }),
    )
  })

  it('the sentence names the level that is off by its own measure', () => {
    const validity = lineValidity({ kind: 'E1', lower: end(sodium.ground, 1), upper: end(sodium.p, 1), fieldTesla: 1.5 })
    const sentence = validitySentence(validity, { lower: '3s ²S₁/₂', upper: '3p ²P°₁/₂' })
    expect(sentence).toContain('Positions: the linear law holds')
    expect(sentence).toContain('Strengths: the linear law does not hold')
    expect(sentence).toContain('3p ²P°₁/₂: off by up to 0.00645 cm⁻¹, 2.8 % of its own largest linear shift')
    expect(sentence).not.toContain('3s ²S₁/₂:')
    expect(sentence).toContain('1 % is passed at 2.16 T')
    expect(sentence).toContain('1 % of μB·B is passed at 1.63 T')
  })
})
