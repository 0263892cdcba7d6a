import { GHZ_PER_INVCM } from '@/lib/units/codata'

export type SeparationUnit = 'cm-1' | 'mcm-1' | 'GHz' | 'MHz' | 'pm' | 'nm'

interface SeparationRow {
  name: string
  spellings: readonly string[]
  /** Whether it is a difference of vacuum wavelengths, which needs a reference wavelength; else a difference of wavenumbers. */
  wavelength: boolean
}

/** Units of small separations in the spectrum. 10^-3 cm^-1 is what interferometry calls a millikayser. */
export const SEPARATION_UNITS: Record<SeparationUnit, SeparationRow> = {
  'cm-1': { name: 'inverse centimetre', spellings: ['cm-1', 'cm^-1', 'cm⁻¹', '1/cm', 'invcm', 'kayser', 'K'], wavelength: false },
  'mcm-1': { name: 'thousandth of an inverse centimetre', spellings: ['mcm-1', '1e-3cm-1', '1e-3 cm-1', '10^-3 cm^-1', '10⁻³ cm⁻¹', 'mK', 'millikayser'], wavelength: false },
  GHz: { name: 'gigahertz', spellings: ['GHz', 'gigahertz'], wavelength: false },
  MHz: { name: 'megahertz', spellings: ['MHz', 'megahertz'], wavelength: false },
  pm: { name: 'picometre', spellings: ['pm', 'picometre', 'picometer'], wavelength: true },
  nm: { name: 'nanometre', spellings: ['nm', 'nanometre', 'nanometer'], wavelength: true },
}

export const SEPARATION_UNIT_NAMES = Object.keys(SEPARATION_UNITS) as SeparationUnit[]

/** The unit a spelling means, case-sensitive; null when unknown. */
export function readSeparationUnit(text: string): SeparationUnit | null {
  for (const unit of SEPARATION_UNIT_NAMES) if (SEPARATION_UNITS[unit].spellings.includes(text.trim())) return unit
  return null
}

/** How many of a unit make one cm^-1, for units of wavenumber and frequency. */
const PER_INVCM: Record<'cm-1' | 'mcm-1' | 'GHz' | 'MHz', number> = { 'cm-1': 1, 'mcm-1': 1000, GHz: GHZ_PER_INVCM, MHz: GHZ_PER_INVCM * 1000 }

/**
 * A separation from a reference wavenumber in cm^-1. Differences of wavelength are turned exactly, not by the first derivative:
 * 1e7/(l0 + dl) - 1e7/l0 = -1e7 dl/(l0 (l0 + dl)), so that to the red is below zero.
 */
export function separationToInvcm(value: number, unit: SeparationUnit, referenceInvcm: number): number {
  if (unit !== 'pm' && unit !== 'nm') return value / PER_INVCM[unit]
  const nm = unit === 'pm' ? value / 1000 : value
  return (-nm * referenceInvcm * referenceInvcm) / (1e7 + nm * referenceInvcm) + 0
}

/** The inverse of `separationToInvcm`. */
export function separationFromInvcm(invcm: number, unit: SeparationUnit, referenceInvcm: number): number {
  if (unit !== 'pm' && unit !== 'nm') return invcm * PER_INVCM[unit]
  const nm = (-1e7 * invcm) / (referenceInvcm * (referenceInvcm + invcm)) + 0
  return unit === 'pm' ? nm * 1000 : nm
}

/** The size in cm^-1 of a small deviation given in the unit, at a place `positionInvcm`: by the derivative, always positive. */
export function deviationToInvcm(deviation: number, unit: SeparationUnit, positionInvcm: number): number {
  if (unit !== 'pm' && unit !== 'nm') return Math.abs(deviation) / PER_INVCM[unit]
  return (Math.abs(unit === 'pm' ? deviation / 1000 : deviation) * positionInvcm * positionInvcm) / 1e7
}
