import { quoted } from '@/lib/units/number'
import { type Parsed, parsed, refused } from '@/lib/atomic/errors'

/** Twice a half-integer quantum number (J, S, m, K), always an integer: J = 3/2 is held as 3. Never compared as a fraction. */
export type TwoJ = number

const LARGEST_TWO = 200

const HOW = 'write a whole or half number such as 2, 3/2 or 1.5'

const fromTwice = (twice: number, shown: string): Parsed<TwoJ> => {
  if (!Number.isInteger(twice)) return refused('half_integer_malformed', `${shown} is not a multiple of one half; ${HOW}.`)
  if (Math.abs(twice) > LARGEST_TWO) return refused('half_integer_malformed', `${shown} is beyond ${LARGEST_TWO / 2}, larger than any atomic angular momentum here.`)
  return parsed(twice === 0 ? 0 : twice)
}

/** Reads `3/2`, `1.5`, `2`, `-1/2`, `3-2` (as in links) or a number as twice its value. Error code `half_integer_malformed`. */
export function parseHalf(input: string | number): Parsed<TwoJ> {
  if (typeof input === 'number') {
    if (!Number.isFinite(input)) return refused('half_integer_malformed', `A quantum number must be finite; ${HOW}.`)
    return fromTwice(input * 2, String(input))
  }
  const text = input.trim().replace(/^[\u2212\u2013]/, '-').replace(/^\+/, '')
  const fraction = /^(-?\d{1,4})\s*[/\u2044-]\s*(\d{1,4})$/.exec(text)
  if (fraction) {
    const [numerator, denominator] = [Number(fraction[1]), Number(fraction[2])]
    if (denominator !== 1 && denominator !== 2) return refused('half_integer_malformed', `${quoted(input)} is not a half-integer; ${HOW}.`)
    return fromTwice(denominator === 2 ? numerator : 2 * numerator, quoted(input))
  }
  if (/^-?(?:\d{1,4}(?:\.\d{0,20})?|\.\d{1,20})$/.test(text)) return fromTwice(Number(text) * 2, quoted(input))
  return refused('half_integer_malformed', `${quoted(input)} is not a quantum number; ${HOW}.`)
}

/** The value itself: 3 -> 1.5. */
export const half = (two: TwoJ): number => two / 2

/** `3/2`, `2`, `-1/2`. */
export const formatHalf = (two: TwoJ): string => (two % 2 === 0 ? String(two / 2) : `${two}/2`)

/** The form used in links, where a slash would divide the path: `3-2`. */
export const formatHalfUrl = (two: TwoJ): string => formatHalf(two).replace('/', '-')

/** For reading: true minus sign, `−1/2`. */
export const formatHalfUnicode = (two: TwoJ): string => formatHalf(two).replace('-', '\u2212')

/** The values |a - b| .. a + b that two angular momenta can add to, in unit steps; all as twice the value. */
export function coupledRange(twoA: TwoJ, twoB: TwoJ): TwoJ[] {
  const range: TwoJ[] = []
  for (let two = Math.abs(twoA - twoB); two <= twoA + twoB; two += 2) range.push(two)
  return range
}

/** Whether three angular momenta make a triangle: each within the sum of the others, and the sum whole. */
export const isTriangle = (twoA: TwoJ, twoB: TwoJ, twoC: TwoJ): boolean =>
  (twoA + twoB + twoC) % 2 === 0 && twoC >= Math.abs(twoA - twoB) && twoC <= twoA + twoB

/** m = -J .. J as twice the value. */
export function magneticNumbers(twoJ: TwoJ): TwoJ[] {
  const list: TwoJ[] = []
  // 0 - J, not -J: m of J = 0 must not be a negative zero
  for (let two = 0 - twoJ; two <= twoJ; two += 2) list.push(two)
  return list
}

/** 2J + 1. */
export const degeneracy = (twoJ: TwoJ): number => twoJ + 1
