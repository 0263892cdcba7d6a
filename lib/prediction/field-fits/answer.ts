import type { Snapshot } from '@/lib/catalogue/shape'
import { fieldAnswer, type ReadFit, visibleQ } from '@/lib/prediction/field-fits/field'
import { gAnswer, gFaults, givenField } from '@/lib/prediction/field-fits/g'
import { fitInPool } from '@/lib/prediction/field-fits/job'
import { readLines, type ReadLine } from '@/lib/prediction/field-fits/lines'
import { componentFaults, readEtalon, readMeasurements, readScale, scalesOf } from '@/lib/prediction/field-fits/measurements'
import { residualTable } from '@/lib/prediction/field-fits/table'
import { boundedFit, canDiagonalise } from '@/lib/prediction/field-fits/work'
import type { Asking } from '@/lib/prediction/answers/bulk'
import { boundGivenTerms } from '@/lib/prediction/term-work'
import { fitField } from '@/lib/atomic/field-fit'
import { linearLineModel } from '@/lib/atomic/field-fit-model'
import { missingJ } from '@/lib/atomic/mixing'
import { AIR } from '@/lib/prediction/conventions'
import { type Fault, faultsProblem } from '@/lib/problem'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'

type Warn = (code: string, detail: string) => void

const CONVENTIONS = {
  q: 'q = m_upper - m_lower, for absorption and emission alike: q = 0 pi, q = +1 sigma+, q = -1 sigma-.',
  field: 'Below zero: reversed against the direction that the assignment was made for. Without polarisations or named components the sign is not told, and is taken as positive.',
  fit: 'Weighted least squares, weights 1/sigma^2: position = zero + scale x (offset of the line among those of its zero + shift at the field). Without stated deviations all weigh the same and the scatter tells them.',
  covariance: 'From the stated deviations, not rescaled by chi-squared; in the order of parameters.',
  uncertainty: 'Budget parts are one standard deviation of the field each and add in squares; level energies and g_J are independent, a level in several lines counts once. Expanded: two standard deviations.',
  influence: 'Field with the point minus field without it, over the standard deviation from the positions.',
  air: AIR,
} as const

/** Levels that keep a term from being diagonalised, by name. */
function incompleteFaults(lines: readonly ReadLine[]): Fault[] {
  return lines.flatMap((line, i) =>
    (['lower', 'upper'] as const).flatMap((end): Fault[] => {
      const { term } = line.fit[end]
      if (term === null) return [{ pointer: `/lines/${i}`, code: 'term_incomplete', detail: `The ${end} level of ${line.name} has no S and L in its coupling, so its term cannot be diagonalised; use model=linear or auto.` }]
      const missing = missingJ(term)
      if (missing.length === 0) return []
      return [{ pointer: `/lines/${i}`, code: 'term_incomplete', detail: `The term of the ${end} level of ${line.name} lacks J = ${missing.map((twoJ) => twoJ / 2).join(', ')}; give it in ${end}_others of an inline line, or use model=linear or auto.` }]
    }),
  )
}

/** Reads a request whole; refuses with everything that is wrong with it. */
function read(snapshot: Snapshot, body: FieldFitRequest): ReadFit & { field: ReturnType<typeof givenField> } {
  const faults: Fault[] = []
  const lines = readLines(snapshot, body, faults)
  const scales = scalesOf(body, lines, faults)
  const etalon = readEtalon(body, faults)
  const measured = readMeasurements(body, lines, scales, etalon, faults)
  faults.push(...componentFaults(body, lines.map((line, i) => (line === null ? null : linearLineModel(line.fit, i).components))))
  const field = body.unknown === 'g' ? givenField(body, faults) : { fieldTesla: 0, fieldUnc: 0 }
  if (body.unknown === 'g') faults.push(...gFaults(body, lines))
  const whole = lines.flatMap((line) => (line === null ? [] : [line]))
  if (body.unknown === 'field' && body.model === 'intermediate' && !canDiagonalise(whole)) faults.push(...incompleteFaults(whole))
  if (faults.length > 0) throw faultsProblem(faults)
  return { body, lines: whole, scales, measured, scale: readScale(body, etalon), field }
}

/** Peaks named by a polarisation that is not seen: the two cannot both be so. */
function warnOfUnseen(body: FieldFitRequest, warn: Warn): void {
  const seen = visibleQ(body)
  if (seen === null) return
  const unseen = body.measurements.flatMap(({ m_lower: lower, m_upper: upper, group, q }, i) => {
    const named = typeof lower === 'number' && typeof upper === 'number' ? upper - lower : (group ?? q ?? null)
    if (named === null) return []
    return (named === 'sigma' ? [-1, 1] : [named]).some((one) => seen.includes(one)) ? [] : [i]
  })
  if (unseen.length === 0) return
  const why = body.visible_q ? 'visible_q does not name' : 'is not seen along the field (theta_deg)'
  warn('polarisation_not_seen', `Measurements ${unseen.join(', ')} (counted from 0) are named by a q that ${why}: check the names, or ${body.visible_q ? 'visible_q' : 'theta_deg'}.`)
}

/**
 * `POST /field-fits`: a field (or g) from measured positions, or why they do not fix it. What is long goes to the pool; without `asking`
 * all is done here.
 */
export async function fieldFitAnswer(snapshot: Snapshot, body: FieldFitRequest, warn: Warn, asking?: Asking) {
  const fit = read(snapshot, body)
  const long = body.unknown === 'field' && boundedFit(body, fit.lines).long
  boundGivenTerms(fit.lines.flatMap(({ detail, facts, fit: { lower, upper } }) => (detail === null && lower.term && upper.term ? [{ kind: facts.kind, lower: lower.term, upper: upper.term }] : [])), 'fit_too_large')
  warnOfUnseen(body, warn)
  const data = body.unknown === 'g' ? gAnswer(fit, fit.field, warn) : await fieldAnswer(fit, (input) => (long && asking ? fitInPool(asking.pool(), asking.caller, input, asking.signal) : fitField(input)), warn)
  return {
    data,
    meta: { model: data.model, g_values: body.g_values, conventions: CONVENTIONS },
    table: () => residualTable(data.status === 'determined' ? data.residuals : []),
  }
}
