import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import type { FieldTerm } from '@/lib/atomic/field-term'
import type { TwoJ } from '@/lib/atomic/half'

/** Names of a term's states, by m and then upwards; the order of every flat array over states. */
export interface TermStateNames {
  twoM: TwoJ[]
  /** By continuity; null where zero-field energies coincide. */
  twoJ: (TwoJ | null)[]
  mL: number[]
  twoMS: TwoJ[]
}

export function termStateNames(term: FieldTerm): TermStateNames {
  const states = term.blocks.flatMap((block) => block.pairs.map((pair, k) => ({ twoM: block.twoM, twoJ: block.coincides[k] ? null : (block.twoJs[block.own[k] ?? 0] ?? null), ...pair })))
  return { twoM: states.map((s) => s.twoM), twoJ: states.map((s) => s.twoJ), mL: states.map((s) => s.mL), twoMS: states.map((s) => s.twoMS) }
}

/** Energies (cm^-1) and derivatives (cm^-1 per tesla) of all states of a term over a grid of fields (T), flat [field][state]. As `intermediateSublevels`. */
export function termGrid(term: FieldTerm, fieldsTesla: ArrayLike<number>): { states: number; energiesInvcm: Float64Array; derivatives: Float64Array } {
  const { states } = term
  const energiesInvcm = new Float64Array(states * fieldsTesla.length)
  const derivatives = new Float64Array(states * fieldsTesla.length)
  const solution = termSolution(term)
  const zero = Float64Array.from(term.blocks.flatMap((block) => [...block.own].map((j) => (block.diagonal[j] ?? 0) + term.meanInvcm)))
  for (let row = 0; row < fieldsTesla.length; row += 1) {
    solveTerm(term, MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[row] as number), solution)
    for (let state = 0; state < states; state += 1) {
      energiesInvcm[row * states + state] = (zero[state] as number) + (solution.shifts[state] as number)
      derivatives[row * states + state] = MU_B_OVER_HC_INVCM_PER_T * (solution.slopes[state] as number)
    }
  }
  return { states, energiesInvcm, derivatives }
}
