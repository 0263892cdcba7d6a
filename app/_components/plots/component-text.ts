import { printFixed } from '@/lib/units/print'
import type { Component } from '@/openapi/schemas/components'
import { halves } from '../number'
import { polarisationName } from './polarisation'
import { signed } from './ruler'

/** What a component is called in a drawing: its two m's, which no other component of the line has. */
export const componentKey = ({ m_lower, m_upper }: Pick<Component, 'm_lower' | 'm_upper'>): string => `${m_lower}:${m_upper}`

export type ShiftUnit = 'lorentz' | 'invcm' | 'ghz' | 'pm'

export const SHIFT_UNITS: Record<ShiftUnit, { label: string; unit: string; axis: string }> = {
  lorentz: { label: 'Lorentz', unit: 'L', axis: 'Shift, Lorentz units' },
  invcm: { label: 'cm⁻¹', unit: 'cm⁻¹', axis: 'Shift' },
  ghz: { label: 'GHz', unit: 'GHz', axis: 'Shift in frequency' },
  pm: { label: 'pm', unit: 'pm', axis: 'Shift in wavelength' },
}

/** The shift of a component in the unit of an axis; null where there is none to tell. */
export function shiftIn(unit: ShiftUnit, component: Component): number | null {
  if (unit === 'lorentz') return component.shift_lorentz
  if (unit === 'invcm') return component.shift_invcm
  return unit === 'ghz' ? component.shift_ghz : component.shift_pm
}

/** The height a component is drawn with: its intensity where an angle is given and known, else its strength. */
export const heightOf = ({ strength, intensity }: Component, thetaDeg: number | null): number =>
  (thetaDeg === null ? strength : (intensity ?? strength)) ?? 0

/** Whether a component has any strength to draw. */
export const isDrawn = ({ strength }: Component): boolean => strength !== null && strength > 0

/** One line of text about a component, for readings and for those who listen. */
export function componentText(component: Component, thetaDeg: number | null): string {
  const { m_lower, m_upper, q, shift_lorentz, shift_invcm, shift_ghz, strength, intensity } = component
  const lorentz = shift_lorentz === null ? '' : `${signed(shift_lorentz, 6)} Lorentz units, `
  const height = strength === null ? 'strength not known' : `strength ${printFixed(strength, 4)}`
  const seen = thetaDeg !== null && intensity !== null ? `, intensity ${printFixed(intensity, 4)}` : ''
  return `${polarisationName(q)}, m ${halves(m_lower)} → ${halves(m_upper)}: ${lorentz}${signed(shift_invcm, 5)} cm⁻¹ (${signed(shift_ghz, 5)} GHz), ${height}${seen}`
}
