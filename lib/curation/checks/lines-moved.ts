import type { UnionLevel } from './work'

/** A line is said to move where nothing is known of its uncertainty and it moves by more than this, cm^-1. */
export const TELLING_MOVE_INVCM = 0.001
/** Beyond this many pairs of one species lines are not counted one by one. */
const MOST_PAIRS = 4e7

/** What is known of the deviation of an energy: for one that moves of both values; 0 where nothing is, or for the ground level. */
function deviationOf({ row, before }: UnionLevel): number {
  const [now, was] = [row.energyInvcm === 0 ? 0 : (row.energyUncInvcm ?? 0), before === null || before.energyInvcm === 0 ? 0 : (before.energyUncInvcm ?? 0)]
  return before === null || before.energyInvcm === row.energyInvcm ? now : Math.hypot(now, was)
}

/**
 * For each level of a species whose energy changes: how many of its allowed E1 lines move by more than three standard deviations,
 * or 0.001 cm^-1 where none is known. Rigorous rules, so intercombination lines count. Null where they are too many to count.
 */
export function countMovedLines(levels: readonly UnionLevel[]): Map<UnionLevel, number> | null {
  const both = levels.filter((level) => level.before !== null)
  const moved = both.map((level) => level.row.energyInvcm - (level.before?.energyInvcm ?? 0))
  const movers = both.flatMap((_, at) => (moved[at] !== 0 ? [at] : []))
  if (movers.length === 0) return new Map()
  if (movers.length * both.length > MOST_PAIRS) return null
  const size = both.length
  const [twoJ, odd, deviation, shift] = [new Int16Array(size), new Uint8Array(size), new Float64Array(size), Float64Array.from(moved)]
  both.forEach((level, at) => {
    twoJ[at] = level.row.twoJ
    odd[at] = level.row.parity === 'odd' ? 1 : 0
    deviation[at] = deviationOf(level)
  })
  const counts = new Map<UnionLevel, number>()
  for (const i of movers) {
    let count = 0
    for (let k = 0; k < size; k += 1) {
      if (odd[k] === odd[i] || k === i) continue
      const [a, b] = [twoJ[i]!, twoJ[k]!]
      if (Math.abs(a - b) > 2 || a + b === 0) continue
      const unc = Math.hypot(deviation[i]!, deviation[k]!)
      const threshold = unc > 0 ? 3 * unc : TELLING_MOVE_INVCM
      if (Math.abs(shift[i]! - shift[k]!) > threshold) count += 1
    }
    const level = both[i]
    if (level !== undefined && count > 0) counts.set(level, count)
  }
  return counts
}
