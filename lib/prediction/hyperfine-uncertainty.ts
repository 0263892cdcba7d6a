import { CONSTANTS } from '@/lib/atomic/constants'
import { type HyperfineLevel, type HyperfineState, MU_B_OVER_H_MHZ_PER_T } from '@/lib/atomic/hyperfine'
import type { HyperfineBudgetPart, HyperfineComponent } from '@/openapi/schemas/components'

/** A level of one isotope with what is known of its numbers, one standard deviation each; null is unknown. */
export interface HyperfineUncertainLevel {
  level: HyperfineLevel
  gUnc: number | null
  aUnc: number | null
  bUnc: number | null
}

type End = HyperfineUncertainLevel & { state: HyperfineState }

const product = (two: number): number => (two * (two + 2)) / 4

/** <I.J> of a state: I_z J_z, and I_+ J_- + I_- J_+ between neighbours in m_J. */
function scalarProduct({ twoJ, twoI }: HyperfineLevel, { amplitudes }: HyperfineState): number {
  let sum = 0
  amplitudes.forEach(({ twoMJ, twoMI, amplitude }, i) => {
    sum += (amplitude * amplitude * twoMJ * twoMI) / 4
    const next = amplitudes[i + 1]
    if (!next) return
    const raised = Math.sqrt((product(twoJ) - (twoMJ * (twoMJ + 2)) / 4) * (product(twoI) - (next.twoMI * (next.twoMI + 2)) / 4))
    sum += amplitude * next.amplitude * raised
  })
  return sum
}

/** What a state's energy changes by with A, B (MHz per MHz) and g_J (MHz), by Hellmann-Feynman. */
function slopesOf({ level, state }: End, fieldTesla: number): { a: number; b: number | null; g: number } {
  const a = scalarProduct(level, state)
  const field = MU_B_OVER_H_MHZ_PER_T * fieldTesla
  const g = field * state.amplitudes.reduce((sum, { twoMJ, amplitude }) => sum + (amplitude * amplitude * twoMJ) / 2, 0)
  if (level.twoJ < 2 || level.twoI < 2) return { a, b: 0, g }
  // the quadrupole's share is what A and the field leave of the energy
  const quadrupole = state.energyMhz - level.aMhz * a - state.derivativeMhzPerTesla * fieldTesla
  return { a, b: level.bMhz === null || level.bMhz === 0 ? null : quadrupole / level.bMhz, g }
}

const row = (part: HyperfineBudgetPart['part'], factor: number | null, unc: number | null): HyperfineBudgetPart => {
  if (factor === 0 || unc === 0) return { part, value_mhz: 0, status: 'exact' }
  const value = factor === null || unc === null ? null : Math.abs(factor) * unc
  return { part, value_mhz: value, status: value === null ? 'unknown' : value === 0 ? 'exact' : 'known' }
}

/** Rounding of <I.J> and <J_z> that stands for nothing at all. */
const tidy = (value: number): number => (Math.abs(value) < 1e-12 ? 0 : value)

/**
 * Uncertainty of a detuning by linear propagation: A, B and g_J of both levels by Hellmann-Feynman, the field by the slope, mu_B/h. Independent parts;
 * a field without an uncertainty is exact, g_I is taken as exact. MHz and tesla, one standard deviation. JCGM 100:2008 (GUM), sec. 5.1.
 */
export function hyperfineUncertainty(lower: End, upper: End, fieldTesla: number, fieldUnc: number | null): Pick<HyperfineComponent, 'detuning_unc_mhz' | 'detuning_known_unc_mhz' | 'budget'> {
  const [low, high] = [slopesOf(lower, fieldTesla), slopesOf(upper, fieldTesla)]
  const slope = upper.state.derivativeMhzPerTesla - lower.state.derivativeMhzPerTesla
  const budget = [
    row('a_lower', tidy(low.a), lower.aUnc),
    row('b_lower', low.b, lower.bUnc),
    row('g_lower', tidy(low.g), lower.gUnc),
    row('a_upper', tidy(high.a), upper.aUnc),
    row('b_upper', high.b, upper.bUnc),
    row('g_upper', tidy(high.g), upper.gUnc),
    row('field', slope, fieldUnc ?? 0),
    row('constants', slope * fieldTesla, CONSTANTS.bohrMagnetonGhz.standardUncertainty / CONSTANTS.bohrMagnetonGhz.value),
  ]
  const known = Math.hypot(...budget.map((part) => part.value_mhz ?? 0))
  return { detuning_unc_mhz: budget.some((part) => part.status === 'unknown') ? null : known, detuning_known_unc_mhz: known, budget }
}
