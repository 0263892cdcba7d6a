import type { Logger } from 'pino'
import type { Caller } from '@/lib/access/caller'
import type { IdempotencyStore } from '@/lib/access/idempotency'
import type { KeptAnswers } from '@/lib/http/kept-answers'
import type { RateLimiter } from '@/lib/http/rate-limit'
import type { WriteTable } from '@/lib/http/types'

export interface Credentials { authorization: string | null; cookie: string | null; userAgent: string | null }

/** What the wrapper needs from the rest of the house; `S` is an edition's content in memory. */
export interface House<S> {
  baseUrl: string
  openReading: boolean
  ratePerMinute: { anonymous: number; known: number }
  trustedProxies: readonly string[]
  /** Edition of the fundamental constants: `meta.constants`. */
  constants: string
  /** Raised whenever a computed number can change: `meta.physics`, and part of computed entity tags. */
  physics: number
  /** Signs cursors. */
  secret: () => Uint8Array
  /** Number of the newest edition (0 where there is none), and whether one exists. */
  editions: { latest: () => Promise<number>; exists: (edition: number) => Promise<boolean> }
  snapshotFor: (edition: number) => Promise<S>
  /** Who is asking; throws a Problem for a key or session that does not hold. */
  callerFor: (credentials: Credentials) => Promise<Caller> | Caller
  idempotency: IdempotencyStore
  limiter: RateLimiter
  /** Answers to give again without making them; without it each is made anew. */
  kept?: KeptAnswers | undefined
  writeTable: WriteTable
  log: Logger
}
