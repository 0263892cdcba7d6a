import { componentPlaces, type LineEnd, shiftLorentz } from '@/lib/atomic/components'
import { Fraction, readFraction } from '@/lib/atomic/exact'
import { isTriangle, magneticNumbers, type TwoJ } from '@/lib/atomic/half'
import { type Kind, rankOf } from '@/lib/atomic/rules'
import { squared3j } from '@/lib/atomic/wigner'

/** Whether a dipole (E1, M1) joins the two J's: a triangle with 1. */
export const hasDipole = (twoJLower: TwoJ, twoJUpper: TwoJ): boolean => isTriangle(twoJLower, 2, twoJUpper)

/**
 * Effective Landé factor: (g_l + g_u)/2 + (g_l - g_u)[J_l(J_l+1) - J_u(J_u+1)]/4, the centre of gravity of sigma+ in Lorentz units.
 * A. G. Shenstone & H. A. Blair, Phil. Mag. 8, 765 (1929). With a J = 0 end it is the other end's g. Null where no dipole line
 * joins the J's, or where a needed g is unknown.
 */
export function effectiveG(lower: LineEnd, upper: LineEnd): number | null {
  if (!hasDipole(lower.twoJ, upper.twoJ)) return null
  if (lower.twoJ === 0) return upper.g
  if (upper.twoJ === 0) return lower.g
  if (lower.g === null || upper.g === null) return null
  const sixteenth = lower.twoJ * (lower.twoJ + 2) - upper.twoJ * (upper.twoJ + 2)
  return (lower.g + upper.g) / 2 + ((lower.g - upper.g) * sixteenth) / 16
}

export interface ExactEnd {
  twoJ: TwoJ
  /** g at g_s = 2 as a fraction, `4/3`; null for J = 0. */
  g: string | Fraction | null
}

const fractionOf = (g: string | Fraction | null): Fraction | null => (typeof g === 'string' ? readFraction(g) : g)

/** `effectiveG` in exact fractions, in lowest terms as text; null as there. */
export function effectiveGExact(lower: ExactEnd, upper: ExactEnd): string | null {
  if (!hasDipole(lower.twoJ, upper.twoJ)) return null
  const [gLower, gUpper] = [fractionOf(lower.g), fractionOf(upper.g)]
  if (lower.twoJ === 0) return gUpper?.toFraction() ?? null
  if (upper.twoJ === 0) return gLower?.toFraction() ?? null
  if (!gLower || !gUpper) return null
  const sixteenth = lower.twoJ * (lower.twoJ + 2) - upper.twoJ * (upper.twoJ + 2)
  return gLower.add(gUpper).div(2).add(gLower.sub(gUpper).mul(sixteenth).div(16)).toFraction()
}

export interface Moments {
  /** Strength-weighted mean of shift^2 of pi about the line's centre, Lorentz units squared. */
  piSecond: number
  /** Mean shift of sigma+ (this is g_eff), Lorentz units. */
  sigmaFirst: number
  /** Mean of shift^2 of sigma+ about the line's centre, Lorentz units squared. */
  sigmaSecond: number
}

/** Strength-weighted moments of the pi and sigma+ groups about the unshifted line (Landi Degl'Innocenti & Landolfi 2004, ch. 3); null as `effectiveG`. */
export function secondMoments(lower: LineEnd, upper: LineEnd): Moments | null {
  if (!hasDipole(lower.twoJ, upper.twoJ)) return null
  if ((lower.g === null && lower.twoJ > 0) || (upper.g === null && upper.twoJ > 0)) return null
  const moments: Moments = { piSecond: 0, sigmaFirst: 0, sigmaSecond: 0 }
  for (const { q, twoMLower, twoMUpper, strength } of componentPlaces('E1', lower.twoJ, upper.twoJ)) {
    if (q < 0) continue
    const shift = shiftLorentz(lower.g, twoMLower, upper.g, twoMUpper)
    if (q === 0) moments.piSecond += strength * shift * shift
    else {
      moments.sigmaFirst += strength * shift
      moments.sigmaSecond += strength * shift * shift
    }
  }
  return moments
}

export interface ExactComponent {
  twoMLower: TwoJ
  twoMUpper: TwoJ
  q: number
  shift: Fraction
  strength: Fraction
}

/** The components at g_s = 2 in exact fractions, zero strengths left out; for patterns and tables, not for inner loops. */
export function exactComponents(lower: ExactEnd, upper: ExactEnd, kind: Kind = 'E1'): ExactComponent[] {
  const rank = rankOf(kind)
  if (!isTriangle(lower.twoJ, 2 * rank, upper.twoJ)) return []
  const [gLower, gUpper] = [fractionOf(lower.g) ?? new Fraction(0), fractionOf(upper.g) ?? new Fraction(0)]
  const list: ExactComponent[] = []
  for (let q = -rank; q <= rank; q += 1) {
    for (const twoMLower of magneticNumbers(lower.twoJ)) {
      const twoMUpper = twoMLower + 2 * q
      const strength = squared3j(upper.twoJ, 2 * rank, lower.twoJ, -twoMUpper, 2 * q, twoMLower).mul(2 * rank + 1)
      if (strength.equals(0)) continue
      list.push({ twoMLower, twoMUpper, q, shift: gUpper.mul(twoMUpper).sub(gLower.mul(twoMLower)).div(2), strength })
    }
  }
  return list
}

export type PatternKind = 'unsplit' | 'normal' | 'triplet' | 'anomalous'

/** How near two shifts computed from measured g's must be, in Lorentz units, to count as one. */
const SAME_SHIFT = 1e-9

function kindOfShifts(distinct: number[]): PatternKind {
  if (distinct.length === 1 && distinct[0] === 0) return 'unsplit'
  if (distinct.length !== 3) return 'anomalous'
  return distinct[0] === -1 && distinct[1] === 0 && distinct[2] === 1 ? 'normal' : 'triplet'
}

const patterns = new Map<string, PatternKind | null>()
const PATTERNS_REMEMBERED = 10_000

/**
 * The pattern of a line by its exact g's at g_s = 2: unsplit (all shifts 0), normal (-1, 0, +1), triplet (three shifts), else anomalous.
 * Null without components or without an exact g. Remembered, since the few g's there are come again and again in lists.
 */
export function patternKind(lower: ExactEnd, upper: ExactEnd, kind: Kind = 'E1'): PatternKind | null {
  const [gLower, gUpper] = [fractionOf(lower.g), fractionOf(upper.g)]
  if ((lower.twoJ > 0 && gLower === null) || (upper.twoJ > 0 && gUpper === null)) return null
  const key = `${kind} ${lower.twoJ} ${gLower?.toFraction() ?? ''} ${upper.twoJ} ${gUpper?.toFraction() ?? ''}`
  const known = patterns.get(key)
  if (known !== undefined) return known
  const shifts = new Map<string, number>()
  for (const { shift } of exactComponents(lower, upper, kind)) shifts.set(shift.toFraction(), shift.valueOf())
  const pattern = shifts.size === 0 ? null : kindOfShifts([...shifts.values()].sort((a, b) => a - b))
  if (patterns.size >= PATTERNS_REMEMBERED) patterns.clear()
  patterns.set(key, pattern)
  return pattern
}

/** `patternKind` for g's that are known as decimals only (measured, or a coupling without an exact value). */
export function patternKindOfNumbers(lower: LineEnd, upper: LineEnd, kind: Kind = 'E1'): PatternKind | null {
  if ((lower.twoJ > 0 && lower.g === null) || (upper.twoJ > 0 && upper.g === null)) return null
  const shifts: number[] = []
  for (const { twoMLower, twoMUpper, strength } of componentPlaces(kind, lower.twoJ, upper.twoJ)) {
    if (strength === 0) continue
    const shift = shiftLorentz(lower.g, twoMLower, upper.g, twoMUpper)
    const rounded = Math.abs(shift - Math.round(shift)) < SAME_SHIFT ? Math.round(shift) : shift
    if (!shifts.some((known) => Math.abs(known - rounded) < SAME_SHIFT)) shifts.push(rounded === 0 ? 0 : rounded)
  }
  return shifts.length === 0 ? null : kindOfShifts(shifts.sort((a, b) => a - b))
}
