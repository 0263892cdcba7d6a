/** A component as it stands in the drawing: `from` and `to` are heights above the axis of its side. */
export interface Standing<C> {
  component: C
  id: string
  x: number
  from: number
  to: number
}

interface Standable<C> {
  component: C
  id: string
  x: number
  height: number
}

/**
 * Components nearer than `apart` px on one side of the axis cannot be told apart by eye, so they stand on each other's
 * shoulders: what is drawn is their sum, and each keeps its own part of it. Returned in order of x.
 */
export function stacks<C>(items: readonly Standable<C>[], apart = 1): Standing<C>[] {
  const sorted = [...items].sort((a, b) => a.x - b.x)
  const standing: Standing<C>[] = []
  let place = Number.NEGATIVE_INFINITY
  let top = 0
  for (const { component, id, x, height } of sorted) {
    if (x - place >= apart) {
      place = x
      top = 0
    }
    standing.push({ component, id, x: place, from: top, to: top + height })
    top += height
  }
  return standing
}
