import { describe, expect, it } from 'vitest'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { landeG } from '@/lib/atomic/lande'
import { lineKernel, mixedStrengths } from '@/lib/atomic/line-mixing'
import { beyondLinear, mixedLevel, type TermLevels } from '@/lib/atomic/mixing'
import { levelValidity, lineValidity } from '@/lib/atomic/validity'
import { readCases } from './read'

interface LevelsCase {
  term: string
  twoS: number
  L: number
  levels: [number, number][]
  gS: number
  B: number
  states: [number, number, number, number | null, number, number, number][]
}
interface LinesCase {
  lines: string
  twoS: number
  gS: number
  B: number
  lower: { L: number; levels: [number, number][] }
  upper: { L: number; levels: [number, number][] }
  components: [number, number, number, number, number, number, number, number, number][]
}

const termOf = (twoS: number, l: number, levels: [number, number][], gS: number): TermLevels => ({
  twoS,
  l,
  levels: levels.map(([twoJ, energyInvcm]) => ({ twoJ, energyInvcm, g: landeG({ twoS, l, twoJ }, { gS }) })),
})

const smallestGap = (levels: [number, number][]): number => {
  const energies = levels.map(([, energy]) => energy).sort((a, b) => a - b)
  return Math.min(...energies.slice(1).map((energy, i) => energy - (energies[i] ?? 0)))
}

/** What a full diagonalisation says beyond the linear law, per state: [twoJ, twoM, E - E_linear]. */
function beyondByDiagonalisation(row: LevelsCase): [number, number, number][] {
  const x = MU_B_OVER_HC_INVCM_PER_T * row.B
  return row.states.flatMap(([twoM, , energy, twoJ]): [number, number, number][] => {
    const level = row.levels.find(([j]) => j === twoJ)
    if (twoJ === null || !level) return []
    const g = landeG({ twoS: row.twoS, l: row.L, twoJ }, { gS: row.gS }) ?? 0
    return [[twoJ, twoM, energy - level[1] - (g * twoM * x) / 2]]
  })
}

const levelCases = readCases<LevelsCase>('05-full-field-levels.json')

describe('energies beyond the linear law against full diagonalisation', () => {
  it.each(levelCases.filter((row) => row.levels.length === 2))('$term of two levels at $B T: exact at any field (header: 1e-9 cm^-1)', (row) => {
    const term = termOf(row.twoS, row.L, row.levels, row.gS)
    const x = MU_B_OVER_HC_INVCM_PER_T * row.B
    for (const [twoJ, twoM, wanted] of beyondByDiagonalisation(row)) {
      const level = mixedLevel(term, twoJ, row.gS)
      expect(level).not.toBeNull()
      if (level) expect(Math.abs(beyondLinear(level, (twoM + twoJ) / 2, x) - wanted)).toBeLessThanOrEqual(1e-9)
    }
  })

  // with two neighbours the sum of closed forms is right to second order; the next term is of third order, x^3 / gap^2, with a factor of order 1
  const weak = levelCases.filter((row) => row.levels.length > 2 && MU_B_OVER_HC_INVCM_PER_T * row.B < smallestGap(row.levels) / 8)
  it.each(weak)('$term at $B T: right to second order', (row) => {
    const term = termOf(row.twoS, row.L, row.levels, row.gS)
    const x = MU_B_OVER_HC_INVCM_PER_T * row.B
    const allowance = (2 * x ** 3) / smallestGap(row.levels) ** 2 + 1e-9
    for (const [twoJ, twoM, wanted] of beyondByDiagonalisation(row)) {
      const level = mixedLevel(term, twoJ, row.gS)
      if (level) expect(Math.abs(beyondLinear(level, (twoM + twoJ) / 2, x) - wanted)).toBeLessThanOrEqual(allowance)
    }
    expect(weak.length).toBeGreaterThan(10)
  })

  it('the level error and its limit are those of the diagonalised Na 3p-like doublet', () => {
    for (const row of levelCases.filter((c) => c.term === 'Na 3p-like 2P' && c.B > 0)) {
      const term = termOf(row.twoS, row.L, row.levels, row.gS)
      const x = MU_B_OVER_HC_INVCM_PER_T * row.B
      for (const twoJ of [1, 3]) {
        const wanted = Math.max(...beyondByDiagonalisation(row).filter(([j]) => j === twoJ).map(([, , e]) => Math.abs(e)))
        const validity = levelValidity({ twoJ, g: landeG({ twoS: 1, l: 1, twoJ }, { gS: row.gS }), term }, row.B, { gS: row.gS })
        expect(Math.abs((validity.errorInvcm ?? Number.NaN) - wanted)).toBeLessThanOrEqual(1e-9)
        expect(validity.status).toBe(wanted / x <= 0.01 ? 'valid' : 'not_valid')
        expect(row.B > (validity.fieldLimitTesla ?? 0)).toBe(wanted / x > 0.01)
      }
    }
  })
})

interface Followed {
  row: LinesCase
  twoJLower: number
  twoJUpper: number
}

const lineCases = readCases<LinesCase>('06-full-field-lines.json').filter((row) => row.B > 0)
const linesOf = (row: LinesCase): Followed[] =>
  row.lower.levels.flatMap(([twoJLower]) => row.upper.levels.filter(([j]) => Math.abs(j - twoJLower) <= 2 && j + twoJLower > 0).map(([twoJUpper]) => ({ row, twoJLower, twoJUpper })))

/** The line's kernel and the share of each q that the line has within the multiplet at zero field. */
function prepared({ row, twoJLower, twoJUpper }: Followed) {
  const lower = termOf(row.twoS, row.lower.L, row.lower.levels, row.gS)
  const upper = termOf(row.twoS, row.upper.L, row.upper.levels, row.gS)
  const kernelOf = (jl: number, ju: number) => {
    const [ml, mu] = [mixedLevel(lower, jl, row.gS), mixedLevel(upper, ju, row.gS)]
    if (!ml || !mu) throw new Error('level missing from its own term')
    const g = (term: TermLevels, twoJ: number) => term.levels.find((level) => level.twoJ === twoJ)?.g ?? null
    return lineKernel('E1', { twoJ: jl, g: g(lower, jl), term: lower, mixed: ml }, { twoJ: ju, g: g(upper, ju), term: upper, mixed: mu })
  }
  const all = linesOf(row).reduce((sum, line) => sum + kernelOf(line.twoJLower, line.twoJUpper).norm, 0)
  const kernel = kernelOf(twoJLower, twoJUpper)
  return { kernel, share: kernel.norm / all / 3, lower, upper }
}

/** Strength of the line's component in the vectors, normalised as the line is (each q sums to 1 at zero field). */
const wantedStrength = (line: Followed, share: number, twoMLower: number, twoMUpper: number): number =>
  (line.row.components.find((c) => c[1] === twoMLower && c[3] === line.twoJLower && c[4] === twoMUpper && c[6] === line.twoJUpper)?.[8] ?? 0) / share

describe('strengths with mixing against full diagonalisation', () => {
  const twoLevel = lineCases.filter((row) => row.lower.levels.length <= 2 && row.upper.levels.length <= 2).flatMap(linesOf)
  it.each(twoLevel)('$row.lines at $row.B T, 2J = $twoJLower - $twoJUpper: exact at any field', (line) => {
    const { kernel, share } = prepared(line)
    const strengths = mixedStrengths(kernel, MU_B_OVER_HC_INVCM_PER_T * line.row.B)
    kernel.components.forEach((component, i) => {
      // header: 1e-10, and components at or below 1e-9 are left out of the file; both over the line's share
      const allowance = 2e-9 / share
      expect(Math.abs((strengths[i] ?? Number.NaN) - wantedStrength(line, share, component.twoMLower, component.twoMUpper))).toBeLessThanOrEqual(allowance)
    })
  })

  const weak = lineCases.filter((row) => row.lines === '3P-3D' && row.B === 0.1).flatMap(linesOf)
  it.each(weak)('3P-3D at 0.1 T, 2J = $twoJLower - $twoJUpper: right to first order', (line) => {
    const { kernel, share } = prepared(line)
    const x = MU_B_OVER_HC_INVCM_PER_T * line.row.B
    const mixed = mixedStrengths(kernel, x)
    // second order: (x / gap)^2 with gap 3.67 cm^-1, times the ratio of the mixed-in line's strength to this line's
    const allowance = (x / 3.67) ** 2 / share
    kernel.components.forEach((component, i) => {
      const wanted = wantedStrength(line, share, component.twoMLower, component.twoMUpper)
      expect(Math.abs((mixed[i] ?? Number.NaN) - wanted)).toBeLessThanOrEqual(allowance)
    })
    expect(weak).toHaveLength(6)
  })

  it('the whole-line errors at 1 T are those of the diagonalised Na-like doublet', () => {
    const row = lineCases.find((c) => c.lines === 'Na-like 2S-2P' && c.B === 1)
    expect(row).toBeDefined()
    if (!row) return
    const x = MU_B_OVER_HC_INVCM_PER_T
    for (const line of linesOf(row)) {
      const { kernel, share, lower, upper } = prepared(line)
      const [gLower, gUpper] = [landeG({ twoS: 1, l: 0, twoJ: 1 }) ?? 0, landeG({ twoS: 1, l: 1, twoJ: line.twoJUpper }) ?? 0]
      const centre = row.upper.levels.find(([j]) => j === line.twoJUpper)?.[1] ?? 0
      const errors = row.components
        .filter((c) => c[6] === line.twoJUpper)
        .map((c) => Math.abs(c[7] - centre - (x * (gUpper * c[4] - gLower * c[1])) / 2))
      const changes = kernel.components.map((c) => Math.abs(wantedStrength(line, share, c.twoMLower, c.twoMUpper) - c.strength) / (kernel.largestOfQ[c.q + 1] ?? 1))
      const validity = lineValidity({ kind: 'E1', lower: { twoJ: 1, g: gLower, term: lower }, upper: { twoJ: line.twoJUpper, g: gUpper, term: upper }, fieldTesla: 1 })
      expect(Math.abs((validity.positions.errorInvcm ?? Number.NaN) - Math.max(...errors))).toBeLessThanOrEqual(2e-9)
      expect(Math.abs((validity.positions.relativeError ?? Number.NaN) - Math.max(...errors) / (x * kernel.largestShift))).toBeLessThanOrEqual(1e-8)
      expect(Math.abs((validity.strengths.relativeError ?? Number.NaN) - Math.max(...changes))).toBeLessThanOrEqual(1e-8)
    }
    expect(G_S).toBe(row.gS)
  })
})

describe('He I 1083 nm, common practice of infrared field measurement', () => {
  // J = 1 and 2 of 2 3P lie 0.076 cm^-1 apart and are seen as one line
  const levels: [number, number][] = [[4, 169086.766473], [2, 169086.842898], [0, 169087.830813]]
  const lower = termOf(2, 0, [[2, 159855.97433]], G_S)
  const upper = termOf(2, 1, levels, G_S)

  /** Centre of gravity of sigma+ of the unresolved pair about its zero-field place, in Lorentz units. */
  function blendShift(fieldTesla: number, withMixing: boolean): number {
    const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
    const zero = 169086.766473
    let [sum, weight, atZero, all] = [0, 0, 0, 0]
    for (const twoJ of [4, 2]) {
      const [ml, mu] = [mixedLevel(lower, 2), mixedLevel(upper, twoJ)]
      if (!ml || !mu) continue
      const kernel = lineKernel('E1', { twoJ: 2, g: G_S, term: lower, mixed: ml }, { twoJ, g: landeG({ twoS: 2, l: 1, twoJ }), term: upper, mixed: mu })
      const strengths = mixedStrengths(kernel, x)
      const place = (levels.find(([j]) => j === twoJ)?.[1] ?? 0) - zero
      kernel.components.forEach((component, i) => {
        if (component.q !== 1) return
        const strength = (twoJ + 1) * (withMixing ? (strengths[i] ?? 0) : component.strength)
        sum += strength * (place + x * component.shift + (withMixing ? beyondLinear(mu, component.upperIndex, x) : 0))
        weight += strength
        atZero += (twoJ + 1) * component.strength * place
        all += (twoJ + 1) * component.strength
      })
    }
    return (sum / weight - atZero / all) / x
  }

  it('linear strengths read the pair 21 % wrong even at 1 mT', () => {
    const ratio = blendShift(0.001, true) / blendShift(0.001, false)
    expect(1 - ratio).toBeGreaterThan(0.205)
    expect(1 - ratio).toBeLessThan(0.215)
  })

  it('and the validity says so well before positions fail', () => {
    const ends = { lower: { twoJ: 2, g: G_S, term: lower }, upper: { twoJ: 4, g: landeG({ twoS: 2, l: 1, twoJ: 4 }), term: upper } }
    const { positions, strengths } = lineValidity({ kind: 'E1', ...ends, fieldTesla: 0.005 })
    expect(positions.status).toBe('valid')
    expect(strengths.status).toBe('not_valid')
    expect(strengths.fieldLimitTesla ?? Number.NaN).toBeLessThan((positions.fieldLimitTesla ?? Number.NaN) / 4)
  })

  it('the first linear crossing, 3P2 M = +2 with 3P1 M = -1, is where the table of common practice has it: 363.8 G', () => {
    const g = landeG({ twoS: 2, l: 1, twoJ: 4 }, { gS: 2 }) ?? Number.NaN
    expect(0.0764254 / (3 * g * MU_B_OVER_HC_INVCM_PER_T)).toBeCloseTo(0.03638, 5)
  })
})
