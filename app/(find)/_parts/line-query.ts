import type { ApiQuery } from '../../_components/data/api'
import type { PageQuery } from '../../_components/data/search-params'
import { airToVac, vacToAir } from '@/lib/atomic/air'

/** The ways to give a window; each is the API's own pair of names. */
export const SCALES = {
  conventional: { label: 'Wavelength', unit: 'nm', min: 'wavelength_min_nm', max: 'wavelength_max_nm' },
  air: { label: 'Wavelength in air', unit: 'nm', min: 'wavelength_min_nm', max: 'wavelength_max_nm' },
  vacuum: { label: 'Wavelength in vacuum', unit: 'nm', min: 'wavelength_min_nm', max: 'wavelength_max_nm' },
  wavenumber: { label: 'Wavenumber', unit: 'cm⁻¹', min: 'wavenumber_min_invcm', max: 'wavenumber_max_invcm' },
  frequency: { label: 'Frequency', unit: 'THz', min: 'frequency_min_thz', max: 'frequency_max_thz' },
} as const
export type Scale = keyof typeof SCALES
export const isScale = (text: string): text is Scale => Object.hasOwn(SCALES, text)

const NAMES = ['kind', 'rules', 'wavelength_min_nm', 'wavelength_max_nm', 'medium', 'wavenumber_min_invcm', 'wavenumber_max_invcm', 'frequency_min_thz', 'frequency_max_thz', 'g_eff_min', 'g_eff_max', 'edition'] as const

const all = (value: string | string[] | undefined): string[] => (value === undefined ? [] : Array.isArray(value) ? value : [value]).filter((text) => text !== '')

/** The API query of a page address: the same names, so that a view and its request read alike. Lists for people use the rigorous rules. */
export function lineQuery(page: PageQuery): ApiQuery & { species: string[] } {
  const query: Record<string, string | undefined> = {}
  for (const name of NAMES) query[name] = all(page[name])[0]
  return { limit: 100, ...query, rules: query.rules ?? 'rigorous', species: all(page.species) }
}

/** On which scale the address gives its window. */
export function scaleOf(query: ApiQuery): Scale {
  if (query.wavenumber_min_invcm ?? query.wavenumber_max_invcm) return 'wavenumber'
  if (query.frequency_min_thz ?? query.frequency_max_thz) return 'frequency'
  const medium = String(query.medium ?? 'conventional')
  return isScale(medium) ? medium : 'conventional'
}

const THZ_PER_INVCM = 0.0299792458

/** cm^-1 of a value on a scale; a conventional wavelength is in air from 200 to 2000 nm. */
function invcm(scale: Scale, value: number): number {
  if (scale === 'wavenumber') return value
  if (scale === 'frequency') return value / THZ_PER_INVCM
  const inAir = scale === 'air' || (scale === 'conventional' && value >= 200 && value <= 2000)
  return 1e7 / (inAir ? airToVac(value) : value)
}
function onScale(scale: Scale, sigma: number): number {
  if (scale === 'wavenumber') return sigma
  if (scale === 'frequency') return sigma * THZ_PER_INVCM
  const vacuum = 1e7 / sigma
  const inAir = vacuum >= 200 && (scale === 'air' || (scale === 'conventional' && vacuum <= 2000))
  return inAir ? vacToAir(vacuum) : vacuum
}

/** A window carried over to another scale, both ends to seven figures; ends change places where the scale runs the other way. */
export function carryWindow(from: Scale, to: Scale, window: { min: string; max: string }): { min: string; max: string } {
  const turns = (scale: Scale): boolean => scale === 'wavenumber' || scale === 'frequency'
  const carry = (text: string): string => {
    const value = Number(text)
    return text.trim() === '' || !(value > 0) ? '' : String(Number(onScale(to, invcm(from, value)).toPrecision(7)))
  }
  const [min, max] = [carry(window.min), carry(window.max)]
  return turns(from) === turns(to) ? { min, max } : { min: max, max: min }
}
