import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { coupledRange } from '@/lib/atomic/half'
import { clebschGordan, sixJ, squared3j, squared3jNumber, threeJ } from '@/lib/atomic/wigner'

const small = fc.integer({ min: 0, max: 8 })
const symbols = fc
  .record({ a: small, b: small, pick: fc.nat(), m: fc.nat(), n: fc.nat() })
  .map(({ a, b, pick, m, n }) => {
    const range = coupledRange(a, b)
    const c = range[pick % range.length] ?? 0
    const alpha = -a + 2 * (m % (a + 1))
    const beta = -b + 2 * (n % (b + 1))
    return [a, b, c, alpha, beta, -alpha - beta] as const
  })

describe('3j symbols', () => {
  it('symmetries: even permutations keep, odd ones and reversed m take (-1)^(a+b+c)', () => {
    fc.assert(
      fc.property(symbols, ([a, b, c, p, q, r]) => {
        const value = threeJ(a, b, c, p, q, r)
        const sign = ((a + b + c) / 2) % 2 === 0 ? 1 : -1
        expect(threeJ(b, c, a, q, r, p)).toBeCloseTo(value, 15)
        expect(threeJ(b, a, c, q, p, r)).toBeCloseTo(sign * value, 15)
        expect(threeJ(a, b, c, -p, -q, -r)).toBeCloseTo(sign * value, 15)
        expect(squared3jNumber(a, b, c, p, q, r)).toBeCloseTo(value * value, 15)
        expect(squared3j(a, b, c, p, q, r).equals(squared3j(b, a, c, q, p, r))).toBe(true)
      }),
    )
  })

  it('orthogonality: (2c + 1) times the squares sum to 1, exactly', () => {
    fc.assert(
      fc.property(symbols, ([a, b, c]) => {
        let sum = squared3j(0, 0, 0, 0, 0, 0).sub(1)
        for (let p = -a; p <= a; p += 2) for (let q = -b; q <= b; q += 2) if (Math.abs(p + q) <= c) sum = sum.add(squared3j(a, b, c, p, q, -p - q))
        expect(sum.toFraction()).toBe('1')
      }),
      { numRuns: 40 },
    )
  })

  it('vanishes where a rule is broken, and never throws there', () => {
    const broken: [number, number, number, number, number, number][] = [
      [2, 2, 6, 0, 0, 0],
      [2, 2, 2, 0, 0, 2],
      [1, 2, 2, 1, 0, -1],
      [2, 2, 2, 4, -4, 0],
      [2, 2, 2, 1, -1, 0],
      [2, 2, 2, 0, 0, 0],
      [-2, 2, 2, 0, 0, 0],
    ]
    for (const bad of broken) {
      expect(threeJ(...bad)).toBe(0)
      expect(squared3j(...bad).equals(0)).toBe(true)
      expect(squared3jNumber(...bad)).toBe(0)
    }
  })

  it('stays finite and normalised at large j', () => {
    // (100 100 0; m -m 0)^2 = 1/201
    expect(squared3j(200, 200, 0, 100, -100, 0).toFraction()).toBe('1/201')
    expect(threeJ(120, 120, 120, 60, -20, -40)).not.toBeNaN()
  })
})

describe('Clebsch-Gordan and 6j', () => {
  it('Clebsch-Gordan: known values in the Condon-Shortley phase', () => {
    expect(clebschGordan(1, 1, 1, 1, 2, 2)).toBeCloseTo(1, 15)
    expect(clebschGordan(1, 1, 1, -1, 0, 0)).toBeCloseTo(Math.SQRT1_2, 15)
    expect(clebschGordan(1, -1, 1, 1, 0, 0)).toBeCloseTo(-Math.SQRT1_2, 15)
    // Condon & Shortley, table 1^3: j1 = 1, j2 = 1/2
    expect(clebschGordan(2, 2, 1, -1, 1, 1)).toBeCloseTo(Math.sqrt(2 / 3), 15)
    expect(clebschGordan(2, 0, 1, 1, 1, 1)).toBeCloseTo(-Math.sqrt(1 / 3), 15)
    expect(clebschGordan(2, 0, 1, 1, 3, 3)).toBe(0)
  })

  it('6j: {a b c; 0 c b} has its closed value, and orthogonality holds', () => {
    fc.assert(
      fc.property(small, small, fc.nat(), (a, b, pick) => {
        const range = coupledRange(a, b)
        const c = range[pick % range.length] ?? 0
        const sign = ((a + b + c) / 2) % 2 === 0 ? 1 : -1
        expect(sixJ(a, b, c, 0, c, b)).toBeCloseTo(sign / Math.sqrt((b + 1) * (c + 1)), 14)
      }),
    )
    // sum over x of (2x + 1)(2f + 1) {a b x; c d f}^2 = 1
    const [a, b, c, d, f] = [3, 2, 1, 2, 3]
    const total = coupledRange(a, b).reduce((sum, x) => sum + (x + 1) * (f + 1) * sixJ(a, b, x, c, d, f) ** 2, 0)
    expect(total).toBeCloseTo(1, 14)
    expect(sixJ(2, 2, 6, 2, 2, 2)).toBe(0)
  })
})
