import { describe, expect, it } from 'vitest'
import { PhysicsError } from '@/lib/atomic/errors'
import type { LevelRow } from '@/lib/catalogue/shape'
import { type ComponentsAsked, predictComponents } from '@/lib/prediction/components'
import { levelDiamagnetic } from '@/lib/prediction/diamagnetic'
import { takeIsotopes } from '@/lib/prediction/isotopes'
import { sublevelsOfLevel } from '@/lib/prediction/level-sublevels'
import { diamagneticOf, membersOf, transitionDetail } from '@/lib/prediction/transition'
import { termSublevels } from '@/lib/prediction/sublevels'
import type { Isotope } from '@/openapi/schemas/species'
import { edition, level, SODIUM_LEVELS } from './edition'

const ASKED: ComponentsAsked = { gValues: 'adopted', gS: null, fieldTesla: 1, fieldUncTesla: null, model: 'auto', thetaDeg: null, medium: 'conventional', tolerance: 0.01 }
const sodium = edition(SODIUM_LEVELS)
const d1 = transitionDetail(sodium, 0, 1)
const codes = (warnings: readonly { code: string }[]): string[] => warnings.map((warning) => warning.code)

describe('model=auto of a line', () => {
  it('is linear while positions and strengths hold, and intermediate where either does not', () => {
    for (const fieldTesla of [1e-6, 1e-3, 0.1, 1, 10, 100]) {
      const { components } = predictComponents(d1, { ...ASKED, fieldTesla })
      const { positions, strengths } = components.validity
      const fails = positions.status === 'not_valid' || strengths.status === 'not_valid'
      expect(components.model, `${fieldTesla} T`).toBe(fails ? 'intermediate' : 'linear')
      // the very numbers of the model named
      expect(components.components).toEqual(predictComponents(d1, { ...ASKED, fieldTesla, model: components.model }).components.components)
    }
  })

  it('follows the tolerance, so that its errors stay below it', () => {
    const limit = predictComponents(d1, ASKED).components.validity.strengths.field_limit_tesla ?? Number.NaN
    const at = (fieldTesla: number) => predictComponents(d1, { ...ASKED, fieldTesla }).components.model
    expect([at(limit * 0.999), at(limit * 1.001)]).toEqual(['linear', 'intermediate'])
  })

  it('goes on without a jump larger than the tolerance where the model changes', () => {
    const limit = predictComponents(d1, ASKED).components.validity.strengths.field_limit_tesla ?? Number.NaN
    const [linear, whole] = (['linear', 'intermediate'] as const).map((model) => predictComponents(d1, { ...ASKED, fieldTesla: limit, model }).components.components)
    whole?.forEach((one, i) => {
      expect(Math.abs((one.strength ?? 0) - (linear?.[i]?.strength ?? 0))).toBeLessThanOrEqual(0.0100001)
      expect(Math.abs((one.shift_lorentz ?? 0) - (linear?.[i]?.shift_lorentz ?? 0))).toBeLessThan(0.02)
    })
  })
})

describe('a term with a level missing', () => {
  const alone = transitionDetail(edition([level({}), level({ ordinal: 2, configuration: '3p', l: 1, parity: 'odd', energyInvcm: 16956.17025 })]), 0, 1)

  it('is left linear by auto, with a warning that names the level and the J', () => {
    const { components, warnings } = predictComponents(alone, ASKED)
    expect([components.model, components.validity.positions.status, components.validity.blend.status]).toEqual(['linear', 'unknown', 'unknown'])
    expect(warnings.find((warning) => warning.code === 'term_incomplete')?.detail).toContain('Na-I.2 lacks J = 3/2')
    expect(codes(predictComponents(alone, { ...ASKED, model: 'linear' }).warnings)).not.toContain('term_incomplete')
  })

  it('is refused by intermediate', () => {
    expect(() => predictComponents(alone, { ...ASKED, model: 'intermediate' })).toThrow(expect.objectContaining({ code: 'term_incomplete', field: 'model', detail: expect.stringContaining('lacks J = 3/2') as string }) as PhysicsError)
  })
})

describe('a level in the two models', () => {
  const found = { level: sodium.level(1), members: membersOf(sodium, 1), diamagnetic: diamagneticOf(sodium, 1) }
  const asked = { gValues: 'adopted', gS: null, fieldTesla: 20, model: 'auto', tolerance: 0.01, diamagnetic: false, amplitudes: false } as const

  it('names its high-field states where the linear law fails', () => {
    const { rows, model, validity } = sublevelsOfLevel(found, asked)
    expect([model, validity.status]).toEqual(['intermediate', 'not_valid'])
    expect(rows.map((row) => [row.j, row.m, row.m_l, row.m_s])).toEqual([[0.5, -0.5, 0, -0.5], [0.5, 0.5, 1, -0.5]])
  })

  it('has no quadratic shift where the ionisation energy is not known', () => {
    expect(found.diamagnetic).toMatchObject({ status: 'unknown', mean_square_radius_bohr2: null })
    expect(codes(sublevelsOfLevel(found, { ...asked, diamagnetic: true }).warnings)).toContain('diamagnetic_missing')
  })
})

describe('a measured g_J far from LS', () => {
  it('of a level that is only mixed in warns in the intermediate model, and not in the linear one', () => {
    const impure = edition(SODIUM_LEVELS, { measuredG: [{ levelId: 'Na-I.3', value: 1.36, unc: 1e-4, source: 'made', evidence: 'read', note: null }] })
    const line = transitionDetail(impure, 0, 1)
    expect(codes(predictComponents(line, { ...ASKED, model: 'intermediate' }).warnings)).toContain('term_not_pure')
    expect(codes(predictComponents(line, { ...ASKED, model: 'linear' }).warnings)).not.toContain('term_not_pure')
  })
})

describe('the quadratic shift', () => {
  const RYDBERG: LevelRow = level({ ordinal: 4, configuration: '20d', l: 2, twoJ: 3, energyInvcm: 41173 })
  const species = { ionisation_energy_invcm: 41449.451, charge: 0, isotopes: [] }

  it('is had for one electron outside closed shells, by its effective quantum number', () => {
    const told = levelDiamagnetic(edition([...SODIUM_LEVELS, RYDBERG]).level(3), species)
    expect(told.status).toBe('ok')
    // R/n*^2 = 276.45 cm^-1; n*^2 (5 n*^2 + 1 - 18)/2
    const square = 109737.31568157 / 276.451
    expect(told.effective_n).toBeCloseTo(Math.sqrt(square), 6)
    expect(told.mean_square_radius_bohr2).toBeCloseTo((square * (5 * square - 17)) / 2, 2)
  })

  it('of a component is the upper less the lower, and is added to the shift and its slope', () => {
    const detail = { ...d1, diamagnetic: { lower: levelDiamagnetic(d1.lower, species), upper: levelDiamagnetic(d1.upper, species) } }
    const asked = { ...ASKED, model: 'linear', fieldTesla: 100 } as const
    const [plain, added] = [predictComponents(detail, asked), predictComponents(detail, { ...asked, diamagnetic: true })]
    added.components.components.forEach((one) => {
      const other = plain.components.components.find((row) => row.m_lower === one.m_lower && row.m_upper === one.m_upper)
      const quadratic = one.shift_invcm - (other?.shift_invcm ?? Number.NaN)
      // 3p is larger than 3s, so lines move to the blue
      expect(quadratic).toBeGreaterThan(0)
      expect(one.derivative_invcm_per_tesla - (other?.derivative_invcm_per_tesla ?? Number.NaN)).toBeCloseTo((2 * quadratic) / 100, 12)
      expect(one.shift_lorentz).toBeCloseTo((one.shift_invcm / (other?.shift_invcm ?? 1)) * (other?.shift_lorentz ?? 0), 12)
    })
    // 0.07 cm^-1 beside a mu_B B of 47 cm^-1
    expect(codes(plain.warnings)).not.toContain('diamagnetic_ignored')
    expect(codes(predictComponents(detail, { ...asked, tolerance: 1e-4 }).warnings)).toContain('diamagnetic_ignored')
  })
})

describe('isotopes', () => {
  const isotope = (mass: number, spin: number | null, percent: number | null): Isotope => ({ mass_number: mass, mass_u: mass, nuclear_spin: spin, abundance_percent: percent, g_i: null, source: null, evidence: null })
  const constants = (mass: number) => ({ mass_number: mass, a_mhz: 100, a_unc_mhz: null, b_mhz: null, b_unc_mhz: null, source: 'made', evidence: 'read' as const, note: null })
  const end = { id: 'X-I.1', twoJ: 1, constants: [constants(3), constants(5)] }

  it('are taken by name, by being the only ones, or by abundance', () => {
    const list = [isotope(3, 0.5, 20), isotope(4, 0, 60), isotope(5, 0.5, null)]
    expect(takeIsotopes(list, [end], 3).isotopes).toMatchObject([{ massNumber: 3, weight: 1 }])
    expect(takeIsotopes(list, [{ ...end, constants: [constants(3)] }], null).isotopes).toMatchObject([{ massNumber: 3 }])
    const natural = takeIsotopes(list, [end], 'natural')
    expect(natural.isotopes.map((one) => [one.massNumber, one.weight])).toEqual([[3, 0.25], [4, 0.75]])
    expect(natural.listedPercent).toBe(80)
    expect(codes(natural.warnings)).toEqual(['abundance_incomplete', 'g_i_unknown'])
  })

  it.each([
    [null, 'isotope_ambiguous'], [7, 'isotope_unknown'], [6, 'nuclear_spin_unknown'], [9, 'hyperfine_unknown'],
  ])('%s is refused as %s', (asked, code) => {
    const list = [isotope(3, 0.5, 20), isotope(5, 0.5, 20), isotope(6, null, 20), isotope(9, 1.5, 20)]
    expect(() => takeIsotopes(list, [end], asked)).toThrow(expect.objectContaining({ code }) as PhysicsError)
  })

  it('without any abundance make no mixture', () => {
    expect(() => takeIsotopes([isotope(3, 0.5, null)], [end], 'natural')).toThrow(expect.objectContaining({ code: 'abundance_unknown' }) as PhysicsError)
  })
})

describe('a term of a request', () => {
  const half = { energy_invcm: 0, s: 0.5, l: 1, j: 0.5, parity: 'odd' } as const
  const whole = [half, { ...half, j: 1.5, energy_invcm: 17.196 }]

  it('is diagonalised by auto only where its largest field asks for it', () => {
    expect(termSublevels({ levels: whole, field: 0.001, model: 'auto', g_values: 'adopted' })).toMatchObject({ model: 'linear', warnings: [] })
    expect(termSublevels({ levels: whole, field: { values: [0.001, 50], unit: 'T' }, model: 'auto', g_values: 'adopted' }).model).toBe('intermediate')
    expect(termSublevels({ levels: whole, field: 0.001, model: 'auto', g_values: 'adopted', tolerance: 1e-6 }).model).toBe('intermediate')
  })

  it('with a g far from LS is told to be impure', () => {
    const levels = [half, { ...half, j: 1.5, energy_invcm: 17.196, g_j: 1.4 }]
    expect(codes(termSublevels({ levels, field: 1, model: 'intermediate', g_values: 'adopted' }).warnings)).toEqual(['term_not_pure'])
    expect(codes(termSublevels({ levels, field: 1, model: 'intermediate', g_values: 'ls' }).warnings)).toEqual([])
  })
})
