import { C_M_PER_S, E_C, H_J_S } from '@/lib/units/codata'
import { quoted, splitQuantity } from '@/lib/units/number'

export type SpectralQuantity = 'wavelength' | 'wavenumber' | 'energy' | 'frequency'
export type SpectralUnit = 'nm' | 'Å' | 'pm' | 'µm' | 'cm-1' | 'eV' | 'meV' | 'THz' | 'GHz'

interface UnitRow {
  quantity: SpectralQuantity
  name: string
  spellings: readonly string[]
  /** Size in the quantity's base unit here: nm, cm^-1, eV, THz. */
  toBase: number
}

/** Units in which a position in the spectrum can be given. Wavelengths are vacuum wavelengths. */
export const SPECTRAL_UNITS: Record<SpectralUnit, UnitRow> = {
  nm: { quantity: 'wavelength', name: 'nanometre', spellings: ['nm', 'nanometre', 'nanometer'], toBase: 1 },
  Å: { quantity: 'wavelength', name: 'angstrom', spellings: ['Å', 'Å', 'A', 'AA', 'angstrom', 'Angstrom', 'ångström', 'Ångström'], toBase: 0.1 },
  pm: { quantity: 'wavelength', name: 'picometre', spellings: ['pm', 'picometre', 'picometer'], toBase: 1e-3 },
  µm: { quantity: 'wavelength', name: 'micrometre', spellings: ['µm', 'μm', 'um', 'micrometre', 'micrometer', 'micron'], toBase: 1e3 },
  'cm-1': { quantity: 'wavenumber', name: 'inverse centimetre', spellings: ['cm-1', 'cm^-1', 'cm⁻¹', 'cm−1', '1/cm', '/cm', 'invcm', 'kayser'], toBase: 1 },
  eV: { quantity: 'energy', name: 'electronvolt', spellings: ['eV', 'ev', 'electronvolt'], toBase: 1 },
  meV: { quantity: 'energy', name: 'millielectronvolt', spellings: ['meV'], toBase: 1e-3 },
  THz: { quantity: 'frequency', name: 'terahertz', spellings: ['THz', 'terahertz'], toBase: 1 },
  GHz: { quantity: 'frequency', name: 'gigahertz', spellings: ['GHz', 'gigahertz'], toBase: 1e-3 },
}

export const SPECTRAL_UNIT_NAMES = Object.keys(SPECTRAL_UNITS) as SpectralUnit[]

/** eV of one cm^-1: h c / e with all three exact. */
const EV_OF_INVCM = (H_J_S * C_M_PER_S * 100) / E_C
/** THz of one cm^-1: c. */
const THZ_OF_INVCM = C_M_PER_S / 1e10

/** Vacuum wavenumber (cm^-1) of a vacuum wavelength (nm). */
export const wavenumberOfVacuumNm = (nm: number): number => 1e7 / nm
/** Vacuum wavelength (nm) of a wavenumber (cm^-1). */
export const vacuumNmOfWavenumber = (invcm: number): number => 1e7 / invcm
export const thzOfWavenumber = (invcm: number): number => invcm * THZ_OF_INVCM
export const wavenumberOfThz = (thz: number): number => thz / THZ_OF_INVCM
export const evOfWavenumber = (invcm: number): number => invcm * EV_OF_INVCM
export const wavenumberOfEv = (ev: number): number => ev / EV_OF_INVCM

/** Wavenumber in cm^-1 of a value in any unit here; wavelengths are taken in vacuum. Exact chains of h, c, e. */
export function toWavenumber(value: number, unit: SpectralUnit): number {
  const row = SPECTRAL_UNITS[unit]
  // a division keeps decimal inputs such as 5889.95 Å on the nearest double, a product with 0.1 does not
  const base = row.toBase < 1 ? value / Math.round(1 / row.toBase) : value * row.toBase
  if (row.quantity === 'wavelength') return wavenumberOfVacuumNm(base)
  if (row.quantity === 'energy') return wavenumberOfEv(base)
  if (row.quantity === 'frequency') return wavenumberOfThz(base)
  return base
}

/** The inverse of `toWavenumber`. */
export function fromWavenumber(invcm: number, unit: SpectralUnit): number {
  const row = SPECTRAL_UNITS[unit]
  const base =
    row.quantity === 'wavelength'
      ? vacuumNmOfWavenumber(invcm)
      : row.quantity === 'energy'
        ? evOfWavenumber(invcm)
        : row.quantity === 'frequency'
          ? thzOfWavenumber(invcm)
          : invcm
  return row.toBase < 1 ? base * Math.round(1 / row.toBase) : base / row.toBase
}

export type ParsedSpectral =
  | { ok: true; quantity: SpectralQuantity; value: number; unit: SpectralUnit; wavenumberInvcm: number; ambiguous?: true }
  | { ok: false; code: string; detail: string }

const KNOWN = 'nm, Å (or A), pm, µm (or um), cm-1, eV, meV, THz, GHz'

export function readSpectralUnit(text: string): SpectralUnit | null {
  for (const unit of SPECTRAL_UNIT_NAMES) if (SPECTRAL_UNITS[unit].spellings.includes(text)) return unit
  return null
}

/**
 * Reads a place in the spectrum: `589.0nm`, `5889.95 Å`, `16973.366 cm-1`, `2.1 eV`, `508.8 THz`.
 * A bare number is taken as nm and marked `ambiguous`, since it may as well be a wavenumber.
 * Errors: `spectral_malformed`, `spectral_unit_unknown`, `spectral_not_positive`.
 */
export function parseSpectral(text: string): ParsedSpectral {
  const split = splitQuantity(text)
  if (!split) return { ok: false, code: 'spectral_malformed', detail: `${quoted(text)} is not a place in the spectrum: write a number and a unit, such as 589.0nm or 16973cm-1 (units: ${KNOWN}).` }
  const unit = split.unitText === '' ? 'nm' : readSpectralUnit(split.unitText)
  if (!unit) return { ok: false, code: 'spectral_unit_unknown', detail: `${quoted(split.unitText)} is not a known unit here; known units: ${KNOWN}.` }
  if (!split.finite || !(split.value > 0)) return { ok: false, code: 'spectral_not_positive', detail: `${quoted(text)} must be a finite number above 0.` }
  const wavenumberInvcm = toWavenumber(split.value, unit)
  if (!Number.isFinite(wavenumberInvcm) || wavenumberInvcm <= 0) return { ok: false, code: 'spectral_not_positive', detail: `${quoted(text)} is outside the numbers that can be computed with.` }
  const answer = { ok: true as const, quantity: SPECTRAL_UNITS[unit].quantity, value: split.value, unit, wavenumberInvcm }
  return split.unitText === '' ? { ...answer, ambiguous: true } : answer
}
