import type { FieldUnit } from '@/lib/units/field'
import { fieldIn } from '@/lib/units/field'
import type { DeterminedField, FitPart } from '@/openapi/schemas/field-fits'
import { fixed, significant, withUncertainty } from '@/app/_components/number'

export const PART_NAME: Record<FitPart | 'field' | 'g_held', string> = {
  positions: 'Measured positions',
  scale: 'Scale of the measurement',
  g_lower: 'g of lower levels',
  g_upper: 'g of upper levels',
  energy_lower: 'Energies of lower levels',
  energy_upper: 'Energies of upper levels',
  constants: 'Constants (μB/hc)',
  field: 'Field',
  g_held: 'g of the level held',
}

export const MODEL_NAME = { linear: 'linear law (weak field)', intermediate: 'intermediate, diagonalised within the terms' } as const

/** `0.8004(33) T`: the field with its known uncertainty in the last digits. */
export function fieldText(tesla: number, unc: number | null, unit: FieldUnit): string {
  const value = fieldIn(tesla, unit)
  const printed = unc === null ? null : withUncertainty(value, fieldIn(unc, unit))
  return `${printed ?? significant(value, 6)}\u202f${unit}`
}

/** A deviation with two digits. */
export const uncText = (tesla: number, unit: FieldUnit): string => {
  const value = fieldIn(tesla, unit)
  const digits = value > 0 ? Math.max(0, 1 - Math.floor(Math.log10(value))) : 0
  return `${digits > 6 ? significant(value, 2) : fixed(value, digits)}\u202f${unit}`
}

/** Which model was used and whether it holds, in a sentence. */
export function modelSentence(answer: Pick<DeterminedField, 'model' | 'model_valid' | 'validity'>): string {
  if (answer.model === 'intermediate') return 'Fitted in the intermediate model: each term diagonalised in the field, which holds at any field within LS coupling.'
  const errors = answer.validity.flatMap(({ linear_law: { positions } }) => (positions.relative_error === null ? [] : [positions.relative_error]))
  const worst = errors.length === 0 ? '' : ` (positions off by up to ${significant(100 * Math.max(...errors), 2)} % of the largest shift)`
  if (answer.model_valid === null) return `Fitted in the linear law; whether it holds at this field is not known, since a term is not complete in the table${worst === '' ? '' : worst.replace('(positions', '(at least: positions')}.`
  return answer.model_valid ? `Fitted in the linear law, which holds at this field${worst}.` : `Fitted in the linear law, which does not hold at this field${worst}: use the intermediate model.`
}
