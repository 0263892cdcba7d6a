import { AIR_FROM_NM, airToVac, CONVENTIONAL_AIR_TO_NM, conventionalWavelength, vacToAir } from '@/lib/atomic/air'
import { thzOfWavenumber, vacuumNmOfWavenumber, wavenumberOfThz, wavenumberOfVacuumNm } from '@/lib/units/spectral'
import type { Medium } from '@/openapi/schemas/common'

/** A stretch of the spectrum in the terms it was asked in. Bounds are included; null leaves that side open. */
export type WindowAsked =
  | { readonly scale: 'wavelength'; readonly minNm: number | null; readonly maxNm: number | null; readonly medium: Medium }
  | { readonly scale: 'wavenumber'; readonly minInvcm: number | null; readonly maxInvcm: number | null }
  | { readonly scale: 'frequency'; readonly minThz: number | null; readonly maxThz: number | null }

/** `in`, `out`, or a line that the medium asked for gives no wavelength to. */
export type WindowVerdict = 'in' | 'out' | 'no_air_wavelength'

/** The same as bounds on the wavenumber that enclose it, and the exact test on each line's own printed number. */
export interface SpectralWindow {
  readonly minInvcm: number
  readonly maxInvcm: number
  readonly verdict: (wavenumberInvcm: number) => WindowVerdict
  /** Between these (both left out) every wavenumber is `in`, so that bulk search need not compute a wavelength for each pair. */
  readonly sureMinInvcm: number
  readonly sureMaxInvcm: number
  /** Tells windows apart that have the same bounds but another scale or medium. */
  readonly key: string
}

/** Enough to hold the rounding of a conversion there and back. */
const SLACK = 1e-9

export const WHOLE_SPECTRUM: SpectralWindow = { minInvcm: 0, maxInvcm: Number.POSITIVE_INFINITY, verdict: () => 'in', sureMinInvcm: Number.NEGATIVE_INFINITY, sureMaxInvcm: Number.POSITIVE_INFINITY, key: 'whole' }

const between = (value: number, min: number | null, max: number | null): boolean => (min === null || value >= min) && (max === null || value <= max)

/** Vacuum wavelength that surely lies at or below (above) every line whose wavelength in the medium is at least (most) `nm`. */
function vacuumBound(nm: number, medium: Medium, side: 'min' | 'max'): number {
  if (medium === 'vacuum' || nm <= 0) return nm
  const clearOfVacuum = nm > AIR_FROM_NM + 1 && (medium === 'air' || nm < CONVENTIONAL_AIR_TO_NM - 1)
  if (clearOfVacuum) return airToVac(nm)
  // near 200 and 2000 nm the two scales overlap or leave a gap: both readings are kept
  const asAir = nm >= AIR_FROM_NM - 1 ? airToVac(Math.max(nm, AIR_FROM_NM - 1)) : nm
  return side === 'min' ? Math.min(nm, asAir) : Math.max(nm, asAir)
}

function wavelengthVerdict(minNm: number | null, maxNm: number | null, medium: Medium): (invcm: number) => WindowVerdict {
  const inside = (nm: number): WindowVerdict => (between(nm, minNm, maxNm) ? 'in' : 'out')
  if (medium === 'vacuum') return (invcm) => inside(vacuumNmOfWavenumber(invcm))
  if (medium === 'conventional') return (invcm) => inside(conventionalWavelength(vacuumNmOfWavenumber(invcm)).nm)
  return (invcm) => {
    const vacuumNm = vacuumNmOfWavenumber(invcm)
    if (vacuumNm >= AIR_FROM_NM) return inside(vacToAir(vacuumNm))
    return between(vacuumNm, minNm, maxNm) ? 'no_air_wavelength' : 'out'
  }
}

/**
 * Turns a window into bounds on the vacuum wavenumber. `conventional`: air from 200 to 2000 nm, judged on the vacuum value,
 * vacuum outside. In `air`, a line below 200 nm has no wavelength: it is told apart where its vacuum wavelength lies in the window.
 */
export function spectralWindow(asked: WindowAsked | null): SpectralWindow {
  if (asked === null) return WHOLE_SPECTRUM
  const bounds = boundsOf(asked)
  // where the bounds follow the scale monotonically, whatever is clear of them by the slack is inside
  const sure = asked.scale !== 'wavelength' || isMonotonic(asked)
  return {
    ...bounds,
    sureMinInvcm: sure ? bounds.minInvcm * (1 + 3 * SLACK) : Number.POSITIVE_INFINITY,
    sureMaxInvcm: sure ? bounds.maxInvcm * (1 - 3 * SLACK) : Number.NEGATIVE_INFINITY,
    key: JSON.stringify(asked),
  }
}

/** A wavelength window on one side of every change of medium: bounds as wavenumbers are then exact but for rounding. */
const isMonotonic = ({ minNm, maxNm, medium }: Extract<WindowAsked, { scale: 'wavelength' }>): boolean =>
  medium === 'vacuum' || (minNm !== null && maxNm !== null && minNm > AIR_FROM_NM + 1 && (medium === 'air' || maxNm < CONVENTIONAL_AIR_TO_NM - 1))

function boundsOf(asked: WindowAsked): Pick<SpectralWindow, 'minInvcm' | 'maxInvcm' | 'verdict'> {
  if (asked.scale === 'wavenumber') {
    const { minInvcm, maxInvcm } = asked
    return { minInvcm: minInvcm ?? 0, maxInvcm: maxInvcm ?? Number.POSITIVE_INFINITY, verdict: (invcm) => (between(invcm, minInvcm, maxInvcm) ? 'in' : 'out') }
  }
  if (asked.scale === 'frequency') {
    const { minThz, maxThz } = asked
    return {
      minInvcm: minThz === null ? 0 : wavenumberOfThz(minThz) * (1 - SLACK),
      maxInvcm: maxThz === null ? Number.POSITIVE_INFINITY : wavenumberOfThz(maxThz) * (1 + SLACK),
      verdict: (invcm) => (between(thzOfWavenumber(invcm), minThz, maxThz) ? 'in' : 'out'),
    }
  }
  const { minNm, maxNm, medium } = asked
  const lowNm = minNm === null ? 0 : vacuumBound(minNm, medium, 'min')
  const highNm = maxNm === null ? Number.POSITIVE_INFINITY : vacuumBound(maxNm, medium, 'max')
  return {
    minInvcm: highNm === Number.POSITIVE_INFINITY ? 0 : highNm === 0 ? Number.POSITIVE_INFINITY : wavenumberOfVacuumNm(highNm) * (1 - SLACK),
    maxInvcm: lowNm === 0 ? Number.POSITIVE_INFINITY : wavenumberOfVacuumNm(lowNm) * (1 + SLACK),
    verdict: wavelengthVerdict(minNm, maxNm, medium),
  }
}

