import { describe, expect, it } from 'vitest'
import { profilesAnswer } from '@/lib/prediction/profiles-answer'
import { ProfilesRequest } from '@/openapi/operations/profiles'
import { edition, SODIUM_LEVELS } from './edition'

const snapshot = edition(SODIUM_LEVELS)
const GIVEN = { lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }, upper: { energy_invcm: 20000, s: 0, l: 1, j: 1, parity: 'odd' } }
const D2 = { transition: 'Na-I.1~Na-I.3' }

async function answered(more: object): Promise<{ numbers: number[]; warnings: string[] }> {
  const warnings: string[] = []
  const { data } = await profilesAnswer(snapshot, ProfilesRequest.parse({ lines: [GIVEN], field: 1, theta_deg: 30, ...more }), (code) => warnings.push(code))
  const columns = [data.stokes_i, data.stokes_q ?? [], data.stokes_v ?? [], data.lines.flatMap((line) => [line.fwhm_invcm, line.integral])]
  return { numbers: columns.flat(), warnings }
}
const faults = async (more: object): Promise<string[]> => {
  const refused: unknown = await answered(more).catch((error: unknown) => error)
  return (refused as { errors: { pointer: string; code: string }[] }).errors.map(({ pointer, code }) => `${pointer} ${code}`)
}

describe('a line given in the request', () => {
  it('is told everything that is wrong with its levels and their terms at once', async () => {
    const lower = { ...GIVEN.lower, j: 2 }
    const lines = [{ lower, upper: { ...GIVEN.upper, energy_invcm: 0 }, lower_others: [{ ...lower, energy_invcm: 7, s: 1, l: 1 }], upper_others: [{ ...GIVEN.upper, parity: 'even' }] }]
    expect((await faults({ lines, resolving_power: 1e5 })).sort()).toEqual([
      '/lines/0/lower/j term_impossible', '/lines/0/lower_others/0/j term_mixed', '/lines/0/lower_others/0/l term_mixed', '/lines/0/lower_others/0/s term_mixed',
      '/lines/0/upper/energy_invcm zero_interval', '/lines/0/upper_others/0/j term_mixed', '/lines/0/upper_others/0/parity term_mixed',
    ])
  })
})

describe('widths of profiles', () => {
  it.each([
    ['an instrument of nothing', { instrument_fwhm_invcm: 1e-300 }],
    ['a natural width of nothing', { lorentzian_fwhm_invcm: 1e-200 }],
    ['an instrument of nothing beside a natural width', { instrument_fwhm_invcm: 1e-300, lorentzian_fwhm_invcm: 0.1 }],
    ['a width below the digits of the wavenumber', { instrument_fwhm_invcm: 1e-12 }],
    ['an instrument that resolves nothing', { resolving_power: 1e-200, lorentzian_fwhm_invcm: 0.1 }],
  ])('%s is refused, with the cure', async (_, widths) => {
    expect(await faults({ ...widths, lines: [{ ...GIVEN, weight: 1e12 }] })).toEqual([' profile_no_width'])
  })

  it.each([[{ instrument_fwhm_invcm: 1e-10 }], [{ lorentzian_fwhm_invcm: 1e-10 }], [{ instrument_fwhm_invcm: 1e-10, lorentzian_fwhm_invcm: 1e6 }], [{ instrument_fwhm_invcm: 1e6 }]])('%j is computed in finite numbers, of the largest weight too', async (widths) => {
    const { numbers } = await answered({ ...widths, lines: [{ ...GIVEN, weight: 1e12 }] })
    expect(numbers.length).toBeGreaterThan(6)
    expect(numbers.filter((value) => !Number.isFinite(value))).toEqual([])
  })
})

describe('an isotope', () => {
  it.each([23, 'natural'])('%s of levels given in the request is refused', async (isotope) => {
    expect(await faults({ isotope, resolving_power: 1e5 })).toEqual(['/isotope isotope_unknown'])
  })

  it('is told not to apply to the lines that the request brings beside those of the table', async () => {
    expect((await answered({ lines: [D2, GIVEN], isotope: 'natural', resolving_power: 1e5 })).warnings).toContain('isotope_not_applied')
    expect((await answered({ lines: [D2], isotope: 'natural', resolving_power: 1e5 })).warnings).not.toContain('isotope_not_applied')
  })
})
