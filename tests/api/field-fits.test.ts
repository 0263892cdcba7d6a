import { describe, expect, it } from 'vitest'
import { readCases } from '../reference/read'
import { ask, faultsOf, get, type Json } from './helpers/client'

const fit = (body: unknown, query = '') => ask('post', `/field-fits${query}`, { body })
const determined = async (body: unknown): Promise<Json> => {
  const reply = await fit(body)
  expect(reply.status, reply.text).toBe(200)
  expect(reply.json.data.status, reply.text.slice(0, 600)).toBe('determined')
  return reply.json
}
const reasons = async (body: unknown): Promise<string[]> => {
  const reply = await fit(body)
  expect([reply.status, reply.json.data?.status], reply.text).toEqual([200, 'undetermined'])
  return reply.json.data.reasons.map((reason: Json) => reason.code)
}
const codes = (json: Json): string[] => json.meta.warnings.map((warning: Json) => warning.code)

const MU_B = 0.46686447719
const S = { energy_invcm: 0, s: 0.5, l: 0, j: 0.5, parity: 'even' }
const D1 = { energy_invcm: 16956.17025, s: 0.5, l: 1, j: 0.5, parity: 'odd' }
const D2 = { energy_invcm: 16973.36619, s: 0.5, l: 1, j: 1.5, parity: 'odd' }

interface Case {
  name: string
  lines: string[]
  measurements: [line: number, twoMLower: number, twoMUpper: number, q: number, shiftExact: string, shift: number, position: number, sigma: number][]
  fit: { E0: number[]; B: number; sigmaE0: number[]; sigmaB: number; covariance: number[][]; chi2: number; dof: number; sigmaB_scaled?: number } | null
}

const ENDS: Record<string, object> = {
  '1S0': { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' },
  '1P1': { energy_invcm: 23652.304, s: 0, l: 1, j: 1, parity: 'odd' },
  '2S1/2': S,
  '2P1/2': D1,
  '2P3/2': D2,
}

describe('a field from positions: vectors 10', () => {
  const bodyOf = (row: Case, assigned: boolean) => ({
    lines: row.lines.map((name) => {
      const [lower = '', upper = ''] = name.split('-')
      return { lower: ENDS[lower], upper: ENDS[upper] }
    }),
    unit: 'cm-1',
    model: 'linear',
    g_values: 'ls',
    g_s: 2,
    measurements: row.measurements.map(([line, twoMLower, twoMUpper, , , , position, sigma]) => ({ line, position, position_unc: sigma, ...(assigned ? { m_lower: twoMLower / 2, m_upper: twoMUpper / 2 } : {}) })),
  })

  it.each(readCases<Case>('10-field-fit.json'))('$name', async (row) => {
    if (row.fit === null) return expect(await reasons(bodyOf(row, true))).not.toEqual([])
    const { data } = await determined(bodyOf(row, true))
    const { E0, B, sigmaE0, sigmaB, covariance, chi2, dof } = row.fit
    // tolerances of the vectors: B to 1e-6 sigma_B, zeros to 1e-9 cm^-1, deviations to 1e-9, covariance to 1e-8 sqrt(C_ii C_jj), chi^2 to 1e-6 (1 + chi^2)
    expect(Math.abs(data.field_tesla - B)).toBeLessThanOrEqual(1e-6 * sigmaB)
    expect(Math.abs(data.statistical_unc_tesla / sigmaB - 1)).toBeLessThanOrEqual(1e-9)
    E0.forEach((position, z) => {
      expect(Math.abs(data.zeros[z].position_invcm - position)).toBeLessThanOrEqual(1e-9)
      expect(Math.abs(data.zeros[z].position_unc_invcm / (sigmaE0[z] ?? 1) - 1)).toBeLessThanOrEqual(1e-9)
    })
    covariance.forEach((line, i) => line.forEach((value, j) => {
      expect(Math.abs(data.covariance[i][j] - value)).toBeLessThanOrEqual(1e-8 * Math.sqrt((covariance[i]?.[i] ?? 0) * (covariance[j]?.[j] ?? 0)))
    }))
    expect(Math.abs(data.chi_squared - chi2)).toBeLessThanOrEqual(1e-6 * (1 + chi2))
    expect(data.degrees_of_freedom).toBe(dof)
    if (row.fit.sigmaB_scaled !== undefined) expect(data.scaled_unc_tesla / row.fit.sigmaB_scaled).toBeCloseTo(1, 9)
    // residuals sum to nothing within each zero, weighed by 1/sigma^2: that is what a free zero means
    for (const zero of data.zeros) {
      const own = data.residuals.filter((residual: Json) => zero.lines.includes(residual.line))
      const sum = own.reduce((all: number, one: Json) => all + one.residual_invcm / one.position_unc_invcm ** 2, 0)
      const size = own.reduce((all: number, one: Json) => all + Math.abs(one.residual_invcm) / one.position_unc_invcm ** 2, 0)
      // positions of 2e4 are held to 4e-12 cm^-1 and weights reach 1e6
      expect(Math.abs(sum)).toBeLessThanOrEqual(1e-6 * size + 1e-4)
    }
  })

  it('peaks without names are read alike', async () => {
    const row = readCases<Case>('10-field-fit.json').find((one) => one.name === 'D1 and D2 together') as Case
    const { data } = await determined(bodyOf(row, false))
    expect(data.field_tesla).toBeCloseTo(row.fit?.B ?? 0, 9)
    expect(data.residuals.every((residual: Json) => residual.assigned === 'automatic')).toBe(true)
  })
})

/** Positions of the components of a table's line at a field, strong ones, in cm^-1. */
async function componentsAt(transition: string, field: string, model: string, least = 0.02): Promise<Json[]> {
  const reply = await get(`/transitions/${transition}/components?field=${field}&model=${model}`)
  expect(reply.status, reply.text).toBe(200)
  return reply.json.data.components.filter((component: Json) => component.strength > least)
}

describe('a field from the lines of the table', () => {
  it('comes back from the positions that the components have: Li I 670.8 nm at 2 T, past the linear law', async () => {
    const found = (await get('/transitions?species=Li-I&wavelength_min_nm=670&wavelength_max_nm=672')).json.data.map((line: Json) => line.id)
    expect(found).toHaveLength(2)
    const measurements = (await Promise.all(found.map(async (id: string, line: number) => (await componentsAt(id, '2T', 'intermediate')).map((one) => ({ line, position: one.wavenumber_invcm, position_unc: 0.002, m_lower: one.m_lower, m_upper: one.m_upper }))))).flat()
    const lines = found.map((transition: string) => ({ transition }))
    const json = await determined({ lines, unit: 'cm-1', measurements })
    expect(json.data).toMatchObject({ model: 'intermediate', model_valid: true })
    // exact positions of 15 000 cm^-1 in double precision: 4e-12 cm^-1 of shifts near 1 cm^-1
    expect(Math.abs(json.data.field_tesla - 2)).toBeLessThan(1e-9)
    expect(json.data.validity.every((one: Json) => one.linear_law.positions.status === 'not_valid')).toBe(true)
    const linear = await determined({ lines, unit: 'cm-1', measurements, model: 'linear' })
    expect(linear.data.model_valid).toBe(false)
    expect(codes(linear)).toContain('linear_not_valid')
    expect(Math.abs(linear.data.field_tesla - 2)).toBeGreaterThan(0.01)
    // the same peaks without names
    const bare = await determined({ lines, unit: 'cm-1', measurements: measurements.map(({ line, position, position_unc }) => ({ line, position, position_unc })) })
    expect(Math.abs(bare.data.field_tesla - 2)).toBeLessThan(0.01)
  })

  it('is the same from every unit and medium', async () => {
    const components = await componentsAt('Na-I.1~Na-I.3', '0.5T', 'linear')
    const named = (one: Json, position: number) => ({ position, m_lower: one.m_lower, m_upper: one.m_upper })
    const ways: [object, (one: Json) => number][] = [
      [{ unit: 'cm-1' }, (one) => one.wavenumber_invcm],
      [{ unit: 'mcm-1' }, (one) => 1000 * one.wavenumber_invcm],
      [{ unit: 'GHz' }, (one) => 1000 * one.frequency_thz],
      [{ unit: 'nm' }, (one) => one.wavelength_air_nm],
      [{ unit: 'nm', medium: 'vacuum' }, (one) => one.wavelength_vac_nm],
      [{ unit: 'pm', medium: 'air' }, (one) => 1000 * one.wavelength_air_nm],
      [{ unit: 'GHz', quantity: 'separations' }, (one) => one.shift_ghz + 3],
      [{ unit: 'pm', quantity: 'separations' }, (one) => one.shift_pm],
    ]
    for (const [how, position] of ways) {
      const { data } = await determined({ lines: [{ transition: 'Na-I.1~Na-I.3' }], model: 'linear', ...how, measurements: components.map((one) => named(one, position(one))) })
      // nm of 589 in doubles are 1e-13 nm: 3e-9 cm^-1 of shifts near 0.3 cm^-1
      expect(Math.abs(data.field_tesla - 0.5), JSON.stringify(how)).toBeLessThan(1e-7)
    }
  })

  it('is negative when the assignment says so', async () => {
    const components = await componentsAt('Na-I.1~Na-I.3', '0.5T', 'linear')
    const { data } = await determined({ lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', model: 'linear', measurements: components.map((one) => ({ position: one.wavenumber_invcm, q: -one.q })) })
    expect(data.field_tesla).toBeCloseTo(-0.5, 8)
    const named = await determined({ lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', model: 'linear', measurements: components.map((one) => ({ position: one.wavenumber_invcm, m_lower: -one.m_lower, m_upper: -one.m_upper })) })
    expect(named.data.field_tesla).toBeCloseTo(-0.5, 8)
  })

  it('says what it is uncertain by', async () => {
    const components = await componentsAt('Na-I.1~Na-I.3', '0.5T', 'linear')
    const body = { lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', measurements: components.map((one) => ({ position: one.wavenumber_invcm, position_unc: 0.005 })) }
    const json = await determined(body)
    const { data } = json
    const known = Math.hypot(...data.budget.map((row: Json) => row.value_tesla ?? 0))
    expect(data.field_known_unc_tesla / known).toBeCloseTo(1, 12)
    expect(data.expanded_unc_tesla).toBe(2 * data.field_known_unc_tesla)
    expect(data.uncertainty_complete).toBe(data.budget.every((row: Json) => row.status !== 'unknown'))
    expect(data.field_unc_tesla).toBe(data.uncertainty_complete ? data.field_known_unc_tesla : null)
    expect(data.budget.map((row: Json) => row.part)).toEqual(expect.arrayContaining(['positions', 'g_lower', 'g_upper', 'constants']))
    // leverages of a fit of two parameters add up to two
    expect(data.residuals.reduce((sum: number, one: Json) => sum + one.leverage, 0)).toBeCloseTo(2, 9)
    expect(codes(json)).toContain('hyperfine_ignored')
    expect(json.meta).toMatchObject({ edition: 1, model: data.model, g_values: 'adopted' })
  })

  it('of two peaks tells every reading', async () => {
    const { data, meta } = await determined({ lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', model: 'linear', measurements: [16973, 16973.5].map((position) => ({ position, position_unc: 0.001 })) })
    expect(data.alternatives.length).toBeGreaterThan(0)
    expect(data.alternatives[0].components).toHaveLength(2)
    expect(codes({ meta })).toContain('assignment_ambiguous')
  })

  it('takes the centre of an unresolved group by g_eff', async () => {
    const gEff = (await get('/transitions/Na-I.1~Na-I.3')).json.data.g_eff
    const { data } = await determined({ lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', quantity: 'separations', model: 'linear', measurements: [-1, 1].map((q) => ({ position: q * MU_B * 0.3 * gEff, group: q })) })
    expect(data.field_tesla).toBeCloseTo(0.3, 9)
    expect(data.residuals[0].components).toHaveLength(2)
  })
})

describe('scale, etalon and g', () => {
  const lines = [{ lower: S, upper: D1, zero: 'plate' }, { lower: S, upper: D2, zero: 'plate' }]
  // the strong components of both D lines in the linear law with LS g at g_s = 2, in Lorentz units
  const shifts: [number, number, number, number][] = [[0, 0.5, -0.5, -4 / 3], [0, -0.5, -0.5, 2 / 3], [0, 0.5, 0.5, -2 / 3], [0, -0.5, 0.5, 4 / 3], [1, 0.5, -0.5, -5 / 3], [1, -0.5, -0.5, 1 / 3], [1, 0.5, 0.5, -1 / 3], [1, -0.5, 0.5, 5 / 3], [1, 0.5, 1.5, 1], [1, -0.5, -1.5, -1]]
  const common = { unit: 'cm-1', model: 'linear', g_values: 'ls', g_s: 2 }

  it('a free scale is fitted beside the field where lines share a zero', async () => {
    const scale = 1.02
    const measurements = shifts.map(([line, m_lower, m_upper, lorentz]) => ({ line, position: scale * ((line === 0 ? D1 : D2).energy_invcm + lorentz * MU_B * 0.7), position_unc: 0.001, m_lower, m_upper }))
    const { data } = await determined({ ...common, lines, measurements, scale: { free: true } })
    expect(data.field_tesla).toBeCloseTo(0.7, 8)
    expect(data.scale).toMatchObject({ status: 'free' })
    expect(data.scale.value).toBeCloseTo(scale, 9)
    expect(data.parameters).toEqual(['plate', 'field', 'scale'])
    expect(data.zeros).toMatchObject([{ name: 'plate', lines: [0, 1] }])
    expect(await reasons({ ...common, lines: lines.map(({ lower, upper }) => ({ lower, upper })), measurements, scale: { free: true } })).toEqual(['scale_and_field'])
  })

  it('an uncertain scale adds its share', async () => {
    const measurements = shifts.filter(([line]) => line === 1).map(([, m_lower, m_upper, lorentz]) => ({ position: D2.energy_invcm + lorentz * MU_B * 0.7, position_unc: 0.001, m_lower, m_upper }))
    const one = [{ lower: S, upper: D2 }]
    const [sure, unsure] = [await determined({ ...common, lines: one, measurements }), await determined({ ...common, lines: one, measurements, scale: { unc: 0.01 } })]
    // the field goes as one over the scale
    expect(unsure.data.statistical_unc_tesla).toBeCloseTo(Math.hypot(sure.data.statistical_unc_tesla, 0.7 * 0.01), 6)
    expect(unsure.data.budget.find((row: Json) => row.part === 'scale').value_tesla).toBeCloseTo(0.007, 6)
  })

  it('rings of an etalon give the field, whatever their order', async () => {
    // radius^2 = (offset/range + order + 0.3) step: a plane etalon to first order in the squares of the angles
    const [range, step] = [2, 11.5]
    const ring = (lorentz: number, order: number) => Math.sqrt(((lorentz * MU_B * 0.6) / range + order + 0.3) * step)
    const measurements = shifts.filter(([line]) => line === 0).flatMap(([, m_lower, m_upper, lorentz]) => [1, 2].map((order) => ({ position: ring(lorentz, order), position_unc: 0.005, m_lower, m_upper, order })))
    const body = { model: 'linear', g_values: 'ls', g_s: 2, lines: [{ lower: S, upper: D1 }], quantity: 'ring_radii', measurements }
    const { data } = await determined({ ...body, etalon: { free_spectral_range_invcm: range, square_step: step } })
    expect(data.field_tesla).toBeCloseTo(0.6, 9)
    // 2.5 mm of air between the plates have a range of 2 cm^-1; the step from three orders of one component
    const other = await determined({ ...body, etalon: { thickness_mm: 2.5, order_radii: [1, 2, 3].map((order) => ring(0, order)) } })
    expect(other.data.field_tesla).toBeCloseTo(0.6, 9)
    const unsure = await determined({ ...body, etalon: { free_spectral_range_invcm: range, square_step: step, square_step_unc: 0.115 } })
    expect(unsure.data.budget.find((row: Json) => row.part === 'scale').value_tesla).toBeCloseTo(0.006, 5)
  })

  it('g comes from a known field', async () => {
    const measurements = shifts.filter(([line]) => line === 1).map(([, m_lower, m_upper, lorentz]) => ({ position: D2.energy_invcm + lorentz * MU_B * 0.9, position_unc: 0.001, m_lower, m_upper }))
    const body = { ...common, unknown: 'g', field: '9kG', field_unc: '9mT', lines: [{ lower: S, upper: D2 }], measurements }
    const { data } = await determined(body)
    expect(data).toMatchObject({ unknown: 'g', field_tesla: 0.9, lower: null, model: 'linear' })
    expect(data.upper.g_j).toBeCloseTo(4 / 3, 8)
    // where the held g moves the pattern too, one per cent of the field is more than one per cent of g: d(g_u) = d(x)/x (g_u - what g_l adds)
    expect(data.upper.budget.find((row: Json) => row.part === 'field').value).toBeGreaterThan(0)
    const both = await determined({ ...body, free_g: 'both' })
    expect([both.data.lower.g_j, both.data.upper.g_j].map((g) => Number(g.toFixed(8)))).toEqual([2, 1.33333333])
    expect(both.data.covariance).toHaveLength(3)
    expect(await reasons({ ...body, measurements: measurements.slice(0, 1) })).toEqual(['too_few_positions'])
  })
})

describe('an undetermined fit says why', () => {
  const line = [{ lower: S, upper: D2 }]
  const base = { lines: line, unit: 'cm-1', model: 'linear' }
  it.each([
    ['no positions', { ...base, measurements: [] }, ['no_positions']],
    ['one position', { ...base, measurements: [{ position: 16973 }] }, ['too_few_positions']],
    ['two peaks of one component', { ...base, measurements: [{ position: 16973.1, m_lower: 0.5, m_upper: 1.5 }, { position: 16973.2, m_lower: 0.5, m_upper: 1.5 }] }, ['one_shift_per_line']],
    ['a peak in each of two lines', { ...base, lines: [{ lower: S, upper: D1 }, ...line], measurements: [{ position: 16956.1, m_lower: 0.5, m_upper: 0.5 }, { line: 1, position: 16973.2, m_lower: 0.5, m_upper: 0.5 }] }, ['one_shift_per_line', 'too_few_positions']],
    ['a line that does not split', { ...base, lines: [{ lower: { energy_invcm: 0, s: 0.5, l: 1, j: 0.5, parity: 'odd', g_j: 0 }, upper: { energy_invcm: 20000, s: 0.5, l: 0, j: 0.5, parity: 'even', g_j: 0 } }], measurements: [{ position: 20000, m_lower: 0.5, m_upper: 0.5 }, { position: 20000.1, m_lower: -0.5, m_upper: 0.5 }] }, ['no_shift']],
  ])('%s', async (_, body, expected) => {
    expect(await reasons(body)).toEqual(expected)
  })

  it('where the field would be larger than any that is computed', async () => {
    const far = { lower: ENDS['1S0'], upper: { ...ENDS['1P1'], energy_invcm: 2e6 } }
    const measurements = [-1, 0, 1].map((q) => ({ position: 2e6 + q * MU_B * 12_840, position_unc: 0.01, m_lower: 0, m_upper: q }))
    expect(await reasons({ ...base, lines: [far], measurements })).toEqual(['field_too_large'])
  })

  it('and is an empty table as well', async () => {
    const reply = await fit({ ...base, measurements: [] }, '?format=csv')
    expect(reply.status).toBe(200)
    expect(reply.text.trim().split('\n')).toHaveLength(1)
  })
})

describe('a fit of many positions', () => {
  it('is made in a worker, and answers as a short one does', async () => {
    const components = [[0.5, 1.5, 1], [-0.5, -1.5, -1], [0.5, -0.5, -5 / 3], [-0.5, 0.5, 5 / 3]] as const
    const measurements = Array.from({ length: 120 }, (_, i) => {
      const [lower, upper, shift] = components[i % 4] ?? components[0]
      return { position: D2.energy_invcm + shift * MU_B * 0.5 + 1e-3 * Math.sin(i), position_unc: 1e-3, m_lower: lower, m_upper: upper }
    })
    const { data } = await determined({ lines: [{ lower: S, upper: D2 }], unit: 'cm-1', model: 'linear', g_values: 'ls', g_s: 2, measurements })
    // 120 points of 1e-3 cm^-1 on shifts of about 1.4 Lorentz units leave 1.5e-4 T; the sine scatters less
    expect(Math.abs(data.field_tesla - 0.5)).toBeLessThan(1e-3)
    expect(data.residuals).toHaveLength(120)
    expect(data.residuals.every((one: Json) => one.field_without_tesla !== null)).toBe(true)
  })
})

describe('a polarisation that is not seen', () => {
  it('is told where a peak is named by it', async () => {
    const body = { lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', measurements: [{ position: 16972.73584, m_lower: 0.5, m_upper: -0.5 }, { position: 16973.49179, m_lower: 0.5, m_upper: 0.5 }] }
    expect(codes(await determined({ ...body, theta_deg: 0 }))).toContain('polarisation_not_seen')
    expect(codes(await determined(body))).not.toContain('polarisation_not_seen')
  })
})

describe('tables of residuals', () => {
  const body = { lines: [{ transition: 'Na-I.1~Na-I.3' }], unit: 'cm-1', measurements: [{ position: 16972.73584, position_unc: 0.006, m_lower: 0.5, m_upper: -0.5 }, { position: 16973.49179, position_unc: 0.002, q: 0 }, { position: 16973.99492, position_unc: 0.006 }] }

  it('csv, ndjson and arrow hold one row per measurement', async () => {
    const { data } = await determined(body)
    const csv = (await fit(body, '?format=csv')).text.trim().split(/\r?\n/)
    expect(csv).toHaveLength(4)
    expect(csv[0]?.split(',').slice(0, 4)).toEqual(['measurement', 'line', 'transition', 'position'])
    const rows = (await fit(body, '?format=ndjson')).text.trim().split('\n').map((line) => JSON.parse(line) as Json)
    expect(rows.slice(0, 3)).toEqual(data.residuals)
    expect(rows[3]).toMatchObject({ complete: true })
    const arrow = await fit(body, '?format=arrow')
    expect(arrow.headers['content-type']).toContain('arrow')
    expect(arrow.bytes.length).toBeGreaterThan(500)
  })
})

describe('wrong fits are refused with everything that is wrong', () => {
  const line = { transition: 'Na-I.1~Na-I.3' }
  const ok = { lines: [line], unit: 'cm-1', measurements: [{ position: 16973 }, { position: 16974 }] }
  const etalon = { free_spectral_range_invcm: 1, square_step: 10 }
  it.each<[string, unknown, number, string[]]>([
    ['another mode', { ...ok, mode: 'spectrum' }, 422, ['/mode spectrum_fit_not_built']],
    ['no unit', { ...ok, unit: undefined }, 400, ['/unit unit_not_applicable']],
    ['a medium for wavenumbers', { ...ok, medium: 'air' }, 400, ['/medium unit_not_applicable']],
    ['rings without etalon', { ...ok, unit: undefined, quantity: 'ring_radii' }, 400, ['/etalon etalon_malformed']],
    ['an etalon told twice', { ...ok, unit: undefined, quantity: 'ring_radii', etalon: { ...etalon, thickness_mm: 1 } }, 400, ['/etalon/free_spectral_range_invcm etalon_malformed']],
    ['an order without rings', { ...ok, measurements: [{ position: 16973, order: 1 }, { position: 16974 }] }, 400, ['/measurements/0/order unit_not_applicable']],
    ['uncertainty of some', { ...ok, measurements: [{ position: 16973, position_unc: 0.1 }, { position: 16974 }, { position: 16975 }] }, 400, ['/measurements/1/position_unc sigma_for_some', '/measurements/2/position_unc sigma_for_some']],
    ['uncertainties of zero', { ...ok, measurements: [{ position: 16973, position_unc: 0 }] }, 400, ['/measurements/0/position_unc sigma_not_positive']],
    ['a line that is not there', { ...ok, measurements: [{ line: 1, position: 16973 }] }, 400, ['/measurements/0/line no_such_line']],
    ['half an assignment', { ...ok, measurements: [{ position: 16973, m_lower: 0.5 }] }, 400, ['/measurements/0/m_upper assignment_malformed']],
    ['two assignments', { ...ok, measurements: [{ position: 16973, q: 1, group: 1 }] }, 400, ['/measurements/0/m_lower assignment_malformed']],
    ['a component that is not there', { ...ok, measurements: [{ position: 16973, m_lower: 0.5, m_upper: 2.5 }] }, 422, ['/measurements/0/m_lower no_such_component']],
    ['a q that is not there', { ...ok, measurements: [{ position: 16973, q: 2 }] }, 422, ['/measurements/0/q no_such_component']],
    ['a negative position', { ...ok, measurements: [{ position: -5 }] }, 400, ['/measurements/0/position spectral_not_positive']],
    ['a wavelength where air is none', { ...ok, unit: 'nm', measurements: [{ position: 150 }] }, 400, ['/measurements/0/position spectral_not_positive']],
    ['an unknown level', { ...ok, lines: [{ transition: 'Na-I.1~Na-I.9999' }] }, 404, ['/lines/0/transition level_unknown']],
    ['a forbidden line', { ...ok, lines: [{ transition: 'Na-I.2~Na-I.3', kind: 'E1' }] }, 422, ['/lines/0 transition_forbidden']],
    ['levels upside down', { ...ok, lines: [{ lower: D2, upper: S }] }, 422, ['/lines/0/upper/energy_invcm physics_impossible']],
    ['a term of two minds', { ...ok, lines: [{ lower: S, upper: D2, upper_others: [{ ...D1, l: 2, j: 1.5 }] }] }, 422, ['/lines/0/upper_others/0/l term_mixed', '/lines/0/upper_others/0/j term_mixed']],
    ['the intermediate model without the term', { ...ok, lines: [{ lower: S, upper: D2 }], model: 'intermediate' }, 422, ['/lines/0 term_incomplete']],
    ['a scale both free and known', { ...ok, scale: { free: true, unc: 0.1 } }, 400, ['/scale/unc scale_malformed']],
    ['a field that is sought', { ...ok, field: 1 }, 400, ['/field field_not_wanted']],
    ['g without a field', { ...ok, unknown: 'g', measurements: [{ position: 16973, m_lower: 0.5, m_upper: 0.5 }] }, 400, ['/field field_needed']],
    ['g of nothing named', { ...ok, unknown: 'g', field: '3furlong' }, 400, ['/field field_unit_unknown', '/measurements/0/m_lower assignment_needed', '/measurements/1/m_lower assignment_needed']],
    ['g of two lines', { ...ok, unknown: 'g', field: 1, lines: [line, line], measurements: [{ position: 16973, m_lower: 0.5, m_upper: 0.5 }] }, 400, ['/lines one_line_only']],
    ['g of J = 0', { ...ok, unknown: 'g', field: 1, free_g: 'both', lines: [{ lower: ENDS['1S0'], upper: ENDS['1P1'] }], measurements: [{ position: 23652, m_lower: 0, m_upper: 0 }] }, 422, ['/free_g g_of_j_zero']],
    ['several things at once', { ...ok, lines: [{ transition: 'Na-I.1~Na-I.9999' }, line], measurements: [{ line: 1, position: -1 }, { line: 7, position: 1 }] }, 400, ['/lines/0/transition level_unknown', '/measurements/0/position spectral_not_positive', '/measurements/1/line no_such_line']],
  ])('%s', async (_, body, status, faults) => {
    const reply = await fit(body)
    expect([reply.status, ...faultsOf(reply)], reply.text).toEqual([status, ...faults])
  })

  it('a line of wrong levels is told all of it at once', async () => {
    const reply = await fit({ ...ok, lines: [{ lower: { ...S, j: 2.5 }, upper: D2, lower_others: [{ ...S, l: 1 }] }] })
    expect([reply.status, ...faultsOf(reply).sort()]).toEqual([422, '/lines/0/lower/j term_impossible', '/lines/0/lower_others/0/l term_mixed'])
  })

  it('a search among too many components is told, with the cure', async () => {
    const term = (l: number, from: number, parity: string) => Array.from({ length: 31 }, (_, i) => ({ energy_invcm: from + 10 * i, s: 15, l, j: l - 15 + i, parity }))
    const [low, high] = [term(20, 0, 'even'), term(21, 30000, 'odd')]
    const reply = await fit({ lines: [{ lower: low[30], lower_others: low.slice(0, 30), upper: high[30], upper_others: high.slice(0, 30) }], unit: 'cm-1', measurements: [29999, 30000, 30001].map((position) => ({ position })) })
    expect([reply.status, reply.json.code], reply.text).toEqual([413, 'fit_too_large'])
    expect(reply.json.detail).toMatch(/m_lower/)
  })
})
