export interface Difference { name: string; before: string | null; after: string | null }

const LONGEST = 300

function textOf(value: unknown): string | null {
  if (value === undefined || value === null) return null
  const text = typeof value === 'string' ? value : JSON.stringify(value)
  return text.length > LONGEST ? `${text.slice(0, LONGEST)}…` : text
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !Array.isArray(value)

/** What an audit row holds of before and after, member by member; what stayed as it was is left out. */
export function differences(before: unknown, after: unknown): Difference[] {
  if (!isRecord(before ?? {}) || !isRecord(after ?? {})) {
    const [old, now] = [textOf(before), textOf(after)]
    return old === now ? [] : [{ name: 'value', before: old, after: now }]
  }
  const [old, now] = [(before ?? {}) as Record<string, unknown>, (after ?? {}) as Record<string, unknown>]
  return [...new Set([...Object.keys(old), ...Object.keys(now)])].flatMap((name) => {
    const [was, is] = [textOf(old[name]), textOf(now[name])]
    return was === is ? [] : [{ name, before: was, after: is }]
  })
}
