import { isTriangle, type TwoJ } from '@/lib/atomic/half'
import { clebschGordan, threeJ } from '@/lib/atomic/wigner'

/**
 * <S L J m| S_z |S L J' m> in the basis |M_L M_S>, with the phases that `lsDipoleAmplitude` has too (L first, then S).
 * Its square for J' = J - 1 is that of Condon & Shortley, ch. XVI: (J^2 - m^2)(J - L + S)(J + L - S)(L + S + 1 + J)(L + S + 1 - J) / 4J^2(4J^2 - 1).
 */
export function spinZElement(twoS: TwoJ, l: number, twoJ: TwoJ, twoJOther: TwoJ, twoM: TwoJ): number {
  let sum = 0
  for (let twoMS = -twoS; twoMS <= twoS; twoMS += 2) {
    const twoML = twoM - twoMS
    if (Math.abs(twoML) > 2 * l || twoML % 2 !== 0) continue
    sum += clebschGordan(2 * l, twoML, twoS, twoMS, twoJ, twoM) * clebschGordan(2 * l, twoML, twoS, twoMS, twoJOther, twoM) * (twoMS / 2)
  }
  return sum
}

/**
 * <S L_u J_u m_u| D_q |S L_l J_l m_l> of a dipole that acts on the orbit alone, q = m_u - m_l, in units of its reduced element:
 * the sum over M_S of the uncoupled elements (-1)^(L_u - M_u) (L_u 1 L_l; -M_u q M_l). Its square goes as (J_u 1 J_l; -m_u q m_l)^2.
 */
export function lsDipoleAmplitude(twoS: TwoJ, lower: { l: number; twoJ: TwoJ; twoM: TwoJ }, upper: { l: number; twoJ: TwoJ; twoM: TwoJ }): number {
  const twoQ = upper.twoM - lower.twoM
  if (Math.abs(twoQ) > 2) return 0
  let sum = 0
  for (let twoMS = -twoS; twoMS <= twoS; twoMS += 2) {
    const [twoMl, twoMu] = [lower.twoM - twoMS, upper.twoM - twoMS]
    if (Math.abs(twoMl) > 2 * lower.l || Math.abs(twoMu) > 2 * upper.l) continue
    const phase = Math.abs(upper.l - twoMu / 2) % 2 === 0 ? 1 : -1
    const orbital = phase * threeJ(2 * upper.l, 2, 2 * lower.l, -twoMu, twoQ, twoMl)
    sum += orbital * clebschGordan(2 * lower.l, twoMl, twoS, twoMS, lower.twoJ, lower.twoM) * clebschGordan(2 * upper.l, twoMu, twoS, twoMS, upper.twoJ, upper.twoM)
  }
  return sum
}

/** Whether an orbital dipole joins two LS terms at all: same S, and L, 1, L' a triangle. */
export const hasLsDipole = (lower: { twoS: TwoJ; l: number }, upper: { twoS: TwoJ; l: number }): boolean =>
  lower.twoS === upper.twoS && isTriangle(2 * lower.l, 2, 2 * upper.l)
