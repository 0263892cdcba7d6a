import { intermediateLineModel, type LineModel, linearLineModel } from '@/lib/atomic/field-fit-model'
import { missingJ } from '@/lib/atomic/mixing'
import type { ReadLine } from '@/lib/prediction/field-fits/lines'
import { Problem } from '@/lib/problem'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'

/** Steps of arithmetic, about; a fit of this many takes under a second. */
const MOST_WORK = 5e8
/** Beyond either a fit takes longer than others should wait for: some tens of milliseconds, the refits without each point by the square of their number. */
const LONG_WORK = 1e7
const LONG_MEASUREMENTS = 40
/** Fields that the intermediate model is solved at for a search, between which it is read off cubics. */
const NODES = 150
/** Steps per component for each pair of candidates: Newton's way to the field. */
const PER_PAIR = 200
/** Steps for each peak laid on each component. */
const PER_PLACE = 6
/** Evaluations of the fit from several starts, and of each fit without one point, which begins where that one ended. */
const OF_THE_FIT = { linear: 4, intermediate: 100 }
const PER_POINT = { linear: 4, intermediate: 40 }

/** Arithmetic of diagonalising a term at one field: the cubes of its blocks' sizes, some 30 times. */
function termWork({ term }: ReadLine['fit']['lower']): number {
  if (term === null) return 1
  let work = 0
  const largest = term.twoS + 2 * term.l
  for (let twoM = 0 - largest; twoM <= largest; twoM += 2) work += 30 * term.levels.filter((level) => level.twoJ >= Math.abs(twoM)).length ** 3
  return work
}

const complete = ({ term }: ReadLine['fit']['lower']): boolean => term !== null && missingJ(term).length === 0

/** Whether every term of the fit can be diagonalised. */
export const canDiagonalise = (lines: readonly ReadLine[]): boolean => lines.every(({ fit }) => complete(fit.lower) && complete(fit.upper))

/** What one evaluation of all lines costs. */
const evaluation = (lines: readonly ReadLine[], models: readonly LineModel[], intermediate: boolean): number =>
  lines.reduce((sum, { fit }, i) => {
    const components = models[i]?.components.length ?? 0
    return sum + components + (intermediate ? termWork(fit.lower) + termWork(fit.upper) + 60 * components : 0)
  }, 0)

/** Pairs of components that the outermost peaks of a line can be, the line with most peaks: what automatic assignment tries. */
function pairs(body: FieldFitRequest, models: readonly LineModel[]): { pairs: number; reading: number } {
  const counts = models.map((_, line) => body.measurements.filter((one) => one.line === line).length)
  const lead = counts.indexOf(Math.max(...counts))
  const seen = body.visible_q ?? (body.theta_deg === 0 || body.theta_deg === 180 ? [-1, 1] : [-2, -1, 0, 1, 2])
  const candidates = models[lead]?.components.filter((component) => seen.includes(component.q)).length ?? 0
  // at each pair the peaks of the other lines are laid on their components from two ends
  const reading = models.reduce((sum, model, line) => sum + (line === lead ? 1 : 2 * model.components.length) * (counts[line] ?? 0) * model.components.length, 0)
  return { pairs: candidates * candidates, reading }
}

/**
 * Refuses a fit that would take too long (413 `fit_too_large`), by an estimate from the sizes of terms, lines and measurements, and says
 * whether it is too long for the thread that answers. The linear fit alone is counted where no term can be diagonalised.
 */
export function boundedFit(body: FieldFitRequest, lines: readonly ReadLine[]): { long: boolean } {
  const models = lines.map(({ fit }, i) => linearLineModel(fit, i))
  const intermediate = body.model !== 'linear' && canDiagonalise(lines)
  const one = evaluation(lines, models, intermediate)
  const automatic = body.measurements.some((m) => (m.m_lower ?? null) === null && (m.group ?? null) === null)
  const kind = intermediate ? 'intermediate' : 'linear'
  const tried = automatic ? pairs(body, models) : { pairs: 0, reading: 0 }
  const components = models.reduce((sum, model) => sum + model.components.length, 0)
  const search = tried.pairs * (PER_PLACE * tried.reading + PER_PAIR * components) + (tried.pairs > 0 && intermediate ? NODES * one : 0)
  const work = search + (OF_THE_FIT[kind] + body.measurements.length * PER_POINT[kind]) * one
  if (work <= MOST_WORK) return { long: work > LONG_WORK || body.measurements.length > LONG_MEASUREMENTS }
  const cure = tried.pairs > 0 ? 'Name the components (m_lower with m_upper), or say which q can be seen' : 'Fit fewer lines or positions at once'
  throw new Problem('fit_too_large', `${lines.length} lines and ${body.measurements.length} positions would take too long to fit${tried.pairs > 0 ? ` with ${tried.pairs} pairs of components to try` : ''}. ${cure}, or use model=linear.`, {
    extra: { limit: MOST_WORK, work: Math.round(work) },
  })
}

/** The models that a determined fit used, solved at its field. */
export function modelsAt(lines: readonly ReadLine[], model: 'linear' | 'intermediate', gS: number, fieldTesla: number): LineModel[] {
  return lines.map(({ fit }, i) => {
    const made = model === 'linear' ? linearLineModel(fit, i) : intermediateLineModel(fit, i, gS)
    made.at(fieldTesla)
    return made
  })
}
