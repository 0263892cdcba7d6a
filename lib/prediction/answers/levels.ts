import type { z } from 'zod'
import { G_S } from '@/lib/atomic/constants'
import { listLevels } from '@/lib/catalogue/levels'
import type { Snapshot } from '@/lib/catalogue/shape'
import { Problem } from '@/lib/problem'
import { levelCriteria } from '@/lib/prediction/answers/criteria'
import { CROSSING_CONVENTIONS, NUCLEUS_CONVENTIONS, SUBLEVEL_CONVENTIONS } from '@/lib/prediction/conventions'
import { crossingsOf } from '@/lib/prediction/crossings'
import { gFactor } from '@/lib/prediction/gfactor'
import { hyperfineSublevelsOf } from '@/lib/prediction/hyperfine'
import { linksOfLevel } from '@/lib/prediction/links'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { levelIndex } from '@/lib/prediction/resolve'
import { sublevelsOfLevel } from '@/lib/prediction/level-sublevels'
import { hyperfineSublevelTable, levelTable, sublevelTable } from '@/lib/prediction/tables/levels'
import { diamagneticOf, membersOf } from '@/lib/prediction/transition'
import type { getCrossings, getGFactor, getSublevels, listLevels as listLevelsOperation } from '@/openapi/operations/levels'

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

/** A level with its constants and the isotopes of its species. */
function nuclearLevelOf(snapshot: Snapshot, index: number) {
  const species = snapshot.species[snapshot.columns.speciesOf[index] ?? 0]
  return { level: snapshot.level(index), constants: snapshot.hyperfine(index), isotopes: species?.isotopes ?? [] }
}

type SublevelQuery = z.output<(typeof getSublevels)['query']>

/** Hyperfine sublevels of a level for one isotope at a field, one row per state. */
function hyperfineList(snapshot: Snapshot, index: number, query: SublevelQuery, after: Position, warn: Warn) {
  const limit = limitOf(query)
  const { rows: all, isotope, g, warnings } = hyperfineSublevelsOf(nuclearLevelOf(snapshot, index), {
    gValues: query.g_values,
    gS: query.g_s ?? null,
    fieldTesla: query.field,
    isotope: query.isotope ?? null,
    amplitudes: query.amplitudes,
  })
  for (const { code, detail } of warnings) warn(code, detail)
  // a state is told from the others by its high-field name alone, since F is null where energies coincide
  const { rows, next } = pageOf(all, limit, after, (row) => `${row.m_f} ${row.m_j}`)
  const [constants] = isotope.constants
  return {
    data: [...rows],
    page: { limit, next },
    meta: {
      model: 'hyperfine',
      g_values: query.g_values,
      g_j: g,
      field_tesla: query.field,
      field_gauss: query.field * 1e4,
      isotope: { mass_number: isotope.massNumber, nuclear_spin: isotope.twoI / 2, g_i: isotope.gI, a_mhz: constants?.a_mhz ?? null, b_mhz: constants?.b_mhz ?? null, source: constants?.source ?? null },
      conventions: { ...NUCLEUS_CONVENTIONS, order: 'Rows by m_F, then upwards in energy.' },
    },
    table: () => hyperfineSublevelTable(rows),
  }
}

/** Sublevels of a level at a field, one row per m, with the validity of the linear law; with hyperfine=true those of one isotope. */
export function sublevelList(snapshot: Snapshot, id: string, query: SublevelQuery, after: Position, warn: Warn) {
  const index = levelIndex(snapshot, id)
  if (query.hyperfine) return hyperfineList(snapshot, index, query, after, warn)
  const limit = limitOf(query)
  const choice = { gValues: query.g_values, gS: query.g_s ?? null }
  const found = { level: snapshot.level(index), members: membersOf(snapshot, index), diamagnetic: diamagneticOf(snapshot, index) }
  const asked = { ...choice, fieldTesla: query.field, model: query.model, tolerance: query.tolerance, diamagnetic: query.diamagnetic, amplitudes: query.amplitudes }
  const { rows: all, model, g, validity, warnings } = sublevelsOfLevel(found, asked)
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

/** Where two sublevels of a level, or of its term, cross, come nearest or keep their distance. */
export function crossingsAnswer(snapshot: Snapshot, id: string, query: z.output<(typeof getCrossings)['query']>, warn: Warn) {
  const index = levelIndex(snapshot, id)
  const { crossings, warnings } = crossingsOf(nuclearLevelOf(snapshot, index), membersOf(snapshot, index), {
    gValues: query.g_values,
    gS: query.g_s ?? null,
    a: query.a,
    b: query.b,
    fromTesla: query.from,
    toTesla: query.to,
    hyperfine: query.hyperfine,
    isotope: query.isotope ?? null,
  })
  for (const { code, detail } of warnings) warn(code, detail)
  return { data: crossings, meta: { model: query.hyperfine ? 'hyperfine' : 'intermediate', g_values: query.g_values, conventions: { ...CROSSING_CONVENTIONS, ...(query.hyperfine ? NUCLEUS_CONVENTIONS : SUBLEVEL_CONVENTIONS.intermediate) } } }
}
