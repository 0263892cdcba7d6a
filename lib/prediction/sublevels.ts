import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { fieldTerm, impureJ } from '@/lib/atomic/field-term'
import { formatHalf } from '@/lib/atomic/half'
import { linearLawLevelValidity } from '@/lib/atomic/intermediate-validity'
import { missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { termGrid, termStateNames } from '@/lib/atomic/term-grid'
import { DEFAULT_TOLERANCE } from '@/lib/atomic/validity'
import { bodyProblem, type Fault, faultsProblem, Problem } from '@/lib/problem'
import type { Warning } from '@/lib/prediction/component-warnings'
import { chooseG } from '@/lib/prediction/g-values'
import { inlineLevel, type InlineLevelGiven, termFaults } from '@/lib/prediction/inline'
import { twice } from '@/lib/prediction/levels'
import { FIELD_MAX_TESLA, FIELD_UNITS, fieldFrom, parseField, type FieldUnit } from '@/lib/units/field'
import type { GValues, Model } from '@/openapi/schemas/common'
import type { SublevelMatrix } from '@/openapi/schemas/computed'


/** Numbers in one answer: energies and derivatives together. */
export const SUBLEVEL_VALUES_MAX = 1_000_000

export type FieldsGiven = string | number | { values: number[]; unit: FieldUnit }

/** Fields of a body in tesla. Every value out of range is named; codes are those of a field parameter. */
export function readFields(field: FieldsGiven): number[] {
  if (typeof field === 'string') {
    const parsed = parseField(field)
    if (parsed.ok) return [parsed.tesla]
    throw faultsProblem([{ pointer: '/field', code: parsed.code, detail: parsed.detail }])
  }
  if (typeof field === 'number') return readFields({ values: [field], unit: 'T' })
  const fields = field.values.map((value) => fieldFrom(value, field.unit))
  const faults = fields.flatMap((tesla, i): Fault[] =>
    tesla > FIELD_MAX_TESLA
      ? [{ pointer: `/field/values/${i}`, code: 'field_too_large', detail: `${field.values[i]} ${FIELD_UNITS[field.unit].name} is beyond the ${FIELD_MAX_TESLA} T that is computed here; give a smaller field.` }]
      : [],
  )
  if (faults.length > 0) throw faultsProblem(faults.slice(0, 100))
  return fields
}

export interface TermSublevelsAsked {
  levels: InlineLevelGiven[]
  field: FieldsGiven
  model: Model
  g_values: GValues
  g_s?: number | null | undefined
  tolerance?: number | null | undefined
}

interface Term {
  levels: TermLevels
  gS: number
}

/** The term with the g's in force. */
function termOf({ levels, g_values: gValues, g_s }: TermSublevelsAsked): Term {
  const choice = { gValues, gS: g_s ?? null }
  const read = levels.map((given, i) => ({ twoJ: twice(given.j), energyInvcm: given.energy_invcm, g: chooseG(inlineLevel(given, choice.gS), choice, `levels[${i}]`).g }))
  const [first] = levels
  return { levels: { twoS: twice(first?.s ?? 0), l: first?.l ?? 0, levels: read }, gS: choice.gS ?? G_S }
}

/** How many levels have each m. */
function blocksOf({ levels }: TermLevels): number[] {
  const highest = Math.max(...levels.map(({ twoJ }) => twoJ))
  return Array.from({ length: highest + 1 }, (_, k) => levels.filter(({ twoJ }) => twoJ >= Math.abs(2 * k - highest)).length)
}

const missingIn = (term: TermLevels): string => missingJ(term).map(formatHalf).join(', ')

/** Whether `auto` diagonalises: the linear law of some level errs by more than the tolerance at the largest field asked. */
const linearFails = ({ levels: term, gS }: Term, largest: number, tolerance: number): boolean =>
  term.levels.some(({ twoJ, g }) => linearLawLevelValidity({ twoJ, g, term }, largest, { tolerance, gS }).status === 'not_valid')

function linearMatrix({ levels: { levels } }: Term, fields: readonly number[]): SublevelMatrix {
  const states = levels.flatMap(({ twoJ, energyInvcm: energy, g }) =>
    Array.from({ length: twoJ + 1 }, (_, k) => {
      const m = k - twoJ / 2
      return { m, j: twoJ / 2, energy, slope: m === 0 || g === null ? 0 : MU_B_OVER_HC_INVCM_PER_T * g * m }
    }),
  )
  states.sort((a, b) => a.m - b.m || a.energy - b.energy || a.slope - b.slope || a.j - b.j)
  return {
    m: states.map((state) => state.m),
    j: states.map((state) => state.j),
    m_l: states.map(() => null),
    m_s: states.map(() => null),
    energies_invcm: fields.map((tesla) => states.map((state) => state.energy + state.slope * tesla)),
    derivatives: fields.map(() => states.map((state) => state.slope)),
  }
}

/** Flat [field][state] as a list of lists. */
export const rowsOf = (flat: Float64Array, fields: number, states: number): number[][] => Array.from({ length: fields }, (_, row) => [...flat.subarray(row * states, (row + 1) * states)])

function diagonalisedMatrix({ levels, gS }: Term, fields: readonly number[]): SublevelMatrix {
  const term = fieldTerm(levels, { gS, gL: 1 })
  const names = termStateNames(term)
  const grid = termGrid(term, fields)
  return {
    m: names.twoM.map((two) => two / 2),
    j: names.twoJ.map((two) => (two === null ? null : two / 2)),
    m_l: names.mL,
    m_s: names.twoMS.map((two) => two / 2),
    energies_invcm: rowsOf(grid.energiesInvcm, fields.length, grid.states),
    derivatives: rowsOf(grid.derivatives, fields.length, grid.states),
  }
}

/** Fields times the cubes of the sizes of their blocks, which diagonalising takes time by: a few seconds. */
export const SUBLEVEL_CUBES_MAX = 3e7

/** Refuses an answer of too many numbers, or of too much work, before it is computed; `blocks` are the sizes of what is diagonalised. */
export function checkSize(states: number, fields: number, perState: number, blocks: readonly number[]): void {
  const values = perState * states * fields
  if (values <= SUBLEVEL_VALUES_MAX) {
    const cubes = blocks.reduce((sum, n) => sum + n ** 3, 0)
    const most = Math.max(1, Math.floor(SUBLEVEL_CUBES_MAX / cubes))
    if (fields <= most) return
    throw new Problem('answer_too_large', `${states} states, up to ${Math.max(...blocks)} of which mix, take too long at ${fields} fields; ask for up to ${most} at once.`, { extra: { limit: most } })
  }
  throw new Problem('answer_too_large', `${states} states at ${fields} fields are ${values} numbers; one answer holds up to ${SUBLEVEL_VALUES_MAX}. Ask for fewer fields at once.`, { extra: { limit: SUBLEVEL_VALUES_MAX } })
}

/**
 * Sublevels of one LS term over fields, in the linear model E_J + mu_B g_J m B or diagonalised within the term; `auto` is decided once, from the
 * largest field. States by m, then upwards in energy at B -> 0+; m_l and m_s are null in the linear model, which does not name them. Energies in
 * cm^-1, derivatives in cm^-1 per tesla. Refuses `term_mixed`, `term_incomplete` (model=intermediate), `answer_too_large`.
 */
export function termSublevels(asked: TermSublevelsAsked): { matrix: SublevelMatrix; model: 'linear' | 'intermediate'; warnings: Warning[] } {
  const faults = termFaults(asked.levels, (i) => `/levels/${i}`)
  if (faults.length > 0) throw faultsProblem(faults)
  const fields = readFields(asked.field)
  const term = termOf(asked)
  const whole = missingJ(term.levels).length === 0
  if (asked.model === 'intermediate' && !whole) {
    throw bodyProblem('/levels', 'term_incomplete', `The intermediate model diagonalises within the term, which lacks J = ${missingIn(term.levels)}: give the whole term, or use model=linear or model=auto.`)
  }
  checkSize(asked.levels.reduce((sum, level) => sum + twice(level.j) + 1, 0), fields.length, 2, asked.model === 'linear' ? [] : blocksOf(term.levels))
  const fails = whole && linearFails(term, Math.max(0, ...fields), asked.tolerance ?? DEFAULT_TOLERANCE)
  const model = asked.model === 'intermediate' || (asked.model === 'auto' && fails) ? 'intermediate' : 'linear'
  const warnings: Warning[] = []
  if (asked.model === 'auto' && !whole) warnings.push({ code: 'term_incomplete', detail: `model=auto is linear here and its validity is not known: the term lacks J = ${missingIn(term.levels)}.` })
  if (model === 'intermediate' && asked.g_values === 'adopted') {
    const impure = impureJ(term.levels, { gS: term.gS, gL: 1 })
    if (impure.length > 0) warnings.push({ code: 'term_not_pure', detail: `g_J of J = ${impure.map(formatHalf).join(', ')} is more than 0.5 % from the LS value: the term is not pure.` })
  }
  return { matrix: model === 'linear' ? linearMatrix(term, fields) : diagonalisedMatrix(term, fields), model, warnings }
}
