import type { z } from 'zod'
import { CONSTANTS } from '@/lib/units/codata'
import { airOf, convert } from '@/lib/prediction/convert'
import { AIR_EXTRAPOLATED, NUCLEUS_CONVENTIONS, SUBLEVEL_CONVENTIONS } from '@/lib/prediction/conventions'
import { nuclearSublevels } from '@/lib/prediction/nuclear-sublevels'
import { termSublevels } from '@/lib/prediction/sublevels'
import { decodeTerm } from '@/lib/prediction/terms'
import type { Term } from '@/lib/atomic/term'
import type { computeSublevels, convertWavelength } from '@/openapi/operations/computed'

type Warn = (code: string, detail: string) => void

const gSOf = (given: number | null | undefined): number => given ?? CONSTANTS.electronSpinG.value

/** A bare term symbol decoded. */
export function termAnswer(term: Term, gS: number | undefined) {
  return { data: decodeTerm(term, gS), meta: { conventions: { g_s: gSOf(gS), g_l: 1, ls_exact: 'At g_s = 2.' } } }
}

/** One position on every scale. */
export function conversionAnswer(query: z.output<(typeof convertWavelength)['query']>, warn: Warn) {
  const { conversion, extrapolated } = convert(query.value, query.from, query.to, query.formula)
  if (extrapolated) warn('air_extrapolated', AIR_EXTRAPOLATED)
  return { data: conversion, meta: { conventions: { air: airOf(query.formula), chain: 'h, c and e are exact; 1 cm^-1 = 29.9792458 GHz.' } } }
}

/** Sublevels of one LS term, or of one level with its nucleus, given in the request. */
export function sublevelMatrixAnswer(body: z.output<NonNullable<(typeof computeSublevels)['body']>>, warn: Warn) {
  if ('nucleus' in body) {
    const { matrix, warnings } = nuclearSublevels(body)
    for (const { code, detail } of warnings) warn(code, detail)
    return { data: matrix, meta: { model: 'hyperfine', conventions: { ...NUCLEUS_CONVENTIONS, order: 'Matrices are [field][state]; states by m_F, then upwards in energy.' } } }
  }
  const { matrix, model, warnings } = termSublevels(body)
  for (const { code, detail } of warnings) warn(code, detail)
  return {
    data: matrix,
    meta: { model, g_values: body.g_values, conventions: { ...SUBLEVEL_CONVENTIONS[model], g_s: gSOf(body.g_s), order: 'Matrices are [field][state]; states by m, then upwards in energy at B -> 0+.' } },
  }
}
