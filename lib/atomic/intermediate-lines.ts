import { angularFactors, type Polarisation, polarisationOf } from '@/lib/atomic/components'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type FieldMultiplet, lineNormalisation } from '@/lib/atomic/field-multiplet'
import type { TwoJ } from '@/lib/atomic/half'
import { intermediateSublevels, type TermState } from '@/lib/atomic/intermediate'
import { plusZero } from '@/lib/units/number'

/** One component of a multiplet in a field. */
export interface MultipletComponent {
  q: number
  polarisation: Polarisation
  lower: TermState
  upper: TermState
  /** E_Ju - E_Jl at zero field, cm^-1; `shiftInvcm` is counted from it. */
  centreInvcm: number
  shiftInvcm: number
  wavenumberInvcm: number
  derivativeInvcmPerTesla: number
  /** Over the whole multiplet all strengths sum to 1, each q to 1/3, at any field; null without an LS amplitude. */
  strength: number | null
}

/** Squared sum over J_u, J_l of both states' amplitudes and the LS dipole amplitudes between them: interference included. */
function strengthOf(multiplet: FieldMultiplet, dipole: Float64Array, lower: TermState, upper: TermState): number | null {
  if (multiplet.noAmplitude !== null) return null
  let amplitude = 0
  upper.amplitudes.forEach((u, i) => lower.amplitudes.forEach((l, j) => (amplitude += u.amplitude * l.amplitude * (dipole[i * lower.amplitudes.length + j] ?? 0))))
  return (amplitude * amplitude) / multiplet.norm
}

function componentAt(multiplet: FieldMultiplet, i: number, states: { lower: TermState[]; upper: TermState[] }): MultipletComponent {
  const [lower, upper] = [states.lower[multiplet.lowerState[i] ?? 0], states.upper[multiplet.upperState[i] ?? 0]]
  const link = multiplet.links[multiplet.linkOf[i] ?? 0]
  if (!lower || !upper || !link) throw new RangeError('a component without its states')
  const [q, centre] = [multiplet.q[i] ?? 0, multiplet.centresInvcm[i] ?? 0]
  const shift = plusZero(upper.shiftInvcm - lower.shiftInvcm)
  return {
    q,
    polarisation: polarisationOf(q),
    lower,
    upper,
    centreInvcm: centre,
    shiftInvcm: shift,
    wavenumberInvcm: centre + shift,
    derivativeInvcmPerTesla: plusZero(MU_B_OVER_HC_INVCM_PER_T * (upper.slope - lower.slope)),
    strength: strengthOf(multiplet, link.dipole, lower, upper),
  }
}

const statesAt = ({ lower, upper }: FieldMultiplet, fieldTesla: number) => ({ lower: intermediateSublevels(lower, fieldTesla), upper: intermediateSublevels(upper, fieldTesla) })

/**
 * All components of a multiplet at a field (T), in the fixed order (q, m_lower, J_lower, J_upper). Strengths follow the eigenvectors:
 * Condon & Shortley, ch. XVI. This is the specification of `multipletGrid`, which is for bulk.
 */
export function multipletComponents(multiplet: FieldMultiplet, fieldTesla: number): MultipletComponent[] {
  const states = statesAt(multiplet, fieldTesla)
  return Array.from({ length: multiplet.count }, (_, i) => componentAt(multiplet, i, states))
}

/** A component of one line in the intermediate model, with viewing angle. */
export interface IntermediateComponent extends MultipletComponent {
  /** Shift over mu_B B; null at zero field. */
  shiftLorentz: number | null
  intensity: number | null
  stokesQ: number | null
  stokesV: number | null
}

/**
 * The components of the line J_l - J_u out of its multiplet, J named by continuity from zero field, sorted by q, shift, m_lower.
 * Strengths are normalised as in the linear model, each q summing to 1 at zero field (with the field strength flows between the lines);
 * a line that only the field induces has strength null. Null too without an LS amplitude.
 */
export function intermediateLine(multiplet: FieldMultiplet, line: { twoJLower: TwoJ; twoJUpper: TwoJ }, fieldTesla: number, thetaDeg: number | null = null): IntermediateComponent[] {
  const factor = lineNormalisation(multiplet, line.twoJLower, line.twoJUpper)
  const lorentzInvcm = MU_B_OVER_HC_INVCM_PER_T * fieldTesla
  const states = statesAt(multiplet, fieldTesla)
  const own = Array.from({ length: multiplet.count }, (_, i) => i).filter((i) => multiplet.nominalTwoJLower[i] === line.twoJLower && multiplet.nominalTwoJUpper[i] === line.twoJUpper)
  return own
    .map((i) => componentAt(multiplet, i, states))
    .map((component) => {
      const strength = component.strength === null || factor === null ? null : component.strength * factor
      const factors = angularFactors(multiplet.kind, component.q, thetaDeg)
      const times = (angular: number | null) => (strength === null || angular === null ? null : plusZero(strength * angular))
      return {
        ...component,
        strength,
        shiftLorentz: lorentzInvcm === 0 ? null : component.shiftInvcm / lorentzInvcm,
        intensity: times(factors.intensity),
        stokesQ: times(factors.stokesQ),
        stokesV: times(factors.stokesV),
      }
    })
    .sort((a, b) => a.q - b.q || a.shiftInvcm - b.shiftInvcm || a.lower.twoM - b.lower.twoM)
}
