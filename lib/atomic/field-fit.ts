import { type CentredOutcome, type CentredProblem, type CentredSolution, solveCentred } from '@/lib/atomic/centred-fit'
import { CONSTANTS, G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { type AssignOptions, likelyReadings, type PeakHint, readAt } from '@/lib/atomic/field-fit-assign'
import { tabulatedModel } from '@/lib/atomic/field-fit-table'
import { type FitComponent, type FitLine, intermediateLineModel, type LineModel, linearLineModel } from '@/lib/atomic/field-fit-model'
import { type Assignment, type FieldBudgetRow, fieldProblem, type FitMeasurement, type FitSetup, fitSetup, type Scale, systematicBudget } from '@/lib/atomic/field-fit-problem'
import { autoModel, type FieldModel, type LinearLawValidity, linearLawValidity } from '@/lib/atomic/intermediate-validity'
import { missingJ } from '@/lib/atomic/mixing'
import { DEFAULT_TOLERANCE, type ValidityEnd } from '@/lib/atomic/validity'

export interface FieldFitMeasurement extends FitMeasurement {
  /** Named by hand; absent where the assignment is to be found. */
  component?: { twoMLower: number; twoMUpper: number }
  /** The peak is the whole unresolved group of this q, its centre of gravity (g_eff), named by hand. */
  group?: number
  /** Polarisation where known: q, or `sigma` for either sense. */
  q?: number | 'sigma'
}

export interface FieldFitInput {
  lines: readonly FitLine[]
  measurements: readonly FieldFitMeasurement[]
  model?: FieldModel | 'auto'
  tolerance?: number
  gS?: number
  /** Measured = zero + scale x true; exact 1 where absent. */
  scale?: Scale
  /** q that can be seen, for automatic assignment: all where absent, [-1, 1] along the field. */
  visibleQ?: readonly number[]
}

export interface Reason {
  code: string
  detail: string
}

/** Reasons and warnings stand beside an answer; they are not refusals. */
export const because = (code: string, detail: string): Reason => ({ code, detail })

export interface FitResidual {
  /** The components that the peak was read as; several where they are not resolved. */
  components: FitComponent[]
  /** Fitted position, and measured minus fitted, cm^-1. */
  fittedInvcm: number
  residualInvcm: number
  /** Residual over its own deviation, sigma sqrt(1 - leverage); null where sigma is not known or the fit must pass through the point. */
  standardised: number | null
  /** Share of the point in its own fitted value. */
  leverage: number
  /** The field without this point, and the change its leaving makes in standard deviations; null where nothing is determined without it. */
  without: { fieldTesla: number; change: number | null } | null
}

export interface DeterminedFit {
  status: 'determined'
  model: FieldModel
  fieldTesla: number
  /** From the positions (and the scale), one standard deviation; null where no deviations are stated and nothing is left over to judge scatter by. */
  fieldUnc: number | null
  /** With what is known of g's, energies and constants; `complete` is false where a part is unknown. Expanded with k = 2. */
  total: { unc: number | null; expandedUnc: number | null; coverageFactor: 2; complete: boolean }
  /** fieldUnc x sqrt(chi^2/dof); null without degrees of freedom. */
  scaledUnc: number | null
  budget: FieldBudgetRow[]
  scale: { value: number; unc: number | null }
  zeros: { name: string; positionInvcm: number; unc: number | null }[]
  /** In the order of `parameters`; null as `fieldUnc`. */
  parameters: string[]
  covariance: number[][] | null
  /** Null where no deviations are stated. */
  chiSquared: number | null
  degreesOfFreedom: number
  residuals: FitResidual[]
  /** Validity of the linear law of each line at the fitted field. */
  validity: LinearLawValidity[]
  assignedAutomatically: boolean
  /** Other readings of the peaks that fit about as well, with their fields. */
  alternatives: { fieldTesla: number; cost: number; /** By measurement. */ components: FitComponent[][] }[]
  warnings: Reason[]
  iterations: number
}

export interface UndeterminedFit {
  status: 'undetermined'
  model: FieldModel
  reasons: Reason[]
}

export type FieldFit = DeterminedFit | UndeterminedFit

const MOST_TESLA = 10_000
/** Readings whose cost lies within this of the best are told as alternatives. */
const ABOUT_AS_GOOD = 9

function check({ lines, measurements, scale }: FieldFitInput): void {
  if (lines.length === 0) throw new PhysicsError('fit_without_lines', 'A fit needs at least one line.', 'lines')
  const stated = measurements.filter((one) => one.sigmaInvcm !== null).length
  if (stated > 0 && stated < measurements.length) throw new PhysicsError('sigma_for_some', 'Give the uncertainty of every position, or of none; then all weigh the same.', 'measurements')
  if (measurements.some((one) => one.sigmaInvcm !== null && !(one.sigmaInvcm > 0))) throw new PhysicsError('sigma_not_positive', 'The uncertainty of a position must be above zero.', 'measurements')
  if (measurements.some((one) => !Number.isFinite(one.positionInvcm))) throw new PhysicsError('position_not_finite', 'A position must be a finite number.', 'measurements')
  if (measurements.some((one) => lines[one.line] === undefined)) throw new PhysicsError('no_such_line', 'A position names a line that the fit does not have.', 'measurements')
  if (scale && !(scale.value > 0 && (scale.unc === null || scale.unc >= 0))) throw new PhysicsError('scale_malformed', 'A scale is above zero, its uncertainty not below.', 'scale')
}

function hintOf(one: FieldFitMeasurement, model: LineModel | undefined): PeakHint {
  const components = model?.components ?? []
  if (one.group !== undefined) {
    const group = components.flatMap((c, i) => (c.q === one.group && (model?.strengths[i] ?? 0) > 0 ? [i] : []))
    if (group.length === 0) throw new PhysicsError('no_such_component', `The line has no components of q = ${one.group}.`, 'measurements')
    return { components: group, q: null }
  }
  if (one.component === undefined) return { components: null, q: one.q ?? null }
  const { twoMLower, twoMUpper } = one.component
  const component = components.findIndex((c) => c.twoMLower === twoMLower && c.twoMUpper === twoMUpper)
  if (component < 0) throw new PhysicsError('no_such_component', `The line has no component m = ${twoMLower / 2} to ${twoMUpper / 2}.`, 'measurements')
  return { components: [component], q: null }
}

const setupOf = (input: FieldFitInput, model: FieldModel): FitSetup => {
  const models = input.lines.map((line, i) => (model === 'linear' ? linearLineModel(line, i) : intermediateLineModel(line, i, input.gS ?? G_S)))
  return fitSetup(input.lines, input.measurements, models, input.scale ?? { value: 1, unc: 0 })
}

/** Why the data leave the field (or the scale) open. */
function whyOpen(setup: FitSetup, assignments: readonly Assignment[], outcome: Extract<CentredOutcome, { ok: false }>): Reason {
  if (!outcome.alone) return because('scale_and_field', 'The scale and the field change the positions in the same way, so they cannot be told apart: give the scale, or its uncertainty, or lines that share a zero.')
  const moves = setup.measurements.some((one, i) => {
    const model = setup.models[one.line]
    model?.at(1)
    return (assignments[i] ?? []).some((c) => Math.abs(model?.slopes[c] ?? 0) > 1e-15)
  })
  if (!moves) return because('no_shift', 'No component measured moves with the field, so the positions tell nothing of it.')
  return because('one_shift_per_line', 'Within each line all components measured move alike, and the zero of each line is free, so a shift of the line and the field cannot be told apart: measure another component of a line.')
}

const parametersOf = (setup: FitSetup): number => setup.zeros.length + (setup.scale.unc === 0 ? 1 : 2)
const priorsOf = (setup: FitSetup): number => (setup.scale.unc !== null && setup.scale.unc !== 0 ? 1 : 0)

interface Solved {
  problem: CentredProblem
  solution: CentredSolution
  assignments: Assignment[]
  cost: number
}

/** Fits of given assignments from several starts; the linear law has one minimum, the intermediate model may have more. */
function solveFrom(setup: FitSetup, assignments: Assignment[], starts: readonly number[]): { problem: CentredProblem; outcome: CentredOutcome } {
  const problem = fieldProblem(setup, assignments)
  const start = (field: number) => (problem.parameters === 1 ? [field] : [field, setup.scale.value])
  const outcomes = starts.map((field) => solveCentred(problem, start(field)))
  const best = outcomes.reduce((a, b) => (b.ok && (!a.ok || b.solution.chiSquared < a.solution.chiSquared) ? b : a))
  return { problem, outcome: best }
}

function startsOf(input: FieldFitInput, setup: FitSetup, assignments: Assignment[], model: FieldModel): number[] {
  if (model === 'linear') {
    if (setup.scale.unc === 0) return [0]
    // at zero field a scale does nothing, so a fitted one begins where the field is that of the exact scale
    const { outcome } = solveFrom({ ...setup, scale: { ...setup.scale, unc: 0 } }, assignments, [0])
    return [outcome.ok ? (outcome.solution.theta[0] ?? 0) : 0]
  }
  const linear = setupOf(input, 'linear')
  // components of both models are named by their m's; the intermediate model lists those without strength too
  const renamed = assignments.map((components, i) => {
    const line = input.measurements[i]?.line ?? 0
    const [from, to] = [setup.models[line]?.components ?? [], linear.models[line]?.components ?? []]
    return components.flatMap((c) => {
      const found = to.findIndex((other) => other.twoMLower === from[c]?.twoMLower && other.twoMUpper === from[c]?.twoMUpper)
      return found < 0 ? [] : [found]
    })
  })
  const { outcome } = solveFrom(linear, renamed, [0])
  const field = outcome.ok ? (outcome.solution.theta[0] ?? 1) : 1
  const sure = field === 0 ? 1e-3 : field
  return [sure, sure * 2, sure / 2, sure * 5, sure / 5]
}

/** Readings of the peaks fitted, read anew at the fit and fitted again until they stay; cheapest first. */
function solveReadings(setup: FitSetup, options: AssignOptions, model: FieldModel): Solved[] {
  const solved: Solved[] = []
  // a diagonalisation for each of the many fields tried would be slow
  const searched = model === 'linear' ? setup : { ...setup, models: setup.models.map(tabulatedModel) }
  for (const reading of likelyReadings(searched, options)) {
    let [assignments, field] = [reading.assignments, reading.fieldTesla]
    for (let round = 0; round < 3; round += 1) {
      const { problem, outcome } = solveFrom(setup, assignments, [field])
      if (!outcome.ok) break
      const { solution } = outcome
      field = solution.theta[0] ?? 0
      const again = readAt(setup, options, field, solution.zeros)
      // a reading of peaks that ends beyond the fields there are is none
      if (Math.abs(field) > options.mostTesla) break
      if (round === 2 || JSON.stringify(again.assignments) === JSON.stringify(assignments)) {
        solved.push({ problem, solution, assignments, cost: again.cost })
        break
      }
      assignments = again.assignments
    }
  }
  return solved.sort((a, b) => a.cost - b.cost)
}

const validityOf = (input: FieldFitInput, fieldTesla: number): LinearLawValidity[] =>
  input.lines.map((line) => {
    const end = ({ twoJ, g, term }: FitLine['lower']): ValidityEnd => ({ twoJ, g, term })
    return linearLawValidity({ kind: line.kind, lower: end(line.lower), upper: end(line.upper), fieldTesla: Math.abs(fieldTesla), tolerance: input.tolerance ?? DEFAULT_TOLERANCE, gS: input.gS ?? G_S })
  })

/** Leave-one-out: the fit without each point, assignments kept. */
function influences(setup: FitSetup, { assignments, solution }: Solved, fieldUnc: number | null): FitResidual['without'][] {
  const field = solution.theta[0] ?? 0
  return setup.measurements.map((_, left) => {
    const kept = setup.measurements.filter((_unused, i) => i !== left)
    if (kept.length < 2) return null
    const smaller = fitSetup(setup.lines, kept, setup.models, setup.scale)
    if (kept.length + priorsOf(smaller) < parametersOf(smaller)) return null
    const { outcome } = solveFrom(smaller, assignments.filter((_unused, i) => i !== left), [field])
    if (!outcome.ok) return null
    const without = outcome.solution.theta[0] ?? 0
    return { fieldTesla: without, change: fieldUnc === null || fieldUnc === 0 ? null : (field - without) / fieldUnc }
  })
}

function report(input: FieldFitInput, model: FieldModel, setup: FitSetup, solved: Solved, others: Solved[], automatic: boolean): DeterminedFit {
  const { problem, solution, assignments } = solved
  const { measurements } = setup
  const stated = measurements[0]?.sigmaInvcm !== null
  const zeros = setup.zeros.length
  const degreesOfFreedom = measurements.length + priorsOf(setup) - parametersOf(setup)
  // without stated deviations the scatter tells them
  const factor = stated ? 1 : degreesOfFreedom > 0 ? solution.chiSquared / degreesOfFreedom : null
  const covariance = factor === null ? null : solution.covariance.map((row) => row.map((value) => value * factor))
  const deviation = (i: number) => (covariance === null ? null : Math.sqrt(Math.max(0, covariance[i]?.[i] ?? 0)))
  const fieldUnc = deviation(zeros)
  const [field = 0, scale = setup.scale.value] = solution.theta
  const budget = budgetOf(setup, solved, field, fieldUnc)
  const known = fieldUnc === null ? null : Math.hypot(...budget.map((row) => row.value ?? 0))
  const without = influences(setup, solved, fieldUnc)
  const validity = validityOf(input, field)
  const alternatives = others.filter((other) => other.cost - solved.cost < ABOUT_AS_GOOD && Math.abs((other.solution.theta[0] ?? 0) - field) > Math.max(3 * (fieldUnc ?? 0), 1e-6 * Math.abs(field)))
  const sigmaOf = (i: number) => measurements[i]?.sigmaInvcm ?? (factor === null ? null : Math.sqrt(factor))
  const componentsOf = (assigned: readonly Assignment[]) => measurements.map((one, i) => (assigned[i] ?? []).flatMap((c) => setup.models[one.line]?.components[c] ?? []))
  const read = componentsOf(assignments)
  return {
    status: 'determined',
    model,
    fieldTesla: field,
    fieldUnc,
    total: { unc: known, expandedUnc: known === null ? null : 2 * known, coverageFactor: 2, complete: known !== null && budget.every((row) => row.status !== 'unknown') },
    scaledUnc: degreesOfFreedom > 0 && fieldUnc !== null ? (stated ? fieldUnc * Math.sqrt(solution.chiSquared / degreesOfFreedom) : fieldUnc) : null,
    budget,
    scale: { value: scale, unc: problem.parameters === 2 ? deviation(zeros + 1) : 0 },
    zeros: setup.zeros.map((name, z) => ({ name, positionInvcm: solution.zeros[z] ?? 0, unc: deviation(z) })),
    parameters: [...setup.zeros, 'field', ...(problem.parameters === 2 ? ['scale'] : [])],
    covariance,
    chiSquared: stated ? solution.chiSquared : null,
    degreesOfFreedom,
    residuals: measurements.map((one, i): FitResidual => {
      const [residual, leverage, sigma] = [solution.residuals[i] ?? 0, solution.leverage[i] ?? 0, sigmaOf(i)]
      return {
        components: read[i] ?? [],
        fittedInvcm: one.positionInvcm - residual,
        residualInvcm: residual,
        standardised: sigma === null || 1 - leverage < 1e-9 ? null : residual / (sigma * Math.sqrt(1 - leverage)),
        leverage,
        without: without[i] ?? null,
      }
    }),
    validity,
    assignedAutomatically: automatic,
    alternatives: alternatives.map((other) => ({ fieldTesla: other.solution.theta[0] ?? 0, cost: other.cost - solved.cost, components: componentsOf(other.assignments) })),
    warnings: warningsOf(model, validity, solution, alternatives.length, stated, degreesOfFreedom),
    iterations: solution.iterations,
  }
}

function budgetOf(setup: FitSetup, { problem, solution, assignments }: Solved, field: number, fieldUnc: number | null): FieldBudgetRow[] {
  const zeros = setup.zeros.length
  const known = (part: FieldBudgetRow['part'], value: number | null): FieldBudgetRow => ({ part, value, status: value === null ? 'unknown' : value === 0 ? 'exact' : 'known' })
  const relative = CONSTANTS.bohrMagnetonInvcm.standardUncertainty / MU_B_OVER_HC_INVCM_PER_T
  const rows = [known('constants', Math.abs(field) * relative)]
  if (problem.parameters === 2 && setup.scale.unc !== null) {
    // what the prior of the scale adds: the field's variance with the scale fitted less that with the scale fixed
    const [ff, fs, ss] = [solution.covariance[zeros]?.[zeros] ?? 0, solution.covariance[zeros]?.[zeros + 1] ?? 0, solution.covariance[zeros + 1]?.[zeros + 1] ?? 1]
    const fixed = Math.max(0, ff - (fs * fs) / ss)
    rows.unshift(known('positions', fieldUnc === null ? null : Math.sqrt(fixed)), known('scale', Math.abs(fs) / Math.sqrt(ss)))
  } else rows.unshift(known('positions', fieldUnc))
  return [...rows, ...systematicBudget(setup, problem, solution, assignments)]
}

function warningsOf(model: FieldModel, validity: LinearLawValidity[], solution: CentredSolution, alternatives: number, stated: boolean, degreesOfFreedom: number): Reason[] {
  const warnings: Reason[] = []
  if (!solution.converged) warnings.push(because('not_converged', 'The fit did not settle within its steps; its result is the best found.'))
  if (model === 'linear' && validity.some((one) => one.positions.status === 'not_valid')) warnings.push(because('linear_not_valid', 'At this field the linear law misplaces components by more than the tolerance; use the intermediate model.'))
  if (model === 'linear' && validity.some((one) => one.positions.status === 'unknown')) warnings.push(because('validity_unknown', 'For a line of this fit it is not known whether the linear law holds at this field.'))
  if (alternatives > 0) warnings.push(because('assignment_ambiguous', 'The peaks can be read otherwise about as well, with another field; see the alternatives, or name components or polarisations.'))
  if (!stated) warnings.push(because('sigma_not_stated', degreesOfFreedom > 0 ? 'No uncertainties of the positions were stated; they are judged by the scatter about the fit.' : 'No uncertainties of the positions were stated and nothing is left over to judge them by, so the field has none.'))
  if (stated && degreesOfFreedom > 0 && solution.chiSquared > degreesOfFreedom + 3 * Math.sqrt(2 * degreesOfFreedom)) warnings.push(because('poor_fit', 'The positions scatter about the fit more than their uncertainties allow.'))
  return warnings
}

const undetermined = (model: FieldModel, ...reasons: Reason[]): UndeterminedFit => ({ status: 'undetermined', model, reasons })

/** The fit in one model, already chosen. */
function fitWith(input: FieldFitInput, model: FieldModel): FieldFit {
  const setup = setupOf(input, model)
  const hints = input.measurements.map((one) => hintOf(one, setup.models[one.line]))
  if (input.measurements.length === 0) return undetermined(model, because('no_positions', 'No position was given.'))
  const automatic = hints.some((hint) => hint.components === null)
  const short: Reason | null =
    input.measurements.length + priorsOf(setup) < parametersOf(setup)
      ? because('too_few_positions', `${input.measurements.length} position${input.measurements.length === 1 ? '' : 's'} cannot fix ${parametersOf(setup)} unknowns: ${setup.zeros.length === 1 ? 'a zero' : `${setup.zeros.length} zeros`}, the field${setup.scale.unc === 0 ? '' : ' and the scale'}.`)
      : null
  if (!automatic) {
    const assignments = hints.map((hint) => hint.components ?? [])
    const { problem, outcome } = solveFrom(setup, assignments, startsOf(input, setup, assignments, model))
    if (!outcome.ok) return undetermined(model, whyOpen(setup, assignments, outcome), ...(short ? [short] : []))
    if (short) return undetermined(model, short)
    return report(input, model, setup, { problem, solution: outcome.solution, assignments, cost: 0 }, [], false)
  }
  if (short) return undetermined(model, short)
  const solved = solveReadings(setup, { hints, visibleQ: input.visibleQ ?? [-1, 0, 1], mostTesla: MOST_TESLA }, model)
  const [best, ...others] = solved
  if (!best) return undetermined(model, because('no_reading', 'No field up to 10 000 T lays the outermost two peaks of a line on two of its components; give at least two peaks of one line, or name the components.'))
  return report(input, model, setup, best, others, true)
}

/**
 * The field (and a zero for each line) from measured positions of components: weighted least squares on centred data, in the linear law as a
 * linear problem, in the intermediate model by Levenberg-Marquardt with analytic derivatives. Components named by hand are kept; the others are
 * assigned automatically. `auto` fits linearly first, and again where the linear law does not hold at the field found. A field below zero is
 * reversed. What the data cannot fix is told with its reason, and is no error.
 */
export function fitField(input: FieldFitInput): FieldFit {
  check(input)
  const { model = 'auto' } = input
  if (model !== 'auto') return fitWith(input, model)
  const linear = fitWith(input, 'linear')
  const complete = ({ term }: FitLine['lower']) => term !== null && missingJ(term).length === 0
  if (!input.lines.every((line) => complete(line.lower) && complete(line.upper))) return linear
  // a poor linear fit may be one far beyond its law that reads the peaks wrongly and so thinks itself valid
  const poor = linear.status === 'undetermined' || linear.warnings.some((warning) => warning.code === 'poor_fit')
  if (!poor && !linear.validity.some((validity) => autoModel(validity) === 'intermediate')) return linear
  const beyond = fitWith(input, 'intermediate')
  return beyond.status === 'undetermined' && linear.status === 'determined' ? linear : beyond
}
