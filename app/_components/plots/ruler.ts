import { scaleLinear } from 'd3-scale'
import { printFixed, printSignificant, trueMinus } from '@/lib/units/print'

/** One mark on a ruler: its value, its rank (0 labelled, 1 half-way, 2 fine) and, for rank 0, its label. */
export interface Tick {
  value: number
  rank: 0 | 1 | 2
  label: string | null
}

export interface Ruler {
  ticks: Tick[]
  /** Labels are the value divided by ten to this power; 0 where the plain numbers read well. */
  exponent: number
}

const NICE = [1, 1.5, 2, 3, 4, 5, 6, 8, 10] as const

/** The smallest pleasant number (1, 1.5, 2, 3, 4, 5, 6, 8 times a power of ten) not below `value`; 1 for zero. */
export function niceCeil(value: number): number {
  if (!(value > 0) || !Number.isFinite(value)) return 1
  const power = 10 ** Math.floor(Math.log10(value))
  // A hair of slack, so that 0.3 made by 3 * 0.1 is not rounded up to 0.4.
  const mantissa = (value / power) * (1 - 1e-12)
  const step = NICE.find((candidate) => candidate >= mantissa) ?? 10
  return Number((step * power).toPrecision(12))
}

/** A shift for reading: significant digits, true minus, and a plus sign where it is positive. */
export const signed = (value: number, digits = 5): string => (value > 0 ? '+' : '') + printSignificant(value, digits)

const SUPERSCRIPTS: Record<string, string> = { '-': '⁻', 0: '⁰', 1: '¹', 2: '²', 3: '³', 4: '⁴', 5: '⁵', 6: '⁶', 7: '⁷', 8: '⁸', 9: '⁹' }
export const superscript = (n: number): string => [...String(n)].map((character) => SUPERSCRIPTS[character] ?? character).join('')

/** How many fine divisions one labelled step takes, by its leading digit, so that each is 1, 2 or 5 of something. */
const DIVISIONS: Record<number, { fine: number; half: number }> = { 1: { fine: 10, half: 5 }, 2: { fine: 4, half: 2 }, 5: { fine: 5, half: 0 } }

/**
 * The marks of a linear ruler over `domain`, drawn `length` px long: labelled steps at least `labelSpace` px apart,
 * fine divisions at least 4 px apart.
 */
export function ruler(domain: readonly [number, number], length: number, labelSpace = 64): Ruler {
  const [from, to] = domain
  const wanted = Math.max(2, Math.floor(length / labelSpace))
  const scale = scaleLinear().domain([from, to])
  const majors = scale.ticks(wanted)
  const step = majors.length > 1 ? (majors[1] ?? 0) - (majors[0] ?? 0) : to - from
  if (!(step > 0)) return { ticks: majors.map((value) => ({ value, rank: 0, label: trueMinus(String(value)) })), exponent: 0 }

  const largest = Math.max(Math.abs(from), Math.abs(to))
  const exponent = largest < 1e-3 || largest >= 1e6 ? Math.floor(Math.log10(largest)) : 0
  const unit = 10 ** exponent
  const decimals = Math.max(0, -Math.floor(Math.log10(step / unit) + 1e-9))
  const power = 10 ** Math.floor(Math.log10(step) + 1e-9)
  const division = DIVISIONS[Math.round(step / power)] ?? { fine: 1, half: 0 }
  const pxPerStep = (length * step) / (to - from)
  const { fine, half } = pxPerStep / division.fine >= 4 ? division : division.half > 0 && pxPerStep / 2 >= 4 ? { fine: 2, half: 1 } : { fine: 1, half: 0 }

  const ticks: Tick[] = []
  const first = Math.ceil((from / step) * fine - 1e-9)
  const last = Math.floor((to / step) * fine + 1e-9)
  for (let index = first; index <= last; index += 1) {
    // Counting up from below passes through minus zero.
    const value = index === 0 ? 0 : (index / fine) * step
    const place = ((index % fine) + fine) % fine
    if (place === 0) {
      // Zero must not print as minus zero.
      const shown = Math.round(index / fine) === 0 ? 0 : value / unit
      ticks.push({ value, rank: 0, label: printFixed(shown, Math.min(decimals, 10), { grouped: Math.abs(shown) >= 1e4 }) })
    } else ticks.push({ value, rank: half > 0 && place === half ? 1 : 2, label: null })
  }
  return { ticks, exponent }
}

/**
 * Moves labels apart along one axis: the positions nearest to those wanted (least squares) that keep their order and
 * stay at least `gap` apart, kept within [low, high] where they fit. Given and returned in the caller's order.
 */
export function spread(wanted: readonly number[], gap: number, low: number, high: number): number[] {
  const order = wanted.map((_, index) => index).sort((a, b) => (wanted[a] ?? 0) - (wanted[b] ?? 0))
  // Pool adjacent violators on wanted[i] - i * gap: the isotonic fit is the least-squares answer.
  const pools: { sum: number; count: number }[] = []
  order.forEach((item, rank) => {
    pools.push({ sum: (wanted[item] ?? 0) - rank * gap, count: 1 })
    while (pools.length > 1) {
      const last = pools[pools.length - 1]
      const before = pools[pools.length - 2]
      if (!last || !before || before.sum / before.count <= last.sum / last.count) break
      pools.splice(-2, 2, { sum: before.sum + last.sum, count: before.count + last.count })
    }
  })
  const top = high - (order.length - 1) * gap
  const placed: number[] = new Array<number>(wanted.length).fill(0)
  let rank = 0
  for (const pool of pools) {
    const base = Math.max(low, Math.min(pool.sum / pool.count, Math.max(low, top)))
    for (let i = 0; i < pool.count; i += 1, rank += 1) {
      const item = order[rank]
      if (item !== undefined) placed[item] = base + rank * gap
    }
  }
  return placed
}
