'use client'
import { useMemo } from 'react'
import { PhysicsError } from '@/lib/atomic/errors'
import { predictComponents } from '@/lib/prediction/components'
import type { Components } from '@/openapi/schemas/components'
import type { TransitionDetail } from '@/openapi/schemas/transition'
import type { ApiWarning } from '@/app/_components/data/api'

export type Prediction = { ok: true; components: Components; warnings: ApiWarning[] } | { ok: false; code: string; detail: string }

/** What the API takes when it is not told: a line's linear validity is judged at one part in a hundred. */
const TOLERANCE = 0.01

/**
 * The components of the line at a field, computed here with the very function that answers the API, so that the picture
 * follows the slider at once and shows the API's numbers.
 */
export function usePrediction(line: TransitionDetail, fieldTesla: number, thetaDeg: number | null): Prediction {
  return useMemo(() => {
    try {
      const asked = { fieldTesla, fieldUncTesla: null, thetaDeg, model: 'linear', medium: 'conventional', gValues: 'adopted', gS: null, tolerance: TOLERANCE } as const
      return { ok: true, ...predictComponents(line, asked) }
    } catch (error) {
      if (error instanceof PhysicsError) return { ok: false, code: error.code, detail: error.detail }
      throw error
    }
  }, [line, fieldTesla, thetaDeg])
}
