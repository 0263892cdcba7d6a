import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { PhysicsError } from '@/lib/atomic/errors'
import { coupledRange } from '@/lib/atomic/half'
import { landeGExact } from '@/lib/atomic/lande'
import { patternKind } from '@/lib/atomic/moments'
import { predictComponents } from '@/lib/prediction/components'
import { inlineLevel } from '@/lib/prediction/inline'
import { assembleTransition, lineFacts, transitionDetail } from '@/lib/prediction/transition'
import { edition, level, SODIUM_LEVELS } from './edition'

const ASKED = { gValues: 'adopted', gS: null, fieldTesla: 1, fieldUncTesla: null, model: 'linear', thetaDeg: null, medium: 'conventional', tolerance: 0.01 } as const
const sodium = edition(SODIUM_LEVELS)
const at = (id: string): number => sodium.indexOf(id) ?? -1

describe('an id may flip between editions', () => {
  it('lower is the level of lower energy in the edition read, whichever order is asked', () => {
    const flipped = edition([level({}), level({ ordinal: 2, configuration: '3p', l: 1, parity: 'odd', energyInvcm: 200 }), level({ ordinal: 3, configuration: '3p', l: 1, twoJ: 3, parity: 'odd', energyInvcm: 100 })])
    const [two, three] = [flipped.indexOf('Na-I.2') ?? -1, flipped.indexOf('Na-I.3') ?? -1]
    expect(assembleTransition(flipped, two, three).id).toBe('Na-I.3~Na-I.2')
    expect(assembleTransition(sodium, at('Na-I.3'), at('Na-I.2')).id).toBe('Na-I.2~Na-I.3')
  })

  it('equal energies make no transition', () => {
    const equal = edition([level({}), level({ ordinal: 2, energyInvcm: 100 }), level({ ordinal: 3, twoJ: 1, l: 1, parity: 'odd', energyInvcm: 100 })])
    expect(() => assembleTransition(equal, 1, 2)).toThrow(PhysicsError)
  })
})

describe('the terms of both ends', () => {
  it('hold all members, and name the J that is missing', () => {
    expect(transitionDetail(sodium, 0, at('Na-I.2')).terms.upper).toMatchObject({ s: 0.5, l: 1, levels: [{ id: 'Na-I.2', j: 0.5 }, { id: 'Na-I.3', j: 1.5 }], missing_j: [] })
    const alone = edition([level({}), level({ ordinal: 2, configuration: '3p', l: 1, parity: 'odd', energyInvcm: 16956.17025 })])
    const detail = transitionDetail(alone, 0, 1)
    expect(detail.terms.upper.missing_j).toEqual([1.5])
    expect(predictComponents(detail, ASKED).components.validity.positions.status).toBe('unknown')
  })
})

describe('the pattern', () => {
  it('is that of exact fractions for every LS line up to S = 5/2, L = 4', () => {
    const terms = Array.from({ length: 6 }, (_, twoS) => [0, 1, 2, 3, 4].flatMap((l) => coupledRange(twoS, 2 * l).map((twoJ) => ({ twoS, l, twoJ })))).flat()
    let compared = 0
    for (const a of terms) {
      for (const b of terms) {
        if (a.twoS !== b.twoS || Math.abs(a.l - b.l) > 1 || Math.abs(a.twoJ - b.twoJ) > 2 || a.twoJ + b.twoJ === 0) continue
        const inline = (numbers: typeof a, energy: number, parity: 'even' | 'odd') => inlineLevel({ energy_invcm: energy, s: numbers.twoS / 2, l: numbers.l, j: numbers.twoJ / 2, parity }, null)
        const exact = patternKind({ twoJ: a.twoJ, g: landeGExact(a) }, { twoJ: b.twoJ, g: landeGExact(b) })
        expect(lineFacts(inline(a, 0, 'even'), inline(b, 1, 'odd'), undefined).pattern, JSON.stringify([a, b])).toBe(exact)
        compared += 1
      }
    }
    expect(compared).toBe(470)
  })
})

describe('uncertainty of a position', () => {
  const known = edition([level({}), level({ ordinal: 2, configuration: '3p', l: 1, twoJ: 1, parity: 'odd', energyInvcm: 16956.17025, energyUncInvcm: 0.003 })], {
    measuredG: [
      { levelId: 'Na-I.1', value: 2.0023, unc: 1e-5, source: 'made', evidence: 'read', note: null },
      { levelId: 'Na-I.2', value: 0.6659, unc: 4e-4, source: 'made', evidence: 'read', note: null },
    ],
  })

  it('of a line is that of its energies; the ground level is exact', () => {
    expect(assembleTransition(known, 0, 1).wavenumber_unc_invcm).toBe(0.003)
    expect(assembleTransition(sodium, 0, 1).wavenumber_unc_invcm).toBeNull()
  })

  it('of a component is the root sum of squares of its budget', () => {
    const { components } = predictComponents(transitionDetail(known, 0, 1), { ...ASKED, fieldUncTesla: 0.02 })
    for (const one of components.components) {
      expect(one.wavenumber_unc_invcm).toBeCloseTo(Math.hypot(...one.budget.map((part) => part.value_invcm ?? Number.NaN)), 15)
      expect(one.wavenumber_unc_invcm).toBeGreaterThan(0.003)
      expect(one.budget.map((part) => part.status)).toEqual(['exact', 'known', 'known', 'known', 'known', 'known'])
    }
  })

  it('is null where a part is unknown, with the known part beside it', () => {
    const { components } = predictComponents(transitionDetail(sodium, 0, 1), { ...ASKED, fieldUncTesla: 0.02 })
    for (const one of components.components) expect([one.wavenumber_unc_invcm, one.wavenumber_known_unc_invcm > 0]).toEqual([null, true])
  })
})

describe('shifts in wavelength', () => {
  it('are the difference of wavelengths, and keep their digits at small fields', () => {
    const detail = transitionDetail(sodium, 0, at('Na-I.3'))
    fc.assert(
      fc.property(fc.double({ min: -9, max: 1, noNaN: true }), (power) => {
        const { components } = predictComponents(detail, { ...ASKED, fieldTesla: 10 ** power, medium: 'vacuum' })
        for (const one of components.components) {
          // -10^10 shift / (sigma_0 sigma) pm, from the exact difference of 10^7 / sigma
          const expected = (-1e10 * one.shift_invcm) / (detail.wavenumber_invcm * (detail.wavenumber_invcm + one.shift_invcm))
          expect(Math.abs((one.shift_pm ?? Number.NaN) - expected)).toBeLessThanOrEqual(4e-15 * Math.abs(expected))
        }
      }),
      { numRuns: 100 },
    )
  })

  it('in air agree with the air wavelengths told', () => {
    const { components } = predictComponents(transitionDetail(sodium, 0, at('Na-I.3')), { ...ASKED, fieldTesla: 3 })
    for (const one of components.components) {
      // the difference of two numbers near 589 nm holds 1e-13 nm
      expect(one.shift_pm).toBeCloseTo(1000 * ((one.wavelength_air_nm ?? 0) - (components.centre.wavelength_air_nm ?? 0)), 8)
    }
  })
})

describe('g_s of choice', () => {
  it('moves adopted values that are coupled ones, and leaves measured ones', () => {
    const detail = transitionDetail(sodium, 0, at('Na-I.2'))
    const shifts = (gS: number | null) => predictComponents(detail, { ...ASKED, gS }).components.components.map((one) => one.shift_lorentz)
    expect(shifts(2)).toEqual([-4 / 3, -2 / 3, 2 / 3, 4 / 3].map((shift) => expect.closeTo(shift, 14) as number))
    const measured = edition(SODIUM_LEVELS, { measuredG: [{ levelId: 'Na-I.1', value: 2.1, unc: 1e-6, source: 'made', evidence: 'read', note: null }] })
    const [first] = predictComponents(transitionDetail(measured, 0, 1), { ...ASKED, gS: 2 }).components.components
    expect(first?.shift_lorentz).toBeCloseTo(-1 / 3 - 1.05, 14)
  })
})
