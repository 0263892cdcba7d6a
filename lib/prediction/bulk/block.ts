import type { TermLevels } from '@/lib/atomic/mixing'
import type { Kind } from '@/lib/atomic/rules'
import type { PredictionQuantity } from '@/openapi/schemas/predictions'

/**
 * What a bulk computation is made from: plain data that goes to a worker as it is. Everything that can be wrong has been found before,
 * so a job computes and refuses nothing.
 */

export interface LineEndGiven {
  twoJ: number
  energyInvcm: number
  /** In force; null for J = 0. */
  g: number | null
  /** All known levels of the level's LS term with the g in force; null where it has no S and L. */
  term: TermLevels | null
}

export interface LineGiven {
  form: 'line'
  transition: string | null
  kind: Kind
  lower: LineEndGiven
  upper: LineEndGiven
}

export interface MultipletGiven {
  form: 'multiplet'
  transition: string | null
  kind: Kind
  lower: TermLevels
  upper: TermLevels
}

export type BlockGiven = LineGiven | MultipletGiven

/** Fields one by one, or evenly spaced, in the unit given (`perTesla` of it make one tesla). */
export type FieldGiven = { values: number[]; perTesla: number } | { start: number; stop: number; count: number; perTesla: number }

export const fieldCount = (field: FieldGiven): number => ('values' in field ? field.values.length : field.count)

/** The fields in tesla. Evenly spaced ones: start + i ((stop - start)/(count - 1)), the last one stop itself, then into tesla. */
export function fieldsTesla(field: FieldGiven): Float64Array {
  const { perTesla } = field
  if ('values' in field) return Float64Array.from(field.values, (value) => value / perTesla)
  const { start, stop, count } = field
  const step = count > 1 ? (stop - start) / (count - 1) : 0
  const fields = new Float64Array(count)
  for (let i = 0; i < count; i += 1) fields[i] = (start + i * step) / perTesla
  if (count > 1) fields[count - 1] = stop / perTesla
  return fields
}

export const largestField = (field: FieldGiven): number => ('values' in field ? Math.max(...chunkMaxima(field.values)) : Math.max(field.start, field.count > 1 ? field.stop : field.start)) / field.perTesla

/** Maxima of pieces: a call may have only so many arguments. */
function chunkMaxima(values: number[]): number[] {
  const maxima: number[] = []
  for (let from = 0; from < values.length; from += 10_000) maxima.push(Math.max(...values.slice(from, from + 10_000)))
  return maxima
}

export interface PredictionOptions {
  model: 'auto' | 'linear' | 'intermediate'
  gS: number | null
  thetaDeg: number | null
  derivatives: boolean
  strengths: boolean
  quantity: PredictionQuantity
  tolerance: number
}

export interface PredictionJob {
  task: 'predictions'
  format: 'json' | 'ndjson' | 'arrow'
  blocks: BlockGiven[]
  field: FieldGiven
  /** The field as the request wrote it, for the metadata of Arrow. */
  fieldText: string
  options: PredictionOptions
  /** `meta` of the answer as JSON text. */
  meta: string
}
