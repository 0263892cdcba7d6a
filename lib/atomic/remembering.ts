const REMEMBERED = 4000

/** Remembers what does not depend on the field, since a slider or a bulk request asks the same levels at many fields. */
export function remembering<T>(): (key: string, make: () => T) => T {
  const known = new Map<string, T>()
  return (key, make) => {
    const before = known.get(key)
    if (before !== undefined) return before
    const made = make()
    if (known.size >= REMEMBERED) known.clear()
    known.set(key, made)
    return made
  }
}
