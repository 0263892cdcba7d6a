import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { shiftLorentz } from '@/lib/atomic/components'
import type { TwoJ } from '@/lib/atomic/half'

export type BudgetPart = 'energy_lower' | 'energy_upper' | 'g_lower' | 'g_upper' | 'field'
export type BudgetStatus = 'known' | 'unknown' | 'exact'

export interface BudgetRow {
  part: BudgetPart
  /** One standard deviation of the position from this part, cm^-1; null when unknown, 0 when exact. */
  value: number | null
  status: BudgetStatus
}

export interface UncertainEnd {
  energyInvcm: number
  energyUnc: number | null
  g: number | null
  gUnc: number | null
  twoM: TwoJ
}

export interface PositionUncertainty {
  /** Root sum of squares over all parts, cm^-1; null when any part is unknown. */
  total: number | null
  /** The same over the known parts. */
  known: number
  budget: BudgetRow[]
}

const row = (part: BudgetPart, value: number | null): BudgetRow => ({ part, value, status: value === null ? 'unknown' : value === 0 ? 'exact' : 'known' })
const EXACT = (part: BudgetPart): BudgetRow => ({ part, value: 0, status: 'exact' })

/** An energy of exactly 0 is the ground level, the zero of the scale, and has no uncertainty. */
const energyRow = (part: BudgetPart, end: UncertainEnd): BudgetRow => (end.energyInvcm === 0 ? EXACT(part) : { part, value: end.energyUnc, status: end.energyUnc === null ? 'unknown' : 'known' })

/** g's part is its deviation times mu_B m B: exactly nothing at m = 0 and at zero field, whatever is known of g. */
const gRow = (part: BudgetPart, end: UncertainEnd, lorentzInvcm: number): BudgetRow => {
  if (end.twoM === 0 || lorentzInvcm === 0) return EXACT(part)
  return row(part, end.gUnc === null ? null : (Math.abs(end.twoM) / 2) * lorentzInvcm * end.gUnc)
}

/**
 * Uncertainty of a component's position with its budget: both energies, both g_J's (times mu_B m B), the field (times the shift per tesla).
 * Level energies are taken as independent; a field without an uncertainty is exact. For the line without field give m = 0 and field 0.
 * Units: cm^-1, tesla; one standard deviation throughout.
 */
export function positionUncertainty(input: { lower: UncertainEnd; upper: UncertainEnd; fieldTesla: number; fieldUnc?: number | null }): PositionUncertainty {
  const { lower, upper, fieldTesla, fieldUnc = null } = input
  const lorentzInvcm = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const perTesla = MU_B_OVER_HC_INVCM_PER_T * Math.abs(shiftLorentz(lower.g, lower.twoM, upper.g, upper.twoM))
  const budget = [
    energyRow('energy_lower', lower),
    energyRow('energy_upper', upper),
    gRow('g_lower', lower, lorentzInvcm),
    gRow('g_upper', upper, lorentzInvcm),
    fieldUnc === null ? EXACT('field') : row('field', perTesla * fieldUnc),
  ]
  const known = Math.hypot(...budget.map((part) => part.value ?? 0))
  return { total: budget.some((part) => part.status === 'unknown') ? null : known, known, budget }
}

/** The sentence that goes with every budget. */
export const UNCERTAINTY_ASSUMPTIONS =
  'One standard deviation. Level energies are taken as independent, the ground level\'s energy as exact, and a field given without an uncertainty as exact.'
