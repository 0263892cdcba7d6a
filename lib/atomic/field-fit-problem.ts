import { centre, type CentredProblem, type CentredSolution } from '@/lib/atomic/centred-fit'
import type { FitLine, LineModel, Sensitivity } from '@/lib/atomic/field-fit-model'

export interface FitMeasurement {
  /** Index into the lines. */
  line: number
  /** cm^-1, on a scale with a free zero for each line (or group of lines). */
  positionInvcm: number
  /** One standard deviation; null for all where it is not known. */
  sigmaInvcm: number | null
}

/** The components of its line that a measured peak is made of, as indices into the line's model; several where they are not resolved. */
export type Assignment = number[]

/** The scale of the measured positions: measured = zero + scale x (true offset). */
export interface Scale {
  value: number
  /** 0: exact; null: not known, fitted freely. */
  unc: number | null
}

export interface FitSetup {
  lines: readonly FitLine[]
  measurements: readonly FitMeasurement[]
  models: readonly LineModel[]
  scale: Scale
  /** Names of the zeros, and which each line has. */
  zeros: string[]
  zeroOfLine: number[]
  /** Offset of each line from the first one with the same zero, cm^-1. */
  offsets: number[]
}

export function fitSetup(lines: readonly FitLine[], measurements: readonly FitMeasurement[], models: readonly LineModel[], scale: Scale): FitSetup {
  const names = lines.map((line, i) => line.zero ?? `line ${i + 1}`)
  const used = new Set(measurements.map((one) => names[one.line] ?? ''))
  const zeros = [...new Set(names)].filter((name) => used.has(name))
  const offsets = lines.map((line, i) => (line.zero === undefined ? 0 : line.centreInvcm - (lines[names.indexOf(names[i] ?? '')]?.centreInvcm ?? 0)))
  return { lines, measurements, models, scale, zeros, zeroOfLine: names.map((name) => zeros.indexOf(name)), offsets }
}

interface Peak {
  shift: number
  slope: number
}

/** Place of a peak of one or more components: the mean by strength, whose slope counts how the strengths change too. */
export function peakOf(model: LineModel, components: Assignment): Peak {
  const [first = 0] = components
  if (components.length <= 1) return { shift: model.shifts[first] ?? 0, slope: model.slopes[first] ?? 0 }
  let [weight, sum, weightSlope, sumSlope] = [0, 0, 0, 0]
  for (const c of components) {
    const [s, ds] = [model.strengths[c] ?? 0, model.strengthSlopes[c] ?? 0]
    weight += s
    weightSlope += ds
    sum += s * (model.shifts[c] ?? 0)
    sumSlope += s * (model.slopes[c] ?? 0) + ds * (model.shifts[c] ?? 0)
  }
  if (weight === 0) return { shift: model.shifts[first] ?? 0, slope: model.slopes[first] ?? 0 }
  return { shift: sum / weight, slope: (sumSlope - (sum / weight) * weightSlope) / weight }
}

/** Index of the scale among the parameters; the field is 0. */
export const SCALE = 1

/** The field (and the scale, unless exact) as a centred least-squares problem with given assignments. */
export function fieldProblem(setup: FitSetup, assignments: readonly Assignment[]): CentredProblem {
  const { measurements, models, scale, zeroOfLine, offsets } = setup
  const fitsScale = scale.unc !== 0
  return {
    measured: Float64Array.from(measurements, (one) => one.positionInvcm),
    weights: Float64Array.from(measurements, (one) => (one.sigmaInvcm === null ? 1 : 1 / one.sigmaInvcm ** 2)),
    zeroOf: Int32Array.from(measurements, (one) => zeroOfLine[one.line] ?? 0),
    zeros: setup.zeros.length,
    parameters: fitsScale ? 2 : 1,
    priors: fitsScale && scale.unc !== null ? [{ parameter: SCALE, value: scale.value, unc: scale.unc }] : [],
    model([field = 0, fitted = scale.value], values, derivatives) {
      for (const model of models) model.at(field)
      measurements.forEach(({ line }, i) => {
        const model = models[line]
        if (!model) return
        const { shift, slope } = peakOf(model, assignments[i] ?? [])
        const offset = (offsets[line] ?? 0) + shift
        values[i] = fitted * offset
        const [byField, byScale] = derivatives
        if (byField) byField[i] = fitted * slope
        if (byScale) byScale[i] = offset
      })
    },
  }
}

export interface FieldBudgetRow {
  part: 'positions' | 'scale' | Sensitivity['part'] | 'constants'
  /** One standard deviation of the field from this part, T; null when unknown. */
  value: number | null
  status: 'known' | 'unknown' | 'exact'
}

/** Moves smaller than this share of the statistical deviation's unit do not make an unknown quantity count. */
const NO_MOVE = 1e-12

/** d(field) for d(quantity) = 1: minus C A^T W d(model)/d(quantity), centred as the data are. */
function movedField(problem: CentredProblem, solution: CentredSolution, perUnit: Float64Array): number {
  const moved = Float64Array.from(perUnit)
  centre(problem, moved)
  const zeros = problem.zeros
  let field = 0
  solution.centred.forEach((column, p) => {
    let projection = 0
    for (let i = 0; i < moved.length; i += 1) projection += (problem.weights[i] as number) * (column[i] as number) * (moved[i] as number)
    field -= (solution.covariance[zeros]?.[zeros + p] ?? 0) * projection
  })
  return field
}

/** Quantities of the same key (one level in several lines) act together; parts are sums of squares over keys. */
export function systematicBudget(setup: FitSetup, problem: CentredProblem, solution: CentredSolution, assignments: readonly Assignment[]): FieldBudgetRow[] {
  const [field = 0, scale = setup.scale.value] = solution.theta
  const byKey = new Map<string, { part: Sensitivity['part']; unc: number | null; perUnit: Float64Array }>()
  setup.lines.forEach((_, line) => {
    const model = setup.models[line]
    if (!model) return
    model.at(field)
    for (const { part, key, unc, values } of model.sensitivities(field)) {
      const kind = part.startsWith('g') ? 'g' : 'energy'
      const entry = byKey.get(`${kind} ${key}`) ?? { part, unc, perUnit: new Float64Array(setup.measurements.length) }
      byKey.set(`${kind} ${key}`, entry)
      setup.measurements.forEach((one, i) => {
        if (one.line !== line) return
        const components = assignments[i] ?? []
        const weight = components.reduce((sum, c) => sum + (model.strengths[c] ?? 0), 0)
        const mean = components.reduce((sum, c) => sum + (weight > 0 ? (model.strengths[c] ?? 0) / weight : 1 / components.length) * (values[c] ?? 0), 0)
        entry.perUnit[i] = (entry.perUnit[i] ?? 0) + scale * mean
      })
    }
  })
  const rows = new Map<Sensitivity['part'], number | null>()
  for (const { part, unc, perUnit } of byKey.values()) {
    const moved = movedField(problem, solution, perUnit)
    const before = rows.get(part)
    if (before === null) continue
    const counts = Math.abs(moved) > NO_MOVE
    if (unc === null && counts) rows.set(part, null)
    else rows.set(part, Math.hypot(before ?? 0, moved * (unc ?? 0)))
  }
  return [...rows].map(([part, value]) => ({ part, value, status: value === null ? 'unknown' : value === 0 ? 'exact' : 'known' }))
}
