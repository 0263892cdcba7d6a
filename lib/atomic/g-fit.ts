import { centre, type CentredProblem, type CentredSolution, solveCentred } from '@/lib/atomic/centred-fit'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import type { TwoJ } from '@/lib/atomic/half'
import { because, type Reason } from '@/lib/atomic/field-fit'

export interface GFitEnd {
  twoJ: TwoJ
  /** Held where it is not fitted; null for J = 0. */
  g: number | null
  gUnc: number | null
}

export interface GFitInput {
  lower: GFitEnd
  upper: GFitEnd
  free: 'lower' | 'upper' | 'both'
  measurements: readonly { positionInvcm: number; sigmaInvcm: number | null; twoMLower: TwoJ; twoMUpper: TwoJ }[]
  fieldTesla: number
  /** One standard deviation; null or 0 where the field is taken as exact. */
  fieldUnc: number | null
}

export interface FittedG {
  value: number
  /** From the positions alone; null where they have no deviations and nothing is left over to judge them by. */
  unc: number | null
  /** With the field's and the held g's uncertainty. */
  totalUnc: number | null
  expandedUnc: number | null
  budget: { part: 'positions' | 'field' | 'g_held'; value: number | null }[]
}

export type GFit =
  | { status: 'undetermined'; reasons: Reason[] }
  | {
      status: 'determined'
      lower: FittedG | null
      upper: FittedG | null
      zero: { positionInvcm: number; unc: number | null }
      /** Zero, then the free g's, lower first. */
      covariance: number[][] | null
      chiSquared: number | null
      degreesOfFreedom: number
      residualsInvcm: number[]
      /** Share of each point in its own fitted value. */
      leverage: number[]
      /** Residuals over their own deviations; null where sigma is not known or the fit must pass through the point. */
      standardised: (number | null)[]
    }

/** d(shift)/dg of one end, cm^-1. */
const perG = (end: 'lower' | 'upper', one: GFitInput['measurements'][number], x: number): number => (end === 'lower' ? -x * one.twoMLower : x * one.twoMUpper) / 2

function check(input: GFitInput): void {
  if (!(input.fieldTesla > 0)) throw new PhysicsError('field_not_positive', 'Without a field above zero no g can be had from a splitting.', 'field_tesla')
  for (const end of ['lower', 'upper'] as const) {
    if ((input.free === end || input.free === 'both') && input[end].twoJ === 0) throw new PhysicsError('g_of_j_zero', `The ${end} level has J = 0 and so no g_J to be fitted.`, 'free')
    if (input.free !== end && input.free !== 'both' && input[end].twoJ > 0 && input[end].g === null) throw new PhysicsError('g_unknown', `The g_J of the ${end} level is held in this fit and is not known.`, end)
  }
}

/** dg/d(quantity) for each free g: minus C A^T W d(model)/d(quantity), centred. */
function moved(problem: CentredProblem, solution: CentredSolution, perUnit: Float64Array): number[] {
  const column = Float64Array.from(perUnit)
  centre(problem, column)
  const projections = solution.centred.map((own) => own.reduce((sum, value, i) => sum + (problem.weights[i] as number) * value * (column[i] as number), 0))
  return solution.centred.map((_, p) => -projections.reduce((sum, projection, other) => sum + (solution.covariance[1 + p]?.[1 + other] ?? 0) * projection, 0))
}

/**
 * g_J of one or both levels of a line from component positions at a known field: the inverse use of the field fit, in the linear law, where it is
 * a linear problem with a free zero. Both g's need components that tell them apart.
 */
export function fitG(input: GFitInput): GFit {
  check(input)
  const { measurements, fieldTesla, fieldUnc } = input
  const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const free = (['lower', 'upper'] as const).filter((end) => input.free === end || input.free === 'both')
  const held = (['lower', 'upper'] as const).filter((end) => !free.includes(end))
  const heldShift = (one: (typeof measurements)[number]) => held.reduce((sum, end) => sum + (input[end].g ?? 0) * perG(end, one, x), 0)
  const degreesOfFreedom = measurements.length - 1 - free.length
  if (degreesOfFreedom < 0) return { status: 'undetermined', reasons: [because('too_few_positions', `${measurements.length} position${measurements.length === 1 ? '' : 's'} cannot fix a zero and ${free.length} g.`)] }
  const stated = measurements.every((one) => one.sigmaInvcm !== null)
  const problem: CentredProblem = {
    measured: Float64Array.from(measurements, (one) => one.positionInvcm),
    weights: Float64Array.from(measurements, (one) => (one.sigmaInvcm === null || !stated ? 1 : 1 / one.sigmaInvcm ** 2)),
    zeroOf: new Int32Array(measurements.length),
    zeros: 1,
    parameters: free.length,
    priors: [],
    model(theta, values, derivatives) {
      measurements.forEach((one, i) => {
        values[i] = free.reduce((sum, end, p) => sum + (theta[p] ?? 0) * perG(end, one, x), heldShift(one))
        free.forEach((end, p) => {
          const column = derivatives[p]
          if (column) column[i] = perG(end, one, x)
        })
      })
    },
  }
  const outcome = solveCentred(problem, free.map((end) => input[end].g ?? 1))
  if (!outcome.ok) {
    const detail = outcome.alone
      ? `All components measured move alike with the g_J of the ${free[outcome.parameter] ?? 'free'} level, and the zero is free: measure another component.`
      : 'The components measured move alike with both g_J, so they cannot be told apart: hold one of them, or measure components of another q.'
    return { status: 'undetermined', reasons: [because(outcome.alone ? 'one_shift' : 'both_g', detail)] }
  }
  const { solution } = outcome
  const factor = stated ? 1 : degreesOfFreedom > 0 ? solution.chiSquared / degreesOfFreedom : null
  const covariance = factor === null ? null : solution.covariance.map((row) => row.map((value) => value * factor))
  const byField = moved(problem, solution, Float64Array.from(measurements, (one) => (free.reduce((sum, end, p) => sum + (solution.theta[p] ?? 0) * perG(end, one, x), heldShift(one))) / fieldTesla))
  const byHeld = held.filter((end) => input[end].twoJ > 0).map((end) => ({ end, perUnit: moved(problem, solution, Float64Array.from(measurements, (one) => perG(end, one, x))) }))
  const told = (end: 'lower' | 'upper'): FittedG | null => {
    const p = free.indexOf(end)
    if (p < 0) return null
    const unc = covariance === null ? null : Math.sqrt(covariance[1 + p]?.[1 + p] ?? 0)
    const heldPart = byHeld.reduce<number | null>((sum, one) => {
      const unit = one.perUnit[p] ?? 0
      const deviation = input[one.end].gUnc
      return sum === null || (deviation === null && Math.abs(unit) > 1e-12) ? null : Math.hypot(sum, unit * (deviation ?? 0))
    }, 0)
    const budget: FittedG['budget'] = [{ part: 'positions', value: unc }, { part: 'field', value: Math.abs(byField[p] ?? 0) * (fieldUnc ?? 0) }, { part: 'g_held', value: heldPart }]
    const total = budget.some((row) => row.value === null) ? null : Math.hypot(...budget.map((row) => row.value ?? 0))
    return { value: solution.theta[p] ?? 0, unc, totalUnc: total, expandedUnc: total === null ? null : 2 * total, budget }
  }
  return {
    status: 'determined',
    lower: told('lower'),
    upper: told('upper'),
    zero: { positionInvcm: solution.zeros[0] ?? 0, unc: covariance === null ? null : Math.sqrt(covariance[0]?.[0] ?? 0) },
    covariance,
    chiSquared: stated ? solution.chiSquared : null,
    degreesOfFreedom,
    residualsInvcm: solution.residuals,
    leverage: solution.leverage,
    standardised: solution.residuals.map((residual, i) => {
      const [sigma, leverage] = [measurements[i]?.sigmaInvcm ?? (factor === null ? null : Math.sqrt(factor)), solution.leverage[i] ?? 1]
      return sigma === null || 1 - leverage < 1e-9 ? null : residual / (sigma * Math.sqrt(1 - leverage))
    }),
  }
}
