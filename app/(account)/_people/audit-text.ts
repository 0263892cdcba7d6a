export interface Difference { name: string; before: string | null; after: string | null }

const LONGEST = 300

function textOf(value: unknown): string | null {
  if (value === undefined || value === null) return null
  const text = typeof value === 'string' ? value : typeof value === 'boolean' ? (value ? 'yes' : 'no') : Array.isArray(value) ? value.map((item) => textOf(item) ?? 'nothing').join(', ') : JSON.stringify(value)
  return text.length > LONGEST ? `${text.slice(0, LONGEST)}…` : text
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null && !Array.isArray(value)

/** Members that only hold others: what a batch changed stands beside what it wrote, and values beside the words about them. */
const HOLDERS = new Set(['values', 'changed', 'written'])
const wordsOf = (path: readonly string[]): string => (path.length === 0 ? 'value' : path.map((part) => part.replace(/_/g, ' ')).join(' › '))

/** Every single value with the way to it. Things in a list are called by what they are about, others by their place. */
function valuesIn(value: unknown, path: readonly string[], into: Map<string, string>): Map<string, string> {
  if (isRecord(value)) {
    for (const [name, inner] of Object.entries(value)) valuesIn(inner, HOLDERS.has(name) ? path : [...path, name], into)
  } else if (Array.isArray(value) && value.some(isRecord)) {
    value.forEach((item: unknown, at) => {
      const about = isRecord(item) && typeof item.subject === 'string' ? item.subject : null
      const rest = isRecord(item) && about !== null ? Object.fromEntries(Object.entries(item).filter(([name]) => name !== 'subject')) : item
      valuesIn(rest, [...path, about ?? String(at + 1)], into)
    })
  } else {
    const text = textOf(value)
    if (text !== null && text !== '') into.set(wordsOf(path), text)
  }
  return into
}

/** What an audit row holds of before and after, value by value; what stayed as it was is left out. */
export function differences(before: unknown, after: unknown): Difference[] {
  const [old, now] = [valuesIn(before, [], new Map()), valuesIn(after, [], new Map())]
  return [...new Set([...old.keys(), ...now.keys()])].flatMap((name) => {
    const [was, is] = [old.get(name) ?? null, now.get(name) ?? null]
    return was === is ? [] : [{ name, before: was, after: is }]
  })
}

/** All of it as it is stored, for whoever has to see every sign. */
export const rawText = (before: unknown, after: unknown): string => JSON.stringify({ before: before ?? null, after: after ?? null }, null, 2)
