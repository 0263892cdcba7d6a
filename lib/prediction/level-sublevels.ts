import { G_S, GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldTerm } from '@/lib/atomic/field-term'
import { intermediateSublevels, type TermState } from '@/lib/atomic/intermediate'
import { linearSublevels } from '@/lib/atomic/sublevels'
import { gSWarnings, gWarnings, memberWarnings, type Warning } from '@/lib/prediction/component-warnings'
import { diamagneticCautions, isLarge, quadraticShift } from '@/lib/prediction/diamagnetic'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { twoJOf } from '@/lib/prediction/levels'
import { type MembersTold, validityEnd, wholeTerm, whyNotWhole } from '@/lib/prediction/term-levels'
import { levelLinearValidity } from '@/lib/prediction/validity'
import type { Model } from '@/openapi/schemas/common'
import type { Level, Sublevel } from '@/openapi/schemas/level'
import type { LevelDiamagnetic } from '@/openapi/schemas/transition'
import type { LevelValidity } from '@/openapi/schemas/validity'

export interface SublevelsAsked extends GChoice {
  fieldTesla: number
  model: Model
  tolerance: number
  /** Whether the quadratic shift is added. */
  diamagnetic: boolean
  /** Whether the amplitudes of |J m> are told. */
  amplitudes: boolean
}

/** A level with the levels of its term and what its quadratic shift is computed from. */
export interface FieldLevel {
  level: Level
  members: MembersTold
  diamagnetic: LevelDiamagnetic
}

export interface SublevelsOfLevel {
  rows: Sublevel[]
  model: 'linear' | 'intermediate'
  g: number | null
  validity: LevelValidity
  warnings: Warning[]
}

interface Row {
  twoJ: number | null
  twoM: number
  state: TermState | null
  shiftInvcm: number
  derivativeInvcmPerTesla: number
}

const linearRows = (level: Level, g: number | null, fieldTesla: number): Row[] =>
  linearSublevels({ twoJ: twoJOf(level), g, energyInvcm: level.energy_invcm, fieldTesla }).map(({ twoM, shiftInvcm }) => ({
    twoJ: twoJOf(level),
    twoM,
    state: null,
    shiftInvcm,
    derivativeInvcmPerTesla: twoM === 0 ? 0 : (MU_B_OVER_HC_INVCM_PER_T * (g ?? 0) * twoM) / 2,
  }))

/**
 * The sublevels of one level of the table at a field, from m = -J up, in the linear model or diagonalised within its term (J by continuity from
 * zero field); `auto` diagonalises where the linear law errs by more than the tolerance. The quadratic shift of each stands beside it and is added
 * on request. Refuses `term_incomplete` (model=intermediate), `no_ls_g`, `g_unknown`.
 */
export function sublevelsOfLevel({ level, members, diamagnetic }: FieldLevel, asked: SublevelsAsked): SublevelsOfLevel {
  const { fieldTesla, tolerance } = asked
  const chosen = chooseG(level, asked, 'level')
  const end = validityEnd(twoJOf(level), chosen.g, members, asked)
  const validity = levelLinearValidity(level, chosen.g, members, asked)
  const [term, why] = [wholeTerm(end), whyNotWhole(level.id, end)]
  if (asked.model === 'intermediate' && term === null) throw new PhysicsError('term_incomplete', `The intermediate model diagonalises within the term, and ${why ?? 'it is not whole'}. Use model=linear or model=auto.`, 'model')
  const warnings: Warning[] = [...gSWarnings([level], asked), ...gWarnings({ level, chosen }, asked.gValues)]
  if (asked.model === 'auto' && term === null) warnings.push({ code: 'term_incomplete', detail: `model=auto is linear here and its validity is not known: ${why ?? 'the term is not whole'}.` })
  const diagonalised = term !== null && (asked.model === 'intermediate' || (asked.model === 'auto' && validity.status === 'not_valid'))
  if (diagonalised && asked.gValues === 'adopted') warnings.push(...memberWarnings(members, level.id))
  const rows = diagonalised
    ? intermediateSublevels(fieldTerm(term, { gS: asked.gS ?? G_S, gL: 1 }), fieldTesla).filter((state) => state.nominalTwoJ === twoJOf(level)).map((state): Row => ({ ...state, state }))
    : linearRows(level, chosen.g, fieldTesla)
  const quadratic = rows.map((row) => quadraticShift(level, diamagnetic, row.twoM, fieldTesla, row.state))
  const largest = Math.max(0, ...quadratic.map((one) => Math.abs(one?.shiftInvcm ?? 0)))
  if (isLarge(largest, fieldTesla, tolerance)) {
    const size = `The quadratic (diamagnetic) shift is up to ${Number(largest.toPrecision(3))} cm^-1 at this field, more than ${tolerance} of mu_B B`
    warnings.push(asked.diamagnetic ? { code: 'diamagnetic_large', detail: `${size}.` } : { code: 'diamagnetic_ignored', detail: `${size}, and is left out here; diamagnetic=true adds it.` })
  }
  if (asked.diamagnetic && diamagnetic.status !== 'ok') warnings.push({ code: 'diamagnetic_missing', detail: `No quadratic shift of ${level.id} is added: ${diamagnetic.reason ?? 'none can be had'}.` })
  if (asked.diamagnetic || isLarge(largest, fieldTesla, tolerance)) warnings.push(...diamagneticCautions(level.id, diamagnetic))
  return {
    rows: rows.map(({ twoJ, twoM, state, ...row }, i): Sublevel => {
      const own = quadratic[i] ?? null
      const more = asked.diamagnetic && own !== null ? own : { shiftInvcm: 0, derivativeInvcmPerTesla: 0 }
      const shift = row.shiftInvcm + more.shiftInvcm
      return {
        j: twoJ === null ? null : twoJ / 2,
        m: twoM / 2,
        m_l: state?.mL ?? null,
        m_s: state === null ? null : state.twoMS / 2,
        shift_invcm: shift,
        shift_ghz: shift * GHZ_PER_INVCM,
        shift_mhz: shift * GHZ_PER_INVCM * 1000,
        energy_invcm: level.energy_invcm + shift,
        derivative_invcm_per_tesla: row.derivativeInvcmPerTesla + more.derivativeInvcmPerTesla,
        diamagnetic_shift_invcm: own?.shiftInvcm ?? null,
        diamagnetic_status: diamagnetic.status,
        ...(asked.amplitudes ? { amplitudes: (state?.amplitudes ?? [{ twoJ: twoJOf(level), amplitude: 1 }]).map((one) => ({ j: one.twoJ / 2, amplitude: one.amplitude })) } : {}),
      }
    }),
    model: diagonalised ? 'intermediate' : 'linear',
    g: chosen.g,
    validity,
    warnings,
  }
}
