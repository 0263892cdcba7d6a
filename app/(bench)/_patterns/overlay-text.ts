import { printFixed } from '@/lib/units/print'
import { fixed, halves } from '@/app/_components/number'
import { polarisationName } from '@/app/_components/plots/polarisation'
import { signed } from '@/app/_components/plots/ruler'
import type { OverlaidComponent } from './overlay'
import type { Axis } from './state'
import type { PatternLine } from './use-lines'

const nameOf = (lines: readonly PatternLine[], line: number): string => `${line + 1} ${lines[line]?.name ?? ''}`.trim()

/** The lines of a blend by number and name. */
export const namesOf = (lines: readonly PatternLine[], numbers: readonly number[]): string => numbers.map((line) => nameOf(lines, line)).join(', ')

/** One line of text about a component of one of several lines. */
export function overlaidText({ line, component, height, blends }: OverlaidComponent, lines: readonly PatternLine[], axis: Axis, thetaDeg: number | null): string {
  const nm = axis === 'air' ? component.wavelength_air_nm : component.wavelength_vac_nm
  const place = axis === 'wavenumber' || nm === null ? `${fixed(component.wavenumber_invcm, 5)} cm⁻¹` : `${fixed(nm, 6)} nm in ${axis === 'air' ? 'air' : 'vacuum'}`
  const blended = blends.length === 0 ? '' : `; blends with ${namesOf(lines, blends)}`
  return `${nameOf(lines, line)}: ${polarisationName(component.q)}, m ${halves(component.m_lower)} → ${halves(component.m_upper)}, ${place}, shift ${signed(component.shift_invcm, 5)} cm⁻¹, ${thetaDeg === null ? 'strength' : 'intensity'} ${printFixed(height, 4)}${blended}`
}
