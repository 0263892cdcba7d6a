import { G_S } from '@/lib/atomic/constants'
import { gcd } from '@/lib/atomic/exact'
import { isTriangle, type TwoJ } from '@/lib/atomic/half'

export interface LsQuantumNumbers {
  twoS: TwoJ
  l: number
  twoJ: TwoJ
}

/** Orbital and spin g factors. `gS` defaults to the CODATA |g_e|; `gL` to 1 (1 - m_e/M on request). */
export interface GFactors {
  gS?: number
  gL?: number
}

/** 4 j(j+1) of a doubled angular momentum: an integer, so that the differences below are exact. */
const fourJJ = (two: TwoJ): number => two * (two + 2)

/**
 * The projection theorem: g of R = A + B from g_A and g_B. 0 for R = 0, where it is multiplied by m = 0 in any use.
 * Condon & Shortley, The Theory of Atomic Spectra, ch. III and XVI.
 */
function projected(gA: number, twoA: TwoJ, gB: number, twoB: TwoJ, twoR: TwoJ): number {
  if (twoR === 0) return 0
  const [a, b, r] = [fourJJ(twoA), fourJJ(twoB), fourJJ(twoR)]
  return (gA * (r + a - b)) / (2 * r) + (gB * (r + b - a)) / (2 * r)
}

type Ratio = readonly [number, number]

const reduced = (n: number, d: number): Ratio => {
  const common = gcd(n, d) || 1
  const sign = d < 0 ? -1 : 1
  return [(sign * n) / common, (sign * d) / common]
}

const ratioText = ([n, d]: Ratio): string => (d === 1 ? String(n === 0 ? 0 : n) : `${n}/${d}`)

/** `projected` in exact fractions of small integers. */
function projectedExact(gA: Ratio, twoA: TwoJ, gB: Ratio, twoB: TwoJ, twoR: TwoJ): Ratio {
  if (twoR === 0) return [0, 1]
  const [a, b, r] = [fourJJ(twoA), fourJJ(twoB), fourJJ(twoR)]
  const first = reduced(gA[0] * (r + a - b), gA[1] * 2 * r)
  const second = reduced(gB[0] * (r + b - a), gB[1] * 2 * r)
  return reduced(first[0] * second[1] + second[0] * first[1], first[1] * second[1])
}

const ONE: Ratio = [1, 1]
const TWO: Ratio = [2, 1]

/**
 * Landé g of an LS level: g_L [J(J+1) + L(L+1) - S(S+1)] / 2J(J+1) + g_s [J(J+1) + S(S+1) - L(L+1)] / 2J(J+1).
 * A. Landé, Z. Phys. 15, 189 (1923); Woodgate, Elementary Atomic Structure. Null for J = 0 (it has none) and where S, L do not make J.
 */
export function landeG({ twoS, l, twoJ }: LsQuantumNumbers, { gS = G_S, gL = 1 }: GFactors = {}): number | null {
  if (twoJ === 0 || !isTriangle(twoS, 2 * l, twoJ)) return null
  return projected(gL, 2 * l, gS, twoS, twoJ)
}

/** The same with g_L = 1 and g_s = 2, as a fraction in lowest terms: `4/3`, `2`, `0`. Null for J = 0. */
export function landeGExact({ twoS, l, twoJ }: LsQuantumNumbers): string | null {
  if (twoJ === 0 || !isTriangle(twoS, 2 * l, twoJ)) return null
  return ratioText(projectedExact(ONE, 2 * l, TWO, twoS, twoJ))
}

/** A pair-coupled level: core (L1 S1)J1, then J1 + l = K, then K + 1/2 = J. */
export interface PairQuantumNumbers {
  core: LsQuantumNumbers
  lOuter: number
  twoK: TwoJ
  twoJ: TwoJ
}

const isPair = ({ core, lOuter, twoK, twoJ }: PairQuantumNumbers): boolean =>
  isTriangle(core.twoS, 2 * core.l, core.twoJ) && isTriangle(core.twoJ, 2 * lOuter, twoK) && isTriangle(twoK, 1, twoJ)

/** g in J1 K coupling by the vector model (Cowan, The Theory of Atomic Structure and Spectra, ch. 17). Null for J = 0 and impossible triangles. */
export function pairG(level: PairQuantumNumbers, gS: number = G_S): number | null {
  if (level.twoJ === 0 || !isPair(level)) return null
  const { core, lOuter, twoK, twoJ } = level
  const gCore = projected(1, 2 * core.l, gS, core.twoS, core.twoJ)
  const gK = projected(gCore, core.twoJ, 1, 2 * lOuter, twoK)
  return projected(gK, twoK, gS, 1, twoJ)
}

/** The same at g_s = 2 as a fraction in lowest terms. */
export function pairGExact(level: PairQuantumNumbers): string | null {
  if (level.twoJ === 0 || !isPair(level)) return null
  const { core, lOuter, twoK, twoJ } = level
  const gCore = projectedExact(ONE, 2 * core.l, TWO, core.twoS, core.twoJ)
  const gK = projectedExact(gCore, core.twoJ, ONE, 2 * lOuter, twoK)
  return ratioText(projectedExact(gK, twoK, TWO, 1, twoJ))
}

/** A jj-coupled level: core (L1 S1)J1 and one electron (l 1/2)j2, J1 + j2 = J. */
export interface JjQuantumNumbers {
  core: LsQuantumNumbers
  lOuter: number
  twoJOuter: TwoJ
  twoJ: TwoJ
}

const isJj = ({ core, lOuter, twoJOuter, twoJ }: JjQuantumNumbers): boolean =>
  isTriangle(core.twoS, 2 * core.l, core.twoJ) && isTriangle(1, 2 * lOuter, twoJOuter) && isTriangle(core.twoJ, twoJOuter, twoJ)

/** g in jj coupling by the vector model (Cowan, ch. 17; Condon & Shortley, ch. XVI). Null for J = 0 and impossible triangles. */
export function jjG(level: JjQuantumNumbers, gS: number = G_S): number | null {
  if (level.twoJ === 0 || !isJj(level)) return null
  const gCore = projected(1, 2 * level.core.l, gS, level.core.twoS, level.core.twoJ)
  const gOuter = projected(1, 2 * level.lOuter, gS, 1, level.twoJOuter)
  return projected(gCore, level.core.twoJ, gOuter, level.twoJOuter, level.twoJ)
}

/** The same at g_s = 2 as a fraction in lowest terms. */
export function jjGExact(level: JjQuantumNumbers): string | null {
  if (level.twoJ === 0 || !isJj(level)) return null
  const gCore = projectedExact(ONE, 2 * level.core.l, TWO, level.core.twoS, level.core.twoJ)
  const gOuter = projectedExact(ONE, 2 * level.lOuter, TWO, 1, level.twoJOuter)
  return ratioText(projectedExact(gCore, level.core.twoJ, gOuter, level.twoJOuter, level.twoJ))
}

/**
 * The limits of g_J in any coupling of levels whose largest spin is S, widened by 0.02 for small true effects:
 * lower 1 - (g_s - 1) S/(J + 1); upper 1 + (g_s - 1) S/J for J >= S, else 1 + (g_s - 1)(S + 1)/(J + 1).
 * g in any coupling is a mean of LS values weighted with positive weights, so it lies between their extremes. Null for J = 0.
 */
export function gBounds({ twoSMax, twoJ, gS = G_S }: { twoSMax: TwoJ; twoJ: TwoJ; gS?: number }): { lower: number; upper: number } | null {
  if (twoJ === 0) return null
  const [s, j] = [twoSMax / 2, twoJ / 2]
  const widened = 0.02
  const lower = 1 - ((gS - 1) * s) / (j + 1)
  const upper = twoJ >= twoSMax ? 1 + ((gS - 1) * s) / j : 1 + ((gS - 1) * (s + 1)) / (j + 1)
  return { lower: lower - widened, upper: upper + widened }
}
