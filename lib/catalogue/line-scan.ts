import { KIND_CODE, type Kind, LS_BITS, RIGOROUS_BITS, RULE_BIT, ruleMask } from '@/lib/atomic/rules'
import type { Snapshot } from '@/lib/catalogue/shape'
import type { SpectralWindow } from '@/lib/catalogue/window'

/** Why a pair of levels inside the window is not in the list. A pair that fails several rules is counted under the first one. */
export const LINE_EXCLUSIONS = [
  'zero_interval',
  'parity',
  'delta_j',
  'zero_zero',
  'delta_s',
  'delta_l',
  'l_zero_zero',
  'no_air_wavelength',
  'g_eff_not_known',
  'g_eff_not_applicable',
] as const
export type LineExclusion = (typeof LINE_EXCLUSIONS)[number]

const CODE = Object.fromEntries(LINE_EXCLUSIONS.map((name, at) => [name, at + 1])) as Record<LineExclusion, number>

/** A verdict as a number: `LISTED`, `OUT` (not in the window, or outside a bound the caller set), else 1 + place in LINE_EXCLUSIONS. */
export const LISTED = 0
export const OUT = -1
export type PairVerdict = (lower: number, upper: number, intervalInvcm: number) => number

export interface LineRules {
  readonly kind: Kind
  /** `ls`: the LS rules must hold too, where they apply. */
  readonly rules: 'ls' | 'rigorous'
  readonly gEffMin?: number
  readonly gEffMax?: number
  /** Bounds themselves left out. */
  readonly gEffMinOpen?: boolean
  readonly gEffMaxOpen?: boolean
}

function firstFailure(mask: number, withLs: boolean): number {
  if ((mask & RULE_BIT.parity) !== 0) return CODE.parity
  if ((mask & RULE_BIT.delta_j) !== 0) return CODE.delta_j
  if ((mask & RULE_BIT.zero_zero) !== 0) return CODE.zero_zero
  if (!withLs) return LISTED
  if ((mask & RULE_BIT.delta_s) !== 0) return CODE.delta_s
  if ((mask & RULE_BIT.delta_l) !== 0) return CODE.delta_l
  return (mask & RULE_BIT.l_zero_zero) !== 0 ? CODE.l_zero_zero : LISTED
}

/** Effective Landé factor from the columns: the formula of `effectiveG` (lib/atomic/moments.ts), NaN where a needed g is unknown. */
export function effectiveGOfPair(snapshot: Snapshot, lower: number, upper: number): number {
  const { twoJ, gAdopted } = snapshot.columns
  const [jl, ju, gl, gu] = [twoJ[lower] ?? 0, twoJ[upper] ?? 0, gAdopted[lower] ?? Number.NaN, gAdopted[upper] ?? Number.NaN]
  if (jl === 0) return gu
  if (ju === 0) return gl
  return (gl + gu) / 2 + ((gl - gu) * (jl * (jl + 2) - ju * (ju + 2))) / 16
}

/** The rules that a pair of levels fails, as the bits of `RULE_BIT`. */
export function pairMask(snapshot: Snapshot, kind: Kind, a: number, b: number): number {
  const { twoJ, parity, twoS, l } = snapshot.columns
  return ruleMask(KIND_CODE[kind], twoJ[a] ?? 0, parity[a] ?? 0, twoS[a] ?? -1, l[a] ?? -1, twoJ[b] ?? 0, parity[b] ?? 0, twoS[b] ?? -1, l[b] ?? -1)
}

/** Whether rules in force let a pair through: rigorous ones, and those of LS where asked and applicable. */
export const passes = (mask: number, rules: 'ls' | 'rigorous'): boolean => (mask & (rules === 'ls' ? RIGOROUS_BITS | LS_BITS : RIGOROUS_BITS)) === 0

/** Makes the verdict on pairs for one query. The caller passes lower before upper, and the interval between them. */
export function pairVerdict(snapshot: Snapshot, window: SpectralWindow, asked: LineRules): PairVerdict {
  const { twoJ, parity, twoS, l } = snapshot.columns
  const kindCode = KIND_CODE[asked.kind]
  const withLs = asked.rules === 'ls'
  const { gEffMin = Number.NEGATIVE_INFINITY, gEffMax = Number.POSITIVE_INFINITY, gEffMinOpen = false, gEffMaxOpen = false } = asked
  const asksG = asked.gEffMin !== undefined || asked.gEffMax !== undefined
  const { sureMinInvcm, sureMaxInvcm } = window
  return (lower, upper, interval) => {
    const place = interval > sureMinInvcm && interval < sureMaxInvcm ? 'in' : window.verdict(interval)
    if (place === 'out') return OUT
    if (interval === 0) return CODE.zero_interval
    const mask = ruleMask(kindCode, twoJ[lower]!, parity[lower]!, twoS[lower]!, l[lower]!, twoJ[upper]!, parity[upper]!, twoS[upper]!, l[upper]!)
    const failed = firstFailure(mask, withLs)
    if (failed !== LISTED) return failed
    if (place === 'no_air_wavelength') return CODE.no_air_wavelength
    if (!asksG) return LISTED
    // the effective factor belongs to dipole lines
    if (kindCode === KIND_CODE.E2) return CODE.g_eff_not_applicable
    const g = effectiveGOfPair(snapshot, lower, upper)
    if (Number.isNaN(g)) return CODE.g_eff_not_known
    return (gEffMinOpen ? g > gEffMin : g >= gEffMin) && (gEffMaxOpen ? g < gEffMax : g <= gEffMax) ? LISTED : OUT
  }
}

/**
 * Visits every pair of one species' levels whose interval lies in [from, to) (or [from, to] with `closed`). Energies are sorted,
 * so for each lower level the uppers are a run whose ends only move on: the cost is the levels plus the pairs visited.
 */
export function visitPairs(snapshot: Snapshot, species: number, from: number, to: number, closed: boolean, visit: (lower: number, upper: number, interval: number) => void): void {
  const energy = snapshot.columns.energyInvcm
  const [begin, end] = snapshot.speciesRange(species)
  let first = begin + 1
  for (let lower = begin; lower < end; lower += 1) {
    const e = energy[lower]!
    if (first <= lower) first = lower + 1
    while (first < end && energy[first]! - e < from) first += 1
    if (first >= end) return
    for (let upper = first; upper < end; upper += 1) {
      const interval = energy[upper]! - e
      if (closed ? interval > to : interval >= to) break
      visit(lower, upper, interval)
    }
  }
}

/** How many pairs `visitPairs` would visit, without visiting them. */
export function countPairs(snapshot: Snapshot, species: readonly number[], from: number, to: number): number {
  const energy = snapshot.columns.energyInvcm
  let count = 0
  for (const one of species) {
    const [begin, end] = snapshot.speciesRange(one)
    let first = begin + 1
    let past = begin + 1
    for (let lower = begin; lower < end; lower += 1) {
      const e = energy[lower]!
      if (first <= lower) first = lower + 1
      while (first < end && energy[first]! - e < from) first += 1
      if (first >= end) break
      if (past < first) past = first
      while (past < end && energy[past]! - e < to) past += 1
      count += past - first
    }
  }
  return count
}

/** The largest interval between two levels of any of the species. */
export function widestInterval(snapshot: Snapshot, species: readonly number[]): number {
  const energy = snapshot.columns.energyInvcm
  let widest = 0
  for (const one of species) {
    const [begin, end] = snapshot.speciesRange(one)
    if (end > begin) widest = Math.max(widest, energy[end - 1]! - energy[begin]!)
  }
  return widest
}
