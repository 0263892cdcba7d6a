'use client'
import { useMemo } from 'react'
import type { PhysicsError } from '@/lib/atomic/errors'
import type { StokesProfiles } from '@/lib/atomic/profile-stokes'
import { profilesOver, readyLines, type ProfilesAsked } from '@/lib/prediction/profiles'
import type { Blend } from '@/lib/prediction/profiles-blends'
import type { ApiWarning } from '@/app/_components/data/api'
import { axisByDefault, curveGrid, hasAir, type NumberedLine, type OverlaidComponent, overlaid, wholeWindow } from './overlay'
import type { Axis, ModelAsked, Width, Window } from './state'
import type { WeighedPatternLine } from './use-lines'

/** What the API takes where it is not told. */
const TOLERANCE = 0.01

export interface Asked {
  fieldTesla: number
  thetaDeg: number | null
  model: ModelAsked
  width: Width
}

export interface Overlay {
  lines: NumberedLine[]
  components: OverlaidComponent[]
  blends: Blend[]
  /** Lines without a pattern, by their number. */
  refused: { index: number; error: PhysicsError }[]
  warnings: ApiWarning[]
}

const profilesAsked = ({ fieldTesla, thetaDeg, model, width }: Asked, massesPending: boolean): ProfilesAsked => ({
  fieldTesla,
  fieldUncTesla: null,
  thetaDeg,
  model,
  medium: 'conventional',
  gValues: 'adopted',
  gS: null,
  tolerance: TOLERANCE,
  // until the masses are here the lines are as wide as the instrument makes them
  temperatureK: massesPending || width.temperatureK === 0 ? null : width.temperatureK,
  microturbulenceKmPerS: null,
  instrumentFwhmInvcm: width.instrument === 'fwhm' ? width.value : null,
  resolvingPower: width.instrument === 'resolving' ? width.value : null,
  lorentzianFwhmInvcm: null,
})

/**
 * The patterns of all lines at one field, computed here with the functions that answer `POST /profiles`, so that the picture follows the
 * slider at once and shows the API's numbers.
 */
export function useOverlay(weighed: readonly WeighedPatternLine[], asked: Asked, massesPending: boolean): Overlay {
  const { fieldTesla, thetaDeg, model, width } = asked
  return useMemo(() => {
    const { ready, refused, warnings } = readyLines(weighed, profilesAsked({ fieldTesla, thetaDeg, model, width }, massesPending))
    const lines = ready.map((one) => ({ ...one, index: (one.weighed as WeighedPatternLine).index }))
    return { lines, ...overlaid(lines, thetaDeg), refused: refused.map(({ index, error }) => ({ index: weighed[index]?.index ?? index, error })), warnings }
  }, [weighed, fieldTesla, thetaDeg, model, width, massesPending])
}

export interface Frame {
  axis: Axis
  airPossible: boolean
  window: Window
  whole: Window
  /** Whether the window is less than the whole. */
  narrowed: boolean
}

/** Axis and window in force; null without lines. */
export function useFrame(lines: readonly NumberedLine[], axisAsked: Axis | null, windowAsked: Window | null): Frame | null {
  const whole = useMemo(() => wholeWindow(lines), [lines])
  const airPossible = hasAir(lines)
  const axis = axisAsked === null || (axisAsked === 'air' && !airPossible) ? axisByDefault(lines) : axisAsked
  // ends in steps do not change with every step of the field, nor should what is made from them
  const [wholeFrom, wholeTo] = [whole?.fromInvcm ?? 0, whole?.toInvcm ?? 0]
  return useMemo(() => {
    if (wholeTo === 0) return null
    const all = { fromInvcm: wholeFrom, toInvcm: wholeTo }
    return { axis, airPossible, window: windowAsked ?? all, whole: all, narrowed: windowAsked !== null }
  }, [axis, airPossible, windowAsked, wholeFrom, wholeTo])
}

export interface Curve {
  wavenumberInvcm: Float64Array
  profiles: StokesProfiles
}

/** The profile of all lines together over the window. */
export function useCurve(lines: readonly NumberedLine[], window: Window | null, thetaDeg: number | null, points: number): Curve | null {
  return useMemo(() => {
    if (window === null || lines.length === 0) return null
    const wavenumberInvcm = curveGrid(window, points, lines)
    return { wavenumberInvcm, profiles: profilesOver(lines, wavenumberInvcm, { thetaDeg }) }
  }, [lines, window, thetaDeg, points])
}
