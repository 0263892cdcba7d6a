import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { adoptG, deviations, farFromCoupled, orderMeasured, termNotPure } from '@/lib/atomic/adopted'
import { G_S } from '@/lib/atomic/constants'
import { jjDerivation, landeDerivation, pairDerivation } from '@/lib/atomic/derivation'
import { readFraction } from '@/lib/atomic/exact'
import { coupledRange } from '@/lib/atomic/half'
import { gBounds, jjG, landeG, landeGExact, pairG, pairGExact } from '@/lib/atomic/lande'

const spins = fc.integer({ min: 0, max: 8 })
const orbits = fc.integer({ min: 0, max: 8 })
const levels = fc.record({ twoS: spins, l: orbits, pick: fc.nat() }).map(({ twoS, l, pick }) => {
  const range = coupledRange(twoS, 2 * l).filter((twoJ) => twoJ > 0)
  return { twoS, l, twoJ: range[pick % Math.max(range.length, 1)] ?? 0 }
})

describe('Landé g', () => {
  it('J = 0 and impossible triangles have none, never 0', () => {
    expect(landeG({ twoS: 2, l: 1, twoJ: 0 })).toBeNull()
    expect(landeGExact({ twoS: 2, l: 1, twoJ: 0 })).toBeNull()
    expect(landeG({ twoS: 1, l: 1, twoJ: 5 })).toBeNull()
    expect(pairG({ core: { twoS: 1, l: 1, twoJ: 1 }, lOuter: 0, twoK: 1, twoJ: 0 })).toBeNull()
    expect(pairGExact({ core: { twoS: 1, l: 1, twoJ: 3 }, lOuter: 0, twoK: 1, twoJ: 2 })).toBeNull()
  })

  it('limits: g_L for S = 0, g_s for L = 0, exactly', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 10 }), fc.double({ min: 0.9, max: 1, noNaN: true }), (n, gL) => {
        expect(landeG({ twoS: 0, l: n, twoJ: 2 * n }, { gL })).toBeCloseTo(gL, 15)
        expect(landeG({ twoS: n, l: 0, twoJ: n })).toBeCloseTo(G_S, 15)
        expect(landeGExact({ twoS: 0, l: n, twoJ: 2 * n })).toBe('1')
        expect(landeGExact({ twoS: n, l: 0, twoJ: n })).toBe('2')
      }),
    )
  })

  it('the exact and the real value at g_s = 2 are one number', () => {
    fc.assert(
      fc.property(levels, (level) => {
        const exact = landeGExact(level)
        if (exact === null) return
        expect(Math.abs((landeG(level, { gS: 2 }) ?? Number.NaN) - (readFraction(exact)?.valueOf() ?? Number.NaN))).toBeLessThan(1e-14)
      }),
    )
  })

  it('g sum rule: over the levels of one J, LS, pair and jj coupling of a core and an electron have one sum', () => {
    // the sum of g over all states of one J is the trace of the moment, which no choice of coupling changes
    fc.assert(
      fc.property(fc.record({ twoS1: fc.integer({ min: 0, max: 4 }), l1: fc.integer({ min: 0, max: 3 }), l: fc.integer({ min: 0, max: 3 }), twoJ: fc.integer({ min: 1, max: 12 }) }), ({ twoS1, l1, l, twoJ }) => {
        const add = (values: (number | null)[]) => values.reduce<number>((sum, value) => sum + (value ?? 0), 0)
        const ls = coupledRange(twoS1, 1).flatMap((twoS) => coupledRange(2 * l1, 2 * l).map((twoL) => landeG({ twoS, l: twoL / 2, twoJ })))
        const cores = coupledRange(twoS1, 2 * l1).map((twoJ1) => ({ twoS: twoS1, l: l1, twoJ: twoJ1 }))
        const pair = cores.flatMap((core) => coupledRange(core.twoJ, 2 * l).map((twoK) => pairG({ core, lOuter: l, twoK, twoJ })))
        const jj = cores.flatMap((core) => coupledRange(1, 2 * l).map((twoJOuter) => jjG({ core, lOuter: l, twoJOuter, twoJ })))
        expect(Math.abs(add(ls) - add(pair))).toBeLessThan(1e-12)
        expect(Math.abs(add(ls) - add(jj))).toBeLessThan(1e-12)
      }),
    )
  })

  it('every LS g of spins up to S lies within the bounds for S, and the bounds are reached to 0.02', () => {
    for (let twoSMax = 0; twoSMax <= 8; twoSMax += 1) {
      for (let twoJ = 1; twoJ <= 14; twoJ += 1) {
        const bounds = gBounds({ twoSMax, twoJ })
        const values: number[] = []
        for (let twoS = twoSMax; twoS >= 0; twoS -= 2) {
          for (let l = 0; l <= 12; l += 1) {
            const g = landeG({ twoS, l, twoJ })
            if (g !== null) values.push(g)
          }
        }
        if (values.length === 0 || bounds === null) continue
        expect(Math.min(...values)).toBeGreaterThan(bounds.lower)
        expect(Math.max(...values)).toBeLessThan(bounds.upper)
        if (twoJ % 2 === twoSMax % 2) {
          expect(Math.min(...values) - bounds.lower).toBeCloseTo(0.02, 12)
          expect(bounds.upper - Math.max(...values)).toBeCloseTo(0.02, 2)
        }
      }
    }
    expect(gBounds({ twoSMax: 2, twoJ: 0 })).toBeNull()
  })
})

describe('derivations', () => {
  it('ends at the exact and the real g, and its shares add up', () => {
    const steps = landeDerivation({ twoS: 1, l: 1, twoJ: 3 })
    expect(steps.map((step) => step.label)).toEqual(['Quantum numbers', 'Formula', 'Orbital share', 'Spin share', 'g_J with g_s = 2', `g_J with g_s = ${G_S}`])
    expect(steps.map((step) => step.exact)).toEqual([null, null, '2/3', '1/3', '4/3', null])
    expect(steps.at(-1)?.value).toBe(landeG({ twoS: 1, l: 1, twoJ: 3 }))
    expect(landeDerivation({ twoS: 2, l: 1, twoJ: 0 }).at(-1)?.label).toBe('J = 0')
  })

  it('pair and jj derivations end at their g', () => {
    const pair = { core: { twoS: 1, l: 1, twoJ: 3 }, lOuter: 1, twoK: 5, twoJ: 6 }
    expect(pairDerivation(pair).at(-2)?.exact).toBe(pairGExact(pair))
    expect(pairDerivation(pair).at(-1)?.value).toBe(pairG(pair))
    const zeroK = { core: { twoS: 2, l: 1, twoJ: 0 }, lOuter: 0, twoK: 0, twoJ: 1 }
    expect(pairDerivation(zeroK).map((step) => step.label)).toContain('K = 0')
    expect(pairG(zeroK)).toBeCloseTo(G_S, 14)
    const jj = { core: { twoS: 1, l: 1, twoJ: 3 }, lOuter: 0, twoJOuter: 1, twoJ: 4 }
    expect(jjDerivation(jj).at(-1)?.value).toBe(jjG(jj))
  })
})

describe('adopted g_J', () => {
  const coupled = 1.3341064347869733
  const row = (value: number, unc: number | null, evidence = 'quoted') => ({ value, unc, evidence })

  it.each([
    ['an uncertain measurement does not displace a good coupled value', [row(1.3362, 0.0013)], coupled, 'coupled', []],
    ['a fine one does', [row(1.33408749, 5.2e-7)], 1.33408749, 'measured', []],
    ['one more than two deviations away does', [row(1.35, 0.005)], 1.35, 'measured', []],
    ['one within two deviations does not', [row(1.342, 0.005)], coupled, 'coupled', []],
    ['unknown uncertainty and a small difference: coupled', [row(1.3342, null)], coupled, 'coupled', []],
    ['unknown uncertainty and a telling difference: measured, with a warning', [row(1.337, null)], 1.337, 'measured', ['g_unc_unknown']],
    ['no measurement', [], coupled, 'coupled', []],
  ] as const)('%s', (_, measured, adopted, basis, warnings) => {
    const answer = adoptG({ coupled, measured })
    expect(answer).toMatchObject({ adopted, basis, byCurator: false })
    expect(answer.warnings.map((warning) => warning.code)).toEqual(warnings)
    expect(answer.reason.length).toBeGreaterThan(5)
  })

  it('of several, the best evidence speaks, then the smallest uncertainty', () => {
    const measured = [row(1.334, 0.0003), row(1.33408749, 5.2e-7, 'read'), row(1.3, 1e-9, 'recalled'), row(1.33, null, 'read')]
    expect(orderMeasured(measured).map((one) => one.value)).toEqual([1.33408749, 1.33, 1.334, 1.3])
    expect(adoptG({ coupled, measured }).adopted).toBe(1.33408749)
  })

  it('without a coupled value the measured one is all there is; without both, none', () => {
    expect(adoptG({ coupled: null, measured: [row(1.2, 0.5)] })).toMatchObject({ adopted: 1.2, basis: 'measured' })
    expect(adoptG({ coupled: null, measured: [] })).toMatchObject({ adopted: null, basis: 'none', chosen: null })
  })

  it('a curator goes before all, with the reason kept', () => {
    expect(adoptG({ coupled, measured: [row(1.33408749, 5.2e-7)], curator: { value: 1.334, reason: 'older value agrees better' } })).toMatchObject({
      adopted: 1.334,
      basis: 'measured',
      byCurator: true,
      reason: 'older value agrees better',
    })
    expect(adoptG({ coupled, measured: [], curator: { value: coupled, reason: 'kept' } }).basis).toBe('coupled')
  })

  it('distance from the coupled value', () => {
    expect(deviations(row(1.3362, 0.0013), coupled)).toBeCloseTo(1.6104, 3)
    expect(deviations(row(1.3362, null), coupled)).toBeNull()
    expect(deviations(row(1.3362, 0), coupled)).toBeNull()
    expect([farFromCoupled(1.3, 1.334), farFromCoupled(1.32, 1.334), farFromCoupled(1, null)]).toEqual([true, false, false])
    expect([termNotPure(1.34, 1.334), termNotPure(1.35, 1.334)]).toEqual([false, true])
  })
})
