import { G_S } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { because } from '@/lib/atomic/field-fit'
import { fitG, type FittedG as Fitted, type GFitEnd } from '@/lib/atomic/g-fit'
import { linearLawValidity } from '@/lib/atomic/intermediate-validity'
import type { ReadFit } from '@/lib/prediction/field-fits/field'
import type { NamedLevel, ReadLine } from '@/lib/prediction/field-fits/lines'
import { lineValidity, modelValid, tableWarnings, toldLine, toldMeasurement, toldZeros } from '@/lib/prediction/field-fits/told'
import { type Fault, faultsProblem, isProblemCode } from '@/lib/problem'
import { parseField } from '@/lib/units/field'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'
import type { FieldFitAnswer, FittedG } from '@/openapi/schemas/field-fits'

type Warn = (code: string, detail: string) => void

/** The field of the request and its deviation in tesla; what is wrong with them goes to `faults`. */
export function givenField(body: FieldFitRequest, faults: Fault[]): { fieldTesla: number; fieldUnc: number } {
  const read = (value: string | number | null | undefined, pointer: string): number => {
    if (value === null || value === undefined) return 0
    if (typeof value === 'number') return value
    const parsed = parseField(value)
    if (parsed.ok) return parsed.tesla
    faults.push({ pointer, code: parsed.code, detail: parsed.detail })
    return Number.NaN
  }
  const fieldTesla = read(body.field, '/field')
  const fieldUnc = read(body.field_unc, '/field_unc')
  if (fieldTesla === 0 && body.field !== null && body.field !== undefined) faults.push({ pointer: '/field', code: 'field_not_positive', detail: 'Without a field above zero no g can be had from a splitting.' })
  return { fieldTesla, fieldUnc }
}

/** What a fit of g asks beyond a fit of the field: one line, every component named. */
export function gFaults(body: FieldFitRequest, lines: readonly (ReadLine | null)[]): Fault[] {
  const faults: Fault[] = []
  if (body.lines.length > 1) faults.push({ pointer: '/lines', code: 'one_line_only', detail: 'g is fitted to the components of one line; give one.' })
  body.measurements.forEach((one, i) => {
    if ((one.m_lower ?? null) === null || (one.m_upper ?? null) === null) faults.push({ pointer: `/measurements/${i}/m_lower`, code: 'assignment_needed', detail: 'With g unknown every peak is named by m_lower and m_upper: without g there is nothing to find it by.' })
  })
  if (body.model === 'intermediate') faults.push({ pointer: '/model', code: 'value_not_listed', detail: 'g is fitted in the linear law; leave model out, or use linear.' })
  const free = body.free_g ?? 'upper'
  for (const end of ['lower', 'upper'] as const) {
    const line = lines[0]
    if (line && (free === end || free === 'both') && line.fit[end].twoJ === 0) faults.push({ pointer: '/free_g', code: 'g_of_j_zero', detail: `The ${end} level has J = 0 and so no g_J to be fitted.` })
  }
  return faults
}

const nameOf = ({ id, level }: NamedLevel): string => id ?? level.term.symbol

const statusOf = (value: number | null) => (value === null ? 'unknown' : value === 0 ? 'exact' : 'known') as 'unknown' | 'exact' | 'known'

function toldG(fitted: Fitted | null, named: NamedLevel, end: GFitEnd): FittedG | null {
  if (fitted === null) return null
  const known = fitted.unc === null ? null : Math.hypot(...fitted.budget.map((row) => row.value ?? 0))
  return {
    level: nameOf(named),
    g_j: fitted.value,
    g_j_unc: fitted.totalUnc,
    g_j_known_unc: known,
    expanded_unc: known === null ? null : 2 * known,
    statistical_unc: fitted.unc,
    budget: fitted.budget.map(({ part, value }) => ({ part, value, status: statusOf(value) })),
    table_g_j: end.g,
  }
}

/** g_J of one or both levels of a line at a known field, in the linear law. */
export function gAnswer(read: ReadFit, field: { fieldTesla: number; fieldUnc: number }, warn: Warn): FieldFitAnswer {
  const { body, lines, scales, measured, scale } = read
  const line = lines[0] as ReadLine
  const free = body.free_g ?? 'upper'
  const told = { mode: 'positions' as const, model: 'linear' as const, lines: [toldLine(line, scales[0] ?? null, 0)] }
  if (scale.unc === null) {
    return { unknown: 'g', status: 'undetermined', ...told, reasons: [because('scale_and_g', 'A free scale and g change the positions in the same way, so they cannot be told apart: give the scale, or its uncertainty.')] }
  }
  // measured distances are scale x B x g: what is not known of the scale acts as if it were of the field
  const fieldUnc = field.fieldTesla * Math.hypot(field.fieldUnc / field.fieldTesla, scale.unc / scale.value)
  const end = ({ twoJ, g, gUnc }: ReadLine['fit']['lower']): GFitEnd => ({ twoJ, g, gUnc })
  const ends = { lower: end(line.fit.lower), upper: end(line.fit.upper) }
  const fit = gOf(() =>
    fitG({
      ...ends,
      free,
      fieldTesla: field.fieldTesla * scale.value,
      fieldUnc: fieldUnc * scale.value,
      measurements: measured.map(({ positionInvcm, sigmaInvcm, component }) => ({ positionInvcm, sigmaInvcm, twoMLower: component?.twoMLower ?? 0, twoMUpper: component?.twoMUpper ?? 0 })),
    }),
  )
  if (fit.status === 'undetermined') return { unknown: 'g', status: 'undetermined', ...told, reasons: fit.reasons }
  const fitted = (which: 'lower' | 'upper') => ({ ...line.fit[which], g: fit[which]?.value ?? line.fit[which].g })
  const [lower, upper] = [fitted('lower'), fitted('upper')]
  const validity = linearLawValidity({ kind: line.facts.kind, lower, upper, fieldTesla: field.fieldTesla, tolerance: body.tolerance, gS: body.g_s ?? G_S })
  const valid = modelValid('linear', [validity])
  if (valid === false) warn('linear_not_valid', 'At this field the linear law misplaces components by more than the tolerance, and g is fitted in it: the value carries that error.')
  if (valid === null) warn('validity_unknown', 'For this line it is not known whether the linear law holds at this field.')
  for (const { code, detail } of tableWarnings(lines, body, field.fieldTesla).filter((warning) => warning.code === 'hyperfine_ignored')) warn(code, detail)
  if (measured.some((one) => one.sigmaInvcm === null)) warn('sigma_not_stated', 'No uncertainties of the positions were stated; they are judged by the scatter about the fit where anything is left over.')
  return {
    unknown: 'g',
    status: 'determined',
    ...told,
    model_valid: valid,
    field_tesla: field.fieldTesla,
    field_unc_tesla: fieldUnc === 0 ? null : fieldUnc,
    coverage_factor: 2,
    lower: toldG(fit.lower, line.lower, ends.lower),
    upper: toldG(fit.upper, line.upper, ends.upper),
    parameters: ['zero', ...(free === 'both' ? ['g_lower', 'g_upper'] : [`g_${free}`])],
    parameter_units: ['cm-1', ...(free === 'both' ? ['1', '1'] : ['1'])],
    covariance: fit.covariance,
    chi_squared: fit.chiSquared,
    degrees_of_freedom: fit.degreesOfFreedom,
    zeros: toldZeros([{ name: line.fit.zero ?? 'line 1', ...fit.zero }], lines, body.quantity),
    residuals: fit.residualsInvcm.map((residual, i) => {
      const { component } = measured[i] ?? {}
      const [twoMLower, twoMUpper] = [component?.twoMLower ?? 0, component?.twoMUpper ?? 0]
      return {
        ...toldMeasurement(body, lines, measured, i),
        fitted_invcm: (measured[i]?.positionInvcm ?? 0) - residual,
        residual_invcm: residual,
        standardised: fit.standardised[i] ?? null,
        leverage: fit.leverage[i] ?? 0,
        components: [{ m_lower: twoMLower / 2, m_upper: twoMUpper / 2, q: (twoMUpper - twoMLower) / 2 }],
        field_without_tesla: null,
        influence: null,
      }
    }),
    validity: [{ line: 0, transition: line.id, linear_law: lineValidity(line, validity) }],
  }
}

/** Refusals of the physics at their place in the body. */
function gOf<T>(fit: () => T): T {
  try {
    return fit()
  } catch (error) {
    if (error instanceof PhysicsError && isProblemCode(error.code)) throw faultsProblem([{ pointer: error.field === 'free' ? '/free_g' : '/lines/0', code: error.code, detail: error.detail }])
    throw error
  }
}
