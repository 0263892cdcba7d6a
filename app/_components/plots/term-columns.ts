import type { Level } from '@/openapi/schemas/level'

export interface TermColumn {
  /** ASCII symbol without J: `2P*`. */
  head: string
  parity: 'even' | 'odd'
  levels: Level[]
}

/** An ASCII term symbol without its J: `2P*3/2` is `2P*`. */
export const withoutJ = (symbol: string): string => symbol.replace(/^((?:\d+[A-Z]|\d*\[[^\]]+\]|\([^)]+\))\*?).*$/, '$1')

const rank = ({ term, coupling }: Level): number =>
  (coupling === 'LS' ? 0 : 1e6) + (term.multiplicity ?? 0) * 1000 + (term.l ?? 0) * 10 + (term.k ?? term.j)

/** Levels in columns by term, even before odd, by multiplicity and L (by K for pair coupling); each column by energy. */
export function termColumns(levels: readonly Level[]): TermColumn[] {
  const columns = new Map<string, { column: TermColumn; rank: number }>()
  for (const level of levels) {
    const head = level.coupling === 'unassigned' ? `J = ${level.term.j}` : withoutJ(level.term.symbol)
    const name = `${level.term.parity} ${head}`
    const known = columns.get(name)
    if (known) known.column.levels.push(level)
    else columns.set(name, { column: { head, parity: level.term.parity, levels: [level] }, rank: rank(level) })
  }
  const sorted = [...columns.values()].sort((a, b) => a.column.parity.localeCompare(b.column.parity) || a.rank - b.rank)
  for (const { column } of sorted) column.levels.sort((a, b) => a.energy_invcm - b.energy_invcm)
  return sorted.map(({ column }) => column)
}

const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const raised = (digits: string): string => [...digits].map((digit) => RAISED[Number(digit)] ?? '').join('')

/** A configuration short enough for a diagram: parents left out, and only its last two shells where there are more. */
export function shortConfiguration(configuration: string): string {
  const shells = configuration.split('.').filter((part) => /^\d+[a-z]\d*$/.test(part))
  return shells.slice(-2).map((shell) => shell.replace(/^(\d+[a-z])(\d*)$/, (_, orbital: string, count: string) => orbital + raised(count))).join('\u2009')
}

export interface EnergySegment {
  from: number
  to: number
}

/**
 * The stretches of energy worth drawing: all of it, or two stretches where more than half of it is one empty gap
 * with at least two levels above (the first excited level of a noble gas lies at four fifths of its limit).
 */
export function energySegments(energies: readonly number[], limit: number | null): EnergySegment[] {
  const sorted = [...energies, ...(limit === null ? [] : [limit])].sort((a, b) => a - b)
  const top = sorted[sorted.length - 1] ?? 1
  const from = Math.min(0, sorted[0] ?? 0)
  let [low, high] = [0, 0]
  for (let i = 1; i < sorted.length; i += 1) {
    const [a, b] = [sorted[i - 1] ?? 0, sorted[i] ?? 0]
    if (b - a > high - low) [low, high] = [a, b]
  }
  const above = energies.filter((energy) => energy >= high).length
  if (high - low <= 0.5 * (top - from) || above < 2) return [{ from, to: top }]
  const span = top - high
  return [{ from, to: Math.max(low, from) + span * 0.06 }, { from: high - span * 0.08, to: top }]
}
