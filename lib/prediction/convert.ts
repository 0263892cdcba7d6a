import { AIR_FORMULAS, AIR_FROM_NM, airToVac, airWavelength } from '@/lib/atomic/air'
import { PhysicsError } from '@/lib/atomic/errors'
import { evOfWavenumber, thzOfWavenumber, vacuumNmOfWavenumber, wavenumberOfEv, wavenumberOfThz, wavenumberOfVacuumNm } from '@/lib/units/spectral'
import type { AirFormula } from '@/openapi/schemas/common'
import type { Conversion, SpectralScale } from '@/openapi/schemas/computed'

/** Vacuum wavelength in nm of a value on any scale; an air wavelength below 200 nm (vacuum) is refused, no formula holding there. */
function vacuumNm(value: number, from: SpectralScale, formula: AirFormula): number {
  switch (from) {
    case 'vacuum_nm':
      return value
    case 'air_nm': {
      // n is within 4e-4 of 1, and below 190 nm no formula is asked, for its poles lie there
      const vacuum = value < 190 ? value : airToVac(value, formula)
      if (vacuum < AIR_FROM_NM) {
        throw new PhysicsError('air_not_applicable', `Air wavelengths are given from ${AIR_FROM_NM} nm (vacuum) up, and ${value} nm in air lies below; give a vacuum wavelength.`, 'value')
      }
      return vacuum
    }
    case 'wavenumber_invcm':
      return vacuumNmOfWavenumber(value)
    case 'frequency_thz':
      return vacuumNmOfWavenumber(wavenumberOfThz(value))
    case 'energy_ev':
      return vacuumNmOfWavenumber(wavenumberOfEv(value))
  }
}

function wavenumber(value: number, from: SpectralScale, vacuum: number): number {
  if (from === 'wavenumber_invcm') return value
  if (from === 'frequency_thz') return wavenumberOfThz(value)
  return from === 'energy_ev' ? wavenumberOfEv(value) : wavenumberOfVacuumNm(vacuum)
}

/**
 * One position on every scale: vacuum and air wavelength (nm), wavenumber (cm^-1), frequency (THz), photon energy (eV), by exact chains of
 * h, c, e and a named dispersion formula. The scale given keeps its number to the bit. Air is null, not applicable, below 200 nm.
 */
export function convert(value: number, from: SpectralScale, to: SpectralScale, formula: AirFormula): { conversion: Conversion; extrapolated: boolean } {
  const vacuum = vacuumNm(value, from, formula)
  const sigma = wavenumber(value, from, vacuum)
  const air = from === 'air_nm' ? { nm: value, extrapolated: airWavelength(vacuum, formula).extrapolated } : airWavelength(vacuum, formula)
  const frequency = from === 'frequency_thz' ? value : thzOfWavenumber(sigma)
  const energy = from === 'energy_ev' ? value : evOfWavenumber(sigma)
  const scales: Record<SpectralScale, number | null> = { vacuum_nm: vacuum, air_nm: air.nm, wavenumber_invcm: sigma, frequency_thz: frequency, energy_ev: energy }
  return {
    extrapolated: air.extrapolated,
    conversion: {
      value,
      from,
      to,
      formula,
      result: scales[to],
      result_status: scales[to] === null ? 'not_applicable' : 'ok',
      wavenumber_invcm: sigma,
      wavelength_vac_nm: vacuum,
      wavelength_air_nm: air.nm,
      wavelength_air_status: air.nm === null ? 'not_applicable' : 'ok',
      frequency_thz: frequency,
      energy_ev: energy,
    },
  }
}

/** How a formula is named where it was used. */
export const airOf = (formula: AirFormula): string => `${AIR_FORMULAS[formula].source}; standard air: ${AIR_FORMULAS[formula].air}`
