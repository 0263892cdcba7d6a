import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { formatHalf, isTriangle, magneticNumbers, type TwoJ } from '@/lib/atomic/half'
import { type ComponentRule, forbiddingComponentRule, type Kind, rankOf } from '@/lib/atomic/rules'
import { squared3jNumber } from '@/lib/atomic/wigner'
import { plusZero } from '@/lib/units/number'

/** q = 0 is pi, q = +1 sigma+, q = -1 sigma-; the |q| = 2 of E2 are named by q itself. */
export type Polarisation = 'pi' | 'sigma+' | 'sigma-' | 'q=+2' | 'q=-2'

export interface LineEnd {
  twoJ: TwoJ
  /** g_J; null only for J = 0, which has none. */
  g: number | null
}

export interface Component {
  twoMLower: TwoJ
  twoMUpper: TwoJ
  /** m_upper - m_lower, the same for absorption and emission. */
  q: number
  polarisation: Polarisation
  /** g_upper m_upper - g_lower m_lower; positive is to the blue. */
  shiftLorentz: number
  shiftInvcm: number
  /** Relative strength; each q sums to 1. */
  strength: number
  /** Strength with the viewing angle, averaged over angle where none is given; null for E2. */
  intensity: number | null
  stokesQ: number | null
  stokesV: number | null
  /** The rule that leaves this component without strength, where one does. */
  forbidden?: ComponentRule
}

export function polarisationOf(q: number): Polarisation {
  if (q === 0) return 'pi'
  if (Math.abs(q) === 1) return q > 0 ? 'sigma+' : 'sigma-'
  return q > 0 ? 'q=+2' : 'q=-2'
}

/**
 * Relative strength of a component: 3 (J_u 1 J_l; -m_u q m_l)^2 for dipole lines, 5 (J_u 2 J_l; ...)^2 for E2, so that each q sums to 1.
 * Condon & Shortley, ch. XVI; m as twice the value.
 */
export function componentStrength(kind: Kind, twoJLower: TwoJ, twoMLower: TwoJ, twoJUpper: TwoJ, twoMUpper: TwoJ): number {
  const rank = rankOf(kind)
  return (2 * rank + 1) * squared3jNumber(twoJUpper, 2 * rank, twoJLower, -twoMUpper, twoMUpper - twoMLower, twoMLower)
}

/**
 * Shift in Lorentz units, g_u m_u - g_l m_l, written (g_u - g_l) m_u + g_l q so that equal g's give exactly q g.
 * An end with J = 0 has m = 0 and adds nothing.
 */
export function shiftLorentz(gLower: number | null, twoMLower: TwoJ, gUpper: number | null, twoMUpper: TwoJ): number {
  if (gLower === null) return plusZero(((gUpper ?? 0) * twoMUpper) / 2)
  if (gUpper === null) return plusZero((-gLower * twoMLower) / 2)
  return plusZero(((gUpper - gLower) * twoMUpper + gLower * (twoMUpper - twoMLower)) / 2)
}

/**
 * Angular factors for one unit of strength, optically thin, theta between the field and the direction to the observer.
 * I: sin^2/2 for pi, (1 + cos^2)/4 for each sigma. Q > 0 along the field projected on the sky. V > 0 is counter-clockwise as the
 * observer sees it (IAU 1974), which q = +1 emits at theta = 0. M1 turns the sign of Q. Without theta: the mean, 1/3, and no Q or V.
 */
export function angularFactors(kind: Kind, q: number, thetaDeg: number | null): { intensity: number | null; stokesQ: number | null; stokesV: number | null } {
  if (kind === 'E2') return { intensity: null, stokesQ: null, stokesV: null }
  if (thetaDeg === null) return { intensity: 1 / 3, stokesQ: null, stokesV: null }
  const { sine, cosine } = sineCosine(thetaDeg)
  const turned = kind === 'M1' ? -1 : 1
  if (q === 0) return { intensity: (sine * sine) / 2, stokesQ: plusZero((turned * sine * sine) / 2), stokesV: 0 }
  return { intensity: (1 + cosine * cosine) / 4, stokesQ: plusZero((-turned * sine * sine) / 4), stokesV: plusZero((q * cosine) / 2) }
}

/** Sine and cosine of an angle in degrees, exact at the quarter turns (cos 90 deg is 0, not 6e-17). */
function sineCosine(degrees: number): { sine: number; cosine: number } {
  const turned = ((degrees % 360) + 360) % 360
  if (turned % 90 === 0) {
    const quarter = turned / 90
    return { sine: [0, 1, 0, -1][quarter] ?? 0, cosine: [1, 0, -1, 0][quarter] ?? 0 }
  }
  const radians = (degrees * Math.PI) / 180
  return { sine: Math.sin(radians), cosine: Math.cos(radians) }
}

const byPlace = (a: Component, b: Component): number => a.q - b.q || a.shiftLorentz - b.shiftLorentz || a.twoMLower - b.twoMLower

/** Refuses a level that needs a g and has none. */
export function requireG(end: LineEnd, name: 'lower' | 'upper'): void {
  if (end.twoJ > 0 && end.g === null) {
    throw new PhysicsError('g_unknown', `The ${name} level (J = ${formatHalf(end.twoJ)}) has no g_J in its coupling and none is measured, so its splitting cannot be computed.`, name)
  }
}

/** What a pair of J's fixes whatever the g's and the field: which m join, how strongly, and why not. */
export interface ComponentPlace {
  readonly twoMLower: TwoJ
  readonly twoMUpper: TwoJ
  readonly q: number
  readonly polarisation: Polarisation
  readonly strength: number
  readonly forbidden: ComponentRule | null
}

const places = new Map<number, readonly ComponentPlace[]>()

/** Every (m_lower, m_upper) with |q| up to the rank, by q then m_lower; empty where no multipole of this rank joins the J's. Remembered. */
export function componentPlaces(kind: Kind, twoJLower: TwoJ, twoJUpper: TwoJ): readonly ComponentPlace[] {
  const rank = rankOf(kind)
  const key = (twoJLower * 512 + twoJUpper) * 2 + rank - 1
  const known = places.get(key)
  if (known) return known
  const list: ComponentPlace[] = []
  for (let q = -rank; q <= rank && isTriangle(twoJLower, 2 * rank, twoJUpper); q += 1) {
    for (const twoMLower of magneticNumbers(twoJLower)) {
      const twoMUpper = twoMLower + 2 * q
      if (Math.abs(twoMUpper) > twoJUpper) continue
      const strength = componentStrength(kind, twoJLower, twoMLower, twoJUpper, twoMUpper)
      const forbidden = strength === 0 ? forbiddingComponentRule(kind, twoJLower, twoMLower, twoJUpper, twoMUpper) : null
      list.push({ twoMLower, twoMUpper, q, polarisation: polarisationOf(q), strength, forbidden })
    }
  }
  places.set(key, list)
  return list
}

export interface WeakFieldInput {
  kind: Kind
  lower: LineEnd
  upper: LineEnd
  fieldTesla: number
  thetaDeg?: number | null
}

/**
 * The Zeeman components of a line in the linear model, sorted by q, shift, m_lower. Shift mu_B B (g_u m_u - g_l m_l) in cm^-1.
 * Components without strength (m = 0 -> 0 with Delta J = 0) are listed with the rule that forbids them; a pair of levels
 * with no multipole of this rank between them has no components. Throws `g_unknown` where a needed g is null.
 */
export function weakFieldComponents({ kind, lower, upper, fieldTesla, thetaDeg = null }: WeakFieldInput): Component[] {
  requireG(lower, 'lower')
  requireG(upper, 'upper')
  const rank = rankOf(kind)
  const lorentzInvcm = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const factorsOfQ = Array.from({ length: 2 * rank + 1 }, (_, i) => angularFactors(kind, i - rank, thetaDeg))
  const times = (strength: number, factor: number | null | undefined) => (factor === null || factor === undefined ? null : plusZero(strength * factor))
  const components = componentPlaces(kind, lower.twoJ, upper.twoJ).map((place): Component => {
    const { twoMLower, twoMUpper, q, polarisation, strength, forbidden } = place
    const shift = shiftLorentz(lower.g, twoMLower, upper.g, twoMUpper)
    const factors = factorsOfQ[q + rank]
    const component: Component = {
      twoMLower,
      twoMUpper,
      q,
      polarisation,
      shiftLorentz: shift,
      shiftInvcm: plusZero(lorentzInvcm * shift),
      strength,
      intensity: times(strength, factors?.intensity),
      stokesQ: times(strength, factors?.stokesQ),
      stokesV: times(strength, factors?.stokesV),
    }
    if (forbidden !== null) component.forbidden = forbidden
    return component
  })
  return components.sort(byPlace)
}
