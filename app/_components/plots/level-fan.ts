'use client'
import { useCallback, useMemo } from 'react'
import { G_S } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldTerm } from '@/lib/atomic/field-term'
import { DEFAULT_TOLERANCE } from '@/lib/atomic/validity'
import { type FieldLevel, type SublevelsOfLevel, sublevelsOfLevel } from '@/lib/prediction/level-sublevels'
import { twoJOf } from '@/lib/prediction/levels'
import { validityEnd, wholeTerm } from '@/lib/prediction/term-levels'
import { halves } from '@/app/_components/number'
import type { Sublevel } from '@/openapi/schemas/level'
import { type Fan, type FanPoint, linearFan, termFan } from './fan'

export type LevelFound = ({ ok: true } & SublevelsOfLevel) | { ok: false; code: string; detail: string }

const ADOPTED = { gValues: 'adopted', gS: null } as const

export interface FanAsked {
  model: 'auto' | 'linear' | 'intermediate'
  fieldTesla: number
  quadratic: boolean
}

/** The sublevels of a level at a field, computed by the function behind `GET /levels/{level}/sublevels`. */
export function findSublevels(found: FieldLevel, { model, fieldTesla, quadratic }: FanAsked): LevelFound {
  try {
    return { ok: true, ...sublevelsOfLevel(found, { ...ADOPTED, fieldTesla, model, tolerance: DEFAULT_TOLERANCE, diamagnetic: quadratic, amplitudes: false }) }
  } catch (error) {
    if (error instanceof PhysicsError) return { ok: false, code: error.code, detail: error.detail }
    throw error
  }
}

export const pointOf = ({ m, m_l, m_s, shift_invcm }: Sublevel): FanPoint => ({
  key: String(Math.round(2 * m)),
  name: halves(m),
  far: m_l === null || m_s === null ? null : `${halves(m_l)}, ${halves(m_s)}`,
  energyInvcm: shift_invcm,
  shiftInvcm: shift_invcm,
})

/** Adds to each curve the quadratic shift at its nodes. */
function withQuadratic(fan: Fan, found: FieldLevel, model: 'linear' | 'intermediate', fieldsTesla: Float64Array): Fan {
  const shifts = Array.from(fieldsTesla, (fieldTesla) => findSublevels(found, { model, fieldTesla, quadratic: true }))
  const curves = fan.curves.map((curve) => ({
    ...curve,
    values: Float64Array.from(shifts, (at) => (at.ok ? (at.rows.find((row) => String(Math.round(2 * row.m)) === curve.key)?.shift_invcm ?? 0) : 0)),
  }))
  return { ...fan, fieldsTesla, curves, neighbours: [] }
}

const QUADRATIC_NODES = 24

/**
 * The curves of a level up to any edge, and its sublevels at the field in force. Where the term is whole and the linear model is not asked for
 * by name the curves are diagonalised, so that they show what comes beyond the field in force.
 */
export function useLevelFan(found: FieldLevel | null, { model, fieldTesla, quadratic }: FanAsked): { sublevels: LevelFound | null; here: FanPoint[]; fanTo: (edgeTesla: number) => Fan } {
  const sublevels = useMemo(() => (found === null ? null : findSublevels(found, { model, fieldTesla, quadratic })), [found, model, fieldTesla, quadratic])
  const here = useMemo(() => (sublevels?.ok ? sublevels.rows.map(pointOf) : []), [sublevels])
  const fanTo = useCallback(
    (edgeTesla: number): Fan => {
      if (found === null) return linearFan(0, null, edgeTesla)
      const twoJ = twoJOf(found.level)
      const g = found.level.g_j.adopted
      const term = model === 'linear' ? null : wholeTerm(validityEnd(twoJ, g, found.members, ADOPTED))
      const fan = term === null ? linearFan(twoJ, g, edgeTesla) : termFan(fieldTerm(term, { gS: G_S, gL: 1 }), twoJ, edgeTesla)
      if (!quadratic || found.diamagnetic.status !== 'ok') return fan
      return withQuadratic(fan, found, term === null ? 'linear' : 'intermediate', Float64Array.from({ length: QUADRATIC_NODES + 1 }, (_, i) => edgeTesla * (i / QUADRATIC_NODES) ** 2))
    },
    [found, model, quadratic],
  )
  return { sublevels, here, fanTo }
}
