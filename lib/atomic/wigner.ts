import { factorial, Fraction, ratioToNumber } from '@/lib/atomic/exact'
import { isTriangle, type TwoJ } from '@/lib/atomic/half'

interface SignedSquare {
  sign: number
  numerator: bigint
  denominator: bigint
}

const ZERO: SignedSquare = { sign: 0, numerator: 0n, denominator: 1n }

/** A sum of (-1)^t / (product of factorials), kept over one denominator that every term divides. */
function alternatingSum(first: number, last: number, rising: readonly number[], falling: readonly number[], numeratorOf: (t: number) => bigint): [bigint, bigint] {
  let [sum, denominator] = [0n, 1n]
  for (let t = first; t <= last; t += 1) {
    let product = 1n
    for (const offset of rising) product *= factorial(offset + t)
    for (const offset of falling) product *= factorial(offset - t)
    const term = t % 2 === 0 ? numeratorOf(t) : -numeratorOf(t)
    sum = sum * product + term * denominator
    denominator *= product
    const common = bigGcd(sum < 0n ? -sum : sum, denominator)
    sum /= common
    denominator /= common
  }
  return [sum, denominator]
}

function bigGcd(a: bigint, b: bigint): bigint {
  let [x, y] = [a, b]
  while (y > 0n) [x, y] = [y, x % y]
  return x === 0n ? 1n : x
}

const isProjection = (twoJ: TwoJ, twoM: TwoJ): boolean => twoJ >= 0 && Math.abs(twoM) <= twoJ && (twoJ + twoM) % 2 === 0

/** The 3j symbol's sign and exact square. G. Racah, Phys. Rev. 62, 438 (1942), eq. (16); Edmonds (1957), eq. (3.6.10). */
function signedSquare3j(a: TwoJ, b: TwoJ, c: TwoJ, alpha: TwoJ, beta: TwoJ, gamma: TwoJ): SignedSquare {
  if (alpha + beta + gamma !== 0 || !isTriangle(a, b, c) || !isProjection(a, alpha) || !isProjection(b, beta) || !isProjection(c, gamma)) return ZERO
  const risingA = (c - b + alpha) / 2
  const risingB = (c - a - beta) / 2
  const falling = [(a + b - c) / 2, (a - alpha) / 2, (b + beta) / 2]
  const first = Math.max(0, -risingA, -risingB)
  const last = Math.min(...falling)
  const [sum, denominator] = alternatingSum(first, last, [0, risingA, risingB], falling, () => 1n)
  if (sum === 0n) return ZERO
  const triangle = factorial((a + b - c) / 2) * factorial((a - b + c) / 2) * factorial((b + c - a) / 2)
  const projections =
    factorial((a + alpha) / 2) * factorial((a - alpha) / 2) * factorial((b + beta) / 2) * factorial((b - beta) / 2) * factorial((c + gamma) / 2) * factorial((c - gamma) / 2)
  const phase = ((a - b - gamma) / 2) % 2 === 0 ? 1 : -1
  return { sign: (sum > 0n ? 1 : -1) * phase, numerator: triangle * projections * sum * sum, denominator: factorial((a + b + c) / 2 + 1) * denominator * denominator }
}

/**
 * The exact square of the Wigner 3j symbol (j1 j2 j3; m1 m2 m3), every argument as twice its value; 0 where a selection rule is broken.
 * Builds bigints: for tables and checks, not for inner loops (see `squared3jNumber`).
 */
export function squared3j(twoJ1: TwoJ, twoJ2: TwoJ, twoJ3: TwoJ, twoM1: TwoJ, twoM2: TwoJ, twoM3: TwoJ): Fraction {
  const { numerator, denominator } = signedSquare3j(twoJ1, twoJ2, twoJ3, twoM1, twoM2, twoM3)
  return new Fraction(numerator, denominator)
}

const REMEMBERED = 200_000
const threeJs = new Map<number, number>()

/** Wigner 3j symbol as a double, correct to about 1e-16 of itself (square root of the exact square); remembered. */
export function threeJ(twoJ1: TwoJ, twoJ2: TwoJ, twoJ3: TwoJ, twoM1: TwoJ, twoM2: TwoJ, twoM3: TwoJ): number {
  if (twoM1 + twoM2 + twoM3 !== 0) return 0
  // five numbers of at most 9 bits each (|2m| <= 2j <= 200 everywhere here) make one exact integer key
  const key = (((twoJ1 * 512 + twoJ2) * 512 + twoJ3) * 512 + twoM1 + 256) * 512 + twoM2 + 256
  const known = threeJs.get(key)
  if (known !== undefined) return known
  const { sign, numerator, denominator } = signedSquare3j(twoJ1, twoJ2, twoJ3, twoM1, twoM2, twoM3)
  const value = sign === 0 ? 0 : sign * Math.sqrt(ratioToNumber(numerator, denominator))
  if (threeJs.size >= REMEMBERED) threeJs.clear()
  threeJs.set(key, value)
  return value
}

const squares = new Map<number, number>()

/** `squared3j` as the nearest double; remembered, so that repeated calls allocate nothing. */
export function squared3jNumber(twoJ1: TwoJ, twoJ2: TwoJ, twoJ3: TwoJ, twoM1: TwoJ, twoM2: TwoJ, twoM3: TwoJ): number {
  if (twoM1 + twoM2 + twoM3 !== 0) return 0
  const key = (((twoJ1 * 512 + twoJ2) * 512 + twoJ3) * 512 + twoM1 + 256) * 512 + twoM2 + 256
  const known = squares.get(key)
  if (known !== undefined) return known
  const { numerator, denominator } = signedSquare3j(twoJ1, twoJ2, twoJ3, twoM1, twoM2, twoM3)
  const common = bigGcd(numerator, denominator)
  const value = ratioToNumber(numerator / common, denominator / common)
  if (squares.size >= REMEMBERED) squares.clear()
  squares.set(key, value)
  return value
}

/** Clebsch-Gordan coefficient <j1 m1 j2 m2 | J M> in the Condon-Shortley phase. Edmonds (1957), eq. (3.7.3). */
export function clebschGordan(twoJ1: TwoJ, twoM1: TwoJ, twoJ2: TwoJ, twoM2: TwoJ, twoJ: TwoJ, twoM: TwoJ): number {
  if (twoM1 + twoM2 !== twoM) return 0
  const phase = Math.abs((twoJ1 - twoJ2 + twoM) / 2) % 2 === 0 ? 1 : -1
  return phase * Math.sqrt(twoJ + 1) * threeJ(twoJ1, twoJ2, twoJ, twoM1, twoM2, -twoM)
}

const triangleSquare = (a: TwoJ, b: TwoJ, c: TwoJ): [bigint, bigint] => [
  factorial((a + b - c) / 2) * factorial((a - b + c) / 2) * factorial((b + c - a) / 2),
  factorial((a + b + c) / 2 + 1),
]

/** Wigner 6j symbol {a b c; d e f} as a double, every argument as twice its value. Racah (1942); Edmonds (1957), eq. (6.3.7). */
export function sixJ(a: TwoJ, b: TwoJ, c: TwoJ, d: TwoJ, e: TwoJ, f: TwoJ): number {
  if (!isTriangle(a, b, c) || !isTriangle(a, e, f) || !isTriangle(d, b, f) || !isTriangle(d, e, c)) return 0
  const sums = [a + b + c, a + e + f, d + b + f, d + e + c].map((two) => two / 2)
  const limits = [a + b + d + e, b + c + e + f, c + a + f + d].map((two) => two / 2)
  const [sum, denominator] = alternatingSum(Math.max(...sums), Math.min(...limits), sums.map((s) => -s), limits, (t) => factorial(t + 1))
  if (sum === 0n) return 0
  let [top, bottom] = [sum * sum, denominator * denominator]
  for (const [n, m] of [triangleSquare(a, b, c), triangleSquare(a, e, f), triangleSquare(d, b, f), triangleSquare(d, e, c)]) {
    top *= n
    bottom *= m
  }
  const common = bigGcd(top, bottom)
  return (sum > 0n ? 1 : -1) * Math.sqrt(ratioToNumber(top / common, bottom / common))
}
