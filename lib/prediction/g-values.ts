import { PhysicsError } from '@/lib/atomic/errors'
import { landeG } from '@/lib/atomic/lande'
import { coupledAt, lsNumbers, type PhysicalLevel } from '@/lib/prediction/levels'
import type { GValues } from '@/openapi/schemas/common'

/** Which Landé factors a prediction uses. `gS` null is the CODATA value. */
export interface GChoice {
  gValues: GValues
  gS: number | null
}

export interface ChosenG {
  /** Null only for J = 0 (it has none) and where no value is known. */
  g: number | null
  /** One standard deviation; null is unknown. */
  unc: number | null
  /** J = 0: there is nothing to be uncertain about. */
  none: boolean
}

/**
 * The g_J of a level under a choice. `adopted`: the adopted value, and where that is the coupled one, with the g_s given;
 * `coupled`: in the level's own coupling; `ls`: in LS coupling, refused (`no_ls_g`) for a level that is not named in it.
 */
export function chooseG(level: PhysicalLevel, { gValues, gS }: GChoice, field: string): ChosenG {
  const none = level.term.j === 0
  if (gValues === 'ls') {
    const numbers = lsNumbers(level)
    if (!numbers) throw new PhysicsError('no_ls_g', `The ${field} level ${level.term.symbol} is not named in LS coupling, so it has no LS g_J; use g_values=adopted or g_values=coupled.`, 'g_values')
    return { g: gS === null ? level.g_j.ls : landeG(numbers, { gS }), unc: null, none }
  }
  if (none) return { g: null, unc: null, none }
  if (gValues === 'adopted' && level.g_j.basis !== 'coupled') return { g: level.g_j.adopted, unc: level.g_j.adopted_unc, none }
  return { g: gS === null ? level.g_j.coupled : coupledAt(level, gS), unc: null, none }
}

/**
 * The same for a member of a term of which only the adopted g is at hand: an LS level, by S, L and J.
 * Its adopted value is the coupled one exactly when the two numbers agree to the bit, both being made by one function.
 */
export function memberG(numbers: { twoS: number; l: number; twoJ: number }, adopted: number | null, { gValues, gS }: GChoice): number | null {
  const coupled = landeG(numbers)
  const atGs = gS === null ? coupled : landeG(numbers, { gS })
  return gValues === 'adopted' && adopted !== coupled ? adopted : atGs
}

/** One standard deviation of the same: known only of a measured value that was adopted. */
export const memberGUnc = (numbers: { twoS: number; l: number; twoJ: number }, member: { g_j: number | null; g_j_unc: number | null }, { gValues }: GChoice): number | null =>
  gValues === 'adopted' && member.g_j !== landeG(numbers) ? member.g_j_unc : null
