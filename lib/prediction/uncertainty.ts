import { CONSTANTS } from '@/lib/atomic/constants'
import { shiftLorentz } from '@/lib/atomic/components'
import type { IntermediateUncertainty } from '@/lib/atomic/intermediate-uncertainty'
import { positionUncertainty, type UncertainEnd } from '@/lib/atomic/uncertainty'
import type { ChosenG } from '@/lib/prediction/g-values'
import type { PhysicalLevel } from '@/lib/prediction/levels'
import type { Component } from '@/openapi/schemas/components'

type Energy = Pick<PhysicalLevel, 'energy_invcm' | 'energy_unc_invcm'>

const endOf = (level: Energy, chosen: ChosenG | null, twoM: number): UncertainEnd => ({
  energyInvcm: level.energy_invcm,
  energyUnc: level.energy_unc_invcm,
  g: chosen?.g ?? null,
  gUnc: chosen?.unc ?? null,
  twoM,
})

/** One standard deviation of a line's wavenumber without field, cm^-1; null where a part is unknown. */
export const positionUnc = (lower: Energy, upper: Energy): number | null =>
  positionUncertainty({ lower: endOf(lower, null, 0), upper: endOf(upper, null, 0), fieldTesla: 0 }).total

export interface ComponentEnd {
  level: Energy
  chosen: ChosenG
  twoM: number
}

/** The uncertainty members of a component: total (null where a part is unknown), known part, and the budget part by part. */
export type UncertaintyTold = Pick<Component, 'wavenumber_unc_invcm' | 'wavenumber_known_unc_invcm' | 'budget'>

export const toldUncertainty = ({ total, known, budget }: Pick<IntermediateUncertainty, 'total' | 'known' | 'budget'>): UncertaintyTold => ({
  wavenumber_unc_invcm: total,
  wavenumber_known_unc_invcm: known,
  budget: budget.map(({ part, value, status }) => ({ part, value_invcm: value, status })),
})

/** Of a component in the linear model: energies, g_J's, field, and mu_B/hc, whose deviation scales the shift. */
export function componentUncertainty(lower: ComponentEnd, upper: ComponentEnd, fieldTesla: number, fieldUnc: number | null): UncertaintyTold {
  const { total, known, budget } = positionUncertainty({
    lower: endOf(lower.level, lower.chosen, lower.twoM),
    upper: endOf(upper.level, upper.chosen, upper.twoM),
    fieldTesla,
    fieldUnc,
  })
  const constants = Math.abs(shiftLorentz(lower.chosen.g, lower.twoM, upper.chosen.g, upper.twoM)) * fieldTesla * CONSTANTS.bohrMagnetonInvcm.standardUncertainty
  return toldUncertainty({
    total: total === null ? null : Math.hypot(total, constants),
    known: Math.hypot(known, constants),
    budget: [...budget, { part: 'constants', value: constants, status: constants === 0 ? 'exact' : 'known' }],
  })
}
