import type { Caller } from '@/lib/access/caller'
import { type Operation, writes } from '@/openapi/core/define'

/** Representation, key and cookie all decide what is answered. */
export const VARY = 'Accept, Authorization, Cookie'

const EXPOSED = 'ETag, Link, Location, RateLimit, RateLimit-Policy, Retry-After, X-Request-Id'

/** Whether pages of other sites may read the answer: published data and computation only, and never with a cookie. */
export const openToOtherSites = (operation: Pick<Operation, 'method' | 'edition' | 'role'>): boolean =>
  !writes(operation) && (operation.role === 'reader' || operation.role === 'public')

export const crossOriginFields = (): Record<string, string> => ({ 'access-control-allow-origin': '*', 'access-control-expose-headers': EXPOSED })

export const preflightFields = (methods: readonly string[]): Record<string, string> => ({
  'access-control-allow-origin': '*',
  'access-control-allow-methods': methods.join(', '),
  'access-control-allow-headers': 'Accept, Authorization, Content-Type, If-None-Match',
  'access-control-max-age': '86400',
})

/**
 * How long an answer keeps. Published content of a numbered edition never changes; what is computed from it can, when the
 * program does; `latest` has to be asked again. Shared caches may keep only what a stranger was given.
 */
export function cacheControl(operation: Operation, pinned: boolean, caller: Caller, openReading: boolean): string {
  if (writes(operation) || operation.role === 'account' || operation.role === 'curator' || operation.role === 'admin') return writes(operation) ? 'no-store' : 'private, no-cache'
  const scope = caller.kind === 'anonymous' && (openReading || operation.role === 'public') ? 'public' : 'private'
  if (operation.method !== 'get' || !pinned || operation.edition === 'none') return `${scope}, no-cache`
  return operation.edition === 'stored' ? `${scope}, max-age=31536000, immutable` : `${scope}, max-age=86400`
}
