'use client'
import { parseAsBoolean, parseAsFloat, parseAsString, parseAsStringLiteral, useQueryState } from 'nuqs'
import { useCallback, useMemo } from 'react'

export const MODELS = ['auto', 'linear', 'intermediate'] as const
export type ModelAsked = (typeof MODELS)[number]

/** The model asked for, `?model=`; absent is auto. */
export function useModel(): [ModelAsked, (model: ModelAsked) => void] {
  const [model, setModel] = useQueryState('model', parseAsStringLiteral(MODELS).withDefault('auto'))
  return [model, useCallback((next: ModelAsked) => void setModel(next), [setModel])]
}

/** Whether the quadratic shift is added, `?diamagnetic=true`. */
export function useQuadratic(): [boolean, (on: boolean) => void] {
  const [on, setOn] = useQueryState('diamagnetic', parseAsBoolean.withDefault(false))
  return [on, useCallback((next: boolean) => void setOn(next ? true : null), [setOn])]
}

export type IsotopeChosen = number | 'natural' | null

export interface Nucleus {
  on: boolean
  /** Null: the only one with constants. */
  isotope: IsotopeChosen
}

const readIsotope = (text: string | null): IsotopeChosen => (text === 'natural' ? 'natural' : text !== null && /^\d{1,3}$/.test(text) ? Number(text) : null)

/** Whether hyperfine structure is shown and of which isotope, `?hyperfine=true&isotope=87`. */
export function useNucleus(): [Nucleus, (nucleus: Nucleus) => void] {
  const [on, setOn] = useQueryState('hyperfine', parseAsBoolean.withDefault(false))
  const [isotope, setIsotope] = useQueryState('isotope', parseAsString)
  const nucleus = useMemo(() => ({ on, isotope: readIsotope(isotope) }), [on, isotope])
  const set = useCallback(
    (next: Nucleus) => {
      void setOn(next.on ? true : null)
      void setIsotope(next.on && next.isotope !== null ? String(next.isotope) : null)
    },
    [setOn, setIsotope],
  )
  return [nucleus, set]
}

export interface SeenWidth {
  instrument: 'resolving' | 'fwhm'
  /** Resolving power, or full width in cm^-1. */
  value: number
  /** 0: the atoms' motion is left out. */
  temperatureK: number
}

export const RESOLVING_BY_DEFAULT = 200_000
const positive = (value: number | null): value is number => value !== null && value > 0 && Number.isFinite(value)

/** What broadens the profile: `?resolving=` or `?fwhm=` (cm^-1), and `?temperature=` (K). */
export function useSeenWidth(): [SeenWidth, (width: SeenWidth) => void] {
  const [resolving, setResolving] = useQueryState('resolving', parseAsFloat)
  const [fwhm, setFwhm] = useQueryState('fwhm', parseAsFloat)
  const [temperature, setTemperature] = useQueryState('temperature', parseAsFloat)
  const width = useMemo((): SeenWidth => {
    const temperatureK = positive(temperature) ? temperature : 0
    if (positive(fwhm)) return { instrument: 'fwhm', value: fwhm, temperatureK }
    return { instrument: 'resolving', value: positive(resolving) ? resolving : RESOLVING_BY_DEFAULT, temperatureK }
  }, [resolving, fwhm, temperature])
  const set = useCallback(
    (next: SeenWidth) => {
      void setFwhm(next.instrument === 'fwhm' ? next.value : null)
      void setResolving(next.instrument === 'resolving' && next.value !== RESOLVING_BY_DEFAULT ? next.value : null)
      void setTemperature(next.temperatureK > 0 ? next.temperatureK : null)
    },
    [setFwhm, setResolving, setTemperature],
  )
  return [width, set]
}
