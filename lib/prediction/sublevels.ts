import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { linearSublevels } from '@/lib/atomic/sublevels'
import { bodyProblem, type Fault, faultsProblem, Problem } from '@/lib/problem'
import { INTERMEDIATE_NOT_BUILT } from '@/lib/prediction/conventions'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { inlineFaults, inlineLevel, type InlineLevelGiven } from '@/lib/prediction/inline'
import { twice, twoJOf } from '@/lib/prediction/levels'
import { FIELD_MAX_TESLA, FIELD_UNITS, fieldFrom, parseField, type FieldUnit } from '@/lib/units/field'
import type { GValues, Model } from '@/openapi/schemas/common'
import type { SublevelMatrix } from '@/openapi/schemas/computed'
import type { Level, Sublevel } from '@/openapi/schemas/level'


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

/** All levels of one term share S, L and parity, and each J stands once. */
function termFaults(levels: readonly InlineLevelGiven[]): Fault[] {
  const [first] = levels
  const seen = new Set<number>()
  return levels.flatMap((level, i): Fault[] => {
    const at = `/levels/${i}`
    const faults = inlineFaults(level, at)
    for (const name of ['s', 'l', 'parity'] as const) {
      if (first && level[name] !== first[name]) {
        faults.push({ pointer: `${at}/${name}`, code: 'term_mixed', detail: `${name} is ${String(level[name])} here and ${String(first[name])} in the first level; the levels of one term share S, L and parity.` })
      }
    }
    if (seen.has(level.j)) faults.push({ pointer: `${at}/j`, code: 'term_mixed', detail: `J = ${level.j} stands twice; each J of a term stands once.` })
    seen.add(level.j)
    return faults
  })
}

export interface SublevelsAsked extends GChoice {
  fieldTesla: number
  model: Model
}

/** Sublevels of one level in the linear model, one row per m from -J up. Refuses `intermediate_not_built`, `no_ls_g`, `g_unknown`. */
export function sublevelsOf(level: Level, asked: SublevelsAsked): Sublevel[] {
  if (asked.model === 'intermediate') throw new PhysicsError('intermediate_not_built', INTERMEDIATE_NOT_BUILT, 'model')
  const { g } = chooseG(level, asked, 'level')
  return linearSublevels({ twoJ: twoJOf(level), g, energyInvcm: level.energy_invcm, fieldTesla: asked.fieldTesla }).map((row) => ({
    m: row.twoM / 2,
    shift_invcm: row.shiftInvcm,
    shift_ghz: row.shiftGhz,
    energy_invcm: row.energyInvcm,
  }))
}

export interface TermSublevelsAsked {
  levels: InlineLevelGiven[]
  field: FieldsGiven
  model: Model
  g_values: GValues
  g_s?: number | null | undefined
}

/**
 * Sublevels of one LS term in the linear model, E_J + mu_B g_J m B, over fields. States by m, then upwards in energy at B -> 0+
 * (energy, then slope); m_l and m_s are null, since the linear model does not name them. Energies in cm^-1, derivatives in cm^-1 per tesla.
 */
export function termSublevels(asked: TermSublevelsAsked): SublevelMatrix {
  if (asked.model === 'intermediate') throw bodyProblem('/model', 'intermediate_not_built', INTERMEDIATE_NOT_BUILT)
  const faults = termFaults(asked.levels)
  if (faults.length > 0) throw faultsProblem(faults)
  const fields = readFields(asked.field)
  const choice = { gValues: asked.g_values, gS: asked.g_s ?? null }
  const states = asked.levels.flatMap((given, i) => {
    const { g } = chooseG(inlineLevel(given, choice.gS), choice, `levels[${i}]`)
    const twoJ = twice(given.j)
    return Array.from({ length: twoJ + 1 }, (_, k) => {
      const m = k - twoJ / 2
      return { m, j: given.j, energy: given.energy_invcm, slope: m === 0 || g === null ? 0 : MU_B_OVER_HC_INVCM_PER_T * g * m }
    })
  })
  if (2 * states.length * fields.length > SUBLEVEL_VALUES_MAX) {
    throw new Problem('answer_too_large', `${states.length} states at ${fields.length} fields are ${2 * states.length * fields.length} numbers; one answer holds up to ${SUBLEVEL_VALUES_MAX}. Ask for fewer fields at once.`, {
      extra: { limit: SUBLEVEL_VALUES_MAX },
    })
  }
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
