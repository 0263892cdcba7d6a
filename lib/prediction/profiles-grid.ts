import { AIR_FROM_NM, airToVac, airWavelength, vacToAir } from '@/lib/atomic/air'
import { PhysicsError } from '@/lib/atomic/errors'
import { GRID_MOST_POINTS } from '@/lib/atomic/profile-stokes'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { GridUnit } from '@/openapi/schemas/profiles'

/** An even grid in the quantity that it was asked in. */
export interface GridAsked {
  start: number
  stop: number
  count: number
  unit: GridUnit
}

/** The points of a grid in the order asked, on every scale. */
export interface SpectralGrid {
  wavenumberInvcm: Float64Array
  vacuumNm: Float64Array
  /** null below 200 nm (vacuum). */
  airNm: (number | null)[]
  /** Whether wavenumber falls along the grid, as it does where the steps are in wavelength. */
  falls: boolean
}

/** Shortest wavelength in air. */
export const AIR_SHORTEST_NM = vacToAir(AIR_FROM_NM)

const isWavelength = (unit: GridUnit): boolean => unit === 'vacuum_nm' || unit === 'air_nm'

/** Wavenumber of a value in the unit of a grid. */
export function wavenumberIn(unit: GridUnit, value: number): number {
  if (unit === 'wavenumber_invcm') return value
  if (unit === 'frequency_ghz') return value / GHZ_PER_INVCM
  return 1e7 / (unit === 'air_nm' ? airToVac(value) : value)
}

/** Value of a wavenumber in the unit of a grid; null where there is none (air below 200 nm). */
export function valueIn(unit: GridUnit, wavenumberInvcm: number): number | null {
  if (unit === 'wavenumber_invcm') return wavenumberInvcm
  if (unit === 'frequency_ghz') return wavenumberInvcm * GHZ_PER_INVCM
  const vacuum = vacuumNmOfWavenumber(wavenumberInvcm)
  return unit === 'air_nm' ? airWavelength(vacuum).nm : vacuum
}

/** Wavelengths of wavenumbers, those of the grid's own unit to the bit. */
function scales(wavenumberInvcm: Float64Array, own?: { unit: GridUnit; values: Float64Array }): SpectralGrid {
  const vacuumNm = own?.unit === 'vacuum_nm' ? own.values : wavenumberInvcm.map(vacuumNmOfWavenumber)
  const airNm = own?.unit === 'air_nm' ? [...own.values] : Array.from(vacuumNm, (nm) => airWavelength(nm).nm)
  return { wavenumberInvcm, vacuumNm, airNm, falls: own !== undefined && isWavelength(own.unit) }
}

/**
 * An even grid in a unit. Codes `grid_malformed` (not 0 < start < stop, or not 2 to 100 000 points) and `air_not_applicable` (in air, below
 * 200 nm). The points rise in the unit asked, so that wavenumber falls along a grid of wavelengths.
 */
export function spectralGrid({ start, stop, count, unit }: GridAsked): SpectralGrid {
  const fine = Number.isFinite(start) && Number.isFinite(stop) && start > 0 && stop > start
  if (!fine || !Number.isInteger(count) || count < 2 || count > GRID_MOST_POINTS) {
    throw new PhysicsError('grid_malformed', `A grid runs from a value above 0 up to a larger one in 2 to ${GRID_MOST_POINTS} points.`, 'grid')
  }
  if (unit === 'air_nm' && start < AIR_SHORTEST_NM) {
    throw new PhysicsError('air_not_applicable', `Wavelengths in air begin at ${AIR_SHORTEST_NM.toFixed(3)} nm (200 nm in vacuum); give the grid in vacuum.`, 'grid')
  }
  const values = Float64Array.from({ length: count }, (_, i) => (i === count - 1 ? stop : start + ((stop - start) * i) / (count - 1)))
  return scales(unit === 'wavenumber_invcm' ? values : values.map((value) => wavenumberIn(unit, value)), { unit, values })
}

/** A grid of wavenumbers on every scale. */
export const gridOfWavenumbers = (wavenumberInvcm: Float64Array): SpectralGrid => scales(wavenumberInvcm)
