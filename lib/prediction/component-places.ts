import { AIR_FROM_NM, airWavelength, CONVENTIONAL_AIR_TO_NM, DEFAULT_AIR_FORMULA, refractivity } from '@/lib/atomic/air'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { plusZero } from '@/lib/units/number'
import { thzOfWavenumber, vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { Medium } from '@/openapi/schemas/common'
import type { Component, Components } from '@/openapi/schemas/components'
import type { TransitionDetail } from '@/openapi/schemas/transition'

type Line = Pick<TransitionDetail, 'wavenumber_invcm' | 'wavelength_vac_nm'>

/** Where the line lies, without field. */
export function centreOf(line: Line): Components['centre'] {
  const air = airWavelength(line.wavelength_vac_nm)
  return {
    wavenumber_invcm: line.wavenumber_invcm,
    wavelength_vac_nm: line.wavelength_vac_nm,
    wavelength_air_nm: air.nm,
    wavelength_air_status: air.nm === null ? 'not_applicable' : 'ok',
    frequency_thz: thzOfWavenumber(line.wavenumber_invcm),
  }
}

/** The medium that shifts in wavelength are told in, judged on the centre; air that does not apply gives way to vacuum. */
function mediumAt(vacuumNm: number, medium: Medium): 'air' | 'vacuum' {
  if (medium === 'vacuum' || vacuumNm < AIR_FROM_NM) return 'vacuum'
  return medium === 'air' || vacuumNm <= CONVENTIONAL_AIR_TO_NM ? 'air' : 'vacuum'
}

/**
 * Wavelength minus that of the centre, in pm, without the difference of two nearly equal numbers:
 * in vacuum -lambda_0 shift / sigma; in air (d n_0 - lambda_0 (n - n_0)) / (n n_0), with d the shift in vacuum.
 */
function shiftPm(centreNm: number, shiftInvcm: number, wavenumber: number, medium: 'air' | 'vacuum', r0: number): number {
  const vacuum = (-centreNm * shiftInvcm) / wavenumber
  if (medium === 'vacuum') return plusZero(1000 * vacuum)
  const r = refractivity(DEFAULT_AIR_FORMULA, centreNm + vacuum)
  return plusZero((1000 * (vacuum * (1 + r0) - centreNm * (r - r0))) / ((1 + r) * (1 + r0)))
}

type Place = Pick<Component, 'shift_invcm' | 'shift_ghz' | 'shift_mhz' | 'shift_pm' | 'wavenumber_invcm' | 'wavelength_vac_nm' | 'wavelength_air_nm' | 'frequency_thz'>

/** Makes the function that tells a shift from the line's centre, in cm^-1, on every scale. */
export function placer(line: Line, asked: Medium): (shiftInvcm: number) => Place {
  const medium = mediumAt(line.wavelength_vac_nm, asked)
  const r0 = medium === 'air' ? refractivity(DEFAULT_AIR_FORMULA, line.wavelength_vac_nm) : 0
  return (shiftInvcm) => {
    const wavenumber = line.wavenumber_invcm + shiftInvcm
    // where the field has brought the upper sublevel to or below the lower one there is no wavelength to tell
    const vacuum = wavenumber > 0 ? vacuumNmOfWavenumber(wavenumber) : null
    const ghz = shiftInvcm * GHZ_PER_INVCM
    return {
      shift_invcm: shiftInvcm,
      shift_ghz: ghz,
      shift_mhz: ghz * 1000,
      shift_pm: vacuum === null ? null : shiftPm(line.wavelength_vac_nm, shiftInvcm, wavenumber, medium, r0),
      wavenumber_invcm: wavenumber,
      wavelength_vac_nm: vacuum,
      wavelength_air_nm: vacuum === null ? null : airWavelength(vacuum).nm,
      frequency_thz: thzOfWavenumber(wavenumber),
    }
  }
}
