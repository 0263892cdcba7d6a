import type { z } from 'zod'
import { G_S } from '@/lib/atomic/constants'
import { listLevels } from '@/lib/catalogue/levels'
import type { Snapshot } from '@/lib/catalogue/shape'
import { Problem } from '@/lib/problem'
import { levelCriteria } from '@/lib/prediction/answers/criteria'
import { SUBLEVEL_CONVENTIONS } from '@/lib/prediction/conventions'
import { gFactor } from '@/lib/prediction/gfactor'
import { linksOfLevel } from '@/lib/prediction/links'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { levelIndex } from '@/lib/prediction/resolve'
import { sublevelsOfLevel } from '@/lib/prediction/level-sublevels'
import { levelTable, sublevelTable } from '@/lib/prediction/tables/levels'
import { diamagneticOf, membersOf } from '@/lib/prediction/transition'
import type { getGFactor, getSublevels, listLevels as listLevelsOperation } from '@/openapi/operations/levels'

type Warn = (code: string, detail: string) => void

/** Levels by filters, in a total order. */
export function levelList(snapshot: Snapshot, query: z.output<(typeof listLevelsOperation)['query']>, after: Position) {
  const limit = limitOf(query)
  const list = listLevels(snapshot, { criteria: levelCriteria(snapshot, query), sort: query.sort, limit, after: after === null ? null : String(after[0]), explain: query.explain })
  if (list === null) throw new Problem('cursor_malformed', 'The cursor names a level that this edition does not hold; begin without one.')
  const levels = list.indices.map((index) => snapshot.level(index))
  return {
    data: levels,
    page: { limit, next: list.next === null ? null : [list.next] },
    meta: { total: list.total, excluded: list.excluded, ...(query.explain ? { explained: list.explained } : {}) },
    table: () => levelTable(levels),
  }
}

/** One level with hyperfine constants and links. */
export function oneLevel(snapshot: Snapshot, id: string) {
  const detail = snapshot.detail(levelIndex(snapshot, id))
  return { data: { ...detail, links: linksOfLevel(detail) } }
}

/** g_J of a level and how it comes about. */
export function gFactorAnswer(snapshot: Snapshot, id: string, query: z.output<(typeof getGFactor)['query']>, warn: Warn) {
  const level = snapshot.level(levelIndex(snapshot, id))
  const answer = gFactor(level, query.g_s ?? G_S)
  if (answer.basis === 'measured' && answer.adopted_unc === null) warn('g_unc_unknown', `The measured g_J of ${id} has no stated uncertainty.`)
  return { data: answer, meta: { conventions: { g_s: answer.g_s, g_l: 1, exact: 'Fractions are at g_s = 2.', difference: 'Measured minus coupled.' } } }
}

/** Sublevels of a level at a field, one row per m, with the validity of the linear law. */
export function sublevelList(snapshot: Snapshot, id: string, query: z.output<(typeof getSublevels)['query']>, after: Position, warn: Warn) {
  const limit = limitOf(query)
  const index = levelIndex(snapshot, id)
  const choice = { gValues: query.g_values, gS: query.g_s ?? null }
  const found = { level: snapshot.level(index), members: membersOf(snapshot, index), diamagnetic: diamagneticOf(snapshot, index) }
  const { rows: all, model, g, validity, warnings } = sublevelsOfLevel(found, { ...choice, fieldTesla: query.field, model: query.model, tolerance: query.tolerance, diamagnetic: query.diamagnetic })
  for (const { code, detail } of warnings) warn(code, detail)
  const { rows, next } = pageOf(all, limit, after, (row) => row.m)
  return {
    data: [...rows],
    page: { limit, next },
    meta: {
      model,
      g_values: query.g_values,
      g_j: g,
      field_tesla: query.field,
      validity,
      diamagnetic: found.diamagnetic,
      conventions: { ...SUBLEVEL_CONVENTIONS[model], g_s: choice.gS ?? G_S },
    },
    table: () => sublevelTable(rows),
  }
}
