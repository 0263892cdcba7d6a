import { printFixed } from '@/lib/units/print'
import type { Component } from '@/openapi/schemas/components'
import { halves } from '../number'
import { polarisationName } from './polarisation'
import { signed } from './ruler'

/** What a drawing needs of a component, with or without nuclear spin. */
export type DrawnComponent = Pick<Component, 'm_lower' | 'm_upper' | 'q' | 'polarisation' | 'shift_lorentz' | 'shift_invcm' | 'shift_ghz' | 'shift_mhz' | 'shift_pm' | 'strength' | 'intensity'> & {
  /** What tells it from the others where the two m's do not. */
  key?: string
  /** The two sublevels in words, where they are not those of two m's. */
  ends?: string
}

/** What a component is called in a drawing: its two m's, which no other component of a line without nuclear spin has. */
export const componentKey = ({ m_lower, m_upper, key }: Pick<DrawnComponent, 'm_lower' | 'm_upper' | 'key'>): string => key ?? `${m_lower}:${m_upper}`

export const endsText = ({ m_lower, m_upper, ends }: Pick<DrawnComponent, 'm_lower' | 'm_upper' | 'ends'>): string => ends ?? `${halves(m_lower)} → ${halves(m_upper)}`

export type ShiftUnit = 'lorentz' | 'invcm' | 'ghz' | 'mhz' | 'pm'

export const SHIFT_UNITS: Record<ShiftUnit, { label: string; unit: string; axis: string }> = {
  lorentz: { label: 'Lorentz', unit: 'L', axis: 'Shift, Lorentz units' },
  invcm: { label: 'cm⁻¹', unit: 'cm⁻¹', axis: 'Shift' },
  ghz: { label: 'GHz', unit: 'GHz', axis: 'Shift in frequency' },
  mhz: { label: 'MHz', unit: 'MHz', axis: 'Detuning' },
  pm: { label: 'pm', unit: 'pm', axis: 'Shift in wavelength' },
}

/** The shift of a component in the unit of an axis; null where there is none to tell. */
export function shiftIn(unit: ShiftUnit, component: DrawnComponent): number | null {
  if (unit === 'lorentz') return component.shift_lorentz
  if (unit === 'invcm') return component.shift_invcm
  if (unit === 'mhz') return component.shift_mhz
  return unit === 'ghz' ? component.shift_ghz : component.shift_pm
}

/** The height a component is drawn with: its intensity where an angle is given and known, else its strength. */
export const heightOf = ({ strength, intensity }: DrawnComponent, thetaDeg: number | null): number =>
  (thetaDeg === null ? strength : (intensity ?? strength)) ?? 0

/** Whether a component has any strength to draw. */
export const isDrawn = ({ strength }: DrawnComponent): boolean => strength !== null && strength > 0

/** One line of text about a component, for readings and for those who listen. */
export function componentText(component: DrawnComponent, thetaDeg: number | null): string {
  const { ends, q, shift_lorentz, shift_invcm, shift_ghz, strength, intensity } = component
  const lorentz = shift_lorentz === null ? '' : `${signed(shift_lorentz, 6)} Lorentz units, `
  const height = strength === null ? 'strength not known' : `strength ${printFixed(strength, 4)}`
  const seen = thetaDeg !== null && intensity !== null ? `, intensity ${printFixed(intensity, 4)}` : ''
  if (ends !== undefined) return `${polarisationName(q)}, ${ends}: ${signed(component.shift_mhz, 8)} MHz (${signed(shift_invcm, 6)} cm⁻¹), ${height}${seen}`
  return `${polarisationName(q)}, m ${endsText(component)}: ${lorentz}${signed(shift_invcm, 5)} cm⁻¹ (${signed(shift_ghz, 5)} GHz), ${height}${seen}`
}
