import { componentPlaces, shiftLorentz } from '@/lib/atomic/components'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldMultiplet, lineNormalisation } from '@/lib/atomic/field-multiplet'
import { solveTerm, type TermSolution } from '@/lib/atomic/field-solver'
import { fieldTerm, type FieldTerm } from '@/lib/atomic/field-term'
import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import { multipletSolution, readStrengths } from '@/lib/atomic/intermediate-grid'
import type { TermLevels } from '@/lib/atomic/mixing'
import type { Kind } from '@/lib/atomic/rules'

/** A level of a fitted line, or of its term. */
export interface FitLevel {
  twoJ: TwoJ
  energyInvcm: number
  energyUnc: number | null
  /** g in force; null only for J = 0. */
  g: number | null
  gUnc: number | null
  /** The same text for the same level in several lines, so that its uncertainty counts once. */
  key?: string
}

export interface FitEnd extends FitLevel {
  /** All levels of its LS term, itself included; null where it has no S and L. */
  term: { twoS: TwoJ; l: number; levels: FitLevel[] } | null
}

export interface FitLine {
  kind: Kind
  lower: FitEnd
  upper: FitEnd
  /** Lines with the same text share one zero; each has its own where this is absent. */
  zero?: string
  /** Wavenumber without field, cm^-1; tells apart the lines that share a zero. */
  centreInvcm: number
}

export interface FitComponent {
  twoMLower: TwoJ
  twoMUpper: TwoJ
  q: number
}

/** What a quantity that is not fitted does to the shifts: d(shift)/d(quantity) of each component. */
export interface Sensitivity {
  part: 'g_lower' | 'g_upper' | 'energy_lower' | 'energy_upper'
  key: string
  unc: number | null
  values: Float64Array
}

/** Shifts of a line's components at a field, for fits: arrays are used again by the next call. */
export interface LineModel {
  components: FitComponent[]
  /** cm^-1 and cm^-1 per tesla; strengths with each q summing to 1 at zero field. */
  shifts: Float64Array
  slopes: Float64Array
  strengths: Float64Array
  strengthSlopes: Float64Array
  /** Below zero means reversed. */
  at(fieldTesla: number): void
  sensitivities(fieldTesla: number): Sensitivity[]
}

const keyOf = (line: number, end: 'lower' | 'upper', level: FitLevel): string => level.key ?? `${line} ${end} ${formatHalf(level.twoJ)}`

/** Linear law: shift mu_B B (g_u m_u - g_l m_l). */
export function linearLineModel(line: FitLine, number: number): LineModel {
  const places = componentPlaces(line.kind, line.lower.twoJ, line.upper.twoJ)
  const lorentz = places.map((place) => shiftLorentz(line.lower.g, place.twoMLower, line.upper.g, place.twoMUpper))
  const slopes = Float64Array.from(lorentz, (shift) => MU_B_OVER_HC_INVCM_PER_T * shift)
  const shifts = new Float64Array(places.length)
  const perG = (end: 'lower' | 'upper', x: number): Sensitivity => ({
    part: end === 'lower' ? 'g_lower' : 'g_upper',
    key: keyOf(number, end, line[end]),
    unc: line[end].twoJ === 0 ? 0 : line[end].gUnc,
    values: Float64Array.from(places, (place) => (end === 'lower' ? (-place.twoMLower * x) / 2 : (place.twoMUpper * x) / 2)),
  })
  const energy = (end: 'lower' | 'upper'): Sensitivity => ({
    part: `energy_${end}`,
    key: keyOf(number, end, line[end]),
    unc: line[end].energyInvcm === 0 ? 0 : line[end].energyUnc,
    values: new Float64Array(places.length).fill(end === 'lower' ? -1 : 1),
  })
  return {
    components: places.map(({ twoMLower, twoMUpper, q }) => ({ twoMLower, twoMUpper, q })),
    shifts,
    slopes,
    strengths: Float64Array.from(places, (place) => place.strength),
    strengthSlopes: new Float64Array(places.length),
    at(fieldTesla) {
      for (let i = 0; i < shifts.length; i += 1) shifts[i] = (slopes[i] as number) * fieldTesla
    },
    sensitivities: (fieldTesla) => {
      const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
      const g = [perG('lower', x), perG('upper', x)]
      // with a zero of its own a line's energies cannot move the field
      return line.zero === undefined ? g : [...g, energy('lower'), energy('upper')]
    },
  }
}

function termOf(end: FitEnd, name: 'lower' | 'upper', gS: number): FieldTerm {
  if (end.term === null) throw new PhysicsError('term_incomplete', `The ${name} level has no S and L in its coupling, so its term cannot be diagonalised in a field; use the linear model.`, 'lines')
  const term: TermLevels = { ...end.term, levels: end.term.levels.map((level) => (level.twoJ === end.twoJ ? { ...level, g: end.g } : level)) }
  return fieldTerm(term, { gS })
}

/** Diagonalised terms of the line, its own components by continuity of J. Throws `term_incomplete` where a term lacks a level. */
export function intermediateLineModel(line: FitLine, number: number, gS: number = G_S): LineModel {
  const terms = { lower: termOf(line.lower, 'lower', gS), upper: termOf(line.upper, 'upper', gS) }
  const multiplet = fieldMultiplet(terms.lower, terms.upper, line.kind)
  const room = multipletSolution(multiplet)
  const own = Array.from({ length: multiplet.count }, (_, i) => i).filter((i) => multiplet.nominalTwoJLower[i] === line.lower.twoJ && multiplet.nominalTwoJUpper[i] === line.upper.twoJ)
  const factor = lineNormalisation(multiplet, line.lower.twoJ, line.upper.twoJ)
  const linear = linearLineModel(line, number)
  const [all, allSlopes] = [new Float64Array(multiplet.count), new Float64Array(multiplet.count)]
  const room2 = () => new Float64Array(own.length)
  const model: LineModel = {
    components: own.map((i) => ({ twoMLower: multiplet.twoMLower[i] ?? 0, twoMUpper: multiplet.twoMUpper[i] ?? 0, q: multiplet.q[i] ?? 0 })),
    shifts: room2(),
    slopes: room2(),
    // without an LS amplitude the strengths of the linear law are the best there is
    strengths: Float64Array.from(own, (i) => linear.strengths[linear.components.findIndex((c) => c.q === multiplet.q[i] && c.twoMLower === multiplet.twoMLower[i])] ?? 0),
    strengthSlopes: room2(),
    at(fieldTesla) {
      const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
      solveTerm(terms.lower, x, room.lower, true)
      solveTerm(terms.upper, x, room.upper, true)
      if (factor !== null) readStrengths(multiplet, room, all, 0, allSlopes)
      own.forEach((i, n) => {
        const [l, u] = [multiplet.lowerState[i] as number, multiplet.upperState[i] as number]
        model.shifts[n] = (room.upper.shifts[u] as number) - (room.lower.shifts[l] as number)
        model.slopes[n] = MU_B_OVER_HC_INVCM_PER_T * ((room.upper.slopes[u] as number) - (room.lower.slopes[l] as number))
        if (factor === null) return
        model.strengths[n] = factor * (all[i] as number)
        model.strengthSlopes[n] = factor * MU_B_OVER_HC_INVCM_PER_T * (allSlopes[i] as number)
      })
    },
    sensitivities(fieldTesla) {
      const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
      solveTerm(terms.lower, x, room.lower)
      solveTerm(terms.upper, x, room.upper)
      const of = (end: 'lower' | 'upper') =>
        (line[end].term?.levels ?? []).flatMap((level) => {
          const share = shareOf(terms[end], room[end], level.twoJ)
          const state = (i: number) => (end === 'lower' ? multiplet.lowerState[i] : multiplet.upperState[i]) as number
          const twoM = (i: number) => (end === 'lower' ? multiplet.twoMLower[i] : multiplet.twoMUpper[i]) as number
          const sign = end === 'lower' ? -1 : 1
          const energyUnc = level.energyInvcm === 0 ? 0 : level.energyUnc
          const key = keyOf(number, end, level)
          const g: Sensitivity = { part: `g_${end}`, key, unc: level.twoJ === 0 ? 0 : level.gUnc, values: Float64Array.from(own, (i) => (sign * share(state(i)) * x * twoM(i)) / 2) }
          // with a zero of its own, what the line's own energies move alike is nothing; only what depends on the state moves the field
          const common = line.zero === undefined && level.twoJ === line[end].twoJ ? 1 : 0
          const energy: Sensitivity = { part: `energy_${end}`, key, unc: energyUnc, values: Float64Array.from(own, (i) => sign * (share(state(i)) - common)) }
          return [g, energy]
        })
      return [...of('lower'), ...of('upper')]
    },
  }
  return model
}

/** |<J m|state>|^2 by state index. */
function shareOf(term: FieldTerm, solution: TermSolution, twoJ: TwoJ): (state: number) => number {
  const shares = new Float64Array(term.states)
  for (const block of term.blocks) {
    const j = block.twoJs.indexOf(twoJ)
    if (j < 0) continue
    for (let k = 0; k < block.n; k += 1) shares[block.firstState + k] = (solution.vectors[block.firstVector + k * block.n + j] as number) ** 2
  }
  return (state) => shares[state] as number
}
