import type { UncertainLevel } from '@/lib/atomic/intermediate-uncertainty'
import { missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { formatHalf } from '@/lib/atomic/half'
import type { ValidityEnd } from '@/lib/atomic/validity'
import { type GChoice, memberG, memberGUnc } from '@/lib/prediction/g-values'
import { twice } from '@/lib/prediction/levels'
import type { TransitionDetail } from '@/openapi/schemas/transition'

/** The levels of one term as the API tells them. */
export type MembersTold = TransitionDetail['terms']['lower']

/** The levels of a term with the g's of a choice; null where the level has no S and L. */
export function termLevelsOf({ s, l, levels }: MembersTold, choice: GChoice): TermLevels | null {
  if (s === null || l === null) return null
  const twoS = twice(s)
  return {
    twoS,
    l,
    levels: levels.map((member) => {
      const twoJ = twice(member.j)
      return { twoJ, energyInvcm: member.energy_invcm, g: memberG({ twoS, l, twoJ }, member.g_j, choice) }
    }),
  }
}

/** A level with its term, its own g being the one in force for it. */
export const validityEnd = (twoJ: number, g: number | null, members: MembersTold, choice: GChoice): ValidityEnd => ({ twoJ, g, term: termLevelsOf(members, choice) })

/** The term of an end, ready to be diagonalised: whole, and its own level with the g in force. Null where it is not whole. */
export function wholeTerm({ twoJ, g, term }: ValidityEnd): TermLevels | null {
  if (term === null || missingJ(term).length > 0) return null
  return { ...term, levels: term.levels.map((level) => (level.twoJ === twoJ ? { ...level, g } : level)) }
}

/** Why the term of an end cannot be diagonalised, in words that name the level and the missing J; null where it can. */
export function whyNotWhole(name: string, { term }: ValidityEnd): string | null {
  if (term === null) return `${name} has no S and L in its coupling, so its term is not known`
  const missing = missingJ(term)
  return missing.length === 0 ? null : `the term of ${name} lacks J = ${missing.map(formatHalf).join(', ')}`
}

/** What is known of every level of a term, for the uncertainty of its states; `own` is the level itself with the g in force. */
export function uncertainLevels({ s, l, levels }: MembersTold, choice: GChoice, own: { twoJ: number; gUnc: number | null }): UncertainLevel[] {
  const numbers = { twoS: twice(s ?? 0), l: l ?? 0 }
  return levels.map((member) => {
    const twoJ = twice(member.j)
    const gUnc = twoJ === own.twoJ ? own.gUnc : memberGUnc({ ...numbers, twoJ }, member, choice)
    return { twoJ, energyInvcm: member.energy_invcm, energyUnc: member.energy_unc_invcm, gUnc }
  })
}
