import { describe, expect, it } from 'vitest'
import { readCases } from '../reference/read'
import { ask, faultsOf, type Json } from './helpers/client'

const profiles = (body: unknown, format = '') => ask('post', `/profiles${format}`, { body })
const dataOf = async (body: unknown): Promise<Json> => {
  const reply = await profiles(body)
  expect(reply.status, reply.text.slice(0, 500)).toBe(200)
  return reply.json.data
}
/** Trapezoidal sum over an even grid. */
const area = (values: number[], step: number): number => values.reduce((sum, value) => sum + value * step, 0)

const SINGLET = { lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }, upper: { energy_invcm: 32, s: 0, l: 1, j: 1, parity: 'odd' } }
const D1 = { transition: 'Na-I.1~Na-I.2' }
const D2 = { transition: 'Na-I.1~Na-I.3' }

interface VoigtCase { kind: 'voigt'; fwhmG: number; fwhmL: number; fwhm: number; peak: number; values: [number, number][] }
interface DopplerCase { kind: 'doppler'; name: string; T_K: number; mass_u: number; lambda_nm: number; 'fwhm_cm-1': number }
const vectors = readCases<VoigtCase | DopplerCase>('09-profiles.json')

describe('widths of the reference vectors (09) through the API', () => {
  it.each(vectors.filter((row) => row.kind === 'voigt'))('Gauss $fwhmG, Lorentz $fwhmL', async ({ fwhmG, fwhmL, fwhm, values }) => {
    for (const [x, wanted] of values.slice(0, 8)) {
      const data = await dataOf({ lines: [SINGLET], field: 0, model: 'linear', instrument_fwhm_invcm: fwhmG, lorentzian_fwhm_invcm: fwhmL, grid: { start: 32 + x, stop: 33 + x, count: 2 } })
      expect(Math.abs(data.lines[0].fwhm_invcm / fwhm - 1)).toBeLessThanOrEqual(1e-12)
      // 32 + x is rounded by up to 4e-15; on the steep side of a Gaussian 0.01 wide that is up to 4e-11 of the profile
      expect(Math.abs(data.stokes_i[0] / wanted - 1), `at ${x}`).toBeLessThanOrEqual(5e-11)
    }
  })

  it.each(vectors.filter((row) => row.kind === 'doppler'))('$name at $T_K K', async (row) => {
    const upper = { ...SINGLET.upper, energy_invcm: 1e7 / row.lambda_nm }
    const data = await dataOf({ lines: [{ ...SINGLET, upper }], field: 0, temperature_k: row.T_K, mass_u: row.mass_u })
    // header: 1e-13
    expect(Math.abs(data.lines[0].doppler_fwhm_invcm / row['fwhm_cm-1'] - 1)).toBeLessThanOrEqual(1e-13)
    expect(data.lines[0]).toMatchObject({ mass_u: row.mass_u, mass_basis: 'given', mass_status: 'ok' })
  })
})

interface GeometryCase {
  line: string
  thetaDeg: number
  components: [twoMLower: number, twoMUpper: number, q: number, shiftExact: string, shift: number, strengthExact: string, i: number, q: number, vh: number][]
}
const levelOf = (symbol: string, energy: number, parity: string) => {
  const [, multiplicity, letter, j] = /^(\d)([A-Z])(.+)$/.exec(symbol) ?? []
  const [over, under = '1'] = (j ?? '').split('/')
  return { energy_invcm: energy, s: (Number(multiplicity) - 1) / 2, l: 'SPDFG'.indexOf(letter ?? ''), j: Number(over) / Number(under), parity }
}

describe('Stokes profiles of the geometry vectors (11) through the API', () => {
  it.each(readCases<GeometryCase>('11-geometry.json'))('$line at $thetaDeg degrees', async ({ line, thetaDeg, components }) => {
    const [low = '', high = ''] = line.split('-')
    const [step, fieldTesla] = [0.01, 10]
    const lorentz = 0.46686447719 * fieldTesla
    const reach = Math.ceil(lorentz * Math.max(...components.map((row) => Math.abs(row[4]))) + 1)
    const grid = { start: 16000 - reach, stop: 16000 + reach, count: Math.round((2 * reach) / step) + 1 }
    const body = { lines: [{ lower: levelOf(low, 0, 'even'), upper: levelOf(high, 16000, 'odd') }], field: fieldTesla, model: 'linear', g_s: 2, theta_deg: thetaDeg, instrument_fwhm_invcm: 0.05, grid }
    const data = await dataOf(body)
    for (const shift of new Set(components.map((row) => row[4]))) {
      // components of one shift stand together; those of others are at least 1/6 Lorentz unit, 0.78 cm^-1, away
      const mine = components.filter((row) => Math.abs(row[4] - shift) < 1e-9)
      const near = (data.wavenumber_invcm as number[]).map((wavenumber) => Math.abs(wavenumber - 16000 - lorentz * shift) < 0.3)
      const within = (values: number[]) => area(values.filter((_, i) => near[i]), step)
      // the sum over a Gaussian with five points on its width is exact to 1e-12
      for (const [name, at] of [['stokes_i', 6], ['stokes_q', 7], ['stokes_v', 8]] as const) {
        expect(within(data[name]), `${name} at ${shift}`).toBeCloseTo(mine.reduce((sum, row) => sum + Number(row[at]), 0), 9)
      }
    }
    expect(area(data.stokes_i, step)).toBeCloseTo(1, 9)
    expect(data.lines[0].integral).toBeCloseTo(1, 12)
  })
})

describe('profiles of lines of the table', () => {
  const body = { lines: [D1, { ...D2, weight: 2 }], field: '0.5T', theta_deg: 30, model: 'linear', temperature_k: 500, resolving_power: 100000, grid: { start: 16950, stop: 16980, count: 6001 } }

  it('have the weights as integrals, and masses from the isotopes', async () => {
    const data = await dataOf(body)
    expect(area(data.stokes_i, 0.005)).toBeCloseTo(3, 8)
    expect(data.lines.map((line: Json) => [line.transition, line.species, line.model, line.mass_u, line.mass_basis])).toEqual([
      ['Na-I.1~Na-I.2', 'Na-I', 'linear', 22.98976928, 'mean_of_isotopes'],
      ['Na-I.1~Na-I.3', 'Na-I', 'linear', 22.98976928, 'mean_of_isotopes'],
    ])
    const [d1] = data.lines
    expect(d1.gaussian_fwhm_invcm).toBeCloseTo(Math.hypot(d1.doppler_fwhm_invcm, d1.instrument_fwhm_invcm), 14)
    expect(d1.instrument_fwhm_invcm).toBeCloseTo(d1.wavenumber_invcm / 100000, 14)
  })

  it('turn V and leave I and Q where the field is reversed; absorption and the solar sign turn what they should', async () => {
    const [here, reversed, solar, absorbed] = await Promise.all([body, { ...body, theta_deg: 150 }, { ...body, stokes_sign: 'solar' }, { ...body, mode: 'absorption' }].map(dataOf))
    const most = (a: number[], b: number[], sign: 1 | -1) => Math.max(...a.map((value, i) => Math.abs(value - sign * (b[i] ?? 0))))
    // cos^2 of 30 and of 150 degrees differ by rounding; profiles are up to 10 high
    expect(most(here.stokes_i, reversed.stokes_i, 1)).toBeLessThan(1e-12)
    expect(most(here.stokes_q, reversed.stokes_q, 1)).toBeLessThan(1e-12)
    expect(most(here.stokes_v, reversed.stokes_v, -1)).toBeLessThan(1e-12)
    expect(Math.max(...here.stokes_v)).toBeGreaterThan(0.1)
    expect(most(here.stokes_v, solar.stokes_v, -1)).toBe(0)
    expect(most(here.stokes_i, absorbed.stokes_i, 1)).toBe(0)
    expect(most(here.stokes_q, absorbed.stokes_q, -1)).toBe(0)
  })

  it('behind an analyser along, and across, the field add up to I; circular ones part the sigmas', async () => {
    const behind = async (analyser: unknown) => (await dataOf({ ...body, theta_deg: 0, analyser })).behind_analyser as number[]
    const [plain, along, across, counter, clock] = await Promise.all([dataOf({ ...body, theta_deg: 0 }), behind({ kind: 'linear', angle_deg: 0 }), behind({ kind: 'linear', angle_deg: 90 }), behind({ kind: 'circular', sense: 'counterclockwise' }), behind({ kind: 'circular', sense: 'clockwise' })])
    expect(plain.behind_analyser).toBeNull()
    plain.stokes_i.forEach((value: number, i: number) => {
      expect((along[i] ?? 0) + (across[i] ?? 0)).toBeCloseTo(value, 12)
      expect((counter[i] ?? 0) + (clock[i] ?? 0)).toBeCloseTo(value, 12)
      expect((counter[i] ?? 0) - (clock[i] ?? 0)).toBeCloseTo(plain.stokes_v[i], 12)
    })
    expect(plain.bench_sentence).toMatch(/^Looking against the field.*sigma\+ group .* turning counter-clockwise/)
  })

  it('are the same on a grid of wavelengths, of frequencies and of wavenumbers, each rising in its unit', async () => {
    const narrow = { ...body, grid: { start: 16973, stop: 16974, count: 51 } }
    const { wavenumber_invcm: w, wavelength_air_nm: air, wavelength_vac_nm: vac, stokes_i: i } = await dataOf(narrow)
    for (const [unit, from, to] of [['vacuum_nm', vac[50], vac[0]], ['air_nm', air[50], air[0]], ['frequency_ghz', w[0] * 29.9792458, w[50] * 29.9792458]] as const) {
      const data = await dataOf({ ...body, grid: { start: from, stop: to, count: 2, unit } })
      const falls = unit !== 'frequency_ghz'
      expect(data.grid).toEqual({ unit, start: from, stop: to, count: 2, automatic: false })
      // wavelengths to the bit, so wavenumbers and values but for rounding
      expect(data.stokes_i[0]).toBeCloseTo(falls ? i[50] : i[0], 8)
      expect(data.stokes_i[1]).toBeCloseTo(falls ? i[0] : i[50], 8)
    }
  })

  it('choose a grid that shows the lines, and warn of one that does not', async () => {
    const own = await dataOf({ ...body, grid: null })
    expect(own.grid).toMatchObject({ unit: 'wavenumber_invcm', automatic: true, count: own.stokes_i.length })
    const step = own.wavenumber_invcm[1] - own.wavenumber_invcm[0]
    expect(area(own.stokes_i, step)).toBeCloseTo(3, 5)
    const coarse = await profiles({ ...body, grid: { start: 16000, stop: 18000, count: 100 } })
    expect(coarse.json.meta.warnings.map((warning: Json) => warning.code)).toContain('grid_coarse')
    const elsewhere = await profiles({ ...body, grid: { start: 10000, stop: 10001, count: 1000 } })
    expect(elsewhere.json.meta.warnings.map((warning: Json) => warning.code)).toContain('grid_without_lines')
  })

  it('take one model for all lines: where linear errs for one, all are diagonalised', async () => {
    const lines = [{ transition: 'Li-I.1~Li-I.2' }, { transition: 'Li-I.1~Li-I.3' }]
    const reply = await profiles({ lines, field: '2T', resolving_power: 1e6 })
    expect(reply.json.meta.model).toBe('intermediate')
    expect(reply.json.data.lines.map((line: Json) => line.model)).toEqual(['intermediate', 'intermediate'])
    // each q flows between the lines of a multiplet; weighed as LS has them (1 : 2) it keeps its sum
    const weighed = await dataOf({ lines: [lines[0], { ...lines[1], weight: 2 }], field: '2T', theta_deg: 0, resolving_power: 1e6 })
    expect(weighed.lines[0].integral + weighed.lines[1].integral).toBeCloseTo(3, 9)
    expect(Math.abs(weighed.lines[0].integral - 1)).toBeGreaterThan(0.01)
  })

  it('come as a table too', async () => {
    const small = { ...body, grid: { start: 16973, stop: 16974, count: 11 } }
    const [json, csv, ndjson] = [await dataOf(small), await profiles(small, '?format=csv'), await profiles(small, '?format=ndjson')]
    const [head, first] = csv.text.split('\r\n')
    expect(head).toBe('wavenumber_invcm,wavelength_vac_nm,wavelength_air_nm,stokes_i,stokes_q,stokes_v,behind_analyser')
    expect(first?.split(',').slice(0, 6).map(Number)).toEqual([json.wavenumber_invcm[0], json.wavelength_vac_nm[0], json.wavelength_air_nm[0], json.stokes_i[0], json.stokes_q[0], json.stokes_v[0]])
    const rows = ndjson.text.trim().split('\n').map((row) => JSON.parse(row) as Json)
    expect(rows).toHaveLength(12)
    expect(rows.at(-1)).toMatchObject({ complete: true, meta: { model: 'linear', edition: 1 } })
  })

  it('are pinned by the edition in the body or in the address, not by two at odds', async () => {
    expect((await profiles({ ...body, edition: 1 })).json.meta.edition).toBe(1)
    expect((await profiles({ ...body, edition: 1 }, '?edition=1')).status).toBe(200)
    const absent = await profiles({ ...body, edition: 999 })
    expect([absent.status, ...faultsOf(absent)]).toEqual([404, '/edition edition_unknown'])
    const odds = await profiles({ ...body, edition: 1 }, '?edition=2')
    expect([odds.status, ...faultsOf(odds)]).toEqual([400, '/edition repeated_parameter'])
  })
})

describe('wrong requests', () => {
  it('are told all that is wrong in form at once', async () => {
    const reply = await profiles({ lines: [{ transition: 'Na' }], field: 1, instrument_fwhm_invcm: 0.1, resolving_power: 10, analyser: { kind: 'linear', angle_deg: 3 }, grid: { start: 5, stop: 3, count: 1 }, temprature_k: 300 })
    expect(reply.status).toBe(400)
    expect(faultsOf(reply).sort()).toEqual([
      '/analyser analyser_without_angle', '/grid/count number_out_of_range', '/grid/stop grid_malformed', '/lines/0/transition transition_malformed', '/resolving_power instrument_twice', '/temprature_k unknown_field',
    ])
    expect(reply.json.errors.find((fault: Json) => fault.pointer === '/temprature_k').detail).toContain('temperature_k')
  })

  it('are told all that is impossible at once', async () => {
    const impossible = { lower: { ...SINGLET.lower, j: 1 }, upper: { ...SINGLET.upper, energy_invcm: 0 } }
    const reply = await profiles({ lines: [{ transition: 'Na-I.1~Na-I.9999' }, { transition: 'Na-I.1~Na-I.3', kind: 'E2' }, impossible], field: '3x', resolving_power: 1000, isotope: 24, grid: { start: 150, stop: 300, count: 10, unit: 'air_nm' } })
    expect(reply.status).toBe(400)
    expect(faultsOf(reply).sort()).toEqual([
      '/field field_unit_unknown', '/grid air_not_applicable', '/isotope isotope_unknown', '/lines/0/transition level_unknown', '/lines/1/kind profile_e2', '/lines/2/lower/j term_impossible', '/lines/2/upper/energy_invcm zero_interval',
    ])
  })

  it.each([
    ['no width', { lines: [D1], field: 1 }, 422, ['/ profile_no_width']],
    ['an instrument narrower than any number', { lines: [{ ...SINGLET, weight: 1e12 }], field: 1, instrument_fwhm_invcm: 1e-300 }, 422, ['/ profile_no_width']],
    ['a natural width narrower than any number', { lines: [SINGLET], field: 1, lorentzian_fwhm_invcm: 1e-200 }, 422, ['/ profile_no_width']],
    ['an isotope of levels given in the request', { lines: [SINGLET], field: 1, resolving_power: 1000, isotope: 23 }, 422, ['/isotope isotope_unknown']],
    ['a temperature and no mass', { lines: [SINGLET], field: 1, temperature_k: 300 }, 422, ['/mass_u mass_unknown']],
    ['no such level', { lines: [{ transition: 'Na-I.1~Na-I.9999' }], field: 1, resolving_power: 1000 }, 404, ['/lines/0/transition level_unknown']],
    ['a term that is not whole in the intermediate model', { lines: [{ lower: { energy_invcm: 0, s: 0.5, l: 0, j: 0.5, parity: 'even' }, upper: { energy_invcm: 16000, s: 0.5, l: 1, j: 0.5, parity: 'odd' } }], field: 1, model: 'intermediate', resolving_power: 1000 }, 422, ['/model term_incomplete']],
    ['too many points times components', { lines: Array.from({ length: 100 }, () => D2), field: 1, resolving_power: 1e5, grid: { start: 16000, stop: 17000, count: 100000 } }, 413, ['/grid answer_too_large']],
    ['no line', { lines: [], field: 1, resolving_power: 1000 }, 400, ['/lines length_out_of_range']],
    ['too many points', { lines: [D1], field: 1, resolving_power: 1000, grid: { start: 1, stop: 2, count: 100001 } }, 400, ['/grid/count number_out_of_range']],
  ])('%s', async (_, body, status, faults) => {
    const reply = await profiles(body)
    expect([reply.status, ...faultsOf(reply).map((fault) => fault.replace(/^ /, '/ '))]).toEqual([status, ...faults])
  })

  it('an isotope is told not to apply to lines given beside those of the table', async () => {
    const reply = await profiles({ lines: [D1, SINGLET], field: 1, resolving_power: 1000, isotope: 23 })
    expect(reply.status).toBe(200)
    expect(reply.json.meta.warnings.map((warning: Json) => warning.code)).toContain('isotope_not_applied')
  })

  it('whole terms given inline are diagonalised', async () => {
    const half = (l: number, j: number, energy: number, parity: string) => ({ energy_invcm: energy, s: 0.5, l, j, parity })
    const data = await dataOf({ lines: [{ lower: half(0, 0.5, 0, 'even'), upper: half(1, 0.5, 14903.66, 'odd'), upper_others: [half(1, 1.5, 14904, 'odd')] }], field: '2T', resolving_power: 1e6 })
    expect(data.lines[0]).toMatchObject({ transition: null, species: null, model: 'intermediate', mass_u: null, mass_status: 'not_applicable' })
  })
})
