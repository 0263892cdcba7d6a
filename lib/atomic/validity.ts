import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { firstPassed } from '@/lib/atomic/field-limit'
import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import { type LineKernel, lineKernel, linePositionError, lineStrengthError } from '@/lib/atomic/line-mixing'
import { beyondLinear, type MixedLevel, mixedLevel, missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { remembering } from '@/lib/atomic/remembering'
import type { Kind } from '@/lib/atomic/rules'

export type { TermLevels } from '@/lib/atomic/mixing'

export type ValidityStatus = 'valid' | 'not_valid' | 'unknown'

export const DEFAULT_TOLERANCE = 0.01
export const VALIDITY_METHOD =
  'Perturbation within the LS term: second order for positions and first order for strengths between neighbouring J (closed form of two coupled states), at this field'

export interface LevelValidity {
  status: ValidityStatus
  /** Largest |energy beyond linear| over the sublevels, cm^-1; a lower bound where `status` is unknown; null where nothing can be said. */
  errorInvcm: number | null
  /** The same divided by mu_B B. */
  relativeError: number | null
  /** The same divided by the level's own largest linear shift; null where it has none. */
  relativeToShift: number | null
  tolerance: number
  /** Smallest field at which `relativeError` passes the tolerance; null where it never does up to 10 000 T, or is not known. */
  fieldLimitTesla: number | null
  missingTwoJ: TwoJ[]
  /** Why the status is unknown; null where it is known. */
  reason: string | null
}

export interface AspectValidity {
  status: ValidityStatus
  /** Largest error of a component's position, cm^-1; null for strengths and where nothing can be said. */
  errorInvcm: number | null
  relativeError: number | null
  tolerance: number
  fieldLimitTesla: number | null
  reason: string | null
}

export interface LineValidity {
  positions: AspectValidity
  strengths: AspectValidity
  levels: { lower: LevelValidity; upper: LevelValidity }
  method: string
}

export interface ValidityEnd {
  twoJ: TwoJ
  g: number | null
  /** All levels of this level's LS term that are known, itself included; null where the level has no S and L. */
  term: TermLevels | null
}

interface Options {
  tolerance?: number
  gS?: number
}

/** One end made ready: its mixing, and why its validity cannot be known. */
interface Prepared {
  end: ValidityEnd
  mixed: MixedLevel
  missing: TwoJ[]
  reason: string | null
}

const NO_LS = 'the level has no S and L in its coupling, so its term is not known'

function prepare(end: ValidityEnd, gS: number): Prepared {
  const alone: MixedLevel = { twoJ: end.twoJ, g: end.g ?? 0, neighbours: [] }
  if (end.term === null) return { end, mixed: alone, missing: [], reason: NO_LS }
  const levels = end.term.levels.map((level) => (level.twoJ === end.twoJ ? { ...level, g: end.g } : level))
  const mixed = mixedLevel({ ...end.term, levels }, end.twoJ, gS)
  if (mixed === null) return { end, mixed: alone, missing: missingJ(end.term), reason: `the term's levels do not include J = ${formatHalf(end.twoJ)} itself` }
  const missing = missingJ(end.term)
  return { end, mixed, missing, reason: missing.length === 0 ? null : `the term lacks J = ${missing.map(formatHalf).join(', ')}, so its share is not known and the error told is a lower bound` }
}

/** Largest |beyond linear| over m, cm^-1, at x = mu_B B. */
function levelError(level: MixedLevel, x: number): number {
  let largest = 0
  for (let i = 0; i <= level.twoJ; i += 1) largest = Math.max(largest, Math.abs(beyondLinear(level, i, x)))
  return largest
}

const relativeLevelError = (level: MixedLevel, x: number): number => (x === 0 ? 0 : levelError(level, x) / x)

const statusOf = (known: boolean, relativeError: number, tolerance: number): ValidityStatus => (known ? (relativeError <= tolerance ? 'valid' : 'not_valid') : 'unknown')

/** A text that is the same exactly when all that mixing depends on is; numbers print in full. */
export function fingerprint({ twoJ, g, term }: ValidityEnd): string {
  let text = `${twoJ}:${g}`
  if (term === null) return text
  text += `:${term.twoS},${term.l}`
  for (const level of term.levels) text += `;${level.twoJ},${level.energyInvcm},${level.g}`
  return text
}

interface ReadyLevel extends Prepared {
  limit: number | null
}

interface ReadyLine {
  lower: ReadyLevel
  upper: ReadyLevel
  kernel: LineKernel
  positionLimit: number | null
  strengthLimit: number | null
}

const smallestGap = (level: MixedLevel): number => Math.min(Number.POSITIVE_INFINITY, ...level.neighbours.map((neighbour) => Math.abs(neighbour.gap)))

const levelMemory = remembering<ReadyLevel>()
const lineMemory = remembering<ReadyLine>()

function readyLevel(end: ValidityEnd, tolerance: number, gS: number): ReadyLevel {
  return levelMemory(`${gS}|${tolerance}|${fingerprint(end)}`, () => {
    const prepared = prepare(end, gS)
    const searched = prepared.reason === null && prepared.mixed.neighbours.length > 0
    return { ...prepared, limit: searched ? firstPassed((x) => relativeLevelError(prepared.mixed, x), tolerance, smallestGap(prepared.mixed)) : null }
  })
}

function readyLine(kind: Kind, low: ValidityEnd, high: ValidityEnd, tolerance: number, gS: number): ReadyLine {
  return lineMemory(`${kind}|${gS}|${tolerance}|${fingerprint(low)}|${fingerprint(high)}`, () => {
    const [lower, upper] = [readyLevel(low, tolerance, gS), readyLevel(high, tolerance, gS)]
    const kernel = lineKernel(kind, { ...low, mixed: lower.mixed }, { ...high, mixed: upper.mixed })
    const searched = lower.reason === null && upper.reason === null && lower.mixed.neighbours.length + upper.mixed.neighbours.length > 0
    const gap = Math.min(smallestGap(lower.mixed), smallestGap(upper.mixed))
    return {
      lower,
      upper,
      kernel,
      positionLimit: searched ? firstPassed((x) => linePositionError(kernel, x).relativeError, tolerance, gap) : null,
      strengthLimit: searched && kernel.noAmplitude === null ? firstPassed((x) => lineStrengthError(kernel, x), tolerance, gap) : null,
    }
  })
}

function levelValidityOf(ready: ReadyLevel, x: number, tolerance: number): LevelValidity {
  const { mixed, missing, reason, end, limit } = ready
  const known = reason === null
  const error = levelError(mixed, x)
  // of an incomplete term whose neighbours say nothing there is no bound but the empty one
  const nothing = end.term === null || (!known && error === 0)
  const relative = relativeLevelError(mixed, x)
  const largestShift = (Math.abs(mixed.g) * mixed.twoJ * x) / 2
  return {
    status: statusOf(known, relative, tolerance),
    errorInvcm: nothing ? null : error,
    relativeError: nothing ? null : relative,
    relativeToShift: nothing || largestShift === 0 ? null : error / largestShift,
    tolerance,
    fieldLimitTesla: limit,
    missingTwoJ: missing,
    reason,
  }
}

/**
 * Whether the linear law holds for one level at a field: valid, not valid, or unknown where its term is incomplete or it has no S and L
 * (then the neighbours present give a lower bound). A term of one level is exact: error 0, no limit. Field in tesla, energies in cm^-1.
 */
export function levelValidity(end: ValidityEnd, fieldTesla: number, { tolerance = DEFAULT_TOLERANCE, gS = G_S }: Options = {}): LevelValidity {
  return levelValidityOf(readyLevel(end, tolerance, gS), MU_B_OVER_HC_INVCM_PER_T * fieldTesla, tolerance)
}

function positionsOf(kernel: LineKernel, x: number, tolerance: number, ends: Prepared[], limit: number | null): AspectValidity {
  const unknown = ends.filter((end) => end.reason !== null)
  const { errorInvcm, relativeError } = linePositionError(kernel, x)
  const nothing = ends.every((end) => end.end.term === null) || (unknown.length > 0 && errorInvcm === 0)
  return {
    status: statusOf(unknown.length === 0, relativeError, tolerance),
    errorInvcm: nothing ? null : errorInvcm,
    relativeError: nothing ? null : relativeError,
    tolerance,
    fieldLimitTesla: unknown.length === 0 ? limit : null,
    reason: unknown[0]?.reason ?? null,
  }
}

function strengthsOf(kernel: LineKernel, x: number, tolerance: number, ends: Prepared[], limit: number | null): AspectValidity {
  const incomplete = ends.find((end) => end.reason !== null)?.reason ?? null
  // complete terms of one level each: nothing is mixed in, so the strengths stay whatever gave them
  const unmixed = incomplete === null && ends.every((end) => end.mixed.neighbours.length === 0)
  const reason = unmixed ? null : (kernel.noAmplitude ?? incomplete)
  const relativeError = unmixed ? 0 : kernel.noAmplitude === null ? lineStrengthError(kernel, x) : null
  return {
    status: statusOf(reason === null, relativeError ?? 0, tolerance),
    errorInvcm: null,
    relativeError,
    tolerance,
    fieldLimitTesla: reason === null ? limit : null,
    reason,
  }
}

/**
 * Whether the linear model holds for a line at a field, for positions and for strengths apart. Position error: the largest error of a
 * component divided by the larger of the line's largest |linear shift| and 0.01 mu_B B. Strength error: the largest change of a component's
 * strength as a fraction of the largest in its q. Each is valid up to the tolerance (0.01), with the field at which it is first passed.
 */
export function lineValidity(
  input: { kind: Kind; lower: ValidityEnd; upper: ValidityEnd; fieldTesla: number } & Options,
): LineValidity {
  const { kind, fieldTesla, tolerance = DEFAULT_TOLERANCE, gS = G_S } = input
  const x = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const { lower, upper, kernel, positionLimit, strengthLimit } = readyLine(kind, input.lower, input.upper, tolerance, gS)
  return {
    positions: positionsOf(kernel, x, tolerance, [lower, upper], positionLimit),
    strengths: strengthsOf(kernel, x, tolerance, [lower, upper], strengthLimit),
    levels: { lower: levelValidityOf(lower, x, tolerance), upper: levelValidityOf(upper, x, tolerance) },
    method: VALIDITY_METHOD,
  }
}
