import { and, eq, lt } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { idempotencyKeys } from '@/db/schema'

export interface StoredAnswer { status: number; headers: Record<string, string>; body: unknown }

export type Begun =
  | { state: 'new' }
  | { state: 'running' }
  | { state: 'mismatch' }
  | { state: 'stored'; answer: StoredAnswer }

export interface Claim { userId: string; operation: string; key: string; requestSha256: string }

export interface IdempotencyStore {
  begin: (claim: Claim) => Promise<Begun>
  finish: (claim: Claim, answer: StoredAnswer) => Promise<void>
  abandon: (claim: Claim) => Promise<void>
}

/** Answers are kept for a day; a claim whose process died can be taken over after ten minutes. */
const KEEP_MS = 24 * 3_600_000
const TAKE_OVER_MS = 600_000

/** Claims in the table `idempotency_keys`, scoped to the caller and the operation. */
export function idempotencyStore(db: () => Db): IdempotencyStore {
  const at = (claim: Claim) => and(eq(idempotencyKeys.userId, claim.userId), eq(idempotencyKeys.operation, claim.operation), eq(idempotencyKeys.key, claim.key))
  return {
    async begin(claim) {
      await db().delete(idempotencyKeys).where(lt(idempotencyKeys.createdAt, new Date(Date.now() - KEEP_MS)))
      // the time is set here, in the milliseconds that a Date can carry back: the takeover below compares it
      // two rounds: a claim that vanishes between the insert and the look is claimed again
      for (let round = 0; round < 2; round += 1) {
        const inserted = await db().insert(idempotencyKeys).values({ ...claim, createdAt: new Date() }).onConflictDoNothing().returning({ key: idempotencyKeys.key })
        if (inserted.length > 0) return { state: 'new' }
        const [found] = await db().select().from(idempotencyKeys).where(at(claim))
        if (found === undefined) continue
        if (found.requestSha256 !== claim.requestSha256) return { state: 'mismatch' }
        if (found.status !== null) return { state: 'stored', answer: { status: found.status, headers: (found.headers ?? {}) as Record<string, string>, body: found.body } }
        if (found.createdAt.getTime() > Date.now() - TAKE_OVER_MS) return { state: 'running' }
        await db().delete(idempotencyKeys).where(and(at(claim), eq(idempotencyKeys.createdAt, found.createdAt)))
      }
      return { state: 'running' }
    },
    async finish(claim, answer) {
      await db().update(idempotencyKeys).set({ status: answer.status, headers: answer.headers, body: answer.body }).where(at(claim))
    },
    async abandon(claim) {
      await db().delete(idempotencyKeys).where(at(claim))
    },
  }
}
