import type { Acting } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import type { HeldClaim } from '@/lib/access/idempotency'
import { getConfig } from '@/lib/config'

/** Who acts, from where, in which request, under which Idempotency-Key: what an audit row needs of a call. */
export const actingOf = (call: { caller: Caller; clientAddress: string; requestId: string; claim: HeldClaim | null }): Acting =>
  ({ caller: call.caller, ip: call.clientAddress, requestId: call.requestId, claim: call.claim })

/** Absolute address of something of the API, from the configured base: never from what a request says of itself. */
export const addressOf = (path: string): string => `${getConfig().baseUrl}/api/v1${path}`
