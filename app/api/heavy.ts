import type { Caller } from '@/lib/access/caller'
import { shared } from '@/lib/access/shared'
import { getConfig } from '@/lib/config'
import { processLog } from '@/lib/http/log'
import type { Asking } from '@/lib/prediction/answers/bulk'
import { Pool, type PoolEvent } from '@/lib/prediction/bulk/pool'
import { spawnWorker } from '@/lib/prediction/bulk/spawn'

const BY_CALLER: ReadonlySet<PoolEvent['event']> = new Set(['cancelled', 'stalled'])

/** The process's one pool, started at the first large request. */
const pool = (): Pool =>
  shared('heavy', () => {
    const { predictionWorkers, logLevel } = getConfig()
    const log = processLog(logLevel)
    return new Pool({
      spawn: spawnWorker,
      workers: predictionWorkers,
      tell: ({ event, detail }) => log[BY_CALLER.has(event) ? 'info' : 'error']({ event, ...detail }, BY_CALLER.has(event) ? 'a large computation was left by its caller' : 'a large computation was interrupted'),
    })
  })

const nameOf = (caller: Caller, address: string): string => (caller.kind === 'anonymous' ? `a:${address}` : caller.kind === 'key' ? `k:${caller.keyId}` : `u:${caller.userId}`)

/** Whose turn a large computation counts as, and where it is done. */
export const askingOf = (call: { caller: Caller; clientAddress: string; signal: AbortSignal }): Asking => ({ pool, caller: nameOf(call.caller, call.clientAddress), signal: call.signal })
