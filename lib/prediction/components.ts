import { PhysicsError } from '@/lib/atomic/errors'
import { lineNormalisation } from '@/lib/atomic/field-multiplet'
import { autoModel, type LinearLawValidity } from '@/lib/atomic/intermediate-validity'
import type { ValidityEnd } from '@/lib/atomic/validity'
import { centreOf, placer } from '@/lib/prediction/component-places'
import { CROSSED, gSWarnings, gWarnings, hyperfineWarnings, mediumWarnings, memberWarnings, type Warning } from '@/lib/prediction/component-warnings'
import { diamagneticCautions, isLarge, quadraticShift, type QuadraticShift } from '@/lib/prediction/diamagnetic'
import { chooseG, type ChosenG, type GChoice } from '@/lib/prediction/g-values'
import { twoJOf } from '@/lib/prediction/levels'
import { intermediateSplits, linearSplits, multipletOf, type Split, type UsedLine } from '@/lib/prediction/split'
import { validityEnd, wholeTerm, whyNotWhole } from '@/lib/prediction/term-levels'
import { judgeLinear, toldValidity } from '@/lib/prediction/validity'
import type { Medium, Model } from '@/openapi/schemas/common'
import type { Component, Components } from '@/openapi/schemas/components'
import type { TransitionDetail } from '@/openapi/schemas/transition'

export type { Warning } from '@/lib/prediction/component-warnings'

export interface ComponentsAsked extends GChoice {
  fieldTesla: number
  /** One standard deviation of the field; null: exact. */
  fieldUncTesla: number | null
  model: Model
  thetaDeg: number | null
  medium: Medium
  tolerance: number
  /** Whether the quadratic shift is added; left out: it is not. */
  diamagnetic?: boolean
}

/** What the prediction needs of a transition: what `GET /transitions/{transition}` gives. Levels of no table have no quadratic shift. */
export type PredictedLine = Pick<TransitionDetail, 'id' | 'lower' | 'upper' | 'kind' | 'verdict' | 'wavenumber_invcm' | 'wavelength_vac_nm' | 'terms' | 'hyperfine'> & Partial<Pick<TransitionDetail, 'diamagnetic'>>

/** Whether a pair that is forbidden without field gains strength in one: only J stands in the way, and both terms have LS amplitudes. */
function isFieldInduced({ kind, verdict, terms }: PredictedLine): boolean {
  const failed = verdict.rules.filter((rule) => rule.verdict === 'fail').map((rule) => rule.rule)
  const mixes = terms.lower.levels.length > 1 || terms.upper.levels.length > 1
  return kind === 'E1' && mixes && failed.every((rule) => rule === 'delta_j' || rule === 'zero_zero') && terms.lower.s !== null && terms.upper.s !== null
}

/** The rules that a forbidden pair breaks, for the refusal. */
export function refuseForbidden(line: PredictedLine): void {
  const { id, kind, verdict } = line
  if (verdict.rigorous) return
  const failed = verdict.rules.filter((rule) => rule.basis === 'rigorous' && rule.verdict === 'fail').map((rule) => `${rule.rule}: ${rule.detail}`)
  const induced = isFieldInduced(line)
    ? ` A field mixes the levels of each term and so induces it: POST /predictions with {"multiplets": [{"transition": "${id}"}]} lists its components among those of the multiplet.`
    : ''
  throw new PhysicsError('transition_forbidden', `${id} is forbidden as ${kind}, so it has no components. Broken: ${failed.join('; ')}.${induced}`, 'transition')
}

const refuseUnknownG = (level: PredictedLine['lower'], { g, none }: ChosenG): void => {
  if (g === null && !none) {
    throw new PhysicsError('g_unknown', `${level.id} (${level.term.symbol}) has no g_J: its coupling gives none and none is measured, so its splitting cannot be computed.`, 'transition')
  }
}

/** A line with the g in force at both ends. Refuses `transition_forbidden`, `no_ls_g`, `g_unknown`. */
export function lineWithG(line: PredictedLine, choice: GChoice): UsedLine {
  refuseForbidden(line)
  const used = { line, lower: chooseG(line.lower, choice, 'lower'), upper: chooseG(line.upper, choice, 'upper') }
  refuseUnknownG(line.lower, used.lower)
  refuseUnknownG(line.upper, used.upper)
  return used
}

type Ends = { lower: ValidityEnd; upper: ValidityEnd }

/** Both ends of a line with their terms and the g in force. */
export const endsOf = ({ line, lower, upper }: UsedLine, choice: GChoice): Ends => ({
  lower: validityEnd(twoJOf(line.lower), lower.g, line.terms.lower, choice),
  upper: validityEnd(twoJOf(line.upper), upper.g, line.terms.upper, choice),
})

/** The terms of both ends where both are whole; else why they cannot be diagonalised. */
function termsOf({ line }: UsedLine, ends: Ends) {
  const why = [whyNotWhole(line.lower.id, ends.lower), whyNotWhole(line.upper.id, ends.upper)].filter((reason) => reason !== null)
  const [lower, upper] = [wholeTerm(ends.lower), wholeTerm(ends.upper)]
  return lower !== null && upper !== null ? { terms: { lower, upper }, why: null } : { terms: null, why: why.join('; ') }
}

interface Decided {
  splits: Split[]
  model: 'linear' | 'intermediate'
  warnings: Warning[]
}

/** Takes the model asked for; `auto` is intermediate where the linear law errs by more than the tolerance and the terms can be diagonalised. */
function decide(used: UsedLine, ends: Ends, validity: LinearLawValidity, asked: ComponentsAsked): Decided {
  const { terms, why } = termsOf(used, ends)
  if (asked.model === 'intermediate' && terms === null) {
    throw new PhysicsError('term_incomplete', `The intermediate model diagonalises within the terms of both levels, and ${why}. Use model=linear or model=auto.`, 'model')
  }
  const warnings: Warning[] = []
  if (asked.model === 'auto' && terms === null) warnings.push({ code: 'term_incomplete', detail: `model=auto is linear here and its validity is not known: ${why}.` })
  if (terms === null || asked.model === 'linear' || (asked.model === 'auto' && autoModel(validity) === 'linear')) return { splits: linearSplits(used, asked), model: 'linear', warnings }
  const multiplet = multipletOf(used.line, terms, asked.gS)
  if (multiplet.noAmplitude !== null || lineNormalisation(multiplet, ends.lower.twoJ, ends.upper.twoJ) === null) {
    warnings.push({ code: 'no_ls_amplitude', detail: `Strengths are null in the intermediate model: ${multiplet.noAmplitude ?? 'the line has no strength in LS coupling at zero field'}. Positions hold.` })
  }
  if (asked.gValues === 'adopted') warnings.push(...memberWarnings(used.line.terms.lower, used.line.lower.id), ...memberWarnings(used.line.terms.upper, used.line.upper.id))
  return { splits: intermediateSplits(used, multiplet, asked), model: 'intermediate', warnings }
}

const NO_RADIUS: TransitionDetail['diamagnetic']['lower'] = { status: 'unknown', reason: 'the level is in no table', effective_n: null, mean_square_radius_bohr2: null, cautions: [] }
const NO_RADII: TransitionDetail['diamagnetic'] = { lower: NO_RADIUS, upper: NO_RADIUS }

/** The quadratic shift of a component: upper minus lower, an end without one adding nothing. Null where neither end has any. */
function quadraticOf({ lower, upper, diamagnetic = NO_RADII }: PredictedLine, split: Split, fieldTesla: number): QuadraticShift | null {
  const low = quadraticShift(lower, diamagnetic.lower, split.lower.twoM, fieldTesla, split.lower.state)
  const high = quadraticShift(upper, diamagnetic.upper, split.upper.twoM, fieldTesla, split.upper.state)
  if (low === null && high === null) return null
  return {
    shiftInvcm: (high?.shiftInvcm ?? 0) - (low?.shiftInvcm ?? 0),
    derivativeInvcmPerTesla: (high?.derivativeInvcmPerTesla ?? 0) - (low?.derivativeInvcmPerTesla ?? 0),
  }
}

function added(split: Split, quadratic: QuadraticShift | null): Split {
  if (quadratic === null) return split
  const shiftInvcm = split.shiftInvcm + quadratic.shiftInvcm
  const perLorentz = split.shiftLorentz === null || split.shiftInvcm === 0 ? null : split.shiftLorentz / split.shiftInvcm
  return {
    ...split,
    shiftInvcm,
    shiftLorentz: perLorentz === null ? split.shiftLorentz : shiftInvcm * perLorentz,
    derivativeInvcmPerTesla: split.derivativeInvcmPerTesla + quadratic.derivativeInvcmPerTesla,
  }
}

/** Adds the quadratic shift where it was asked for, and warns of it where it was not and is large. */
function withQuadratic(line: PredictedLine, splits: Split[], asked: ComponentsAsked): { splits: Split[]; warnings: Warning[] } {
  const { fieldTesla, tolerance } = asked
  const { diamagnetic = NO_RADII } = line
  const told = [...diamagneticCautions(line.lower.id, diamagnetic.lower), ...diamagneticCautions(line.upper.id, diamagnetic.upper)]
  const quadratic = splits.map((split) => quadraticOf(line, split, fieldTesla))
  const largest = Math.max(0, ...quadratic.map((one) => Math.abs(one?.shiftInvcm ?? 0)))
  if (asked.diamagnetic !== true) {
    if (!isLarge(largest, fieldTesla, tolerance)) return { splits, warnings: [] }
    return { splits, warnings: [{ code: 'diamagnetic_ignored', detail: `The quadratic (diamagnetic) shift, left out here, is up to ${Number(largest.toPrecision(3))} cm^-1 at this field, more than ${tolerance} of mu_B B; diamagnetic=true adds it.` }, ...told] }
  }
  const warnings = [...told]
  for (const [level, { status, reason }] of [[line.lower, diamagnetic.lower], [line.upper, diamagnetic.upper]] as const) {
    if (status !== 'ok') warnings.push({ code: 'diamagnetic_missing', detail: `No quadratic shift of ${level.id} is added: ${reason ?? 'none can be had'}.` })
  }
  if (isLarge(largest, fieldTesla, tolerance)) warnings.push({ code: 'diamagnetic_large', detail: `The quadratic shift is up to ${Number(largest.toPrecision(3))} cm^-1 at this field, more than ${tolerance} of mu_B B.` })
  const shifted = splits.map((split, i) => added(split, quadratic[i] ?? null))
  return { splits: shifted.sort((a, b) => a.q - b.q || a.shiftInvcm - b.shiftInvcm || a.lower.twoM - b.lower.twoM), warnings }
}

const half = (two: number | null | undefined): number | null => (two === null || two === undefined ? null : two / 2)

function componentOf(split: Split, line: PredictedLine, place: ReturnType<typeof placer>): Component {
  const { lower, upper } = split
  return {
    j_lower: half(lower.twoJ),
    m_lower: lower.twoM / 2,
    j_upper: half(upper.twoJ),
    m_upper: upper.twoM / 2,
    q: split.q,
    polarisation: split.polarisation,
    m_l_lower: lower.state?.mL ?? null,
    m_s_lower: half(lower.state?.twoMS),
    m_l_upper: upper.state?.mL ?? null,
    m_s_upper: half(upper.state?.twoMS),
    shift_lorentz: split.shiftLorentz,
    ...place(split.shiftInvcm),
    derivative_invcm_per_tesla: split.derivativeInvcmPerTesla,
    strength: split.strength,
    intensity: split.intensity,
    intensity_status: split.intensity !== null ? 'ok' : line.kind === 'E2' ? 'not_applicable' : 'unknown',
    stokes_q: split.stokesQ,
    stokes_v: split.stokesV,
    vanishes_by: split.vanishesBy,
    ...split.uncertainty,
  }
}

/**
 * The components of a line at a field, in the linear model or diagonalised within both LS terms, with the validity of the linear law and, per
 * component, a budget of its uncertainty. Pure: the same function serves the API and a page that holds the transition.
 * Refuses (`PhysicsError`): `transition_forbidden`, `term_incomplete` (model=intermediate), `no_ls_g`, `g_unknown`.
 */
export function predictComponents(line: PredictedLine, asked: ComponentsAsked): { components: Components; warnings: Warning[] } {
  const used = lineWithG(line, asked)
  const ends = endsOf(used, asked)
  const validity = judgeLinear(line, ends, asked)
  const decided = decide(used, ends, validity, asked)
  const { splits, warnings: quadratic } = withQuadratic(line, decided.splits, asked)
  const place = placer(line, asked.medium)
  const components: Components = {
    transition: line.id,
    field_tesla: asked.fieldTesla,
    model: decided.model,
    theta_deg: asked.thetaDeg,
    centre: centreOf(line),
    components: splits.map((split) => componentOf(split, line, place)),
    validity: toldValidity(line, validity),
  }
  const warnings = [
    ...decided.warnings,
    ...gSWarnings([line.lower, line.upper], asked),
    ...gWarnings({ level: line.lower, chosen: used.lower }, asked.gValues),
    ...gWarnings({ level: line.upper, chosen: used.upper }, asked.gValues),
    ...mediumWarnings(line, asked.medium),
    ...quadratic,
    ...hyperfineWarnings(line, asked.fieldTesla, { lower: used.lower.g, upper: used.upper.g }),
  ]
  if (components.components.some((component) => component.wavelength_vac_nm === null)) warnings.push(CROSSED)
  return { components, warnings }
}
