import { Problem } from '@/lib/problem'

/** Node's and PostgreSQL's codes for a database that cannot be reached, is starting or stopping, has no connection to spare, or kept a statement waiting too long. */
const DOWN = /^(ECONNREFUSED|ECONNRESET|EPIPE|ETIMEDOUT|ENOTFOUND|EAI_AGAIN|08\w{3}|57P0[123]|53300|57014|25P03|40P01|55P03)$/
const DOWN_SENTENCE = /^(timeout exceeded when trying to connect|Connection terminated|Client has encountered a connection error)/

/** Whether an error, or what it was caused by, says that the database cannot be reached. */
export function isDatabaseDown(error: unknown): boolean {
  for (let at: unknown = error, steps = 0; at instanceof Error && steps < 5; at = at.cause, steps += 1) {
    const code: unknown = 'code' in at ? at.code : undefined
    if (typeof code === 'string' && DOWN.test(code)) return true
    if (DOWN_SENTENCE.test(at.message)) return true
    if (at instanceof AggregateError && at.errors.some(isDatabaseDown)) return true
  }
  return false
}

export const RETRY_SECONDS = 5

export const databaseDown = (cause: unknown): Problem =>
  new Problem('unavailable', 'The database cannot be reached, or has too much to do, at the moment; nothing was changed.', { headers: { 'retry-after': String(RETRY_SECONDS) }, cause })
