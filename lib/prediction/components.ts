import { AIR_FROM_NM, airWavelength, CONVENTIONAL_AIR_TO_NM, DEFAULT_AIR_FORMULA, refractivity } from '@/lib/atomic/air'
import { type Component as Splitting, weakFieldComponents } from '@/lib/atomic/components'
import { PhysicsError } from '@/lib/atomic/errors'
import { termNotPure } from '@/lib/atomic/adopted'
import { GHZ_PER_INVCM, MU_B_OVER_H_GHZ_PER_T } from '@/lib/atomic/constants'
import { AIR_EXTRAPOLATED, INTERMEDIATE_NOT_BUILT } from '@/lib/prediction/conventions'
import { chooseG, type ChosenG, type GChoice } from '@/lib/prediction/g-values'
import { type PhysicalLevel, twoJOf } from '@/lib/prediction/levels'
import { componentUncertainty } from '@/lib/prediction/uncertainty'
import { linearValidity } from '@/lib/prediction/validity'
import { plusZero } from '@/lib/units/number'
import { thzOfWavenumber, vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { Medium, Model } from '@/openapi/schemas/common'
import type { Component, Components } from '@/openapi/schemas/components'
import type { TransitionDetail } from '@/openapi/schemas/transition'

export interface Warning {
  code: string
  detail: string
}

export interface ComponentsAsked extends GChoice {
  fieldTesla: number
  /** One standard deviation of the field; null: exact. */
  fieldUncTesla: number | null
  model: Model
  thetaDeg: number | null
  medium: Medium
  tolerance: number
}

/** What the prediction needs of a transition: what `GET /transitions/{transition}` gives. */
export type PredictedLine = Pick<TransitionDetail, 'id' | 'lower' | 'upper' | 'kind' | 'verdict' | 'wavenumber_invcm' | 'wavelength_vac_nm' | 'terms' | 'hyperfine'>

/** The medium that shifts in wavelength are told in, judged on the centre; air that does not apply gives way to vacuum. */
function mediumAt(vacuumNm: number, medium: Medium): 'air' | 'vacuum' {
  if (medium === 'vacuum' || vacuumNm < AIR_FROM_NM) return 'vacuum'
  return medium === 'air' || vacuumNm <= CONVENTIONAL_AIR_TO_NM ? 'air' : 'vacuum'
}

/**
 * Wavelength minus that of the centre, in pm, without the difference of two nearly equal numbers:
 * in vacuum -lambda_0 shift / sigma; in air (d n_0 - lambda_0 (n - n_0)) / (n n_0), with d the shift in vacuum.
 */
function shiftPm(centreNm: number, shiftInvcm: number, wavenumber: number, medium: 'air' | 'vacuum', r0: number): number {
  const vacuum = (-centreNm * shiftInvcm) / wavenumber
  if (medium === 'vacuum') return plusZero(1000 * vacuum)
  const r = refractivity(DEFAULT_AIR_FORMULA, centreNm + vacuum)
  return plusZero((1000 * (vacuum * (1 + r0) - centreNm * (r - r0))) / ((1 + r) * (1 + r0)))
}

interface Place {
  line: PredictedLine
  asked: ComponentsAsked
  medium: 'air' | 'vacuum'
  /** n - 1 at the centre. */
  r0: number
  lower: ChosenG
  upper: ChosenG
}

function componentOf(split: Splitting, { line, asked, medium, r0, lower, upper }: Place): Component {
  const wavenumber = line.wavenumber_invcm + split.shiftInvcm
  // where the field has brought the upper sublevel to or below the lower one there is no wavelength to tell
  const vacuum = wavenumber > 0 ? vacuumNmOfWavenumber(wavenumber) : null
  return {
    m_lower: split.twoMLower / 2,
    m_upper: split.twoMUpper / 2,
    q: split.q,
    polarisation: split.polarisation,
    shift_lorentz: split.shiftLorentz,
    shift_invcm: split.shiftInvcm,
    shift_ghz: split.shiftInvcm * GHZ_PER_INVCM,
    shift_pm: vacuum === null ? null : shiftPm(line.wavelength_vac_nm, split.shiftInvcm, wavenumber, medium, r0),
    wavenumber_invcm: wavenumber,
    wavelength_vac_nm: vacuum,
    wavelength_air_nm: vacuum === null ? null : airWavelength(vacuum).nm,
    frequency_thz: thzOfWavenumber(wavenumber),
    strength: split.strength,
    intensity: split.intensity,
    intensity_status: split.intensity === null ? 'not_applicable' : 'ok',
    stokes_q: split.stokesQ,
    stokes_v: split.stokesV,
    vanishes_by: split.forbidden ?? null,
    ...componentUncertainty(
      { level: line.lower, chosen: lower, twoM: split.twoMLower },
      { level: line.upper, chosen: upper, twoM: split.twoMUpper },
      asked.fieldTesla,
      asked.fieldUncTesla,
    ),
  }
}

/** The rules that a forbidden pair breaks, for the refusal. */
function refuseForbidden({ id, kind, verdict }: PredictedLine): void {
  if (verdict.rigorous) return
  const failed = verdict.rules.filter((rule) => rule.basis === 'rigorous' && rule.verdict === 'fail').map((rule) => `${rule.rule}: ${rule.detail}`)
  throw new PhysicsError('transition_forbidden', `${id} is forbidden as ${kind}, so it has no components. Broken: ${failed.join('; ')}.`, 'transition')
}

const refuseUnknownG = (level: PredictedLine['lower'], { g, none }: ChosenG): void => {
  if (g === null && !none) {
    throw new PhysicsError('g_unknown', `${level.id} (${level.term.symbol}) has no g_J: its coupling gives none and none is measured, so its splitting cannot be computed.`, 'transition')
  }
}

function warningsOf(line: PredictedLine, asked: ComponentsAsked, ends: readonly (readonly [PhysicalLevel & { id: string }, ChosenG])[]): Warning[] {
  const warnings: Warning[] = []
  if (asked.model === 'auto') warnings.push({ code: 'intermediate_not_built', detail: 'model=auto is linear until the intermediate model is built; validity says where linear errs.' })
  const kept = ends.filter(([level]) => asked.gS !== null && asked.gValues === 'adopted' && level.g_j.basis !== 'coupled' && level.g_j.adopted !== null)
  if (kept.length > 0) {
    warnings.push({ code: 'g_s_not_applied', detail: `g_s does not touch the adopted g_J of ${kept.map(([level]) => level.id).join(' and ')}, which is not computed from it; g_values=coupled or ls takes all from g_s.` })
  }
  for (const [level, chosen] of ends) {
    if (asked.gValues === 'adopted' && level.g_j.basis === 'measured' && chosen.unc === null) {
      warnings.push({ code: 'g_unc_unknown', detail: `The measured g_J of ${level.id} has no stated uncertainty.` })
    }
    if (level.g_j.measured !== null && termNotPure(level.g_j.measured, level.g_j.ls)) {
      warnings.push({ code: 'term_not_pure', detail: `The measured g_J of ${level.id}, ${level.g_j.measured}, is more than 0.5 % from the LS value ${level.g_j.ls ?? 0}: its term is not pure.` })
    }
  }
  const { extrapolated } = airWavelength(line.wavelength_vac_nm)
  if (extrapolated) warnings.push({ code: 'air_extrapolated', detail: AIR_EXTRAPOLATED })
  if (asked.medium === 'air' && line.wavelength_vac_nm < AIR_FROM_NM) {
    warnings.push({ code: 'air_not_applicable', detail: 'Below 200 nm no air wavelength is given; shift_pm is in vacuum.' })
  }
  return warnings
}

/** Says what the stored constants A are beside the field's own splitting, for each end that has any. */
function hyperfineWarnings({ lower, upper, hyperfine }: PredictedLine, fieldTesla: number, g: { lower: number | null; upper: number | null }): Warning[] {
  return (['lower', 'upper'] as const).flatMap((end) => {
    const level = end === 'lower' ? lower : upper
    const told = hyperfine[end].flatMap(({ mass_number, a_mhz }) => (a_mhz === null ? [] : [`A = ${a_mhz} MHz for mass number ${mass_number}`]))
    const splitting = g[end]
    if (told.length === 0 || splitting === null) return []
    const ghz = Math.abs(splitting) * MU_B_OVER_H_GHZ_PER_T * fieldTesla
    return [{
      code: 'hyperfine_ignored',
      detail: `Hyperfine structure is left out: ${level.id} has ${told.join(', ')}; at this field g mu_B B / h is ${Number(ghz.toPrecision(3))} GHz. Where the two are comparable the pattern is not what the isotope shows.`,
    }]
  })
}

/**
 * The components of a line at a field in the linear model, with validity and, per component, a budget of its uncertainty. Pure: the same function
 * serves the API and a page that holds the transition. Refuses (`PhysicsError`): `intermediate_not_built`, `transition_forbidden`,
 * `no_ls_g`, `g_unknown`.
 */
export function predictComponents(line: PredictedLine, asked: ComponentsAsked): { components: Components; warnings: Warning[] } {
  if (asked.model === 'intermediate') throw new PhysicsError('intermediate_not_built', INTERMEDIATE_NOT_BUILT, 'model')
  refuseForbidden(line)
  const [lower, upper] = [chooseG(line.lower, asked, 'lower'), chooseG(line.upper, asked, 'upper')]
  refuseUnknownG(line.lower, lower)
  refuseUnknownG(line.upper, upper)
  const medium = mediumAt(line.wavelength_vac_nm, asked.medium)
  const place: Place = { line, asked, medium, r0: medium === 'air' ? refractivity(DEFAULT_AIR_FORMULA, line.wavelength_vac_nm) : 0, lower, upper }
  const splittings = weakFieldComponents({
    kind: line.kind,
    lower: { twoJ: twoJOf(line.lower), g: lower.g },
    upper: { twoJ: twoJOf(line.upper), g: upper.g },
    fieldTesla: asked.fieldTesla,
    thetaDeg: asked.thetaDeg,
  })
  const air = airWavelength(line.wavelength_vac_nm)
  const components: Components = {
    transition: line.id,
    field_tesla: asked.fieldTesla,
    model: 'linear',
    theta_deg: asked.thetaDeg,
    centre: {
      wavenumber_invcm: line.wavenumber_invcm,
      wavelength_vac_nm: line.wavelength_vac_nm,
      wavelength_air_nm: air.nm,
      wavelength_air_status: air.nm === null ? 'not_applicable' : 'ok',
      frequency_thz: thzOfWavenumber(line.wavenumber_invcm),
    },
    components: splittings.map((split) => componentOf(split, place)),
    validity: linearValidity(line, asked, lower.g, upper.g),
  }
  const warnings = [...warningsOf(line, asked, [[line.lower, lower], [line.upper, upper]]), ...hyperfineWarnings(line, asked.fieldTesla, { lower: lower.g, upper: upper.g })]
  if (components.components.some((component) => component.wavelength_vac_nm === null)) {
    warnings.push({ code: 'level_crossing', detail: 'At this field an upper sublevel lies at or below a lower one; those components have no wavelength, and their wavenumber is not positive.' })
  }
  return { components, warnings }
}
