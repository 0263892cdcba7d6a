import type { Snapshot } from '@/lib/catalogue/shape'
import type { Change } from '@/openapi/schemas/edition'
import type { Level } from '@/openapi/schemas/level'

/** Values of a level that a reader compares, each under its dotted name; identity and revision number are not among them. */
function valuesOf(level: Level): Map<string, unknown> {
  const values = new Map<string, unknown>()
  for (const [name, value] of Object.entries(level)) {
    if (name === 'id' || name === 'species' || name === 'revision' || name === 'status') continue
    if ((name === 'term' || name === 'g_j') && typeof value === 'object' && value !== null) {
      for (const [inner, part] of Object.entries(value)) values.set(`${name}.${inner}`, part)
    } else values.set(name, value)
  }
  return values
}

const NOTHING: ReadonlyMap<string, unknown> = new Map()

function fieldsBetween(before: ReadonlyMap<string, unknown>, after: ReadonlyMap<string, unknown>): Change['fields'] {
  return [...new Set([...before.keys(), ...after.keys()])].flatMap((field) => {
    const [old, now] = [before.get(field) ?? null, after.get(field) ?? null]
    return JSON.stringify(old) === JSON.stringify(now) ? [] : [{ field, before: old, after: now }]
  })
}

/**
 * What changed from one edition to a later one, level by level and field by field, in the order of species and ordinal.
 * `earlier` null is the empty table. A level retired in between says so; one that came and went is not told.
 */
export function changesBetween(earlier: Snapshot | null, later: Snapshot): Change[] {
  const changes: Change[] = []
  for (let i = 0; i < later.size; i += 1) {
    const now = later.level(i)
    const old = earlier?.indexOf(now.id)
    const fields = fieldsBetween(earlier === null || old === undefined ? NOTHING : valuesOf(earlier.level(old)), valuesOf(now))
    if (old === undefined) changes.push({ level: now.id, species: now.species, action: 'created', fields })
    else if (fields.length > 0) changes.push({ level: now.id, species: now.species, action: 'replaced', fields })
  }
  for (let i = 0; earlier !== null && i < earlier.size; i += 1) {
    const id = earlier.levelId(i)
    if (later.indexOf(id) !== undefined) continue
    const gone = later.retired(id)
    changes.push({
      level: id,
      species: earlier.level(i).species,
      action: 'retired',
      fields: [
        { field: 'status', before: 'active', after: 'retired' },
        { field: 'reason', before: null, after: gone?.reason ?? null },
        { field: 'successor', before: null, after: gone?.successor ?? null },
      ],
    })
  }
  return changes.sort((a, b) => byTable(later, a, b))
}

const ordinalOf = ({ level }: Change): number => Number(level.slice(level.lastIndexOf('.') + 1))

const byTable = (snapshot: Snapshot, a: Change, b: Change): number =>
  (snapshot.speciesIndex.get(a.species) ?? 0) - (snapshot.speciesIndex.get(b.species) ?? 0) || ordinalOf(a) - ordinalOf(b)
