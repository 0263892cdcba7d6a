import { GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { formatHalf, magneticNumbers, type TwoJ } from '@/lib/atomic/half'

export interface Sublevel {
  twoM: TwoJ
  shiftInvcm: number
  shiftGhz: number
  energyInvcm: number
}

/** E(m) = E + mu_B g_J m B, one row per m from -J up. J = 0 has one row without a shift; a missing g with J > 0 throws `g_unknown`. */
export function linearSublevels({ twoJ, g, energyInvcm, fieldTesla }: { twoJ: TwoJ; g: number | null; energyInvcm: number; fieldTesla: number }): Sublevel[] {
  if (twoJ > 0 && g === null) {
    throw new PhysicsError('g_unknown', `This level (J = ${formatHalf(twoJ)}) has no g_J in its coupling and none is measured, so its splitting cannot be computed.`, 'level')
  }
  const perM = (MU_B_OVER_HC_INVCM_PER_T * fieldTesla * (g ?? 0)) / 2
  return magneticNumbers(twoJ).map((twoM) => {
    const shiftInvcm = perM * twoM === 0 ? 0 : perM * twoM
    return { twoM, shiftInvcm, shiftGhz: shiftInvcm * GHZ_PER_INVCM, energyInvcm: energyInvcm + shiftInvcm }
  })
}
