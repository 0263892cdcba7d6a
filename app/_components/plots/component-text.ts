import type { Component } from '@/lib/atomic/components'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { formatHalfUnicode } from '@/lib/atomic/half'
import { printFixed } from '@/lib/units/print'
import { polarisationName } from './polarisation'
import { signed } from './ruler'

/** What a component is called in a drawing: its two m's, which no other component of the line has. */
export const componentKey = ({ twoMLower, twoMUpper }: Pick<Component, 'twoMLower' | 'twoMUpper'>): string => `${twoMLower}:${twoMUpper}`

export type ShiftUnit = 'lorentz' | 'invcm' | 'ghz' | 'pm'

export const SHIFT_UNITS: Record<ShiftUnit, { label: string; unit: string; axis: string }> = {
  lorentz: { label: 'Lorentz', unit: 'L', axis: 'Shift, Lorentz units' },
  invcm: { label: 'cm⁻¹', unit: 'cm⁻¹', axis: 'Shift' },
  ghz: { label: 'GHz', unit: 'GHz', axis: 'Shift in frequency' },
  pm: { label: 'pm', unit: 'pm', axis: 'Shift in vacuum wavelength' },
}

/**
 * The shift of a component in the unit of an axis. In picometres it is the vacuum wavelength minus that of the centre,
 * -1e10 d / (s (s + d)) for a shift of d at s, both in cm^-1: the exact difference, written so that no digits are lost.
 */
export function shiftIn(unit: ShiftUnit, component: Pick<Component, 'shiftLorentz' | 'shiftInvcm'>, centreInvcm: number): number {
  const { shiftInvcm, shiftLorentz } = component
  if (unit === 'lorentz') return shiftLorentz
  if (unit === 'invcm') return shiftInvcm
  if (unit === 'ghz') return shiftInvcm * GHZ_PER_INVCM
  const shift = (-1e10 * shiftInvcm) / (centreInvcm * (centreInvcm + shiftInvcm))
  return shift === 0 ? 0 : shift
}

/** The height a component is drawn with: its intensity where an angle is given and known, else its strength. */
export const heightOf = (component: Pick<Component, 'strength' | 'intensity'>, thetaDeg: number | null): number =>
  thetaDeg === null ? component.strength : (component.intensity ?? component.strength)

/** One line of text about a component, for readings and for those who listen. */
export function componentText(component: Component, thetaDeg: number | null): string {
  const { twoMLower, twoMUpper, q, shiftLorentz, shiftInvcm, strength, intensity } = component
  const seen = thetaDeg !== null && intensity !== null ? `, intensity ${printFixed(intensity, 4)}` : ''
  return (
    `${polarisationName(q)}, m ${formatHalfUnicode(twoMLower)} → ${formatHalfUnicode(twoMUpper)}: ${signed(shiftLorentz, 6)} Lorentz units, ` +
    `${signed(shiftInvcm, 5)} cm⁻¹ (${signed(shiftInvcm * GHZ_PER_INVCM, 5)} GHz), strength ${printFixed(strength, 4)}${seen}`
  )
}
