/** Numbers that look random and are the same for the same seed (mulberry32, T. Ettinger, public domain). */
export class Random {
  #state: number

  constructor(seed: number) {
    this.#state = seed >>> 0
  }

  /** From 0 up to, not including, 1. */
  next(): number {
    this.#state = (this.#state + 0x6d2b79f5) >>> 0
    let t = this.#state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32
  }

  between(low: number, high: number): number {
    return low + (high - low) * this.next()
  }

  /** Evenly in the logarithm. */
  magnitude(low: number, high: number): number {
    return Math.exp(this.between(Math.log(low), Math.log(high)))
  }

  pick<T>(from: readonly T[]): T | undefined {
    return from[Math.floor(this.next() * from.length)]
  }

  /** Up to `count` of them, each once. */
  sample<T>(from: readonly T[], count: number): T[] {
    const rest = [...from]
    const taken: T[] = []
    while (taken.length < count && rest.length > 0) taken.push(...rest.splice(Math.floor(this.next() * rest.length), 1))
    return taken
  }
}
