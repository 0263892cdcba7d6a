const REMEMBERED = 4000

/**
 * Remembers what does not depend on the field, since a slider or a bulk request asks the same levels at many fields. Beyond `most` it begins
 * anew; a multiplet of iron takes some 40 kB, so those are kept to a thousand.
 */
export function remembering<T>(most: number = REMEMBERED): (key: string, make: () => T) => T {
  const known = new Map<string, T>()
  return (key, make) => {
    const before = known.get(key)
    if (before !== undefined) return before
    const made = make()
    if (known.size >= most) known.clear()
    known.set(key, made)
    return made
  }
}
