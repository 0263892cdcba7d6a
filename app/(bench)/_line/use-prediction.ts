'use client'
import { useMemo } from 'react'
import { PhysicsError } from '@/lib/atomic/errors'
import { DEFAULT_TOLERANCE } from '@/lib/atomic/validity'
import { predictComponents } from '@/lib/prediction/components'
import { predictHyperfine } from '@/lib/prediction/hyperfine'
import type { Components, HyperfineComponents } from '@/openapi/schemas/components'
import type { Isotope } from '@/openapi/schemas/species'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { ApiWarning } from '@/app/_components/data/api'
import type { IsotopeChosen, ModelAsked } from '@/app/_components/field/use-model'

interface Refused {
  ok: false
  code: string
  detail: string
}

export type Prediction = { ok: true; components: Components; warnings: ApiWarning[] } | Refused
export type NuclearPrediction = { ok: true; components: HyperfineComponents; warnings: ApiWarning[] } | Refused

/** What the API takes when it is not told. */
const BY_DEFAULT = { fieldUncTesla: null, medium: 'conventional', gValues: 'adopted', gS: null, tolerance: DEFAULT_TOLERANCE } as const

export interface PredictionAsked {
  fieldTesla: number
  thetaDeg: number | null
  model: ModelAsked
  quadratic: boolean
}

export const componentsAsked = ({ fieldTesla, thetaDeg, model, quadratic }: PredictionAsked) => ({ ...BY_DEFAULT, fieldTesla, thetaDeg, model, diamagnetic: quadratic })

function attempt<T>(act: () => T): (T & { ok: true }) | Refused {
  try {
    return { ok: true, ...act() }
  } catch (error) {
    if (error instanceof PhysicsError) return { ok: false, code: error.code, detail: error.detail }
    throw error
  }
}

/**
 * The components of the line at a field, computed here with the very function that answers the API, so that the picture
 * follows the slider at once and shows the API's numbers.
 */
export function usePrediction(line: TransitionDetail, { fieldTesla, thetaDeg, model, quadratic }: PredictionAsked): Prediction {
  return useMemo(() => attempt(() => predictComponents(line, componentsAsked({ fieldTesla, thetaDeg, model, quadratic }))), [line, fieldTesla, thetaDeg, model, quadratic])
}

/** The same with nuclear spin; null while the isotopes of the species are being read. */
export function useNuclearPrediction(line: TransitionDetail, isotopes: readonly Isotope[] | null, isotope: IsotopeChosen, fieldTesla: number, thetaDeg: number | null): NuclearPrediction | null {
  return useMemo(
    () => (isotopes === null ? null : attempt(() => predictHyperfine(line, isotopes, { ...BY_DEFAULT, fieldTesla, thetaDeg, model: 'auto', isotope }))),
    [line, isotopes, isotope, fieldTesla, thetaDeg],
  )
}
