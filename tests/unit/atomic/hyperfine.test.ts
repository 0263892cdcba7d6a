import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { differenceFeatures, hyperfineFeatures, termFeatures } from '@/lib/atomic/crossings'
import { PhysicsError } from '@/lib/atomic/errors'
import { fieldTerm } from '@/lib/atomic/field-term'
import { hyperfineEnergy, type HyperfineLevel, hyperfineLevel, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { hyperfineGrid } from '@/lib/atomic/hyperfine-grid'
import { hyperfineComponents, isotopeMixture } from '@/lib/atomic/hyperfine-lines'
import { sixJ } from '@/lib/atomic/wigner'

// constants in MHz: Steck, Rubidium 87 D Line Data, as in the table's hyperfine rows
const ground: HyperfineLevel = { twoJ: 1, gJ: 2.00233113, twoI: 3, aMhz: 3417.341305452145, bMhz: null, gI: -0.0009951414 }
const upper: HyperfineLevel = { twoJ: 3, gJ: 1.3362, twoI: 3, aMhz: 84.7185, bMhz: 12.4965, gI: -0.0009951414 }

describe('hyperfine structure', () => {
  it('diagonalisation at zero field gives Casimir energies, any I and J', () => {
    const numbers = fc.tuple(fc.integer({ min: 0, max: 9 }), fc.integer({ min: 0, max: 9 }), fc.double({ min: -500, max: 500, noNaN: true }), fc.double({ min: -300, max: 300, noNaN: true }))
    fc.assert(
      fc.property(numbers, ([twoJ, twoI, aMhz, bMhz]) => {
        const level = { twoJ, gJ: 1.3, twoI, aMhz, bMhz, gI: -1e-3 }
        for (const state of hyperfineSublevels(hyperfineLevel(level), 0)) expect(Math.abs(state.energyMhz - hyperfineEnergy(level, state.nominalTwoF))).toBeLessThan(1e-9)
      }),
      { numRuns: 40 },
    )
  })

  it('slopes and curvatures are the derivatives of the energies', () => {
    const ready = hyperfineLevel(upper)
    const [field, step] = [0.004, 1e-7]
    const [below, here, above] = [field - step, field, field + step].map((tesla) => hyperfineSublevels(ready, tesla))
    here?.forEach((state, i) => {
      const [low, high] = [below?.[i], above?.[i]]
      expect(Math.abs(state.derivativeMhzPerTesla - ((high?.energyMhz ?? 0) - (low?.energyMhz ?? 0)) / (2 * step))).toBeLessThan(1e-2)
      const curvature = ((high?.derivativeMhzPerTesla ?? 0) - (low?.derivativeMhzPerTesla ?? 0)) / (2 * step)
      expect(Math.abs(state.curvatureMhzPerTesla2 - curvature)).toBeLessThan(1e-4 * Math.abs(curvature) + 1)
    })
  })

  it('over a grid it is that of the single fields, with a quadrupole and without', () => {
    for (const level of [ground, upper, { ...upper, twoJ: 8, twoI: 7 }, { ...upper, bMhz: 0 }]) {
      const ready = hyperfineLevel(level)
      const fields = [0, 1e-5, 0.01, 2]
      const { energiesMhz, derivatives, states } = hyperfineGrid(ready, fields)
      fields.forEach((tesla, row) => {
        hyperfineSublevels(ready, tesla).forEach((state, i) => {
          expect(Math.abs((energiesMhz[row * states + i] ?? Number.NaN) - state.energyMhz)).toBeLessThan(1e-9)
          expect(Math.abs((derivatives[row * states + i] ?? Number.NaN) - state.derivativeMhzPerTesla)).toBeLessThan(1e-7)
        })
      })
    }
  })

  it('g_F at zero field is that of the vector model', () => {
    // g_F = g_J [F(F+1) + J(J+1) - I(I+1)]/2F(F+1) + g_I' [F(F+1) - J(J+1) + I(I+1)]/2F(F+1): Arimondo et al. (1977), sec. II, from memory
    for (const state of hyperfineSublevels(hyperfineLevel(upper), 0)) {
      const [f, j, i] = [state.nominalTwoF / 2, 1.5, 1.5]
      if (f === 0) continue
      const [ff, jj, ii] = [f * (f + 1), j * (j + 1), i * (i + 1)]
      const g = (1.3362 * (ff + jj - ii) - 0.0009951414 * (ff - jj + ii)) / (2 * ff)
      expect(state.derivativeMhzPerTesla / 13996.2449171).toBeCloseTo((g * state.twoMF) / 2, 10)
    }
  })

  it('without a nucleus, or without constants, it is the Zeeman effect of J', () => {
    const alone = hyperfineSublevels(hyperfineLevel({ ...upper, twoI: 0 }), 0.2)
    alone.forEach((state, i) => expect(state.energyMhz).toBeCloseTo((13996.2449171 * 0.2 * 1.3362 * (2 * i - 3)) / 2, 8))
    const free = hyperfineSublevels(hyperfineLevel({ ...upper, aMhz: 0, bMhz: 0, gI: 0 }), 0)
    expect(free.filter((state) => state.twoF !== null).map((state) => state.twoMF)).toEqual([-6, 6])
    for (const state of free) expect(state.derivativeMhzPerTesla).toBeCloseTo((13996.2449171 * 1.3362 * state.twoMJ) / 2, 8)
  })

  it('J = 0 needs no g_J and moves with the nucleus alone; J > 0 without one is refused', () => {
    const [low] = hyperfineSublevels(hyperfineLevel({ ...upper, twoJ: 0, gJ: null, aMhz: 0 }), 1)
    expect(low?.energyMhz).toBeCloseTo((13996.2449171 * -0.0009951414 * -3) / 2, 10)
    expect(() => hyperfineLevel({ ...upper, gJ: null })).toThrow(PhysicsError)
  })
})

describe('lines with nuclear spin', () => {
  const [lower, higher] = [hyperfineLevel(ground), hyperfineLevel(upper)]

  it('strengths sum to 1 over the line at any field, each q to a third', () => {
    for (const tesla of [0, 0.001, 0.05, 1]) {
      const all = hyperfineComponents(lower, higher, tesla)
      for (const q of [-1, 0, 1]) expect(all.filter((c) => c.q === q).reduce((sum, c) => sum + c.strength, 0)).toBeCloseTo(1 / 3, 12)
    }
  })

  it('at zero field the lines F - F have the shares of the 6j symbols', () => {
    // (2F+1)(2F'+1){J I F; F' 1 J'}^2 (2J+1 and 2J'+1 apart): Condon & Shortley ch. IX on multiplets, with I, J, F for S, L, J
    const all = hyperfineComponents(lower, higher, 0)
    for (const twoF of [2, 4]) {
      for (const twoG of [0, 2, 4, 6]) {
        const share = ((twoF + 1) * (twoG + 1) * sixJ(1, twoF, 3, twoG, 3, 2) ** 2) / 4
        expect(all.filter((c) => c.lower.twoF === twoF && c.upper.twoF === twoG).reduce((sum, c) => sum + c.strength, 0)).toBeCloseTo(share, 12)
      }
    }
  })

  it('at high field the nuclear spin is a spectator: only m_I = m_I has strength', () => {
    for (const c of hyperfineComponents(lower, higher, 5)) {
      if (c.lower.twoMI !== c.upper.twoMI) expect(c.strength).toBeLessThan(1e-3)
    }
  })

  it('two nuclei are refused', () => {
    expect(() => hyperfineComponents(lower, hyperfineLevel({ ...upper, twoI: 5 }), 1)).toThrow('one nucleus')
  })

  it('a mixture weighs by abundance, renormalised to what is listed', () => {
    const part = (massNumber: number, abundance: number | null, shiftMhz: number | null) => ({ massNumber, abundance, shiftMhz, components: [massNumber] })
    const mixture = isotopeMixture([part(85, 0.5, null), part(87, 0.25, -78), part(86, null, null)])
    expect(mixture.listedAbundance).toBe(0.75)
    expect(mixture.isotopes.map((one) => [one.massNumber, one.weight, one.shiftMhz, one.shiftKnown])).toEqual([[85, 2 / 3, 0, false], [87, 1 / 3, -78, true], [86, 0, 0, false]])
    expect(() => isotopeMixture([part(85, null, null)])).toThrow('No abundance')
  })
})

describe('crossings, anticrossings and stationary points', () => {
  it('finds two close stationary points and all crossings of a known function', () => {
    // (B - 1)(B - 1.0004)(B - 3), whose stationary points lie at 1.0002 and near 2.333
    const at = (b: number) => ({ value: (b - 1) * (b - 1.0004) * (b - 3), slope: (b - 1.0004) * (b - 3) + (b - 1) * (b - 3) + (b - 1) * (b - 1.0004), curvature: 2 * (3 * b - 5.0004) })
    const { crossings, stationary } = differenceFeatures(at, 0, 5, false)
    expect(crossings.map((c) => Number(c.fieldTesla.toFixed(9)))).toEqual([1, 1.0004, 3])
    expect(stationary.map((s) => s.kind)).toEqual(['maximum', 'minimum'])
  })

  it('states of 87Rb 5p 2P3/2 cross where their energies are equal', () => {
    const ready = hyperfineLevel(upper)
    const [a, b] = [{ twoF: 6, twoMF: -6 }, { twoF: 4, twoMF: 4 }]
    const { crossings, anticrossings } = hyperfineFeatures(ready, a, b, 0, 0.1)
    expect(crossings.length).toBeGreaterThan(0)
    expect(anticrossings).toEqual([])
    for (const { fieldTesla } of crossings) {
      const states = hyperfineSublevels(ready, fieldTesla)
      const energy = (name: typeof a) => states.find((s) => s.twoF === name.twoF && s.twoMF === name.twoMF)?.energyMhz ?? Number.NaN
      expect(Math.abs(energy(a) - energy(b))).toBeLessThan(1e-9)
    }
  })

  it('states of one m_F do not cross: they are nearest at an anticrossing', () => {
    // by Breit-Rabi the distance D sqrt(1 + 4 m x/(2I+1) + x^2) is least at x = -2m/(2I+1), for m = -1 and I = 3/2 at x = 1/2
    const ready = hyperfineLevel({ ...ground, gI: 0 })
    const { anticrossings, crossings } = hyperfineFeatures(ready, { twoF: 4, twoMF: -2 }, { twoF: 2, twoMF: -2 }, 0, 1)
    expect(crossings).toEqual([])
    expect(anticrossings).toHaveLength(1)
    const interval = 2 * ground.aMhz
    expect((anticrossings[0]?.fieldTesla ?? 0) * 13996.2449171 * 2.00233113).toBeCloseTo(interval / 2, 6)
    expect(anticrossings[0]?.gap ?? 0).toBeCloseTo(interval * Math.sqrt(3 / 4), 8)
  })

  it('He I 2 3P: J = 2 m = +2 meets J = 1 m = -1 near 400 G', () => {
    // Socas-Navarro, Trujillo Bueno & Landi Degl'Innocenti (2004), astro-ph/0409005, abstract: level crossing near 400 G; 363.8 G with straight lines
    const helium = fieldTerm({ twoS: 2, l: 1, levels: [[0, 169087.830813], [2, 169086.842898], [4, 169086.766473]].map(([twoJ = 0, energyInvcm = 0]) => ({ twoJ, energyInvcm, g: null })) })
    const { crossings } = termFeatures(helium, { twoJ: 4, twoM: 4 }, { twoJ: 2, twoM: -2 }, 0, 0.5)
    expect(crossings).toHaveLength(1)
    expect(crossings[0]?.fieldTesla ?? 0).toBeGreaterThan(0.03638)
    expect(crossings[0]?.fieldTesla ?? 0).toBeLessThan(0.045)
    expect(() => termFeatures(helium, { twoJ: 4, twoM: 6 }, { twoJ: 2, twoM: -2 }, 0, 1)).toThrow('no sublevel')
  })
})
