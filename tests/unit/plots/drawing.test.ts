import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { stacks } from '@/app/_components/plots/stacks'
import { termPieces } from '@/app/_components/plots/svg-term'
import { energySegments, shortConfiguration, withoutJ } from '@/app/_components/plots/term-columns'
import { printDetail } from '@/app/(bench)/_parts/rule-words'

describe('stacks', () => {
  it('stand components that coincide on one another, each with its own height, none lost', () => {
    fc.assert(
      fc.property(fc.array(fc.record({ x: fc.integer({ min: 0, max: 20 }).map((n) => n / 2), height: fc.double({ min: 0.01, max: 1, noNaN: true }) }), { maxLength: 30 }), (items) => {
        const placed = stacks(items.map((item, i) => ({ component: i, id: String(i), ...item })))
        expect(placed).toHaveLength(items.length)
        for (const one of placed) expect(one.to - one.from).toBeCloseTo(items[one.component]?.height ?? 0, 12)
        for (let i = 1; i < placed.length; i += 1) {
          const [before, one] = [placed[i - 1], placed[i]]
          if (one?.x === before?.x) expect(one?.from).toBe(before?.to)
          else expect(one?.from).toBe(0)
        }
      }),
    )
  })
})

describe('a term in a drawing', () => {
  it('is set in raised, plain and lowered pieces', () => {
    expect(termPieces('2P*3/2').map((piece) => piece.text)).toEqual(['2', 'P°', '3/2'])
    expect(termPieces('2[3/2]*2').map((piece) => piece.text)).toEqual(['2', '[3/2]°', '2'])
    expect(termPieces('(3/2,1/2)*1').map((piece) => piece.place)).toEqual([0, 1])
    expect(termPieces('J = 2')).toEqual([{ text: 'J = 2', place: 0 }])
  })
  it('loses its J at the head of a column', () => {
    expect(withoutJ('2P*3/2')).toBe('2P*')
    expect(withoutJ('2[3/2]*2')).toBe('2[3/2]*')
    expect(withoutJ('(3/2,1/2)*1')).toBe('(3/2,1/2)*')
  })
  it('shortens a configuration to its last shells', () => {
    expect(shortConfiguration('3d6.(5D).4s.4p.(3P*)')).toBe('4s\u20094p')
    expect(shortConfiguration('3d6.4s2')).toBe('3d⁶\u20094s²')
  })
})

describe('energySegments', () => {
  it('leaves out an empty stretch that is more than half of the scheme', () => {
    const segments = energySegments([0, 134041, 134459, 150000], 173929)
    expect(segments).toHaveLength(2)
    expect(segments[0]?.to).toBeLessThan(segments[1]?.from ?? 0)
    expect(segments[1]?.from).toBeLessThan(134041)
  })
  it('draws sodium whole, and every level always lies in a stretch', () => {
    expect(energySegments([0, 16956, 16973, 25739], 41449)).toHaveLength(1)
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 2e5, noNaN: true }), { minLength: 1, maxLength: 12 }), (energies) => {
        const segments = energySegments([0, ...energies], 2.1e5)
        for (const energy of energies) expect(segments.some((s) => energy >= s.from && energy <= s.to)).toBe(true)
      }),
    )
  })
})

it('sets the reasons of rules with proper signs', () => {
  expect(printDetail('J = 1/2 -> 3/2 (E1: Delta J = 0, +-1)')).toBe('J = 1/2 → 3/2 (E1: ΔJ = 0, ±1)')
  expect(printDetail('m = -1/2 -> 1/2')).toBe('m = −1/2 → 1/2')
})
