import pino, { type Logger } from 'pino'
import { shared } from '@/lib/access/shared'

const MOST_TEXT = 1000
const MOST_STACK = 4000
const MOST_CAUSES = 5
const DATABASE_PARTS = ['code', 'severity', 'schema', 'table', 'column', 'constraint', 'routine'] as const

const cut = (text: string, most: number): string => (text.length <= most ? text : `${text.slice(0, most)}... (${text.length} characters)`)

/** The frames alone: what stands above them repeats the message. Where that cannot be told, none. */
function framesOf({ stack, message }: Error): string | undefined {
  if (typeof stack !== 'string') return undefined
  const at = stack.indexOf(message)
  return at < 0 ? undefined : cut(stack.slice(at + message.length).trimStart(), MOST_STACK)
}

const textIn = (error: object, part: string): string | undefined => {
  const value: unknown = (error as Record<string, unknown>)[part]
  return typeof value === 'string' ? value : undefined
}

/** A failed query as the query layer throws it: with all that was to be written in its message, its stack and `params`. */
const isFailedQuery = (error: Error): boolean => typeof textIn(error, 'query') === 'string' && 'params' in error
/** PostgreSQL's own error: `detail`, `where` and, where a value could not be read, the message repeat values. */
const isDatabaseError = (error: Error): boolean => /^[0-9A-Z]{5}$/.test(textIn(error, 'code') ?? '') && textIn(error, 'severity') !== undefined

function oneShown(error: Error): Record<string, unknown> {
  const shown: Record<string, unknown> = { type: error.name === 'Error' ? error.constructor.name : error.name }
  if (isFailedQuery(error)) return { ...shown, message: 'Failed query', query: cut(textIn(error, 'query') ?? '', MOST_TEXT), stack: framesOf(error) }
  if (isDatabaseError(error)) {
    for (const part of DATABASE_PARTS) if (textIn(error, part) !== undefined) shown[part] = cut(textIn(error, part) ?? '', 200)
    // class 22 is data: "invalid input syntax for type uuid: ..." quotes what was given
    return { ...shown, message: cut(error.message.replace((textIn(error, 'code') ?? '').startsWith('22') ? /[:"].*$/s : /\n.*$/s, ''), MOST_TEXT), stack: framesOf(error) }
  }
  const code: unknown = 'code' in error ? error.code : undefined
  return { ...shown, ...(typeof code === 'string' || typeof code === 'number' ? { code } : {}), message: cut(error.message, MOST_TEXT), stack: framesOf(error) }
}

/**
 * What of an error may stand in the log: what it is, where it arose, and of a failed query its text, the table and the constraint, but
 * nothing of what was to be written: tokens, secrets and whole files are among it.
 */
export function shownError(error: unknown): unknown {
  if (!(error instanceof Error)) return typeof error === 'string' ? cut(error, MOST_TEXT) : { type: typeof error }
  const causes: Record<string, unknown>[] = []
  let message = ''
  for (let at: unknown = error; at instanceof Error && causes.length < MOST_CAUSES; at = at.cause) {
    // an error that quotes the one before it repeats its parameters as well
    const inner: unknown = at.cause
    const quotes = inner instanceof Error && isFailedQuery(inner) && at.message.includes(inner.message)
    const one = oneShown(at)
    if (quotes) Object.assign(one, { message: 'It quotes a failed query', stack: undefined })
    causes.push(one)
    message ||= String(one.message)
  }
  const [first = {}, ...rest] = causes
  const database = rest.find((one) => 'severity' in one)
  const found = database === undefined ? {} : Object.fromEntries(DATABASE_PARTS.flatMap((part) => (part in database ? [[part, database[part]]] : [])))
  return { ...first, ...found, message, ...(rest.length > 0 ? { causes: rest } : {}) }
}

/** The process's log: JSON lines on standard output. Keys, cookies and bodies are never given to it, and errors are shown without them. */
export const processLog = (level: string): Logger => shared('log', () => pino(logSettings(level)))

export const logSettings = (level: string) => ({ level, base: { app: 'lodeterm' }, serializers: { err: shownError, error: shownError } })
