import { G_S } from '@/lib/atomic/constants'
import { because, type DeterminedFit, type FieldFitInput, type FieldFit, type FieldFitMeasurement, type Reason } from '@/lib/atomic/field-fit'
import type { Scale } from '@/lib/atomic/field-fit-problem'
import { type ReadLine, zeroTold } from '@/lib/prediction/field-fits/lines'
import type { LineScale } from '@/lib/prediction/field-fits/measurements'
import { lineValidity, modelValid, tableWarnings, toldComponent, toldLine, toldMeasurement, toldZeros } from '@/lib/prediction/field-fits/told'
import { modelsAt } from '@/lib/prediction/field-fits/work'
import { FIELD_MAX_TESLA } from '@/lib/units/field'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'
import type { DeterminedField, FieldFitAnswer } from '@/openapi/schemas/field-fits'

type Warn = (code: string, detail: string) => void

/** Everything read from a request. */
export interface ReadFit {
  body: FieldFitRequest
  lines: readonly ReadLine[]
  scales: readonly (LineScale | null)[]
  measured: readonly FieldFitMeasurement[]
  scale: Scale
}

/** A fitted zero this far from the table's line, as a share of its wavenumber, looks like another unit or another line. */
const FAR_FROM_LINE = 1e-3

export const visibleQ = ({ visible_q, theta_deg }: FieldFitRequest): readonly number[] | null => visible_q ?? (theta_deg === 0 || theta_deg === 180 ? [-1, 1] : null)

function residualsOf({ body, lines, measured }: ReadFit, fit: DeterminedFit): DeterminedField['residuals'] {
  return fit.residuals.map((residual, i) => ({
    ...toldMeasurement(body, lines, measured, i),
    fitted_invcm: residual.fittedInvcm,
    residual_invcm: residual.residualInvcm,
    standardised: residual.standardised,
    leverage: residual.leverage,
    components: residual.components.map(toldComponent),
    field_without_tesla: residual.without?.fieldTesla ?? null,
    influence: residual.without?.change ?? null,
  }))
}

/** Components at the fitted field on the scale of the measurement: zero + scale x (offset of the line from the first of its zero + shift). */
function patternOf({ lines, body }: ReadFit, fit: DeterminedFit): DeterminedField['pattern'] {
  const models = modelsAt(lines, fit.model, body.g_s ?? G_S, fit.fieldTesla)
  return lines.flatMap(({ fit: line }, i) => {
    const name = line.zero ?? `line ${i + 1}`
    const zero = fit.zeros.find((one) => one.name === name)
    const model = models[i]
    if (!zero || !model) return []
    const first = line.zero === undefined ? line : (lines.find((other) => other.fit.zero === line.zero)?.fit ?? line)
    return model.components.flatMap((component, c) => {
      const strength = model.strengths[c] ?? 0
      if (!(strength > 1e-6)) return []
      return [{ line: i, ...toldComponent(component), position_invcm: zero.positionInvcm + fit.scale.value * (line.centreInvcm - first.centreInvcm + (model.shifts[c] ?? 0)), strength }]
    })
  })
}

function determined(read: ReadFit, fit: DeterminedFit): DeterminedField {
  const { body, lines, scales, scale } = read
  const { total } = fit
  return {
    unknown: 'field',
    status: 'determined',
    mode: 'positions',
    model: fit.model,
    lines: lines.map((line, i) => toldLine(line, scales[i] ?? null, i)),
    model_valid: modelValid(fit.model, fit.validity),
    field_tesla: fit.fieldTesla,
    field_unc_tesla: total.complete ? total.unc : null,
    field_known_unc_tesla: total.unc,
    expanded_unc_tesla: total.expandedUnc,
    coverage_factor: 2,
    uncertainty_complete: total.complete,
    statistical_unc_tesla: fit.fieldUnc,
    scaled_unc_tesla: fit.scaledUnc,
    budget: fit.budget.map(({ part, value, status }) => ({ part, value_tesla: value, status })),
    parameters: fit.parameters.map(zeroTold),
    parameter_units: fit.parameters.map((_, i) => (i < fit.zeros.length ? 'cm-1' : i === fit.zeros.length ? 'T' : '1')),
    covariance: fit.covariance,
    chi_squared: fit.chiSquared,
    degrees_of_freedom: fit.degreesOfFreedom,
    zeros: toldZeros(fit.zeros, lines, body.quantity),
    scale: { ...fit.scale, status: scale.unc === null ? 'free' : scale.unc === 0 ? 'exact' : 'uncertain' },
    residuals: residualsOf(read, fit),
    pattern: patternOf(read, fit),
    validity: lines.flatMap((line, i) => {
      const validity = fit.validity[i]
      return validity === undefined ? [] : [{ line: i, transition: line.id, linear_law: lineValidity(line, validity) }]
    }),
    alternatives: fit.alternatives.map(({ fieldTesla, cost, components }) => ({ field_tesla: fieldTesla, cost_more: cost, components: components.map((peak) => peak.map(toldComponent)) })),
  }
}

function warnOfUnits({ lines }: ReadFit, answer: DeterminedField, warn: Warn): void {
  for (const zero of answer.zeros) {
    const line = lines[zero.lines[0] ?? 0]
    if (zero.table_offset_invcm !== null && line && Math.abs(zero.table_offset_invcm) > FAR_FROM_LINE * line.facts.wavenumber_invcm) {
      warn('far_from_line', `The positions given for ${line.name} lie ${Math.abs(zero.table_offset_invcm).toPrecision(3)} cm^-1 from where the table has the line: check the unit, the medium and the line.`)
    }
  }
}

/** Why a field fitted is none: it is no number, or one beyond what is computed here. */
const outOfRange = (fieldTesla: number): Reason =>
  Number.isFinite(fieldTesla)
    ? because('field_too_large', `The positions fit best at ${fieldTesla.toPrecision(6)} T, beyond the ${FIELD_MAX_TESLA} T that is computed here: check the unit of the positions, and which components the peaks are.`)
    : because('not_converged', 'The fit ran away from all numbers; check the uncertainties and the unit.')

/** One field from the positions of all lines, fitted where `fitted` does it. */
export async function fieldAnswer(read: ReadFit, fitted: (input: FieldFitInput) => FieldFit | Promise<FieldFit>, warn: Warn): Promise<FieldFitAnswer> {
  const { body, lines, scales, measured, scale } = read
  const seen = visibleQ(body)
  const input: FieldFitInput = {
    lines: lines.map((line) => line.fit),
    measurements: measured,
    model: body.model,
    tolerance: body.tolerance,
    scale,
    ...(body.g_s === null || body.g_s === undefined ? {} : { gS: body.g_s }),
    ...(seen === null ? {} : { visibleQ: seen }),
  }
  const fit = await fitted(input)
  if (fit.status === 'undetermined' || !(Math.abs(fit.fieldTesla) <= FIELD_MAX_TESLA)) {
    const reasons = fit.status === 'undetermined' ? fit.reasons : [outOfRange(fit.fieldTesla)]
    return { unknown: 'field', status: 'undetermined', mode: 'positions', model: fit.model, lines: lines.map((line, i) => toldLine(line, scales[i] ?? null, i)), reasons }
  }
  for (const { code, detail } of fit.warnings) warn(code, detail)
  for (const { code, detail } of tableWarnings(lines, body, fit.fieldTesla)) warn(code, detail)
  const answer = determined(read, fit)
  if (!answer.uncertainty_complete && answer.field_known_unc_tesla !== null) {
    const parts = answer.budget.filter((row) => row.status === 'unknown').map((row) => row.part)
    warn('uncertainty_incomplete', `Not known, and so not in the uncertainty: ${parts.join(', ')}.`)
  }
  warnOfUnits(read, answer, warn)
  return answer
}
