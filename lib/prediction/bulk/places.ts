import { isTriangle, type TwoJ } from '@/lib/atomic/half'
import { type Kind, rankOf } from '@/lib/atomic/rules'
import type { BlockGiven } from '@/lib/prediction/bulk/block'

/** A component before anything is computed of it. */
export interface Place {
  q: number
  twoMLower: number
  twoMUpper: number
  twoJLower: TwoJ
  twoJUpper: TwoJ
}

const levelsOf = (block: BlockGiven): { lower: TwoJ[]; upper: TwoJ[] } => {
  const upwards = (list: TwoJ[]) => list.sort((a, b) => a - b)
  return block.form === 'line'
    ? { lower: [block.lower.twoJ], upper: [block.upper.twoJ] }
    : { lower: upwards(block.lower.levels.map((level) => level.twoJ)), upper: upwards(block.upper.levels.map((level) => level.twoJ)) }
}

/**
 * All components of a block in the order of every bulk answer: q, m_lower, J_lower, J_upper. A multiplet lists those that only the field
 * induces too, in either model, so that the rows do not depend on the model.
 */
export function placesOf(block: BlockGiven): Place[] {
  const rank = rankOf(block.kind)
  const { lower, upper } = levelsOf(block)
  const highest = Math.max(...lower)
  const places: Place[] = []
  for (let q = -rank; q <= rank; q += 1) {
    for (let twoMLower = -highest; twoMLower <= highest; twoMLower += 2) {
      const twoMUpper = twoMLower + 2 * q
      for (const twoJLower of lower) for (const twoJUpper of upper) {
        if (Math.abs(twoMLower) <= twoJLower && Math.abs(twoMUpper) <= twoJUpper) places.push({ q, twoMLower, twoMUpper, twoJLower, twoJUpper })
      }
    }
  }
  return places
}

/** How many m a line has of one q: m_lower and m_lower + q both within their J. */
const countOfQ = (twoJLower: TwoJ, twoJUpper: TwoJ, q: number): number => Math.max(0, (Math.min(twoJLower, twoJUpper - 2 * q) - Math.max(-twoJLower, -twoJUpper - 2 * q)) / 2 + 1)

/** How many components a block has, without making them. */
export function componentCount(block: BlockGiven): number {
  const rank = rankOf(block.kind)
  const { lower, upper } = levelsOf(block)
  let count = 0
  for (const twoJLower of lower) for (const twoJUpper of upper) for (let q = -rank; q <= rank; q += 1) count += countOfQ(twoJLower, twoJUpper, q)
  return count
}

/** The pairs of J that make lines of a block. */
export function linePairs(block: BlockGiven): { twoJLower: TwoJ; twoJUpper: TwoJ }[] {
  const { lower, upper } = levelsOf(block)
  return lower.flatMap((twoJLower) => upper.filter((twoJUpper) => canJoin(block.kind, twoJLower, twoJUpper)).map((twoJUpper) => ({ twoJLower, twoJUpper })))
}

export const canJoin = (kind: Kind, twoJLower: TwoJ, twoJUpper: TwoJ): boolean => isTriangle(twoJLower, 2 * rankOf(kind), twoJUpper)
