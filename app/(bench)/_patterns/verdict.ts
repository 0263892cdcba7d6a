import type { ValidityStatus } from '@/openapi/schemas/validity'
import { significant } from '@/app/_components/number'
import type { NumberedLine } from './overlay'
import type { PatternLine } from './use-lines'

export interface Verdict {
  model: string
  tone: ValidityStatus
  sentence: string
  /** Smallest field at which the linear law of some line passes its tolerance. */
  limitTesla: number | null
}

const percent = (value: number): string => `${significant(value * 100, 2)}\u202f%`

/** The judgement of the linear law over all lines: the line for which it errs most speaks. */
export function verdictOf(ready: readonly NumberedLine[], lines: readonly PatternLine[]): Verdict {
  const models = new Set(ready.map(({ components }) => components.model))
  const intermediate = models.has('intermediate')
  const model = intermediate ? (models.size > 1 ? 'intermediate, and linear where a term is not whole' : 'intermediate (diagonalised within each term)') : 'linear (weak field)'
  const judged = ready.map(({ index, components: { validity } }) => ({
    index,
    positions: validity.positions,
    strengths: validity.strengths,
    error: Math.max(validity.positions.relative_error ?? 0, validity.strengths.relative_error ?? 0),
  }))
  const limits = judged.flatMap(({ positions, strengths }) => [positions.field_limit_tesla, strengths.field_limit_tesla].filter((limit) => limit !== null))
  const limitTesla = limits.length === 0 ? null : Math.min(...limits)
  const worst = judged.reduce<(typeof judged)[number] | null>((most, one) => (most === null || one.error > most.error ? one : most), null)
  const failing = judged.some(({ positions, strengths }) => positions.status === 'not_valid' || strengths.status === 'not_valid')
  const unknown = judged.filter(({ positions, strengths }) => positions.status === 'unknown' || strengths.status === 'unknown').map(({ index }) => String(index + 1))
  const name = worst === null ? '' : `${worst.index + 1} ${lines[worst.index]?.name ?? ''}`
  const off = worst === null ? '' : `positions off by ${percent(worst.positions.relative_error ?? 0)}, strengths by ${percent(worst.strengths.relative_error ?? 0)}`
  const told = unknown.length === 0 ? '' : ` Of ${unknown.length === 1 ? 'line' : 'lines'} ${unknown.join(', ')} it cannot be told, since a term is not whole.`
  const said = worst === null ? '' : worst.error === 0 ? 'Linear is exact within the terms for every line.' : unknown.length === ready.length ? `Linear errs by no less than this, for ${name}: ${off}.` : failing ? `Linear ${intermediate ? 'would err' : 'errs'} most for ${name}: ${off}.` : `Linear holds for every line; it errs most for ${name}: ${off}.`
  return { model, tone: failing && !intermediate ? 'not_valid' : unknown.length > 0 ? 'unknown' : 'valid', sentence: `${said}${told}`.trim(), limitTesla }
}
