/** Comparing rows with what the database holds of them as jsonb. */

/** jsonb gives the members back in an order of its own. */
export function sameRow(a: unknown, b: unknown): boolean {
  if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return a === b
  const [x, y] = [a as Record<string, unknown>, b as Record<string, unknown>]
  const keys = Object.keys(x)
  return keys.length === Object.keys(y).length && keys.every((key) => sameRow(x[key], y[key]))
}

interface Member { key: string; label: string }
/** By the number of members, which tells the kinds of row apart well enough to remember one order for each. */
const orders = new Map<number, readonly Member[]>()

/** Members in the order of jsonb, the shorter name first. */
function membersOf(row: Readonly<Record<string, unknown>>): readonly Member[] {
  const keys = Object.keys(row)
  const known = orders.get(keys.length)
  if (known?.every(({ key }) => row[key] !== undefined)) return known
  const members = keys.sort((a, b) => a.length - b.length || (a < b ? -1 : 1)).map((key) => ({ key, label: `${JSON.stringify(key)}: ` }))
  orders.set(keys.length, members)
  return members
}

/** A value as jsonb is written out where its numbers have no exponent. */
function jsonbText(value: unknown): string {
  if (value === null) return 'null'
  if (typeof value === 'number') return String(value)
  if (typeof value !== 'object') return JSON.stringify(value) ?? ''
  if (Array.isArray(value)) return `[${value.map(jsonbText).join(', ')}]`
  const row = value as Readonly<Record<string, unknown>>
  let text = ''
  for (const { key, label } of membersOf(row)) text += (text === '' ? label : `, ${label}`) + jsonbText(row[key])
  return `{${text}}`
}

/**
 * Whether the database's text of a stored row says the same as a row. Of 100 000 rows nearly all are the same to the letter; only the
 * others are read, since equal values may be written in several ways.
 */
export function storedAs(stored: string | null, row: object | null): boolean {
  if (stored === null || row === null) return stored === null && row === null
  return stored === jsonbText(row) || sameRow(JSON.parse(stored), row)
}
