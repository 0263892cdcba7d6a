import { componentPlaces, type LineEnd, requireG, shiftLorentz } from '@/lib/atomic/components'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { TwoJ } from '@/lib/atomic/half'
import type { Kind } from '@/lib/atomic/rules'

/** The components of one line in the linear law, in the order (q, m_lower) of every bulk answer; none depends on the field. */
export interface LinearLine {
  count: number
  q: Int8Array
  twoMLower: Int16Array
  twoMUpper: Int16Array
  twoJLower: TwoJ
  twoJUpper: TwoJ
  centreInvcm: number
  /** cm^-1 per tesla. */
  slopes: Float64Array
  /** Each q sums to 1. */
  strengths: Float64Array
}

/** Makes a line ready for bulk prediction in the linear law; zero strengths are listed. Throws `g_unknown` where a needed g is null. */
export function linearLine(kind: Kind, lower: LineEnd, upper: LineEnd, centreInvcm: number): LinearLine {
  requireG(lower, 'lower')
  requireG(upper, 'upper')
  const places = componentPlaces(kind, lower.twoJ, upper.twoJ)
  return {
    count: places.length,
    q: Int8Array.from(places, (place) => place.q),
    twoMLower: Int16Array.from(places, (place) => place.twoMLower),
    twoMUpper: Int16Array.from(places, (place) => place.twoMUpper),
    twoJLower: lower.twoJ,
    twoJUpper: upper.twoJ,
    centreInvcm,
    slopes: Float64Array.from(places, (place) => MU_B_OVER_HC_INVCM_PER_T * shiftLorentz(lower.g, place.twoMLower, upper.g, place.twoMUpper)),
    strengths: Float64Array.from(places, (place) => place.strength),
  }
}

/** Wavenumbers (or shifts) of a line over a grid of fields (T), flat [field][component]. As `weakFieldComponents`; the slopes are the derivatives at every field. */
export function linearGrid(line: LinearLine, fieldsTesla: ArrayLike<number>, quantity: 'wavenumber' | 'shift' = 'wavenumber', rows: { from: number; to: number } = { from: 0, to: fieldsTesla.length }): Float64Array {
  const { count, slopes } = line
  const values = new Float64Array((rows.to - rows.from) * count)
  const origin = quantity === 'wavenumber' ? line.centreInvcm : 0
  let at = 0
  for (let row = rows.from; row < rows.to; row += 1) {
    const field = fieldsTesla[row] as number
    for (let c = 0; c < count; c += 1) {
      values[at] = origin + (slopes[c] as number) * field
      at += 1
    }
  }
  return values
}
