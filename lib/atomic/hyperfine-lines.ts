import { type Polarisation, polarisationOf } from '@/lib/atomic/components'
import { PhysicsError } from '@/lib/atomic/errors'
import { formatHalf } from '@/lib/atomic/half'
import { type HyperfineReady, type HyperfineState, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { type Kind, rankOf } from '@/lib/atomic/rules'
import { threeJ } from '@/lib/atomic/wigner'
import { plusZero } from '@/lib/units/number'

export interface HyperfineComponent {
  /** m_F upper - m_F lower. */
  q: number
  polarisation: Polarisation
  lower: HyperfineState
  upper: HyperfineState
  /** From the line between the centres of gravity of both levels. */
  detuningMhz: number
  derivativeMhzPerTesla: number
  /** All components of the line sum to 1 at any field, each q to a third (a fifth for E2). */
  strength: number
}

/**
 * Amplitude of a multipole that acts on the electrons alone: sum over m_I of both states' amplitudes with
 * (-1)^(J_u - m_u) (J_u k J_l; -m_u q m_l).
 */
function amplitudeOf(lower: HyperfineState, upper: HyperfineState, ends: { twoJLower: number; twoJUpper: number; rank: number }): number {
  let sum = 0
  for (const u of upper.amplitudes) {
    const l = lower.amplitudes.find((one) => one.twoMI === u.twoMI)
    if (!l || u.amplitude === 0 || l.amplitude === 0) continue
    const phase = ((ends.twoJUpper - u.twoMJ) / 2) % 2 === 0 ? 1 : -1
    sum += phase * u.amplitude * l.amplitude * threeJ(ends.twoJUpper, 2 * ends.rank, ends.twoJLower, -u.twoMJ, u.twoMJ - l.twoMJ, l.twoMJ)
  }
  return sum
}

/**
 * Every component of a line with nuclear spin at a field (T), by q, m_F lower, then both states upwards; those without strength included.
 * All states are taken as equally populated, so that the strengths sum to 1 over the line.
 */
export function hyperfineComponents(lower: HyperfineReady, upper: HyperfineReady, fieldTesla: number, kind: Kind = 'E1'): HyperfineComponent[] {
  const [nucleus, other] = [lower.level.twoI, upper.level.twoI]
  if (nucleus !== other) throw new PhysicsError('nucleus_differs', `Both levels of a line belong to one nucleus; these have I = ${formatHalf(nucleus)} and ${formatHalf(other)}.`, 'nucleus')
  const rank = rankOf(kind)
  const ends = { twoJLower: lower.level.twoJ, twoJUpper: upper.level.twoJ, rank }
  const [lowerStates, upperStates] = [hyperfineSublevels(lower, fieldTesla), hyperfineSublevels(upper, fieldTesla)]
  const components: HyperfineComponent[] = []
  for (let q = -rank; q <= rank; q += 1) {
    for (const l of lowerStates) {
      for (const u of upperStates) {
        if (u.twoMF !== l.twoMF + 2 * q) continue
        components.push({
          q,
          polarisation: polarisationOf(q),
          lower: l,
          upper: u,
          detuningMhz: u.energyMhz - l.energyMhz,
          derivativeMhzPerTesla: plusZero(u.derivativeMhzPerTesla - l.derivativeMhzPerTesla),
          strength: amplitudeOf(l, u, ends) ** 2 / (nucleus + 1),
        })
      }
    }
  }
  return components
}

export interface Isotope<Component> {
  massNumber: number
  /** Share of the natural element, 0 to 1; null where it is not known. */
  abundance: number | null
  /** Shift of its line from the line of the table, MHz; null where none is given, and then taken as 0. */
  shiftMhz: number | null
  components: Component[]
}

export interface IsotopeMixture<Component> {
  /** Weights sum to 1. */
  isotopes: { massNumber: number; weight: number; shiftMhz: number; shiftKnown: boolean; components: Component[] }[]
  /** Sum of the abundances as listed; weights were divided by it. */
  listedAbundance: number
}

/** A natural mixture by abundance, renormalised to the isotopes at hand (`listedAbundance` says what they sum to). Isotopes without an abundance weigh nothing. */
export function isotopeMixture<Component>(isotopes: Isotope<Component>[]): IsotopeMixture<Component> {
  const listed = isotopes.reduce((sum, isotope) => sum + (isotope.abundance ?? 0), 0)
  if (!(listed > 0)) throw new PhysicsError('abundance_unknown', 'No abundance is known for any isotope here, so no natural mixture can be made; name one isotope.', 'isotope')
  return {
    isotopes: isotopes.map(({ massNumber, abundance, shiftMhz, components }) => ({ massNumber, weight: (abundance ?? 0) / listed, shiftMhz: shiftMhz ?? 0, shiftKnown: shiftMhz !== null, components })),
    listedAbundance: listed,
  }
}
