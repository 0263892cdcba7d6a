import { G_S } from '@/lib/atomic/constants'
import { coupledRange, type TwoJ } from '@/lib/atomic/half'
import { spinZElement } from '@/lib/atomic/term-coupling'

/** The levels of one LS term: same species, configuration with parents, label, S, L and parity. Some J may be missing. */
export interface TermLevels {
  twoS: TwoJ
  l: number
  levels: { twoJ: TwoJ; energyInvcm: number; g: number | null }[]
}

/** A neighbour J +- 1 that the field mixes in. Arrays run over m = -J .. J of the level itself; per unit of x = mu_B B in cm^-1. */
export interface Neighbour {
  twoJ: TwoJ
  /** E_J - E_J' at zero field, cm^-1. */
  gap: number
  /** Slope of the linear energies' difference, (g_J - g_J') m. */
  slopes: number[]
  /** (g_s - 1) <J m|S_z|J' m>; 0 where J' has no such m. */
  couplings: number[]
}

/** One level with what the field mixes into it. */
export interface MixedLevel {
  twoJ: TwoJ
  g: number
  neighbours: Neighbour[]
}

/** The J's that S and L make and that are not among the levels. */
export const missingJ = (term: TermLevels): TwoJ[] => coupledRange(term.twoS, 2 * term.l).filter((twoJ) => !term.levels.some((level) => level.twoJ === twoJ))

/** The level J of a term with its neighbours, or null where the term has no such level. g_L = 1. */
export function mixedLevel(term: TermLevels, twoJ: TwoJ, gS: number = G_S): MixedLevel | null {
  const own = term.levels.find((level) => level.twoJ === twoJ)
  if (!own) return null
  const g = own.g ?? 0
  const neighbours = term.levels
    .filter((level) => Math.abs(level.twoJ - twoJ) === 2)
    .map((other): Neighbour => {
      const [slopes, couplings]: [number[], number[]] = [[], []]
      for (let twoM = -twoJ; twoM <= twoJ; twoM += 2) {
        const inBoth = Math.abs(twoM) <= other.twoJ
        slopes.push(((g - (other.g ?? 0)) * twoM) / 2)
        couplings.push(inBoth ? (gS - 1) * spinZElement(term.twoS, term.l, twoJ, other.twoJ, twoM) : 0)
      }
      return { twoJ: other.twoJ, gap: own.energyInvcm - other.energyInvcm, slopes, couplings }
    })
  return { twoJ, g, neighbours }
}

/** Which side of its neighbour a state is on by continuity from zero field: +1 above. States of one m do not cross. */
const side = (gap: number, difference: number): number => (gap !== 0 ? Math.sign(gap) : difference < 0 ? -1 : 1)

/**
 * Energy beyond the linear model, cm^-1, of one m at x = mu_B B (cm^-1): for each neighbour the closed form of two coupled states,
 * s (sqrt(d^2 + 4 v^2) - s d)/2 with d the difference of the linear energies at this field and s the side at zero field. For a term of
 * two levels this is exact; with two neighbours it is right to second order.
 */
export function beyondLinear(level: MixedLevel, mIndex: number, x: number): number {
  let sum = 0
  for (const neighbour of level.neighbours) {
    const v = x * (neighbour.couplings[mIndex] ?? 0)
    if (v === 0) continue
    const d = neighbour.gap + x * (neighbour.slopes[mIndex] ?? 0)
    const s = side(neighbour.gap, d)
    const root = Math.hypot(d, 2 * v)
    // for s d > 0 the difference root - s d loses all digits at small field, the quotient none
    sum += s * d > 0 ? (s * 2 * v * v) / (root + s * d) : (s * (root - s * d)) / 2
  }
  return sum
}

/**
 * The state J m at x = mu_B B as amplitudes: its own first, then each neighbour's, normalised. The mixing angle is that of the two coupled
 * states, tan 2 theta = 2v/d, which at small field is first-order perturbation, v/d.
 */
export function mixedAmplitudes(level: MixedLevel, mIndex: number, x: number): number[] {
  const amplitudes = [1]
  let square = 1
  for (const neighbour of level.neighbours) {
    const v = x * (neighbour.couplings[mIndex] ?? 0)
    const d = neighbour.gap + x * (neighbour.slopes[mIndex] ?? 0)
    const s = side(neighbour.gap, d)
    const tangent = v === 0 ? 0 : Math.tan(Math.atan2(2 * s * v, s * d) / 2)
    amplitudes.push(tangent)
    square += tangent * tangent
  }
  const norm = Math.sqrt(square)
  return amplitudes.map((amplitude) => amplitude / norm)
}
