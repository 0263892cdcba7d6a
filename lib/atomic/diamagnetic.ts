import { C_M_PER_S, CONSTANTS, E_C, H_J_S, M_E_KG, M_E_U, MU_B_OVER_HC_INVCM_PER_T, R_INF_INVCM } from '@/lib/atomic/constants'
import type { FieldTerm } from '@/lib/atomic/field-term'
import type { TermState } from '@/lib/atomic/intermediate'
import { capacity, type Configuration, isShell } from '@/lib/atomic/shells'
import { clebschGordan } from '@/lib/atomic/wigner'

/** alpha/(4 pi R_inf), m. */
const BOHR_RADIUS_M = CONSTANTS.fineStructureConstant.value / (4 * Math.PI * R_INF_INVCM * 100)

/** e^2 a_0^2/8 m_e over hc: the shift per T^2 of a state with <r^2 sin^2 theta> = a_0^2, cm^-1. */
export const DIAMAGNETIC_INVCM_PER_T2 = (E_C * E_C * BOHR_RADIUS_M * BOHR_RADIUS_M) / (8 * M_E_KG * H_J_S * C_M_PER_S * 100)

/** A level with one electron outside a core that the field may be taken not to touch. */
export interface RydbergLevel {
  n: number
  l: number
  energyInvcm: number
  /** Limit of ionisation of this series, on the same scale. */
  limitInvcm: number
  /** Charge that the electron sees from far away: 1 for a neutral atom. */
  coreCharge: number
  /** Mass of the atom, u; infinite where absent. */
  massU?: number
}

/** The one electron outside closed shells and s electrons, whose l is then the L of the term; null where another configuration stands. */
export function outerElectron(configuration: Configuration): { n: number; l: number } | null {
  const shells = configuration.parts.filter(isShell)
  const outer = shells.at(-1)
  if (!outer || outer.count !== 1) return null
  const round = shells.slice(0, -1).every((shell) => shell.l === 0 || shell.count === capacity(shell.l))
  return round ? { n: outer.n, l: outer.l } : null
}

/** n* with R_M Z^2/n*^2 = limit - E. Null at or above the limit. */
export function effectiveQuantumNumber({ energyInvcm, limitInvcm, coreCharge, massU }: Omit<RydbergLevel, 'n' | 'l'>): number | null {
  const binding = limitInvcm - energyInvcm
  const rydberg = massU === undefined ? R_INF_INVCM : R_INF_INVCM * (1 - M_E_U / massU)
  return binding > 0 ? coreCharge * Math.sqrt(rydberg / binding) : null
}

/** <r^2> = n^2 [5n^2 + 1 - 3l(l+1)]/2Z^2 in a_0^2, with n* for n. Bethe & Salpeter, Quantum Mechanics of One- and Two-Electron Atoms, sec. 3. */
export const meanSquareRadius = (nStar: number, l: number, coreCharge: number): number => (nStar * nStar * (5 * nStar * nStar + 1 - 3 * l * (l + 1))) / (2 * coreCharge * coreCharge)

/** <l m|sin^2 theta|l m> = 2(l^2 + l - 1 + m^2)/((2l - 1)(2l + 3)). Bethe & Salpeter, sec. 47. */
export const sinSquared = (l: number, m: number): number => (2 * (l * l + l - 1 + m * m)) / ((2 * l - 1) * (2 * l + 3))

/**
 * <sin^2 theta> of a state of an LS term whose L is that of its one outer electron: the mean over M_L with the squares of the state's
 * amplitudes in |M_L M_S>, so that coupled and intermediate states are covered alike.
 */
export function stateSinSquared({ twoS, l }: Pick<FieldTerm, 'twoS' | 'l'>, state: Pick<TermState, 'twoM' | 'amplitudes'>): number {
  let sum = 0
  for (let twoMS = -twoS; twoMS <= twoS; twoMS += 2) {
    const mL = (state.twoM - twoMS) / 2
    if (Math.abs(mL) > l) continue
    const amplitude = state.amplitudes.reduce((part, { twoJ, amplitude: a }) => part + a * clebschGordan(2 * l, 2 * mL, twoS, twoMS, twoJ, state.twoM), 0)
    sum += amplitude * amplitude * sinSquared(l, mL)
  }
  return sum
}

export interface Diamagnetic {
  applies: boolean
  /** Why it does not; null where it does. */
  reason: string | null
  nStar: number | null
  /** <r^2>, a_0^2. */
  meanSquareRadius: number | null
  /** What to know of its limits: mixing of l or of n that first order leaves out. */
  warnings: ('l_mixing' | 'penetrating')[]
}

/** A quantum defect below this leaves levels of other l so near that the field mixes them, from n = 3 on. */
const HYDROGENIC_DEFECT = 0.01

/**
 * Whether the quadratic shift of a level can be had from the hydrogenic formula, and its <r^2>. It applies to one electron outside a round core
 * with n* above l. `l_mixing`: levels l +- 2 of the same n lie so near (hydrogen from n = 3 on) that first order is only a guide;
 * `penetrating`: a quantum defect above 1/2 per shell inside makes n* a rougher measure (ground levels of alkalis: some per cent).
 */
export function diamagnetic(level: RydbergLevel): Diamagnetic {
  const nStar = effectiveQuantumNumber(level)
  const refuse = (reason: string): Diamagnetic => ({ applies: false, reason, nStar, meanSquareRadius: null, warnings: [] })
  if (nStar === null) return refuse('the level lies at or above its limit of ionisation')
  // a level of hydrogen has n* = n but for fine structure and the mass
  if (nStar > level.n + 0.05) return refuse(`the effective quantum number ${nStar.toFixed(2)} is above n = ${level.n}, so the limit is not that of this electron`)
  if (nStar <= level.l) return refuse(`the effective quantum number ${nStar.toFixed(2)} is not above l = ${level.l}, so the electron is not outside a core`)
  const defect = level.n - nStar
  const warnings: Diamagnetic['warnings'] = []
  if (level.n >= 3 && Math.abs(defect) < HYDROGENIC_DEFECT) warnings.push('l_mixing')
  if (defect > 0.5) warnings.push('penetrating')
  return { applies: true, reason: null, nStar, meanSquareRadius: meanSquareRadius(nStar, level.l, level.coreCharge), warnings }
}

/** Quadratic shift e^2 B^2 <r^2 sin^2 theta>/8 m_e in cm^-1, <r^2> in a_0^2. L. I. Schiff & H. Snyder, Phys. Rev. 55, 59 (1939). */
export const diamagneticShift = (meanSquareRadiusA0: number, sinSquaredMean: number, fieldTesla: number): number =>
  DIAMAGNETIC_INVCM_PER_T2 * meanSquareRadiusA0 * sinSquaredMean * fieldTesla * fieldTesla

/**
 * Field at which a quadratic shift (or the difference of two, of a line) passes the tolerance as a share of mu_B B:
 * tolerance mu_B/|coefficient|, the coefficient in cm^-1/T^2. Null where there is none.
 */
export const diamagneticLimit = (coefficientInvcmPerT2: number, tolerance: number): number | null =>
  coefficientInvcmPerT2 === 0 ? null : (tolerance * MU_B_OVER_HC_INVCM_PER_T) / Math.abs(coefficientInvcmPerT2)

/** Quadratic shift of each state of a term (same order), cm^-1, and its derivative per tesla at fixed vectors. */
export function termDiamagneticShifts(term: Pick<FieldTerm, 'twoS' | 'l'>, states: readonly TermState[], meanSquareRadiusA0: number, fieldTesla: number): { shiftInvcm: number; derivativeInvcmPerTesla: number }[] {
  return states.map((state) => {
    const shiftInvcm = diamagneticShift(meanSquareRadiusA0, stateSinSquared(term, state), fieldTesla)
    return { shiftInvcm, derivativeInvcmPerTesla: fieldTesla === 0 ? 0 : (2 * shiftInvcm) / fieldTesla }
  })
}
