import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'

const LOWEST_TESLA = 1e-7
const HIGHEST_TESLA = 1e4
const STEPS_PER_DECADE = 6
const REMEMBERED = 4000

const known = new Map<string, (number | null)[]>()

/**
 * The smallest field (T, up to 10 000) at which a relative error, a function of x = mu_B B in cm^-1, passes the tolerance: a scan upwards in
 * six steps a decade, then bisection. 0 where it is passed at any field; null where it never is.
 */
function firstPassed(error: (x: number) => number, tolerance: number): number | null {
  const passed = (tesla: number) => error(MU_B_OVER_HC_INVCM_PER_T * tesla) > tolerance
  if (passed(LOWEST_TESLA)) return 0
  const steps = Math.round(Math.log10(HIGHEST_TESLA / LOWEST_TESLA)) * STEPS_PER_DECADE
  let below = LOWEST_TESLA
  for (let step = 1; step <= steps; step += 1) {
    const above = step === steps ? HIGHEST_TESLA : LOWEST_TESLA * 10 ** (step / STEPS_PER_DECADE)
    if (!passed(above)) {
      below = above
      continue
    }
    let [low, high] = [below, above]
    while (high / low > 1 + 1e-12) {
      const middle = (low + high) / 2
      if (middle <= low || middle >= high) break
      if (passed(middle)) high = middle
      else low = middle
    }
    return high
  }
  return null
}

/** `firstPassed` of several errors, remembered under a key that says all they depend on: limits do not change with the field asked. */
export function limitsOf(key: string, errors: readonly ((x: number) => number)[], tolerance: number): (number | null)[] {
  const before = known.get(key)
  if (before) return before
  const limits = errors.map((error) => firstPassed(error, tolerance))
  if (known.size >= REMEMBERED) known.clear()
  known.set(key, limits)
  return limits
}
