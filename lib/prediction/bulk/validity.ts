import { autoModel, type FieldModel, linearLawLevelValidity, type LinearLawValidity, linearLawValidity } from '@/lib/atomic/intermediate-validity'
import { missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { remembering } from '@/lib/atomic/remembering'
import { G_S } from '@/lib/atomic/constants'
import type { BlockGiven, PredictionOptions } from '@/lib/prediction/bulk/block'
import { linePairs } from '@/lib/prediction/bulk/places'
import type { PredictionValidity } from '@/openapi/schemas/predictions'

type Aspect = LinearLawValidity['positions']

/** Of a multiplet's lines the worst speaks: unknown before not valid before valid, then the larger error, and the smallest limit. */
function worst(aspects: readonly Aspect[], tolerance: number): Aspect {
  const rank = { valid: 0, not_valid: 1, unknown: 2 }
  const sorted = [...aspects].sort((a, b) => rank[b.status] - rank[a.status] || (b.relativeError ?? 0) - (a.relativeError ?? 0))
  const [first] = sorted
  if (first === undefined) return { status: 'unknown', errorInvcm: null, relativeError: null, tolerance, fieldLimitTesla: null, reason: null }
  const largest = (name: 'errorInvcm' | 'relativeError') => aspects.reduce<number | null>((most, aspect) => (aspect[name] === null ? most : Math.max(most ?? 0, aspect[name])), null)
  const limits = aspects.flatMap((aspect) => (aspect.fieldLimitTesla === null ? [] : [aspect.fieldLimitTesla]))
  return { ...first, errorInvcm: largest('errorInvcm'), relativeError: largest('relativeError'), fieldLimitTesla: limits.length === 0 ? null : Math.min(...limits) }
}

function linesOf(block: BlockGiven): { lower: { twoJ: number; g: number | null; term: TermLevels | null }; upper: { twoJ: number; g: number | null; term: TermLevels | null } }[] {
  if (block.form === 'line') return [{ lower: block.lower, upper: block.upper }]
  const end = (term: TermLevels, twoJ: number) => ({ twoJ, g: term.levels.find((level) => level.twoJ === twoJ)?.g ?? null, term })
  return linePairs(block).map(({ twoJLower, twoJUpper }) => ({ lower: end(block.lower, twoJLower), upper: end(block.upper, twoJUpper) }))
}

const told = (aspect: Aspect) => ({ status: aspect.status, relative_error: aspect.relativeError, tolerance: aspect.tolerance, field_limit_tesla: aspect.fieldLimitTesla })

const complete = (term: TermLevels | null): boolean => term !== null && missingJ(term).length === 0

/** Whether both terms of a block can be diagonalised. */
export const canDiagonalise = (block: BlockGiven): boolean => (block.form === 'line' ? complete(block.lower.term) && complete(block.upper.term) : complete(block.lower) && complete(block.upper))

export interface Decision {
  model: FieldModel
  validity: PredictionValidity
}

/** Characters, about, of what is remembered: a key holds both terms. */
const DECISIONS_REMEMBERED = 2e7

/** A fit asks the same blocks at the same fields again and again, and the field limits cost most. Empty until all lines are judged. */
const decisions = remembering<{ decision: Decision | null }>(DECISIONS_REMEMBERED, (_, key) => 500 + key.length)

/**
 * The model of a block and the error of the linear law at the largest field asked, which decides it under `auto`. In steps, three a line: the
 * lines of a large multiplet take seconds together, and whoever shares the thread has a turn in between.
 */
export function* decideSteps(block: BlockGiven, fieldTesla: number, { model, tolerance, gS }: PredictionOptions): Generator<null, Decision> {
  const remembered = decisions(`${model}|${tolerance}|${gS}|${fieldTesla}|${block.form}|${block.kind}|${JSON.stringify([block.lower, block.upper])}`, () => ({ decision: null }))
  if (remembered.decision !== null) return remembered.decision
  const lines: LinearLawValidity[] = []
  const factors = { tolerance, gS: gS ?? G_S }
  for (const { lower, upper } of linesOf(block)) {
    // the limits of both levels are remembered, so that the line finds them
    for (const end of [lower, upper]) {
      yield null
      linearLawLevelValidity(end, fieldTesla, factors)
    }
    yield null
    lines.push(linearLawValidity({ kind: block.kind, lower, upper, fieldTesla, ...factors }))
  }
  const positions = worst(lines.map((line) => line.positions), tolerance)
  const strengths = worst(lines.map((line) => line.strengths), tolerance)
  const blend = worst(lines.map((line) => line.blend), tolerance)
  const chosen = model === 'auto' ? (canDiagonalise(block) ? autoModel({ positions, strengths }) : 'linear') : model
  const validity = {
    field_tesla: fieldTesla,
    positions: { ...told(positions), error_invcm: positions.errorInvcm },
    strengths: told(strengths),
    blend: { ...told(blend), error_invcm: blend.errorInvcm },
    method: lines[0]?.method ?? 'No line joins these terms',
  }
  remembered.decision = { model: chosen, validity }
  return remembered.decision
}
