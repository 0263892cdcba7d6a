import { setFlagsFromString } from 'node:v8'
import { runInNewContext } from 'node:vm'
import { shared } from '@/lib/access/shared'

/** Rows from which on the garbage of one stage is worth a pause of some hundred milliseconds. */
const MANY_ROWS = 10_000

function collector(): () => void {
  try {
    setFlagsFromString('--expose-gc')
    const gc: unknown = runInNewContext('gc')
    return typeof gc === 'function' ? () => void (gc as () => void)() : () => undefined
  } catch {
    return () => undefined
  }
}

/**
 * Collects garbage between the stages of a large import. Left alone on a machine with much memory, V8 lets it pile up to a multiple of
 * what is in use before it looks: the server would need twice the memory that an import does.
 */
export function collectAfter(rows: number): void {
  if (rows >= MANY_ROWS) shared('collector', () => ({ collect: collector() })).collect()
}
