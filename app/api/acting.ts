import type { Acting } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import { getConfig } from '@/lib/config'

/** Who acts, from where, in which request: what an audit row needs of a call. */
export const actingOf = (call: { caller: Caller; clientAddress: string; requestId: string }): Acting => ({ caller: call.caller, ip: call.clientAddress, requestId: call.requestId })

/** Absolute address of something of the API, from the configured base: never from what a request says of itself. */
export const addressOf = (path: string): string => `${getConfig().baseUrl}/api/v1${path}`
