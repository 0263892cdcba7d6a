import type { z } from 'zod'
import { AIR_MEASURED_TO_NM } from '@/lib/atomic/air'
import { G_S } from '@/lib/atomic/constants'
import { defaultKind } from '@/lib/atomic/rules'
import { type LineExclusion, type LineListQuery, listLines, spectralWindow, type WindowAsked } from '@/lib/catalogue/lines'
import { LINE_EXCLUSIONS, passes, pairMask } from '@/lib/catalogue/line-scan'
import type { Snapshot } from '@/lib/catalogue/shape'
import { Problem } from '@/lib/problem'
import { predictComponents } from '@/lib/prediction/components'
import { AIR_EXTRAPOLATED, FIELD_CONVENTIONS, HYPERFINE_LINE_CONVENTIONS, LINE_CONVENTIONS } from '@/lib/prediction/conventions'
import { predictHyperfine } from '@/lib/prediction/hyperfine'
import { judgeInline } from '@/lib/prediction/judge'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { levelIndex, speciesIndex, speciesOf, transitionIndices } from '@/lib/prediction/resolve'
import { componentTable, hyperfineComponentTable, lineTable } from '@/lib/prediction/tables/lines'
import { assembleTransition, transitionDetail } from '@/lib/prediction/transition'
import type { listLevelTransitions } from '@/openapi/operations/levels'
import type { getComponents, getTransition, judgeTransition, listTransitions } from '@/openapi/operations/transitions'
import type { Transition } from '@/openapi/schemas/transition'

type Warn = (code: string, detail: string) => void

/** Air wavelengths beyond the range in which the formula of air was measured are told, with a warning. */
export function warnOfAir(lines: readonly Pick<Transition, 'wavelength_vac_nm'>[], warn: Warn): void {
  if (lines.some((line) => line.wavelength_vac_nm > AIR_MEASURED_TO_NM)) warn('air_extrapolated', AIR_EXTRAPOLATED)
}

const staleCursor = () =>
  new Problem('cursor_malformed', 'The cursor names a row that this edition does not hold; begin without one.', {
    errors: [{ parameter: 'cursor', code: 'cursor_malformed', detail: 'Begin without a cursor.' }],
  })

function windowOf(query: z.output<(typeof listTransitions)['query']>): WindowAsked | null {
  if (query.wavelength_min_nm !== undefined || query.wavelength_max_nm !== undefined) {
    return { scale: 'wavelength', minNm: query.wavelength_min_nm ?? null, maxNm: query.wavelength_max_nm ?? null, medium: query.medium }
  }
  if (query.wavenumber_min_invcm !== undefined || query.wavenumber_max_invcm !== undefined) {
    return { scale: 'wavenumber', minInvcm: query.wavenumber_min_invcm ?? null, maxInvcm: query.wavenumber_max_invcm ?? null }
  }
  if (query.frequency_min_thz === undefined && query.frequency_max_thz === undefined) return null
  return { scale: 'frequency', minThz: query.frequency_min_thz ?? null, maxThz: query.frequency_max_thz ?? null }
}

/** Lines that the rules allow, in a window, over any species of the edition, by wavenumber. */
export function lineList(snapshot: Snapshot, query: z.output<(typeof listTransitions)['query']>, after: Position, warn: Warn) {
  const limit = limitOf(query)
  const asked: LineListQuery = {
    kind: query.kind,
    rules: query.rules,
    ...(query.g_eff_min === undefined ? {} : { gEffMin: query.g_eff_min }),
    ...(query.g_eff_max === undefined ? {} : { gEffMax: query.g_eff_max }),
    // named twice is named once
    species: query.species === undefined ? null : [...new Set(query.species.map((id) => speciesIndex(snapshot, id)))].sort((a, b) => a - b),
    window: spectralWindow(windowOf(query)),
    limit,
    after: after === null ? null : String(after[0]),
    explain: query.explain,
  }
  const list = listLines(snapshot, asked)
  if (list === null) throw staleCursor()
  const lines = list.lines.map(({ lower, upper }) => assembleTransition(snapshot, lower, upper, query.kind))
  warnOfAir(lines, warn)
  return {
    data: lines,
    page: { limit, next: list.next === null ? null : [list.next] },
    meta: { total: list.total, conventions: LINE_CONVENTIONS, excluded: list.excluded, ...(query.explain ? { explained: list.explained } : {}) },
    table: () => lineTable(lines),
  }
}

/** The first rule in force that takes a pair out; undefined where all pass. */
function firstFailed(line: Transition, rules: 'ls' | 'rigorous'): LineExclusion | undefined {
  const failed = line.verdict.rules.filter((rule) => rule.verdict === 'fail' && (rules === 'ls' || rule.basis === 'rigorous'))
  return LINE_EXCLUSIONS.find((reason) => failed.some((rule) => rule.rule === reason))
}

/**
 * The partners of a level by wavenumber: those that the rules in force let through, and with `include=forbidden` the others too.
 * Without `kind` each pair is judged as what it can be.
 */
export function partnerList(snapshot: Snapshot, levelId: string, query: z.output<(typeof listLevelTransitions)['query']>, after: Position, warn: Warn) {
  const limit = limitOf(query)
  const index = levelIndex(snapshot, levelId)
  const { speciesOf, energyInvcm, twoJ, parity } = snapshot.columns
  const [begin, end] = snapshot.speciesRange(speciesOf[index] ?? 0)
  const excluded: Partial<Record<LineExclusion, number>> = {}
  const explained: { transition: string; reason: LineExclusion }[] = []
  const leaveOut = (reason: LineExclusion, other: number): void => {
    excluded[reason] = (excluded[reason] ?? 0) + 1
    if (query.explain) explained.push({ transition: [index, other].sort((a, b) => a - b).map((i) => snapshot.levelId(i)).join('~'), reason })
  }
  const side = (i: number) => (parity[i] === 1 ? ('odd' as const) : ('even' as const))
  const partners: { lower: number; upper: number; kind: Transition['kind']; wavenumber: number }[] = []
  for (let other = begin; other < end; other += 1) {
    if (other === index) continue
    const [lower, upper] = other < index ? [other, index] : [index, other]
    const wavenumber = (energyInvcm[upper] ?? 0) - (energyInvcm[lower] ?? 0)
    if (wavenumber === 0) {
      leaveOut('zero_interval', other)
      continue
    }
    const kind = query.kind ?? defaultKind(side(lower), side(upper), twoJ[lower] ?? 0, twoJ[upper] ?? 0)
    if (query.include === 'allowed' && !passes(pairMask(snapshot, kind, lower, upper), query.rules)) {
      leaveOut(firstFailed(assembleTransition(snapshot, lower, upper, kind), query.rules) ?? 'parity', other)
      continue
    }
    partners.push({ lower, upper, kind, wavenumber })
  }
  partners.sort((a, b) => a.wavenumber - b.wavenumber || a.lower - b.lower || a.upper - b.upper)
  const idOf = ({ lower, upper }: { lower: number; upper: number }): string => `${snapshot.levelId(lower)}~${snapshot.levelId(upper)}`
  const { rows, next } = pageOf(partners, limit, after, idOf)
  const lines = rows.map(({ lower, upper, kind }) => assembleTransition(snapshot, lower, upper, kind))
  warnOfAir(lines, warn)
  return {
    data: lines,
    page: { limit, next },
    meta: { total: partners.length, conventions: LINE_CONVENTIONS, excluded, ...(query.explain ? { explained } : {}) },
    table: () => lineTable(lines),
  }
}

/** One line or forbidden pair with the terms of both ends. */
export function oneTransition(snapshot: Snapshot, id: string, query: z.output<(typeof getTransition)['query']>, warn: Warn) {
  const [first, second] = transitionIndices(snapshot, id)
  const detail = transitionDetail(snapshot, first, second, query.kind)
  warnOfAir([detail], warn)
  return { data: detail, meta: { conventions: LINE_CONVENTIONS } }
}

/** The components of a line at a field; with hyperfine=true those of one isotope or of the natural mixture. */
export function componentsAnswer(snapshot: Snapshot, id: string, query: z.output<(typeof getComponents)['query']>, warn: Warn) {
  const [first, second] = transitionIndices(snapshot, id)
  const line = transitionDetail(snapshot, first, second, query.kind)
  const asked = {
    fieldTesla: query.field,
    fieldUncTesla: query.field_unc ?? null,
    model: query.model,
    gValues: query.g_values,
    gS: query.g_s ?? null,
    thetaDeg: query.theta_deg ?? null,
    medium: query.medium,
    tolerance: query.tolerance,
  }
  if (query.hyperfine) {
    const { components, warnings } = predictHyperfine(line, speciesOf(snapshot, line.lower.species).isotopes, { ...asked, isotope: query.isotope ?? null })
    for (const { code, detail } of warnings) warn(code, detail)
    return {
      data: components,
      meta: { model: components.model, g_values: query.g_values, conventions: { ...HYPERFINE_LINE_CONVENTIONS, g_s: asked.gS ?? G_S } },
      table: () => hyperfineComponentTable(components.components),
    }
  }
  const { components, warnings } = predictComponents(line, { ...asked, diamagnetic: query.diamagnetic })
  for (const { code, detail } of warnings) warn(code, detail)
  return {
    data: components,
    meta: { model: components.model, g_values: query.g_values, conventions: { ...FIELD_CONVENTIONS, g_s: asked.gS ?? G_S } },
    table: () => componentTable(components.components),
  }
}

/** Two levels given in the request, judged. */
export function judgeAnswer(body: z.output<NonNullable<(typeof judgeTransition)['body']>>, warn: Warn) {
  const { transition, exchanged } = judgeInline(body.lower, body.upper, body.kind, body.g_s ?? null)
  if (exchanged) warn('levels_exchanged', 'The level given as upper has the lower energy; lower and upper were exchanged in the answer.')
  warnOfAir([transition], warn)
  return { data: transition, meta: { conventions: LINE_CONVENTIONS } }
}
