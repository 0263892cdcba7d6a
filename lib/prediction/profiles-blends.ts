/** A component among those of several lines. */
export interface Placed {
  /** Which line it belongs to. */
  line: number
  wavenumberInvcm: number
  /** Width of its line, cm^-1. */
  fwhmInvcm: number
}

/** A stretch in which components of different lines stand nearer to each other than the width in force. */
export interface Blend {
  fromInvcm: number
  toInvcm: number
  /** Lines that meet there, in their order. */
  lines: number[]
}

export interface Blends {
  blends: Blend[]
  /** For each component given, the other lines that it blends with; empty where it stands alone. */
  withLines: number[][]
}

/**
 * Finds where components of different lines are nearer than the larger of their widths, so that an instrument shows them as one. Components
 * of one line are never a blend. Stretches that touch are one.
 */
export function findBlends(components: readonly Placed[]): Blends {
  const order = components.map((_, i) => i).sort((a, b) => (components[a] as Placed).wavenumberInvcm - (components[b] as Placed).wavenumberInvcm)
  const widest = Math.max(0, ...components.map(({ fwhmInvcm }) => fwhmInvcm))
  const withLines: Set<number>[] = components.map(() => new Set<number>())
  const blends: (Omit<Blend, 'lines'> & { lines: Set<number> })[] = []
  order.forEach((i, rank) => {
    const one = components[i] as Placed
    for (let next = rank + 1; next < order.length; next += 1) {
      const j = order[next] as number
      const other = components[j] as Placed
      const apart = other.wavenumberInvcm - one.wavenumberInvcm
      if (apart > widest) break
      if (other.line === one.line || apart > Math.max(one.fwhmInvcm, other.fwhmInvcm)) continue
      withLines[i]?.add(other.line)
      withLines[j]?.add(one.line)
      const last = blends.at(-1)
      if (last && one.wavenumberInvcm <= last.toInvcm) {
        last.toInvcm = Math.max(last.toInvcm, other.wavenumberInvcm)
        last.lines.add(one.line).add(other.line)
      } else blends.push({ fromInvcm: one.wavenumberInvcm, toInvcm: other.wavenumberInvcm, lines: new Set([one.line, other.line]) })
    }
  })
  const inOrder = (lines: ReadonlySet<number>) => [...lines].sort((a, b) => a - b)
  return { blends: blends.map((blend) => ({ ...blend, lines: inOrder(blend.lines) })), withLines: withLines.map(inOrder) }
}
