import { airWavelength } from '@/lib/atomic/air'
import type { FieldFitMeasurement } from '@/lib/atomic/field-fit'
import type { FitComponent } from '@/lib/atomic/field-fit-model'
import type { LinearLawValidity } from '@/lib/atomic/intermediate-validity'
import { predictComponents } from '@/lib/prediction/components'
import { type NamedLevel, type ReadLine, zeroTold } from '@/lib/prediction/field-fits/lines'
import type { LineScale } from '@/lib/prediction/field-fits/measurements'
import { toldValidity } from '@/lib/prediction/validity'
import type { FieldFitRequest } from '@/openapi/operations/field-fits'
import type { DeterminedField, FitLineTold, FitResidual } from '@/openapi/schemas/field-fits'
import type { Validity } from '@/openapi/schemas/validity'
import type { Level } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'

/** A line as the answer tells it. */
export const toldLine = ({ id, name, facts }: ReadLine, scale: LineScale | null, line: number): FitLineTold => ({
  line,
  transition: id,
  kind: facts.kind,
  name,
  wavenumber_invcm: facts.wavenumber_invcm,
  wavelength_vac_nm: facts.wavelength_vac_nm,
  wavelength_air_nm: airWavelength(facts.wavelength_vac_nm).nm,
  medium: scale?.medium ?? null,
  reference_invcm: scale?.medium === null ? null : (scale?.referenceInvcm ?? null),
})

export const toldComponent = ({ twoMLower, twoMUpper, q }: FitComponent) => ({ m_lower: twoMLower / 2, m_upper: twoMUpper / 2, q })

/** A level of no table, where a sentence names one of the table by its configuration. */
const inPlace = ({ level }: NamedLevel): Level =>
  ({ ...level, id: '', species: '', configuration: '', energy_literal: null, energy_source: '', energy_evidence: 'computed', line_checked: false, repeat_index: null, alternative_name: null, note: null, status: 'active', revision: 0 }) as Level

const NO_MEMBERS: TransitionDetail['terms']['lower'] = { s: null, l: null, levels: [], missing_j: [] }

/** Validity of the linear law as the answers of components tell it; levels of no table have no names. */
export function lineValidity(line: ReadLine, validity: LinearLawValidity): Validity {
  if (line.detail !== null) return toldValidity(line.detail, validity)
  const told = toldValidity({ kind: line.facts.kind, lower: inPlace(line.lower), upper: inPlace(line.upper), terms: { lower: NO_MEMBERS, upper: NO_MEMBERS } }, validity)
  return { ...told, levels: { lower: { ...told.levels.lower, level: null }, upper: { ...told.levels.upper, level: null } } }
}

/** Whether the model used holds for positions: the linear law by its validity; the intermediate one wherever the terms are whole. */
export function modelValid(model: 'linear' | 'intermediate', validity: readonly LinearLawValidity[]): boolean | null {
  if (model === 'intermediate') return true
  if (validity.some((one) => one.positions.status === 'not_valid')) return false
  return validity.some((one) => one.positions.status === 'unknown') ? null : true
}

/** What is to be known of a table's levels at the field: nuclei left out, impure terms, g's without uncertainty. */
export function tableWarnings(lines: readonly ReadLine[], body: Pick<FieldFitRequest, 'g_values' | 'g_s' | 'tolerance'>, fieldTesla: number): { code: string; detail: string }[] {
  const kept = new Set(['hyperfine_ignored', 'term_not_pure', 'g_unc_unknown', 'g_s_not_applied'])
  return lines.flatMap(({ detail }) => {
    if (detail === null) return []
    const { warnings } = predictComponents(detail, { fieldTesla: Math.abs(fieldTesla), fieldUncTesla: null, model: 'linear', gValues: body.g_values, gS: body.g_s ?? null, thetaDeg: null, medium: 'conventional', tolerance: body.tolerance })
    return warnings.filter((warning) => kept.has(warning.code)).map(({ code, detail: text }) => ({ code, detail: text.replace('; hyperfine=true computes it', '') }))
  })
}

/** The part of a residual that is the measurement itself. */
export const toldMeasurement = (body: FieldFitRequest, lines: readonly ReadLine[], measured: readonly FieldFitMeasurement[], i: number) => {
  const [given, one] = [body.measurements[i], measured[i]]
  const line = one?.line ?? 0
  return {
    measurement: i,
    line,
    transition: lines[line]?.id ?? null,
    position: given?.position ?? 0,
    position_unc: given?.position_unc ?? null,
    position_invcm: one?.positionInvcm ?? 0,
    position_unc_invcm: one?.sigmaInvcm ?? null,
    assigned: one?.component !== undefined || one?.group !== undefined ? 'by_hand' : 'automatic',
  } satisfies Partial<FitResidual>
}

/** Zeros with their lines, and how far the first of them lies from the table. */
export function toldZeros(zeros: readonly { name: string; positionInvcm: number; unc: number | null }[], lines: readonly ReadLine[], quantity: FieldFitRequest['quantity']): DeterminedField['zeros'] {
  return zeros.map(({ name, positionInvcm, unc }) => {
    const own = lines.flatMap((line, i) => ((line.fit.zero ?? `line ${i + 1}`) === name ? [i] : []))
    const first = lines[own[0] ?? 0]
    return {
      name: zeroTold(name),
      lines: own,
      position_invcm: positionInvcm,
      position_unc_invcm: unc,
      table_offset_invcm: quantity === 'positions' && first ? positionInvcm - first.fit.centreInvcm : null,
    }
  })
}
