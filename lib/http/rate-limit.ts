export interface Allowance { allowed: boolean; limit: number; remaining: number; /** Seconds until the allowance is full again. */ reset: number; retryAfter: number }

interface Bucket { tokens: number; at: number; perMinute: number }

/** A token bucket per caller: `perMinute` requests at once, refilled evenly over the minute. Kept in memory of one process. */
export class RateLimiter {
  private readonly buckets = new Map<string, Bucket>()

  constructor(private readonly now: () => number = () => performance.now(), private readonly mostBuckets = 100_000) {}

  /** Takes one request out of the caller's bucket. */
  take(caller: string, perMinute: number): Allowance {
    const now = this.now()
    const perMillisecond = perMinute / 60_000
    const bucket = this.buckets.get(caller) ?? { tokens: perMinute, at: now, perMinute }
    bucket.tokens = Math.min(perMinute, bucket.tokens + (now - bucket.at) * perMillisecond)
    bucket.at = now
    if (!this.buckets.has(caller)) {
      if (this.buckets.size >= this.mostBuckets) this.forgetFull(now)
      this.buckets.set(caller, bucket)
    }
    const allowed = bucket.tokens >= 1
    if (allowed) bucket.tokens -= 1
    return {
      allowed, limit: perMinute, remaining: Math.floor(bucket.tokens),
      reset: Math.ceil((perMinute - bucket.tokens) / perMillisecond / 1000),
      retryAfter: allowed ? 0 : Math.max(1, Math.ceil((1 - bucket.tokens) / perMillisecond / 1000)),
    }
  }

  /** Makes room: buckets that are full again say nothing; if none is, the oldest goes. */
  private forgetFull(now: number): void {
    for (const [caller, bucket] of this.buckets) {
      if (bucket.tokens + ((now - bucket.at) * bucket.perMinute) / 60_000 >= bucket.perMinute) this.buckets.delete(caller)
    }
    for (const caller of this.buckets.keys()) {
      if (this.buckets.size < this.mostBuckets) break
      this.buckets.delete(caller)
    }
  }
}

/** RateLimit-Policy and RateLimit fields (IETF draft-ietf-httpapi-ratelimit-headers): quota and window, what remains and when it is whole. */
export function rateFields(policy: string, allowance: Allowance): Record<string, string> {
  return {
    'ratelimit-policy': `"${policy}";q=${allowance.limit};w=60`,
    'ratelimit': `"${policy}";r=${allowance.remaining};t=${allowance.reset}`,
  }
}
