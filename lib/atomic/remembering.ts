const REMEMBERED = 4000

/**
 * Remembers what does not depend on the field, since a slider or a bulk request asks the same levels at many fields. Beyond `most` it begins
 * anew. Where things differ in size, `weigh` says what one counts for, and `most` is of all weights together: terms may be written in a request,
 * and a thousand invented ones would fill the memory that a thousand of atoms do not.
 */
export function remembering<T>(most: number = REMEMBERED, weigh: (made: T, key: string) => number = () => 1): (key: string, make: () => T) => T {
  const known = new Map<string, T>()
  let weight = 0
  return (key, make) => {
    const before = known.get(key)
    if (before !== undefined) return before
    const made = make()
    const own = weigh(made, key)
    if (weight + own > most) {
      known.clear()
      weight = 0
    }
    // what made this may have remembered it already
    if (!known.has(key)) weight += own
    known.set(key, made)
    return made
  }
}
