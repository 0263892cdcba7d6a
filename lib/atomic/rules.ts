import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import { termLetter } from '@/lib/atomic/letters'
import type { Parity } from '@/lib/atomic/term'
import { squared3jNumber } from '@/lib/atomic/wigner'

export type Kind = 'E1' | 'M1' | 'E2'
export const KINDS: readonly Kind[] = ['E1', 'M1', 'E2']

/** What selection rules look at. S and L are null where the coupling has none. */
export interface JudgedLevel {
  twoJ: TwoJ
  twoS: TwoJ | null
  l: number | null
  parity: Parity
  coupling: string
}

export type LineRule = 'parity' | 'delta_j' | 'zero_zero' | 'delta_s' | 'delta_l' | 'l_zero_zero'
export type ComponentRule = 'delta_m' | 'm_zero_zero' | 'zero_amplitude'
export type RuleVerdict = 'pass' | 'fail' | 'not_applicable'

export interface JudgedRule<R extends string = LineRule> {
  rule: R
  basis: 'rigorous' | 'ls'
  verdict: RuleVerdict
  detail: string
}

export interface Verdict {
  /** The rigorous rules of the kind all pass. */
  allowed: boolean
  rigorous: boolean
  /** The LS rules pass as well; null where none are in force (M1, E2) or S, L are lacking. */
  ls: boolean | null
  /** E1 that passes the rigorous rules and changes S. */
  intercombination: boolean
  rules: JudgedRule[]
}

/** One bit per failed rule of `ruleMask`; `lsUnknown` is set where the LS rules do not apply. */
export const RULE_BIT = { parity: 1, delta_j: 2, zero_zero: 4, delta_s: 8, delta_l: 16, l_zero_zero: 32, lsUnknown: 64 } as const
export const RIGOROUS_BITS = RULE_BIT.parity | RULE_BIT.delta_j | RULE_BIT.zero_zero
export const LS_BITS = RULE_BIT.delta_s | RULE_BIT.delta_l | RULE_BIT.l_zero_zero

/** Kinds as small numbers, for typed arrays. */
export const KIND_CODE: Readonly<Record<Kind, 0 | 1 | 2>> = { E1: 0, M1: 1, E2: 2 }

/**
 * All rules at once as a bit mask of those that fail (`RULE_BIT`); allocates nothing, for bulk search over typed arrays.
 * kindCode: `KIND_CODE`; parity 0 even, 1 odd; twoS, l: -1 where the coupling has none. `mask & RIGOROUS_BITS` 0 means allowed.
 */
export function ruleMask(
  kindCode: number,
  twoJ1: number,
  parity1: number,
  twoS1: number,
  l1: number,
  twoJ2: number,
  parity2: number,
  twoS2: number,
  l2: number,
): number {
  const deltaJ = twoJ1 > twoJ2 ? twoJ1 - twoJ2 : twoJ2 - twoJ1
  if (kindCode === 2) {
    return (parity1 === parity2 ? 0 : 1) | (deltaJ <= 4 && deltaJ % 2 === 0 ? 0 : 2) | (twoJ1 + twoJ2 >= 4 ? 0 : 4) | 64
  }
  const rigorous = ((parity1 === parity2) === (kindCode === 1) ? 0 : 1) | (deltaJ === 0 || deltaJ === 2 ? 0 : 2) | (twoJ1 + twoJ2 > 0 ? 0 : 4)
  if (kindCode === 1 || twoS1 < 0 || twoS2 < 0 || l1 < 0 || l2 < 0) return rigorous | 64
  const deltaL = l1 > l2 ? l1 - l2 : l2 - l1
  return rigorous | (twoS1 === twoS2 ? 0 : 8) | (deltaL <= 1 ? 0 : 16) | (l1 + l2 > 0 ? 0 : 32)
}

const hasLs = (level: JudgedLevel): boolean => level.coupling === 'LS' && level.twoS !== null && level.l !== null

/** `ruleMask` of two levels as objects; allocates nothing. */
export function quickVerdict(lower: JudgedLevel, upper: JudgedLevel, kind: Kind): number {
  const ls = hasLs(lower) && hasLs(upper)
  return ruleMask(
    KIND_CODE[kind],
    lower.twoJ,
    lower.parity === 'odd' ? 1 : 0,
    ls ? (lower.twoS ?? -1) : -1,
    ls ? (lower.l ?? -1) : -1,
    upper.twoJ,
    upper.parity === 'odd' ? 1 : 0,
    ls ? (upper.twoS ?? -1) : -1,
    ls ? (upper.l ?? -1) : -1,
  )
}

const passed = (mask: number, bit: number): RuleVerdict => ((mask & bit) === 0 ? 'pass' : 'fail')

function rigorousRules(lower: JudgedLevel, upper: JudgedLevel, kind: Kind, mask: number): JudgedRule[] {
  const js = `J = ${formatHalf(lower.twoJ)} -> ${formatHalf(upper.twoJ)}`
  const wantedParity = kind === 'E1' ? 'must change' : 'must stay the same'
  const wantedJ = kind === 'E2' ? 'Delta J = 0, +-1, +-2' : 'Delta J = 0, +-1'
  const zero = kind === 'E2' ? 'J + J\' must be at least 2' : 'J = 0 -> J = 0 is forbidden'
  const rule = (name: LineRule, bit: number, detail: string): JudgedRule => ({ rule: name, basis: 'rigorous', verdict: passed(mask, bit), detail })
  return [
    rule('parity', RULE_BIT.parity, `${lower.parity} -> ${upper.parity} (${kind}: parity ${wantedParity})`),
    rule('delta_j', RULE_BIT.delta_j, `${js} (${kind}: ${wantedJ})`),
    rule('zero_zero', RULE_BIT.zero_zero, `${js} (${kind}: ${zero})`),
  ]
}

function lsRules(lower: JudgedLevel, upper: JudgedLevel, kind: Kind, mask: number): JudgedRule[] {
  const apart = (name: LineRule, verdict: RuleVerdict, detail: string): JudgedRule => ({ rule: name, basis: 'ls', verdict, detail })
  if (kind !== 'E1' || !hasLs(lower) || !hasLs(upper)) {
    const why = kind !== 'E1' ? `no LS rules are in force for ${kind}` : 'an end of the line has no S and L in its coupling'
    return [apart('delta_s', 'not_applicable', why), apart('delta_l', 'not_applicable', why), apart('l_zero_zero', 'not_applicable', why)]
  }
  const ss = `S = ${formatHalf(lower.twoS ?? 0)} -> ${formatHalf(upper.twoS ?? 0)}`
  const ls = `L = ${lower.l ?? 0} -> ${upper.l ?? 0} (${termLetter(lower.l ?? 0)} -> ${termLetter(upper.l ?? 0)})`
  return [
    apart('delta_s', passed(mask, RULE_BIT.delta_s), `${ss} (Delta S = 0)`),
    apart('delta_l', passed(mask, RULE_BIT.delta_l), `${ls} (Delta L = 0, +-1)`),
    apart('l_zero_zero', passed(mask, RULE_BIT.l_zero_zero), `${ls} (L = 0 -> L = 0 is forbidden)`),
  ]
}

/**
 * Judges a pair of levels by each selection rule alone. Condon & Shortley, The Theory of Atomic Spectra, ch. IV and IX;
 * for M1 and E2 Cowan, The Theory of Atomic Structure and Spectra, ch. 15. Order of the ends does not matter to the verdict.
 */
export function judge(lower: JudgedLevel, upper: JudgedLevel, kind: Kind): Verdict {
  const mask = quickVerdict(lower, upper, kind)
  const rigorous = (mask & RIGOROUS_BITS) === 0
  const ls = (mask & RULE_BIT.lsUnknown) === 0 ? rigorous && (mask & LS_BITS) === 0 : null
  return {
    allowed: rigorous,
    rigorous,
    ls,
    intercombination: rigorous && (mask & RULE_BIT.delta_s) !== 0,
    rules: [...rigorousRules(lower, upper, kind, mask), ...lsRules(lower, upper, kind, mask)],
  }
}

/** E1 where the parities differ; else M1, or E2 where the J's given leave no M1. */
export function defaultKind(lowerParity: Parity, upperParity: Parity, twoJLower?: TwoJ, twoJUpper?: TwoJ): Kind {
  if (lowerParity !== upperParity) return 'E1'
  if (twoJLower === undefined || twoJUpper === undefined) return 'M1'
  const parity = 0
  const m1 = ruleMask(KIND_CODE.M1, twoJLower, parity, -1, -1, twoJUpper, parity, -1, -1) & RIGOROUS_BITS
  const e2 = ruleMask(KIND_CODE.E2, twoJLower, parity, -1, -1, twoJUpper, parity, -1, -1) & RIGOROUS_BITS
  return m1 !== 0 && e2 === 0 ? 'E2' : 'M1'
}

/** The rank of the multipole: 1 for E1 and M1, 2 for E2. */
export const rankOf = (kind: Kind): 1 | 2 => (kind === 'E2' ? 2 : 1)

/** The rule that forbids a component, or null; m as twice the value. */
export function forbiddingComponentRule(kind: Kind, twoJLower: TwoJ, twoMLower: TwoJ, twoJUpper: TwoJ, twoMUpper: TwoJ): ComponentRule | null {
  const rank = rankOf(kind)
  const twoQ = twoMUpper - twoMLower
  if (Math.abs(twoQ) > 2 * rank || twoQ % 2 !== 0) return 'delta_m'
  if (rank === 1 && twoJLower === twoJUpper && twoMLower === 0 && twoMUpper === 0) return 'm_zero_zero'
  return squared3jNumber(twoJUpper, 2 * rank, twoJLower, -twoMUpper, twoQ, twoMLower) === 0 ? 'zero_amplitude' : null
}

/** Judges one component m_lower -> m_upper by the rules of Delta m, m = 0 -> 0 and vanishing amplitude. */
export function judgeComponent(
  kind: Kind,
  lower: { twoJ: TwoJ; twoM: TwoJ },
  upper: { twoJ: TwoJ; twoM: TwoJ },
): { allowed: boolean; rules: JudgedRule<ComponentRule>[] } {
  const failed = forbiddingComponentRule(kind, lower.twoJ, lower.twoM, upper.twoJ, upper.twoM)
  const ms = `m = ${formatHalf(lower.twoM)} -> ${formatHalf(upper.twoM)}`
  const rank = rankOf(kind)
  const rule = (name: ComponentRule, verdict: RuleVerdict, detail: string): JudgedRule<ComponentRule> => ({ rule: name, basis: 'rigorous', verdict, detail })
  return {
    allowed: failed === null,
    rules: [
      rule('delta_m', failed === 'delta_m' ? 'fail' : 'pass', `${ms} (${kind}: Delta m = 0, +-1${rank === 2 ? ', +-2' : ''})`),
      rank === 1
        ? rule('m_zero_zero', failed === 'm_zero_zero' ? 'fail' : 'pass', `${ms} (m = 0 -> m = 0 is forbidden when Delta J = 0)`)
        : rule('m_zero_zero', 'not_applicable', 'holds for dipole lines only'),
      rule('zero_amplitude', failed === null ? 'pass' : failed === 'zero_amplitude' ? 'fail' : 'not_applicable', `${ms}: the amplitude must not vanish`),
    ],
  }
}
