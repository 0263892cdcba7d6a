import type { Change } from '@/openapi/schemas/edition'
import type { Level } from '@/openapi/schemas/level'

/** Values of a level that a reader compares, each under its dotted name; identity and revision number are not among them. */
export function levelValues(level: Level): Map<string, unknown> {
  const values = new Map<string, unknown>()
  for (const [name, value] of Object.entries(level)) {
    if (name === 'id' || name === 'species' || name === 'revision' || name === 'status') continue
    if ((name === 'term' || name === 'g_j') && typeof value === 'object' && value !== null) {
      for (const [inner, part] of Object.entries(value)) values.set(`${name}.${inner}`, part)
    } else values.set(name, value)
  }
  return values
}

/** Field by field what differs; what one side lacks is null there. */
export function fieldsBetween(before: ReadonlyMap<string, unknown>, after: ReadonlyMap<string, unknown>): Change['fields'] {
  return [...new Set([...before.keys(), ...after.keys()])].flatMap((field) => {
    const [old, now] = [before.get(field) ?? null, after.get(field) ?? null]
    return JSON.stringify(old) === JSON.stringify(now) ? [] : [{ field, before: old, after: now }]
  })
}
