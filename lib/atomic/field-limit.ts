import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'

const LOWEST_TESLA = 1e-7
const HIGHEST_TESLA = 1e4
const STEPS_PER_DECADE = 4
const RELATIVE_WIDTH = 1e-12

/** Narrows a bracket of the root of `excess` (below 0 at low, above at high): Illinois steps, every fourth a bisection so that it cannot stall. */
function narrow(excess: (tesla: number) => number, low: number, atLow: number, high: number, atHigh: number): number {
  let [a, fa, b, fb] = [low, atLow, high, atHigh]
  for (let step = 1; step <= 200 && b / a > 1 + RELATIVE_WIDTH; step += 1) {
    const secant = b - (fb * (b - a)) / (fb - fa)
    const middle = step % 4 === 0 || !(secant > a && secant < b) ? (a + b) / 2 : secant
    if (middle <= a || middle >= b) break
    const at = excess(middle)
    if (at > 0) {
      ;[b, fb] = [middle, at]
      fa /= 2
    } else {
      ;[a, fa] = [middle, at]
      fb /= 2
    }
  }
  return b
}

/**
 * The smallest field (T, up to 10 000) at which a relative error, a function of x = mu_B B in cm^-1, passes the tolerance: a scan upwards in
 * four steps a decade, then a narrowed bracket. The scan starts a thousandth below where mixing over the smallest gap (cm^-1) can matter.
 * 0 where the tolerance is passed at any field; null where it never is.
 */
export function firstPassed(error: (x: number) => number, tolerance: number, smallestGap: number): number | null {
  const excess = (tesla: number) => error(MU_B_OVER_HC_INVCM_PER_T * tesla) - tolerance
  const hint = (tolerance * smallestGap) / (1000 * MU_B_OVER_HC_INVCM_PER_T)
  let below = Math.min(Math.max(hint, LOWEST_TESLA), HIGHEST_TESLA / 10)
  let before = excess(below)
  if (before > 0) {
    below = LOWEST_TESLA
    before = excess(below)
    if (before > 0) return 0
  }
  while (below < HIGHEST_TESLA) {
    const above = Math.min(below * 10 ** (1 / STEPS_PER_DECADE), HIGHEST_TESLA)
    const now = excess(above)
    if (now > 0) return narrow(excess, below, before, above, now)
    below = above
    before = now
  }
  return null
}
