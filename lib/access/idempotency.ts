import { and, eq, lt } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { idempotencyKeys } from '@/db/schema'
import { Problem } from '@/lib/problem'

export interface StoredAnswer { status: number; headers: Record<string, string>; body: unknown }

export interface Claim { userId: string; operation: string; key: string; requestSha256: string }
/** A claim that this request holds; the time tells it from one that took it over. */
export interface HeldClaim extends Claim { claimedAt: Date }

export type Begun =
  | { state: 'new'; claim: HeldClaim }
  | { state: 'running' }
  | { state: 'mismatch' }
  /** It took effect, and what was answered was not kept. */
  | { state: 'lost' }
  | { state: 'stored'; answer: StoredAnswer }

export interface IdempotencyStore {
  begin: (claim: Claim) => Promise<Begun>
  finish: (claim: HeldClaim, answer: StoredAnswer) => Promise<void>
  /** Gives a claim back whose request has had no effect; false where it has had one, and then the claim stays. */
  abandon: (claim: HeldClaim) => Promise<boolean>
}

/** Answers are kept for a day; a claim whose process died without an effect can be taken over after ten minutes. */
const KEEP_MS = 24 * 3_600_000
const TAKE_OVER_MS = 600_000
/** The answer of an effect that has just been is being written down at this moment. */
const ANSWER_COMES_MS = 2000
const LOOK_AGAIN_MS = 100

const at = (claim: Claim) => and(eq(idempotencyKeys.userId, claim.userId), eq(idempotencyKeys.operation, claim.operation), eq(idempotencyKeys.key, claim.key))
const held = (claim: HeldClaim) => and(at(claim), eq(idempotencyKeys.createdAt, claim.claimedAt))

/**
 * Notes in the transaction of an effect that it was had: both stand or neither does, whatever becomes of the process, the connection or
 * the answer. Throws, so that the effect is taken back, where another request has taken the claim over meanwhile.
 */
export async function commitClaim(tx: Tx | Db, claim: HeldClaim): Promise<void> {
  const noted = await tx.update(idempotencyKeys).set({ committed: true }).where(held(claim)).returning({ key: idempotencyKeys.key })
  if (noted.length === 0) throw new Problem('idempotency_running', 'This took so long that another request with this Idempotency-Key has begun; nothing was done by this one.', { headers: { 'retry-after': '1' } })
}

/** Claims in the table `idempotency_keys`, scoped to the caller and the operation. */
export function idempotencyStore(db: () => Db): IdempotencyStore {
  return {
    async begin(claim) {
      await db().delete(idempotencyKeys).where(lt(idempotencyKeys.createdAt, new Date(Date.now() - KEEP_MS)))
      const until = Date.now() + ANSWER_COMES_MS
      // a claim that vanishes between the insert and the look is claimed again
      for (let vanished = 0; vanished < 2;) {
        // the time is set here, in the milliseconds that a Date can carry back: what follows compares it
        const claimedAt = new Date()
        const inserted = await db().insert(idempotencyKeys).values({ ...claim, createdAt: claimedAt }).onConflictDoNothing().returning({ key: idempotencyKeys.key })
        if (inserted.length > 0) return { state: 'new', claim: { ...claim, claimedAt } }
        const [found] = await db().select().from(idempotencyKeys).where(at(claim))
        if (found === undefined) {
          vanished += 1
          continue
        }
        if (found.requestSha256 !== claim.requestSha256) return { state: 'mismatch' }
        if (found.status !== null) return { state: 'stored', answer: { status: found.status, headers: (found.headers ?? {}) as Record<string, string>, body: found.body } }
        if (found.committed) {
          if (Date.now() >= until) return { state: 'lost' }
          await new Promise((done) => setTimeout(done, LOOK_AGAIN_MS))
          continue
        }
        if (found.createdAt.getTime() > Date.now() - TAKE_OVER_MS) return { state: 'running' }
        // one whose effect is being committed at this moment is waited for, and then not taken over
        await db().delete(idempotencyKeys).where(and(held({ ...claim, claimedAt: found.createdAt }), eq(idempotencyKeys.committed, false)))
        vanished += 1
      }
      return { state: 'running' }
    },
    async finish(claim, answer) {
      await db().update(idempotencyKeys).set({ status: answer.status, headers: answer.headers, body: answer.body }).where(held(claim))
    },
    async abandon(claim) {
      await db().delete(idempotencyKeys).where(and(held(claim), eq(idempotencyKeys.committed, false)))
      return (await db().select({ key: idempotencyKeys.key }).from(idempotencyKeys).where(and(held(claim), eq(idempotencyKeys.committed, true)))).length === 0
    },
  }
}
