'use client'
import { parseAsArrayOf, parseAsFloat, parseAsString, parseAsStringLiteral, throttle, useQueryState } from 'nuqs'
import { useCallback, useMemo } from 'react'
import { isTransitionId, LINES_MOST } from './line-ids'

export const MODELS = ['auto', 'linear', 'intermediate'] as const
export const AXES = ['air', 'vacuum', 'wavenumber'] as const
export type Axis = (typeof AXES)[number]
export type ModelAsked = (typeof MODELS)[number]

/** The window is dragged as the field is; the address follows at its own pace. */
const dragged = { history: 'replace', limitUrlUpdates: throttle(150) } as const

export interface LineWanted {
  id: string
  weight: number
}

/** The lines of the picture with their weights, `?lines=Na-I.1~Na-I.2,Na-I.1~Na-I.3&weights=1,2`; what is no transition is told apart. */
export function useLinesWanted() {
  const [ids, setIds] = useQueryState('lines', parseAsArrayOf(parseAsString).withDefault([]).withOptions({ history: 'push' }))
  const [weights, setWeights] = useQueryState('weights', parseAsArrayOf(parseAsFloat).withDefault([]))
  const lines = useMemo(() => {
    const seen = new Set<string>()
    return ids.flatMap((id, i): LineWanted[] => {
      const weight = weights[i]
      if (!isTransitionId(id) || seen.has(id) || seen.size >= LINES_MOST) return []
      seen.add(id)
      return [{ id, weight: weight !== undefined && weight >= 0 && Number.isFinite(weight) ? weight : 1 }]
    })
  }, [ids, weights])
  const notLines = useMemo(() => ids.filter((id) => !isTransitionId(id)), [ids])
  const setLines = useCallback(
    (next: readonly LineWanted[]) => {
      void setIds(next.length === 0 ? null : next.map(({ id }) => id))
      void setWeights(next.every(({ weight }) => weight === 1) ? null : next.map(({ weight }) => weight))
    },
    [setIds, setWeights],
  )
  return { lines, notLines, setLines }
}

export interface Width {
  /** How the instrument is told. */
  instrument: 'resolving' | 'fwhm'
  /** Resolving power, or FWHM in cm^-1. */
  value: number
  temperatureK: number
}

export const RESOLVING_BY_DEFAULT = 200_000
const positive = (value: number | null): value is number => value !== null && value > 0 && Number.isFinite(value)

/** The width in force: the instrument as resolving power or FWHM, and a temperature. */
export function useWidthAsked() {
  const [resolving, setResolving] = useQueryState('resolving', parseAsFloat)
  const [fwhm, setFwhm] = useQueryState('fwhm', parseAsFloat)
  const [temperature, setTemperature] = useQueryState('temperature', parseAsFloat)
  const width = useMemo((): Width => {
    const temperatureK = positive(temperature) ? temperature : 0
    if (positive(fwhm)) return { instrument: 'fwhm', value: fwhm, temperatureK }
    return { instrument: 'resolving', value: positive(resolving) ? resolving : RESOLVING_BY_DEFAULT, temperatureK }
  }, [resolving, fwhm, temperature])
  const setWidth = useCallback(
    (next: Width) => {
      void setFwhm(next.instrument === 'fwhm' ? next.value : null)
      void setResolving(next.instrument === 'resolving' && next.value !== RESOLVING_BY_DEFAULT ? next.value : null)
      void setTemperature(next.temperatureK > 0 ? next.temperatureK : null)
    },
    [setFwhm, setResolving, setTemperature],
  )
  return { width, setWidth }
}

/** Model, axis and window. The window is in wavenumbers whatever the axis; null is the whole. */
export function useView() {
  const [model, setModel] = useQueryState('model', parseAsStringLiteral(MODELS).withDefault('auto'))
  const [axis, setAxis] = useQueryState('axis', parseAsStringLiteral(AXES))
  const [text, setText] = useQueryState('window', parseAsArrayOf(parseAsFloat).withOptions(dragged))
  const window = useMemo((): Window | null => {
    const [from, to] = text ?? []
    return text?.length === 2 && from !== undefined && to !== undefined && from > 0 && to > from ? { fromInvcm: from, toInvcm: to } : null
  }, [text])
  const setWindow = useCallback((next: Window | null) => void setText(next === null ? null : [next.fromInvcm, next.toInvcm].map((value) => Number(value.toPrecision(10)))), [setText])
  return { model, setModel: useCallback((next: ModelAsked) => void setModel(next), [setModel]), axis, setAxis: useCallback((next: Axis) => void setAxis(next), [setAxis]), window, setWindow }
}

export interface Window {
  fromInvcm: number
  toInvcm: number
}
