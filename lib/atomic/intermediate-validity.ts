import { BLEND_RESOLVING_POWER, type BlendKernel, blendError, blendKernel, blendOf, type LinePair } from '@/lib/atomic/blend'
import { componentStrength, shiftLorentz } from '@/lib/atomic/components'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { firstPassed } from '@/lib/atomic/field-limit'
import { type FieldMultiplet, lineNormalisation, multipletOfTerms } from '@/lib/atomic/field-multiplet'
import { solveTerm, type TermSolution, termSolution } from '@/lib/atomic/field-solver'
import { type FieldTerm, fieldTerm } from '@/lib/atomic/field-term'
import { multipletSolution, type MultipletSolution, readSomeStrengths } from '@/lib/atomic/intermediate-grid'
import { missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { remembering } from '@/lib/atomic/remembering'
import type { Kind } from '@/lib/atomic/rules'
import { type AspectValidity, DEFAULT_TOLERANCE, fingerprint, levelValidity, type LevelValidity, type LineValidity, lineValidity, type ValidityEnd } from '@/lib/atomic/validity'

export const DIAGONALISED_METHOD = 'Diagonalisation within both LS terms at this field, compared with the linear law; field limits by root finding'

export interface BlendValidity extends AspectValidity {
  /** The lines taken as unresolved from this one, itself included. */
  lines: LinePair[]
}

/** Validity of the linear law with the centroid of the unresolved blend beside positions and strengths. */
export interface LinearLawValidity extends LineValidity {
  blend: BlendValidity
}

export interface LinearLawInput {
  kind: Kind
  lower: ValidityEnd
  upper: ValidityEnd
  fieldTesla: number
  tolerance?: number
  gS?: number
  gL?: number
  /** Lines nearer than wavenumber over this are one blend. */
  blendResolvingPower?: number
}

type Factors = { gS: number; gL: number }

/** Whether the end's term is known and complete, so that it can be diagonalised. */
const complete = (end: ValidityEnd): end is ValidityEnd & { term: TermLevels } => end.term !== null && missingJ(end.term).length === 0

/** The end's term with the g in force for its own level. */
const withOwnG = (end: ValidityEnd & { term: TermLevels }): TermLevels => ({ ...end.term, levels: end.term.levels.map((level) => (level.twoJ === end.twoJ ? { ...level, g: end.g } : level)) })

const smallestGap = (term: FieldTerm): number => Math.min(Number.POSITIVE_INFINITY, ...term.levels.slice(1).map((level, i) => Math.abs(level.energyInvcm - (term.levels[i]?.energyInvcm ?? 0))))

interface ReadyLevel {
  term: FieldTerm
  room: TermSolution
  /** States of this J. */
  states: number[]
  limit: number | null
}

/** Numbers of the vectors of the terms remembered, and components of the multiplets. */
const NUMBERS_REMEMBERED = 400_000
const levelMemory = remembering<ReadyLevel>(NUMBERS_REMEMBERED, ({ term }) => Math.max(100, term.vectorLength))

function largestBeyond(level: Pick<ReadyLevel, 'room' | 'states'>): number {
  let largest = 0
  for (const state of level.states) largest = Math.max(largest, Math.abs(level.room.beyond[state] as number))
  return largest
}

function readyLevel(end: ValidityEnd & { term: TermLevels }, tolerance: number, factors: Factors): ReadyLevel {
  return levelMemory(`${factors.gS}|${factors.gL}|${tolerance}|${fingerprint(end)}`, () => {
    const term = fieldTerm(withOwnG(end), factors)
    const states = term.blocks.flatMap((block) => [...block.own].flatMap((own, k) => (block.twoJs[own] === end.twoJ ? [block.firstState + k] : [])))
    const level: ReadyLevel = { term, room: termSolution(term), states, limit: null }
    const error = (x: number) => {
      solveTerm(term, x, level.room)
      return largestBeyond(level) / x
    }
    if (term.levels.length > 1) level.limit = firstPassed(error, tolerance, smallestGap(term))
    return level
  })
}

/**
 * Whether the linear law holds for one level at a field, from the diagonalised term; by perturbation and `unknown` where the term is not
 * complete. As `levelValidity`, but without the approximations of second order.
 */
export function linearLawLevelValidity(end: ValidityEnd, fieldTesla: number, { tolerance = DEFAULT_TOLERANCE, gS = G_S, gL = 1 }: { tolerance?: number; gS?: number; gL?: number } = {}): LevelValidity {
  if (!complete(end)) return levelValidity(end, fieldTesla, { tolerance, gS })
  const ready = readyLevel(end, tolerance, { gS, gL })
  const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  solveTerm(ready.term, x, ready.room)
  const error = largestBeyond(ready)
  const relative = x === 0 ? 0 : error / x
  const largestShift = (Math.abs(end.g ?? 0) * end.twoJ * x) / 2
  return {
    status: relative <= tolerance ? 'valid' : 'not_valid',
    errorInvcm: error,
    relativeError: relative,
    relativeToShift: largestShift === 0 ? null : error / largestShift,
    tolerance,
    fieldLimitTesla: ready.limit,
    missingTwoJ: [],
    reason: null,
  }
}

interface ReadyLine {
  multiplet: FieldMultiplet
  room: MultipletSolution
  blend: BlendKernel | null
  /** The line's components: index, strength and largest of its q in the linear model. */
  components: { index: number; strength: number; largest: number }[]
  largestShift: number
  normalisation: number | null
  /** Components whose strengths are needed: the line's and the blend's. */
  needed: Int32Array
  strengths: Float64Array
  limits: { positions: number | null; strengths: number | null; blend: number | null }
}

interface Errors {
  positionInvcm: number
  position: number
  strength: number | null
  blendInvcm: number | null
  blend: number | null
}

const lineMemory = remembering<ReadyLine>(NUMBERS_REMEMBERED, ({ multiplet }) => Math.max(100, multiplet.count))

/** All three errors at x = mu_B B; the terms are solved once for them. */
function errorsAt(line: ReadyLine, x: number): Errors {
  const { multiplet, room, components } = line
  solveTerm(multiplet.lower, x, room.lower)
  solveTerm(multiplet.upper, x, room.upper)
  let [position, strength] = [0, 0]
  for (const c of components) {
    if (c.strength === 0) continue
    position = Math.max(position, Math.abs((room.upper.beyond[multiplet.upperState[c.index] as number] as number) - (room.lower.beyond[multiplet.lowerState[c.index] as number] as number)))
  }
  const relative = position === 0 ? 0 : position / (x * Math.max(line.largestShift, 0.01))
  if (line.normalisation === null) return { positionInvcm: position, position: relative, strength: null, blendInvcm: null, blend: null }
  readSomeStrengths(multiplet, room, line.needed, line.strengths)
  for (const c of components) {
    if (c.largest > 0) strength = Math.max(strength, Math.abs((line.strengths[c.index] as number) * line.normalisation - c.strength) / c.largest)
  }
  const blend = line.blend === null ? null : blendError(line.blend, room, line.strengths, x)
  return { positionInvcm: position, position: relative, strength, blendInvcm: blend?.errorInvcm ?? null, blend: blend?.relativeError ?? null }
}

function componentsOf(multiplet: FieldMultiplet, pair: LinePair): ReadyLine['components'] {
  const own = Array.from({ length: multiplet.count }, (_, index) => index)
    .filter((i) => multiplet.nominalTwoJLower[i] === pair.twoJLower && multiplet.nominalTwoJUpper[i] === pair.twoJUpper)
    .map((index) => ({ index, q: multiplet.q[index] ?? 0, strength: componentStrength(multiplet.kind, pair.twoJLower, multiplet.twoMLower[index] ?? 0, pair.twoJUpper, multiplet.twoMUpper[index] ?? 0) }))
  return own.map(({ index, q, strength }) => ({ index, strength, largest: Math.max(0, ...own.filter((c) => c.q === q).map((c) => c.strength)) }))
}

function readyLine(input: LinearLawInput, low: ValidityEnd & { term: TermLevels }, high: ValidityEnd & { term: TermLevels }, tolerance: number, factors: Factors): ReadyLine {
  const resolvingPower = input.blendResolvingPower ?? BLEND_RESOLVING_POWER
  const key = `${input.kind}|${factors.gS}|${factors.gL}|${tolerance}|${resolvingPower}|${fingerprint(input.lower)}|${fingerprint(input.upper)}`
  return lineMemory(key, () => {
    // the lines of one multiplet share it
    const multiplet = multipletOfTerms(withOwnG(low), withOwnG(high), input.kind, factors)
    const { lower, upper } = multiplet
    const pair = { twoJLower: input.lower.twoJ, twoJUpper: input.upper.twoJ }
    const lines = blendOf(multiplet, pair, resolvingPower)
    const components = componentsOf(multiplet, pair)
    const shifts = components.filter((c) => c.strength > 0).map((c) => Math.abs(shiftLorentz(input.lower.g, multiplet.twoMLower[c.index] ?? 0, input.upper.g, multiplet.twoMUpper[c.index] ?? 0)))
    const blend = lines.length > 0 ? blendKernel(multiplet, lines) : null
    const line: ReadyLine = {
      multiplet,
      room: multipletSolution(multiplet),
      blend,
      components,
      largestShift: Math.max(0, ...shifts),
      normalisation: lineNormalisation(multiplet, pair.twoJLower, pair.twoJUpper),
      needed: Int32Array.from(new Set([...components.map((c) => c.index), ...(blend?.members ?? [])])),
      strengths: new Float64Array(multiplet.count),
      limits: { positions: null, strengths: null, blend: null },
    }
    const gap = Math.min(smallestGap(lower), smallestGap(upper))
    if (Number.isFinite(gap)) line.limits = limitsOf(line, tolerance, gap)
    return line
  })
}

/** The three searches scan the same fields first, so what was solved is kept while they run. */
function limitsOf(line: ReadyLine, tolerance: number, gap: number): ReadyLine['limits'] {
  const solved = new Map<number, Errors>()
  const at = (x: number): Errors => {
    const errors = solved.get(x) ?? errorsAt(line, x)
    solved.set(x, errors)
    return errors
  }
  const hasStrengths = line.normalisation !== null
  return {
    positions: firstPassed((x) => at(x).position, tolerance, gap),
    strengths: hasStrengths ? firstPassed((x) => at(x).strength ?? 0, tolerance, gap) : null,
    blend: hasStrengths && line.blend ? firstPassed((x) => at(x).blend ?? 0, tolerance, gap) : null,
  }
}

const aspect = (error: number | null, invcm: number | null, limit: number | null, tolerance: number, reason: string | null): AspectValidity => ({
  status: error === null ? 'unknown' : error <= tolerance ? 'valid' : 'not_valid',
  errorInvcm: invcm,
  relativeError: error,
  tolerance,
  fieldLimitTesla: error === null ? null : limit,
  reason: error === null ? reason : null,
})

/**
 * Whether the linear law holds for a line at a field, for positions, strengths and the centroid of the unresolved blend apart, from the
 * diagonalised terms; each with its error, and the smallest field where the tolerance is passed. Where a term is incomplete or has no S and
 * L: by perturbation, `unknown`, never valid (`lineValidity`). Errors are defined there and in `blendError`.
 */
export function linearLawValidity(input: LinearLawInput): LinearLawValidity {
  const { tolerance = DEFAULT_TOLERANCE, gS = G_S, gL = 1 } = input
  const options = { tolerance, gS, gL }
  const levels = { lower: linearLawLevelValidity(input.lower, input.fieldTesla, options), upper: linearLawLevelValidity(input.upper, input.fieldTesla, options) }
  const { lower, upper } = input
  if (!complete(lower) || !complete(upper)) {
    const perturbed = lineValidity({ ...input, tolerance, gS })
    const reason = perturbed.positions.reason ?? perturbed.strengths.reason
    return { ...perturbed, levels, blend: { ...aspect(null, null, null, tolerance, reason), lines: [] } }
  }
  const line = readyLine(input, lower, upper, tolerance, options)
  const errors = errorsAt(line, MU_B_OVER_HC_INVCM_PER_T * input.fieldTesla)
  // terms of one level each: nothing is mixed in, so strengths stay whatever gave them
  const unmixed = lower.term.levels.length === 1 && upper.term.levels.length === 1
  const noAmplitude = line.multiplet.noAmplitude ?? 'the line has no strength in LS coupling at zero field'
  const strength = unmixed ? 0 : errors.strength
  const blend = unmixed ? 0 : errors.blend
  return {
    positions: aspect(errors.position, errors.positionInvcm, line.limits.positions, tolerance, null),
    strengths: aspect(strength, null, line.limits.strengths, tolerance, noAmplitude),
    blend: { ...aspect(blend, unmixed ? 0 : errors.blendInvcm, line.limits.blend, tolerance, noAmplitude), lines: line.blend?.lines ?? [] },
    levels,
    method: DIAGONALISED_METHOD,
  }
}

export type FieldModel = 'linear' | 'intermediate'

/**
 * What `model=auto` takes: intermediate where the linear law errs by more than the tolerance in positions or strengths; linear where it holds
 * or where the terms cannot be diagonalised (`unknown`, to be told as a warning).
 */
export const autoModel = ({ positions, strengths }: Pick<LineValidity, 'positions' | 'strengths'>): FieldModel =>
  positions.status !== 'unknown' && (positions.status === 'not_valid' || strengths.status === 'not_valid') ? 'intermediate' : 'linear'
