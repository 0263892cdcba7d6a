import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { niceCeil, ruler, signed, spread } from '@/app/_components/plots/ruler'

describe('niceCeil', () => {
  it('is never below the value, never above one and a half times it (2 to 3 is the widest step), and stays put when asked again', () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-9, max: 1e9, noNaN: true }), (value) => {
        const nice = niceCeil(value)
        // The slack of 1e-12 that forgives rounding may leave the result that much below.
        expect(nice).toBeGreaterThanOrEqual(value * (1 - 1e-11))
        expect(nice).toBeLessThanOrEqual(value * 1.5 * (1 + 1e-11))
        expect(niceCeil(nice)).toBe(nice)
      }),
    )
  })
  it('gives an empty drawing a scale', () => {
    expect(niceCeil(0)).toBe(1)
    expect(niceCeil(Number.NaN)).toBe(1)
  })
})

describe('ruler', () => {
  it('labels steps with true minus signs and no minus zero', () => {
    const labels = ruler([-2, 2], 600).ticks.flatMap((tick) => (tick.label === null ? [] : [tick.label]))
    expect(labels).toContain('0.0')
    expect(labels).toContain('−1.5')
    expect(labels.join()).not.toContain('-')
  })
  it('marks the half between steps of one, with ten fine divisions', () => {
    const { ticks } = ruler([0, 4], 400, 80)
    expect(ticks.filter((tick) => tick.rank === 0).map((tick) => tick.value)).toEqual([0, 1, 2, 3, 4])
    expect(ticks.filter((tick) => tick.rank === 1).map((tick) => tick.value)).toEqual([0.5, 1.5, 2.5, 3.5])
    expect(ticks).toHaveLength(41)
  })
  it('takes a power of ten out of very small and very large numbers', () => {
    const { exponent, ticks } = ruler([0, 4e-5], 300)
    expect(exponent).toBe(-5)
    expect(ticks.find((tick) => tick.label !== null && tick.value > 3.9e-5)?.label).toMatch(/^4/)
  })
})

describe('spread', () => {
  const sorted = (values: number[]) => [...values].sort((a, b) => a - b)
  it('keeps labels apart, in order and inside, where they fit', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 300, noNaN: true }), { minLength: 1, maxLength: 20 }), (wanted) => {
        const placed = spread(wanted, 12, 0, 300)
        const order = wanted.map((_, i) => i).sort((a, b) => (wanted[a] ?? 0) - (wanted[b] ?? 0))
        const inOrder = order.map((i) => placed[i] ?? Number.NaN)
        expect(inOrder).toEqual(sorted(inOrder))
        // Sums of a few doubles of size 300: a millionth of a pixel is far beyond their rounding.
        for (let i = 1; i < inOrder.length; i += 1) expect((inOrder[i] ?? 0) - (inOrder[i - 1] ?? 0)).toBeGreaterThanOrEqual(12 - 1e-6)
        for (const y of inOrder) {
          expect(y).toBeGreaterThanOrEqual(-1e-6)
          expect(y).toBeLessThanOrEqual(300 + 1e-6)
        }
      }),
    )
  })
  it('leaves alone what is already apart', () => {
    expect(spread([50, 10, 100], 12, 0, 300)).toEqual([50, 10, 100])
  })
})

it('writes the sign of a shift', () => {
  expect(signed(1.5, 3)).toBe('+1.50')
  expect(signed(-1.5, 3)).toBe('−1.50')
  expect(signed(0, 3)).toBe('0')
})
