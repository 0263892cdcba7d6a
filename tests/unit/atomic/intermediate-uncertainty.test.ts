import { describe, expect, it } from 'vitest'
import { CONSTANTS, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { fieldMultiplet } from '@/lib/atomic/field-multiplet'
import { fieldTerm } from '@/lib/atomic/field-term'
import { multipletGrid } from '@/lib/atomic/intermediate-grid'
import { multipletComponents } from '@/lib/atomic/intermediate-lines'
import { intermediateUncertainty, type UncertainLevel } from '@/lib/atomic/intermediate-uncertainty'
import { landeG } from '@/lib/atomic/lande'
import { positionUncertainty } from '@/lib/atomic/uncertainty'

interface Level extends UncertainLevel {
  g: number
}
const level = (twoS: number, l: number, twoJ: number, energyInvcm: number, energyUnc: number | null, gUnc: number | null): Level => ({ twoJ, energyInvcm, energyUnc, gUnc, g: landeG({ twoS, l, twoJ }) ?? 0 })
const lower = [level(2, 0, 2, 159855.97433, 2e-4, 1e-5)]
const upper = [level(2, 1, 0, 169087.830813, 5e-4, null), level(2, 1, 2, 169086.842898, 2e-4, 3e-4), level(2, 1, 4, 169086.766473, 3e-4, 5e-4)]
const [lone] = lower as [Level]
const multipletOf = (low: Level[], high: Level[]) => fieldMultiplet(fieldTerm({ twoS: 2, l: 0, levels: low }), fieldTerm({ twoS: 2, l: 1, levels: high }))

/** Marsaglia's xorshift, so that every run draws the same numbers; normal deviates by Box and Muller. */
function normalDeviates(seed: number): () => number {
  let state = seed
  const uniform = () => {
    state ^= state << 13
    state ^= state >>> 17
    state ^= state << 5
    return ((state >>> 0) + 0.5) / 4294967296
  }
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform())
}

describe('uncertainty of positions in the intermediate model', () => {
  it('linear propagation against Monte-Carlo over energies, g, field and mu_B, every component of He I 1083 nm at 0.3 T', () => {
    const [fieldTesla, fieldUnc, draws] = [0.3, 4e-4, 6000]
    const components = multipletComponents(multipletOf(lower, upper), fieldTesla)
    const told = components.map((c) => intermediateUncertainty({ lower: { state: c.lower, levels: lower }, upper: { state: c.upper, levels: upper }, fieldTesla, fieldUnc }))
    const normal = normalDeviates(20250601)
    const drawn = (levels: Level[]) => levels.map((one) => ({ ...one, energyInvcm: one.energyInvcm + (one.energyUnc ?? 0) * normal(), g: one.g + (one.gUnc ?? 0) * normal() }))
    const [sums, squares] = [new Float64Array(components.length), new Float64Array(components.length)]
    for (let draw = 0; draw < draws; draw += 1) {
      // a relative deviation of mu_B acts as one of the field
      const muB = 1 + (CONSTANTS.bohrMagnetonInvcm.standardUncertainty / MU_B_OVER_HC_INVCM_PER_T) * normal()
      const { values } = multipletGrid(multipletOf(drawn(lower), drawn(upper)), [(fieldTesla + fieldUnc * normal()) * muB])
      components.forEach((c, i) => {
        const off = (values[i] ?? 0) - c.wavenumberInvcm
        sums[i] = (sums[i] ?? 0) + off
        squares[i] = (squares[i] ?? 0) + off * off
      })
    }
    told.forEach(({ total }, i) => {
      const mean = (sums[i] ?? 0) / draws
      const deviation = Math.sqrt((squares[i] ?? 0) / draws - mean * mean)
      // a standard deviation from 6000 draws is itself sure to 0.9 %; four of those
      expect(Math.abs(deviation / (total ?? Number.NaN) - 1)).toBeLessThan(0.037)
    })
    expect(told).toHaveLength(components.length)
  })

  it('is that of the linear model at small field, part by part', () => {
    const fieldTesla = 1e-5
    for (const c of multipletComponents(multipletOf(lower, upper), fieldTesla)) {
      const ends = { state: c.upper, levels: upper }
      const now = intermediateUncertainty({ lower: { state: c.lower, levels: lower }, upper: ends, fieldTesla, fieldUnc: 1e-7 })
      const own = upper.find((one) => one.twoJ === c.upper.twoJ)
      if (!own) throw new Error('no such level')
      const before = positionUncertainty({ lower: { ...lone, twoM: c.lower.twoM }, upper: { ...own, twoM: c.upper.twoM }, fieldTesla, fieldUnc: 1e-7 })
      for (const part of before.budget) {
        const same = now.budget.find((one) => one.part === part.part)
        // a component that does not move in the linear model moves with the square of the field here
        if (part.value !== 0) expect(same?.status).toBe(part.status)
        expect(Math.abs((same?.value ?? Number.NaN) - (part.value ?? Number.NaN))).toBeLessThan(1e-3 * (part.value ?? 0) + 1e-10)
      }
    }
  })

  it('the ground level is exact, and an unknown deviation of a level that is mixed in makes the total unknown', () => {
    const ground = [{ ...lone, energyInvcm: 0, energyUnc: null }]
    const unknown = upper.map((one) => (one.twoJ === 4 ? { ...one, energyUnc: null } : one))
    const components = multipletComponents(multipletOf(ground, unknown), 0.3)
    for (const c of components) {
      const { total, known, budget } = intermediateUncertainty({ lower: { state: c.lower, levels: ground }, upper: { state: c.upper, levels: unknown }, fieldTesla: 0.3 })
      expect(budget[0]).toEqual({ part: 'energy_lower', value: 0, status: 'exact' })
      expect(budget.find((part) => part.part === 'field')?.status).toBe('exact')
      expect([total, budget[1]?.status]).toEqual([null, 'unknown'])
      expect(known).toBeGreaterThan(0)
    }
    // at zero field only the level itself counts
    for (const c of multipletComponents(multipletOf(ground, unknown), 0)) {
      const { total } = intermediateUncertainty({ lower: { state: c.lower, levels: ground }, upper: { state: c.upper, levels: unknown }, fieldTesla: 0 })
      expect(total === null).toBe(c.upper.twoJ === 4)
    }
  })
})
