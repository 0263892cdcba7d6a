import Fraction from 'fraction.js'

export { Fraction }

/** Greatest common divisor of two integers held as numbers. */
export function gcd(a: number, b: number): number {
  let [x, y] = [Math.abs(a), Math.abs(b)]
  while (y > 0) [x, y] = [y, x % y]
  return x
}

/** A quotient of bigints as the nearest double but for a last-place rounding, whatever their size. */
export function ratioToNumber(numerator: bigint, denominator: bigint): number {
  const digits = Math.max(numerator.toString(16).length, denominator.toString(16).length)
  const shift = BigInt(Math.max(0, (digits - 240) * 4))
  return Number(numerator >> shift) / Number(denominator >> shift)
}

const factorials: bigint[] = [1n]

/** n! exactly, remembered. */
export function factorial(n: number): bigint {
  for (let k = factorials.length; k <= n; k += 1) factorials.push((factorials[k - 1] ?? 1n) * BigInt(k))
  return factorials[n] ?? 1n
}

/** Reads `4/3`, `-1/3`, `2` as an exact fraction; null when it is none. */
export function readFraction(text: string): Fraction | null {
  const match = /^\s*(-?\d{1,12})\s*(?:\/\s*(\d{1,12}))?\s*$/.exec(text)
  if (!match || match[2] === '0') return null
  return new Fraction(`${match[1] ?? '0'}/${match[2] ?? '1'}`)
}
