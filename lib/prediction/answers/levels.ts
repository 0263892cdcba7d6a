import type { z } from 'zod'
import { G_S } from '@/lib/atomic/constants'
import { listLevels } from '@/lib/catalogue/levels'
import type { Snapshot } from '@/lib/catalogue/shape'
import { Problem } from '@/lib/problem'
import { levelCriteria } from '@/lib/prediction/answers/criteria'
import { SUBLEVEL_CONVENTIONS } from '@/lib/prediction/conventions'
import { gFactor } from '@/lib/prediction/gfactor'
import { chooseG } from '@/lib/prediction/g-values'
import { linksOfLevel } from '@/lib/prediction/links'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { levelIndex } from '@/lib/prediction/resolve'
import { sublevelsOf } from '@/lib/prediction/sublevels'
import { levelTable, sublevelTable } from '@/lib/prediction/tables/levels'
import { membersOf } from '@/lib/prediction/transition'
import { levelLinearValidity } from '@/lib/prediction/validity'
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
  const level = snapshot.level(index)
  const choice = { gValues: query.g_values, gS: query.g_s ?? null }
  const sublevels = sublevelsOf(level, { ...choice, fieldTesla: query.field, model: query.model })
  if (query.model === 'auto') warn('intermediate_not_built', 'model=auto is linear until the intermediate model is built; meta.validity says where linear errs.')
  const { g } = chooseG(level, choice, 'level')
  const validity = levelLinearValidity(level, g, membersOf(snapshot, index), { ...choice, fieldTesla: query.field, tolerance: query.tolerance })
  const { rows, next } = pageOf(sublevels, limit, after, (row) => row.m)
  return {
    data: [...rows],
    page: { limit, next },
    meta: { model: 'linear', g_values: query.g_values, g_j: g, field_tesla: query.field, validity, conventions: { ...SUBLEVEL_CONVENTIONS, g_s: choice.gS ?? G_S } },
    table: () => sublevelTable(rows),
  }
}
