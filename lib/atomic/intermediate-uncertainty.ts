import { CONSTANTS, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { TwoJ } from '@/lib/atomic/half'
import type { TermState } from '@/lib/atomic/intermediate'
import type { BudgetPart, BudgetStatus } from '@/lib/atomic/uncertainty'

export interface IntermediateBudgetRow {
  part: BudgetPart | 'constants'
  /** One standard deviation of the position from this part, cm^-1; null when unknown, 0 when exact. */
  value: number | null
  status: BudgetStatus
}

export interface IntermediateUncertainty {
  /** Root sum of squares over all parts, cm^-1; null when any part is unknown. */
  total: number | null
  /** The same over the known parts. */
  known: number
  budget: IntermediateBudgetRow[]
}

/** What is known of the levels of a term, each J. */
export interface UncertainLevel {
  twoJ: TwoJ
  energyInvcm: number
  energyUnc: number | null
  gUnc: number | null
}

/** A level with a smaller share in the state than this does not make an uncertainty unknown: 1 cm^-1 of it would move the state by 1e-9. */
const NEGLIGIBLE_SHARE = 1e-9

const row = (part: IntermediateBudgetRow['part'], value: number | null): IntermediateBudgetRow => ({ part, value, status: value === null ? 'unknown' : value === 0 ? 'exact' : 'known' })

/** Root sum of squares of each level's deviation times its factor; null when one that counts is unknown. */
function independent(parts: { share: number; factor: number; unc: number | null }[]): number | null {
  let square = 0
  for (const { share, factor, unc } of parts) {
    if (unc === null && share > NEGLIGIBLE_SHARE) return null
    square += (factor * (unc ?? 0)) ** 2
  }
  return Math.sqrt(square)
}

function sharesOf(state: TermState, levels: UncertainLevel[]): { share: number; level: UncertainLevel }[] {
  return state.amplitudes.flatMap(({ twoJ, amplitude }) => {
    const level = levels.find((one) => one.twoJ === twoJ)
    return level ? [{ share: amplitude * amplitude, level }] : []
  })
}

/** dE/dE_J = |<J m|state>|^2; an energy of exactly 0 is the ground level, the zero of the scale, and has no uncertainty. */
const energyPart = (state: TermState, levels: UncertainLevel[]): number | null =>
  independent(sharesOf(state, levels).map(({ share, level }) => ({ share, factor: share, unc: level.energyInvcm === 0 ? 0 : level.energyUnc })))

/** dE/dg_J = mu_B B m |<J m|state>|^2: nothing at m = 0 and at zero field, whatever is known of g. */
function gPart(state: TermState, levels: UncertainLevel[], x: number): number | null {
  if (state.twoM === 0 || x === 0) return 0
  return independent(sharesOf(state, levels).map(({ share, level }) => ({ share, factor: (x * state.twoM * share) / 2, unc: level.gUnc })))
}

/**
 * Uncertainty of a component's position in the intermediate model by linear propagation: the energies and g_J of every level of both terms
 * with the share that each has in its state (first-order perturbation), the field by Hellmann-Feynman, and mu_B/hc. Independent parts;
 * a field without an uncertainty is exact. Units cm^-1 and tesla, one standard deviation. JCGM 100:2008 (GUM), sec. 5.1.
 */
export function intermediateUncertainty(input: {
  lower: { state: TermState; levels: UncertainLevel[] }
  upper: { state: TermState; levels: UncertainLevel[] }
  fieldTesla: number
  fieldUnc?: number | null
}): IntermediateUncertainty {
  const { lower, upper, fieldTesla, fieldUnc = null } = input
  const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const slope = Math.abs(upper.state.slope - lower.state.slope)
  const budget = [
    row('energy_lower', energyPart(lower.state, lower.levels)),
    row('energy_upper', energyPart(upper.state, upper.levels)),
    row('g_lower', gPart(lower.state, lower.levels, x)),
    row('g_upper', gPart(upper.state, upper.levels, x)),
    row('field', fieldUnc === null ? 0 : MU_B_OVER_HC_INVCM_PER_T * slope * fieldUnc),
    row('constants', slope * fieldTesla * CONSTANTS.bohrMagnetonInvcm.standardUncertainty),
  ]
  const known = Math.hypot(...budget.map((part) => part.value ?? 0))
  return { total: budget.some((part) => part.status === 'unknown') ? null : known, known, budget }
}
