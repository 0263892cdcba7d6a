import { AIR_FROM_NM, CONVENTIONAL_AIR_TO_NM } from '@/lib/atomic/air'
import { type Blends, findBlends } from '@/lib/prediction/profiles-blends'
import { valueIn, wavenumberIn } from '@/lib/prediction/profiles-grid'
import type { ReadyLine } from '@/lib/prediction/profiles'
import type { Component } from '@/openapi/schemas/components'
import type { GridUnit } from '@/openapi/schemas/profiles'
import { componentKey, heightOf, isDrawn } from '@/app/_components/plots/component-text'
import { niceCeil } from '@/app/_components/plots/ruler'
import type { Axis, Window } from './state'

export const AXIS_UNIT: Record<Axis, GridUnit> = { air: 'air_nm', vacuum: 'vacuum_nm', wavenumber: 'wavenumber_invcm' }

/** A component of one of the lines, as it is drawn and listed. */
export interface OverlaidComponent {
  key: string
  /** Number of the line, from 0. */
  line: number
  component: Component
  wavenumberInvcm: number
  /** Strength, or intensity where an angle is given, times the weight of its line. */
  height: number
  /** Other lines that it blends with. */
  blends: readonly number[]
}

/** Lines that are ready, each with its number. */
export type NumberedLine = ReadyLine & { index: number }

/** The components of all lines with what blends; only those that are seen (at the angle given) can blend. */
export function overlaid(lines: readonly NumberedLine[], thetaDeg: number | null): { components: OverlaidComponent[]; blends: Blends['blends'] } {
  const widths: number[] = []
  const all = lines.flatMap(({ index, components, weighed, fwhmInvcm }) =>
    components.components.map((component): OverlaidComponent => {
      const height = weighed.weight * heightOf(component, thetaDeg)
      if (height > 0) widths.push(fwhmInvcm)
      return { key: `${index}/${componentKey(component)}`, line: index, component, wavenumberInvcm: component.wavenumber_invcm, height, blends: [] }
    }),
  )
  const seen = all.filter(({ height }) => height > 0)
  const { blends, withLines } = findBlends(seen.map(({ line, wavenumberInvcm }, i) => ({ line, wavenumberInvcm, fwhmInvcm: widths[i] ?? 0 })))
  const blended = new Map(seen.map(({ key }, i) => [key, withLines[i] ?? []]))
  return { blends, components: all.map((one) => ({ ...one, blends: blended.get(one.key) ?? [] })) }
}

/** Whether a component is drawn: it has strength, and a height at this angle. */
export const isShown = ({ component, height }: OverlaidComponent): boolean => isDrawn(component) && height > 0

const nmOf = (line: ReadyLine): number => line.components.centre.wavelength_vac_nm

/** Air where every line has a wavelength in air that is commonly used, else vacuum. */
export const axisByDefault = (lines: readonly ReadyLine[]): Axis =>
  lines.every((line) => nmOf(line) >= AIR_FROM_NM && nmOf(line) <= CONVENTIONAL_AIR_TO_NM) ? 'air' : 'vacuum'

/** Whether every line has a wavelength in air. */
export const hasAir = (lines: readonly ReadyLine[]): boolean => lines.every((line) => nmOf(line) >= AIR_FROM_NM)

const WIDTHS_BEYOND = 2.5

/** Half-width about a line's centre that holds its pattern and some widths more, in steps, so that the field moves the components and not the ruler. */
function reachOf({ components, fwhmInvcm }: ReadyLine): number {
  const largest = components.components.reduce((most, { shift_invcm }) => Math.max(most, Math.abs(shift_invcm)), 0)
  return niceCeil(1.1 * largest + WIDTHS_BEYOND * fwhmInvcm)
}

/** The window about one line. */
export function windowAround(line: ReadyLine): Window {
  const [centre, reach] = [line.components.centre.wavenumber_invcm, reachOf(line)]
  return { fromInvcm: Math.max(centre - reach, centre / 1e6), toInvcm: centre + reach }
}

/** The window that holds all lines; null without any. */
export function wholeWindow(lines: readonly ReadyLine[]): Window | null {
  const windows = lines.map(windowAround)
  if (windows.length === 0) return null
  return { fromInvcm: Math.min(...windows.map(({ fromInvcm }) => fromInvcm)), toInvcm: Math.max(...windows.map(({ toInvcm }) => toInvcm)) }
}

/** Both ends of a window on an axis, the smaller first. Beyond the reach of air it ends where air does. */
export function domainOf(axis: Axis, { fromInvcm, toInvcm }: Window): [number, number] {
  const unit = AXIS_UNIT[axis]
  const shortest = valueIn('air_nm', 1e7 / AIR_FROM_NM) as number
  const [a, b] = [valueIn(unit, fromInvcm) ?? shortest, valueIn(unit, toInvcm) ?? shortest]
  return a < b ? [a, b] : [b, a]
}

/** The window between two values of an axis. */
export function windowOf(axis: Axis, first: number, second: number): Window {
  const [a, b] = [wavenumberIn(AXIS_UNIT[axis], first), wavenumberIn(AXIS_UNIT[axis], second)]
  return { fromInvcm: Math.min(a, b), toInvcm: Math.max(a, b) }
}

/** Narrowest window, as a part of its wavenumber: beyond that an axis has no digits left to show. */
const NARROWEST = 1e-9

const STEPS: Readonly<Record<'closer' | 'wider' | 'left' | 'right', (from: number, to: number) => [number, number]>> = {
  closer: (from, to) => [from + (to - from) / 4, to - (to - from) / 4],
  wider: (from, to) => [from - (to - from) / 2, to + (to - from) / 2],
  left: (from, to) => [from - (to - from) / 4, to - (to - from) / 4],
  right: (from, to) => [from + (to - from) / 4, to + (to - from) / 4],
}
export type WindowStep = keyof typeof STEPS

/** One step of a window as it is seen on an axis; the window itself where it can go no farther. */
export function steppedWindow(axis: Axis, window: Window, step: WindowStep): Window {
  const [from, to] = STEPS[step](...domainOf(axis, window))
  const shortest = axis === 'air' ? (valueIn('air_nm', 1e7 / AIR_FROM_NM) as number) : 0
  if (!(from > shortest) || !Number.isFinite(to) || to - from < NARROWEST * to) return window
  return windowOf(axis, from, to)
}

/**
 * Wavenumbers to draw a curve at: even ones, a point to every pixel or so, and some on each component that would fall between them, so that a
 * line narrower than a pixel still reaches its height. Rises, without repeats.
 */
export function curveGrid({ fromInvcm, toInvcm }: Window, points: number, lines: readonly ReadyLine[]): Float64Array {
  const step = (toInvcm - fromInvcm) / (points - 1)
  const grid = Array.from({ length: points }, (_, i) => fromInvcm + i * step)
  for (const { fwhmInvcm, components } of lines) {
    if (fwhmInvcm > 4 * step) continue
    for (const { wavenumber_invcm: centre } of components.components) {
      if (centre < fromInvcm || centre > toInvcm) continue
      for (const place of [-1, -0.5, 0, 0.5, 1]) grid.push(centre + place * fwhmInvcm)
    }
  }
  const sorted = Float64Array.from(grid).sort()
  return sorted.filter((value, i) => value >= fromInvcm && value <= toInvcm && value !== sorted[i - 1])
}
