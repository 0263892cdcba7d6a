import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { type Component, componentStrength, type LineEnd, weakFieldComponents } from '@/lib/atomic/components'
import { G_S } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { landeG, landeGExact } from '@/lib/atomic/lande'
import { effectiveG, exactComponents, patternKind, patternKindOfNumbers, secondMoments } from '@/lib/atomic/moments'
import { KINDS } from '@/lib/atomic/rules'
import { linearSublevels } from '@/lib/atomic/sublevels'
import { positionUncertainty } from '@/lib/atomic/uncertainty'

const g = fc.double({ min: -1, max: 3, noNaN: true })
/** Two J's that a multipole of the rank joins, with any g's. */
const pairs = (rank: number) =>
  fc
    .record({ twoJ: fc.integer({ min: 0, max: 14 }), step: fc.integer({ min: -rank, max: rank }), gLower: g, gUpper: g })
    .map(({ twoJ, step, gLower, gUpper }): { lower: LineEnd; upper: LineEnd } => {
      const other = Math.max(0, twoJ + 2 * step)
      const upper = (other + twoJ) % 2 === 0 ? other : other + 1
      return { lower: { twoJ, g: twoJ === 0 ? null : gLower }, upper: { twoJ: upper, g: upper === 0 ? null : gUpper } }
    })
    .filter(({ lower, upper }) => lower.twoJ + upper.twoJ >= 2 * rank && Math.abs(lower.twoJ - upper.twoJ) <= 2 * rank)
const kindsWithPairs = fc.constantFrom(...KINDS).chain((kind) => pairs(kind === 'E2' ? 2 : 1).map((ends) => ({ kind, ...ends })))

const sum = (components: Component[], value: (component: Component) => number | null) => components.reduce((total, component) => total + (value(component) ?? 0), 0)

describe('weak-field components', () => {
  it('sum rule: each q sums to 1', () => {
    fc.assert(
      fc.property(kindsWithPairs, ({ kind, lower, upper }) => {
        const components = weakFieldComponents({ kind, lower, upper, fieldTesla: 1 })
        const rank = kind === 'E2' ? 2 : 1
        for (let q = -rank; q <= rank; q += 1) {
          // a sum of up to 15 squares, each right to 3e-16 of itself
          expect(Math.abs(sum(components.filter((c) => c.q === q), (c) => c.strength) - 1)).toBeLessThan(1e-14)
        }
      }),
    )
  })

  it('the exact strengths of each q sum to exactly 1', () => {
    for (const [twoJLower, twoJUpper] of [[1, 3], [4, 4], [0, 2], [7, 5], [8, 10]] as const) {
      const components = exactComponents({ twoJ: twoJLower, g: null }, { twoJ: twoJUpper, g: null })
      for (const q of [-1, 0, 1]) expect(components.filter((c) => c.q === q).reduce((total, c) => total.add(c.strength), components[0]?.strength.mul(0) ?? Object.create(null)).toFraction()).toBe('1')
    }
  })

  it('symmetry: turning every m over turns q and the shift over and keeps the strength', () => {
    fc.assert(
      fc.property(kindsWithPairs, ({ kind, lower, upper }) => {
        const components = weakFieldComponents({ kind, lower, upper, fieldTesla: 0.7 })
        for (const component of components) {
          const mirror = components.find((c) => c.twoMLower === -component.twoMLower && c.twoMUpper === -component.twoMUpper)
          expect(mirror?.q).toBe(component.q === 0 ? 0 : -component.q)
          expect(mirror?.strength).toBe(component.strength)
          expect(Math.abs((mirror?.shiftLorentz ?? Number.NaN) + component.shiftLorentz)).toBeLessThan(1e-13)
        }
      }),
    )
  })

  it('a line sums to 1 at every angle, and unpolarised where it is not split', () => {
    fc.assert(
      fc.property(pairs(1), fc.double({ min: 0, max: 180, noNaN: true }), fc.constantFrom('E1' as const, 'M1' as const), ({ lower, upper }, thetaDeg, kind) => {
        const components = weakFieldComponents({ kind, lower, upper, fieldTesla: 1, thetaDeg })
        expect(Math.abs(sum(components, (c) => c.intensity) - 1)).toBeLessThan(1e-13)
        expect(Math.abs(sum(components, (c) => c.stokesQ))).toBeLessThan(1e-13)
        expect(Math.abs(sum(components, (c) => c.stokesV))).toBeLessThan(1e-13)
      }),
    )
  })

  it('averaged over the sphere each component has a third of its strength', () => {
    const ends = { lower: { twoJ: 1, g: 2 }, upper: { twoJ: 3, g: 4 / 3 } }
    const plain = weakFieldComponents({ kind: 'E1', ...ends, fieldTesla: 1 })
    // Gauss-Legendre with 3 nodes integrates the second degree in cos(theta) exactly
    const nodes = [[-Math.sqrt(0.6), 5 / 9], [0, 8 / 9], [Math.sqrt(0.6), 5 / 9]] as const
    const mean = new Map<string, number>()
    for (const [cosine, weight] of nodes) {
      for (const c of weakFieldComponents({ kind: 'E1', ...ends, fieldTesla: 1, thetaDeg: (Math.acos(cosine) * 180) / Math.PI })) {
        const key = `${c.twoMLower},${c.twoMUpper}`
        mean.set(key, (mean.get(key) ?? 0) + ((c.intensity ?? 0) * weight) / 2)
      }
    }
    for (const c of plain) {
      expect(c.intensity).toBeCloseTo(c.strength / 3, 15)
      expect(mean.get(`${c.twoMLower},${c.twoMUpper}`)).toBeCloseTo(c.strength / 3, 14)
      expect([c.stokesQ, c.stokesV]).toEqual([null, null])
    }
  })

  it('geometry at the ends: along the field no pi, across it no circular light; M1 turns Q over and keeps I and V', () => {
    const line = (kind: 'E1' | 'M1', thetaDeg: number) => weakFieldComponents({ kind, lower: { twoJ: 0, g: null }, upper: { twoJ: 2, g: 1 }, fieldTesla: 1, thetaDeg })
    expect(line('E1', 0).map((c) => [c.intensity, c.stokesQ, c.stokesV])).toEqual([[0.5, 0, -0.5], [0, 0, 0], [0.5, 0, 0.5]])
    expect(line('E1', 90).map((c) => [c.intensity, c.stokesQ, c.stokesV])).toEqual([[0.25, -0.25, 0], [0.5, 0.5, 0], [0.25, -0.25, 0]])
    expect(line('M1', 90).map((c) => [c.intensity, c.stokesQ, c.stokesV])).toEqual([[0.25, 0.25, 0], [0.5, -0.5, 0], [0.25, 0.25, 0]])
  })

  it('the blue sigma+ of a normal triplet is counter-clockwise with the field towards the observer: V > 0', () => {
    const blue = weakFieldComponents({ kind: 'E1', lower: { twoJ: 0, g: null }, upper: { twoJ: 2, g: 1 }, fieldTesla: 1, thetaDeg: 0 }).find((c) => c.shiftInvcm > 0)
    expect(blue).toMatchObject({ q: 1, polarisation: 'sigma+', stokesV: 0.5 })
  })

  it('sorted by q, shift, m_lower; no negative zeros; at zero field only the shift in cm^-1 vanishes', () => {
    fc.assert(
      fc.property(kindsWithPairs, ({ kind, lower, upper }) => {
        const components = weakFieldComponents({ kind, lower, upper, fieldTesla: 0, thetaDeg: 90 })
        components.slice(1).forEach((c, i) => {
          const before = components[i]
          expect(before && (before.q < c.q || (before.q === c.q && (before.shiftLorentz < c.shiftLorentz || (before.shiftLorentz === c.shiftLorentz && before.twoMLower < c.twoMLower))))).toBe(true)
        })
        for (const c of components) {
          expect(Object.is(c.shiftInvcm, 0)).toBe(true)
          for (const value of [c.shiftLorentz, c.intensity, c.stokesQ, c.stokesV]) expect(Object.is(value, -0)).toBe(false)
        }
      }),
    )
  })

  it('a forbidden m = 0 -> 0 is listed with its rule; no multipole, no components; a missing g is an error that says so', () => {
    const components = weakFieldComponents({ kind: 'E1', lower: { twoJ: 2, g: 1 }, upper: { twoJ: 2, g: 1.5 }, fieldTesla: 1 })
    expect(components.filter((c) => c.forbidden !== undefined)).toMatchObject([{ twoMLower: 0, twoMUpper: 0, strength: 0, forbidden: 'm_zero_zero' }])
    expect(weakFieldComponents({ kind: 'E1', lower: { twoJ: 0, g: null }, upper: { twoJ: 0, g: null }, fieldTesla: 1 })).toEqual([])
    expect(weakFieldComponents({ kind: 'E1', lower: { twoJ: 0, g: null }, upper: { twoJ: 4, g: 1 }, fieldTesla: 1 })).toEqual([])
    expect(() => weakFieldComponents({ kind: 'E1', lower: { twoJ: 0, g: null }, upper: { twoJ: 2, g: null }, fieldTesla: 1 })).toThrow(PhysicsError)
    expect(() => linearSublevels({ twoJ: 2, g: null, energyInvcm: 0, fieldTesla: 1 })).toThrow('no g_J')
  })

  it('E2 has |q| up to 2, names them by q, and no angular intensity', () => {
    const components = weakFieldComponents({ kind: 'E2', lower: { twoJ: 2, g: 1 }, upper: { twoJ: 4, g: 1.5 }, fieldTesla: 1, thetaDeg: 30 })
    expect(new Set(components.map((c) => c.polarisation))).toEqual(new Set(['q=-2', 'sigma-', 'pi', 'sigma+', 'q=+2']))
    expect(components.every((c) => c.intensity === null && c.stokesQ === null && c.stokesV === null)).toBe(true)
    expect(components.find((c) => c.twoMLower === 0 && c.twoMUpper === 0)?.forbidden).toBe('zero_amplitude')
    expect(componentStrength('E2', 1, 1, 1, 1)).toBe(0)
  })
})

describe('moments and patterns', () => {
  it('the closed form of g_eff is the centre of gravity of sigma+, and the moments of the components agree', () => {
    fc.assert(
      fc.property(pairs(1), ({ lower, upper }) => {
        const components = weakFieldComponents({ kind: 'E1', lower, upper, fieldTesla: 1 })
        const of = (q: number, power: number) => sum(components.filter((c) => c.q === q), (c) => c.strength * c.shiftLorentz ** power)
        const [closed, moments] = [effectiveG(lower, upper), secondMoments(lower, upper)]
        // shifts up to about 50 Lorentz units here, squares 2500, rounding 2e-16 of them
        expect(Math.abs((closed ?? Number.NaN) - of(1, 1))).toBeLessThan(1e-12)
        expect(Math.abs(of(-1, 1) + of(1, 1))).toBeLessThan(1e-12)
        expect(Math.abs((moments?.sigmaFirst ?? Number.NaN) - of(1, 1))).toBeLessThan(1e-12)
        expect(Math.abs((moments?.sigmaSecond ?? Number.NaN) - of(1, 2))).toBeLessThan(1e-10)
        expect(Math.abs((moments?.piSecond ?? Number.NaN) - of(0, 2))).toBeLessThan(1e-10)
        expect(Math.abs(of(0, 1))).toBeLessThan(1e-12)
      }),
    )
  })

  it('limits: one J = 0 end gives the other end\'s g; equal g\'s give that g; no dipole gives null', () => {
    expect(effectiveG({ twoJ: 0, g: null }, { twoJ: 2, g: 1.5 })).toBe(1.5)
    expect(effectiveG({ twoJ: 2, g: 1.5 }, { twoJ: 0, g: null })).toBe(1.5)
    expect(effectiveG({ twoJ: 3, g: 1.2 }, { twoJ: 5, g: 1.2 })).toBe(1.2)
    expect(effectiveG({ twoJ: 0, g: null }, { twoJ: 0, g: null })).toBeNull()
    expect(effectiveG({ twoJ: 1, g: 2 }, { twoJ: 5, g: 1 })).toBeNull()
    expect(effectiveG({ twoJ: 2, g: null }, { twoJ: 2, g: 1 })).toBeNull()
    expect(secondMoments({ twoJ: 2, g: null }, { twoJ: 2, g: 1 })).toBeNull()
  })

  it.each([
    ['1S0 - 1P1', [0, 0, 0], [0, 1, 2], 'normal'],
    ['1P1 - 1D2', [0, 1, 2], [0, 2, 4], 'normal'],
    ['3P0 - 3S1', [2, 1, 0], [2, 0, 2], 'triplet'],
    ['5F1 - 5D0', [4, 3, 2], [4, 2, 0], 'unsplit'],
    ['2S1/2 - 2P3/2', [1, 0, 1], [1, 1, 3], 'anomalous'],
    ['2S1/2 - 2P1/2', [1, 0, 1], [1, 1, 1], 'anomalous'],
  ] as const)('%s is %s', (_, [s1, l1, j1], [s2, l2, j2], wanted) => {
    const ends = [{ twoS: s1, l: l1, twoJ: j1 }, { twoS: s2, l: l2, twoJ: j2 }] as const
    const exact = ends.map((end) => ({ twoJ: end.twoJ, g: landeGExact(end) }))
    const real = ends.map((end) => ({ twoJ: end.twoJ, g: landeG(end, { gS: 2 }) }))
    const [low, high, lowReal, highReal] = [exact[0], exact[1], real[0], real[1]]
    if (!low || !high || !lowReal || !highReal) throw new Error('two ends wanted')
    expect(patternKind(low, high)).toBe(wanted)
    expect(patternKindOfNumbers(lowReal, highReal)).toBe(wanted)
  })

  it('no pattern without components or without g', () => {
    expect(patternKind({ twoJ: 0, g: null }, { twoJ: 0, g: null })).toBeNull()
    expect(patternKind({ twoJ: 2, g: null }, { twoJ: 2, g: '1' })).toBeNull()
    expect(patternKindOfNumbers({ twoJ: 0, g: null }, { twoJ: 0, g: null })).toBeNull()
  })
})

describe('sublevels and the budget of a position', () => {
  it('sublevels are evenly spaced about the level and have its energy as their mean', () => {
    const rows = linearSublevels({ twoJ: 3, g: 4 / 3, energyInvcm: 100, fieldTesla: 2 })
    expect(rows.map((row) => row.twoM)).toEqual([-3, -1, 1, 3])
    expect(rows.reduce((total, row) => total + row.energyInvcm, 0) / 4).toBeCloseTo(100, 12)
    expect(rows.at(-1)?.shiftInvcm).toBeCloseTo(2 * 0.46686447719 * (4 / 3) * 1.5, 14)
    expect(rows.at(-1)?.shiftGhz).toBeCloseTo(29.9792458 * (rows.at(-1)?.shiftInvcm ?? 0), 12)
    expect(linearSublevels({ twoJ: 0, g: null, energyInvcm: 5, fieldTesla: 2 })).toEqual([{ twoM: 0, shiftInvcm: 0, shiftGhz: 0, energyInvcm: 5 }])
  })

  const lower = { energyInvcm: 0, energyUnc: null, g: G_S, gUnc: 1e-6, twoM: -1 }
  const upper = { energyInvcm: 17000, energyUnc: 0.003, g: 1.334, gUnc: 0.004, twoM: 1 }

  it('adds the parts in quadrature, the ground energy exact', () => {
    const answer = positionUncertainty({ lower, upper, fieldTesla: 1, fieldUnc: 0.01 })
    const l = 0.46686447719
    const parts = [0, 0.003, 0.5 * l * 1e-6, 0.5 * l * 0.004, l * (1.334 * 0.5 + G_S * 0.5) * 0.01]
    answer.budget.forEach((row, i) => expect(row.value).toBeCloseTo(parts[i] ?? Number.NaN, 14))
    expect(answer.total).toBeCloseTo(Math.hypot(...parts), 14)
    expect(answer.budget.map((row) => row.status)).toEqual(['exact', 'known', 'known', 'known', 'known'])
  })

  it('is null where a part is unknown, with the known part beside it', () => {
    const answer = positionUncertainty({ lower, upper: { ...upper, energyUnc: null }, fieldTesla: 1 })
    expect(answer.total).toBeNull()
    expect(answer.known).toBeGreaterThan(0)
    expect(answer.budget.map((row) => row.status)).toEqual(['exact', 'unknown', 'known', 'known', 'exact'])
  })

  it('an unknown g does not matter at m = 0 or without a field', () => {
    const zero = positionUncertainty({ lower: { ...lower, gUnc: null }, upper: { ...upper, gUnc: null }, fieldTesla: 0 })
    expect(zero.total).toBeCloseTo(0.003, 15)
    const centre = positionUncertainty({ lower: { ...lower, twoM: 0, gUnc: null }, upper, fieldTesla: 1 })
    expect(centre.budget.find((row) => row.part === 'g_lower')?.status).toBe('exact')
  })
})
