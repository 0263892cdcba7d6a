import { describe, expect, it } from 'vitest'
import { ask, faultsOf, get, type Json } from './helpers/client'

describe('a bare term symbol', () => {
  it.each([
    ['2P*3-2', { symbol: '2P*3/2', unicode: '²P°₃/₂', multiplicity: 2, s: 0.5, l: 1, j: 1.5, possible_j: [0.5, 1.5], parity: 'odd', degeneracy: 4, g_j: { ls: 1.3341064347869733, ls_exact: '4/3', status: 'ok' } }],
    ['5D4', { symbol: '5D4', multiplicity: 5, s: 2, l: 2, j: 4, parity: null, degeneracy: 9, g_j: { ls_exact: '3/2', status: 'ok' } }],
    ['%C2%B2P%C2%B0%E2%82%83%2F%E2%82%82', { symbol: '2P*3/2' }],
    ['1S0', { j: 0, degeneracy: 1, g_j: { ls: null, ls_exact: null, status: 'not_applicable' } }],
    ['z5P*', { label: 'z', symbol: '5P*', j: null, degeneracy: 15, possible_j: [1, 2, 3], g_j: { ls: null, status: 'not_applicable' } }],
    ['2[3-2]*2', { symbol: '2[3/2]*2', s: null, l: null, multiplicity: null, j: 2, g_j: { ls: null, status: 'unknown' } }],
  ])('%s', async (symbol, expected) => {
    const reply = await get(`/terms/${symbol}`)
    expect(reply.status, reply.text).toBe(200)
    expect(reply.json.data).toMatchObject(expected)
  })

  it('takes another g_s', async () => {
    expect((await get('/terms/2P*3-2?g_s=2')).json.data.g_j).toEqual({ ls: 4 / 3, ls_exact: '4/3', status: 'ok' })
  })

  it.each([
    ['2P*5-2', 422, 'term_impossible', /1\/2 or 3\/2/],
    ['2J1-2', 400, 'term_malformed', /J/],
    ['P3', 400, 'term_malformed', /multiplicity/],
  ])('%s is refused: %d %s', async (symbol, status, code, says) => {
    const reply = await get(`/terms/${symbol}`)
    expect([reply.status, reply.json.code]).toEqual([status, code])
    expect(reply.json.detail).toMatch(says)
  })
})

describe('conversion', () => {
  it('keeps the number given to the bit and comes back to it', async () => {
    const there = (await get('/wavelengths/convert?value=589.158325&from=vacuum_nm&to=air_nm')).json.data
    expect(there).toMatchObject({ wavelength_vac_nm: 589.158325, result_status: 'ok', formula: 'ciddor1996' })
    // (n - 1) of standard air near the D lines is 2.77e-4
    expect((589.158325 - (there.result as number)) / 589.158325).toBeCloseTo(2.77e-4, 6)
    const back = (await get(`/wavelengths/convert?value=${String(there.result)}&from=air_nm&to=vacuum_nm`)).json.data
    expect(back.result).toBeCloseTo(589.158325, 12)
  })

  it('follows the exact chain h, c, e', async () => {
    const { data } = (await get('/wavelengths/convert?value=1&from=energy_ev&to=wavenumber_invcm')).json
    expect(data.result).toBeCloseTo(8065.543937, 6)
    expect(data.frequency_thz).toBeCloseTo(241.7989242, 7)
  })

  it.each([
    ['ciddor1996', 'P. E. Ciddor'],
    ['peck_reeder1972', 'Peck'],
    ['edlen1966', 'Edlén'],
  ])('names its formula: %s', async (formula, author) => {
    const reply = await get(`/wavelengths/convert?value=500&from=vacuum_nm&to=air_nm&formula=${formula}`)
    expect(reply.json.meta?.conventions?.air).toContain(author)
    expect(reply.json.data.result).toBeCloseTo(499.8605, 3)
  })

  it('below 200 nm air is not applicable: null as an answer, 422 as a question', async () => {
    expect((await get('/wavelengths/convert?value=150&from=vacuum_nm&to=air_nm')).json.data).toMatchObject({ result: null, result_status: 'not_applicable' })
    const asked = await get('/wavelengths/convert?value=150&from=air_nm&to=vacuum_nm')
    expect([asked.status, asked.json.code]).toEqual([422, 'air_not_applicable'])
  })

  it('warns where the formula is extrapolated', async () => {
    const reply = await get('/wavelengths/convert?value=2500&from=vacuum_nm&to=air_nm')
    expect(reply.json.meta.warnings.map((warning: Json) => warning.code)).toEqual(['air_extrapolated'])
  })

  it.each(['value=-1&from=air_nm&to=vacuum_nm', 'value=abc&from=air_nm&to=vacuum_nm', 'value=1&from=parsec&to=air_nm', 'from=air_nm&to=vacuum_nm'])('refuses %s', async (query) => {
    const reply = await get(`/wavelengths/convert?${query}`)
    expect(reply.status).toBe(400)
    expect(faultsOf(reply)).toHaveLength(1)
  })
})

describe('sublevels of a term given in the request', () => {
  const half = { energy_invcm: 16956.17025, s: 0.5, l: 1, j: 0.5, parity: 'odd' }
  const threeHalves = { energy_invcm: 16973.36619, s: 0.5, l: 1, j: 1.5, parity: 'odd' }
  const compute = (body: unknown) => ask('post', '/sublevels', { body })

  it('are [field][state], states by m then upwards', async () => {
    const reply = await compute({ levels: [threeHalves, half], field: { values: [0, 1.5], unit: 'T' }, model: 'linear', g_s: 2 })
    expect(reply.status, reply.text).toBe(200)
    const { data } = reply.json
    expect(data).toMatchObject({ m: [-1.5, -0.5, -0.5, 0.5, 0.5, 1.5], j: [1.5, 0.5, 1.5, 0.5, 1.5, 1.5], m_l: Array(6).fill(null), m_s: Array(6).fill(null) })
    expect(data.energies_invcm[0]).toEqual([16973.36619, 16956.17025, 16973.36619, 16956.17025, 16973.36619, 16973.36619])
    const slope = data.derivatives[1]?.[5] as unknown as number
    expect(slope).toBeCloseTo(0.46686447719 * 2, 14)
    expect(data.energies_invcm[1]?.[5]).toBe(16973.36619 + slope * 1.5)
    expect(reply.json.meta).toMatchObject({ model: 'linear', warnings: [] })
  })

  it('takes one field as text or as a number in tesla', async () => {
    const [text, number] = [await compute({ levels: [half], field: '15kG' }), await compute({ levels: [half], field: 1.5 })]
    expect(text.json.data).toEqual(number.json.data)
    expect(text.json.meta.warnings.map((warning: Json) => warning.code)).toEqual(['term_incomplete'])
  })

  it.each([
    [{ levels: [half, { ...threeHalves, l: 2 }], field: 1 }, 422, ['/levels/1/l term_mixed']],
    [{ levels: [half, half], field: 1 }, 422, ['/levels/1/j term_mixed']],
    [{ levels: [{ ...half, j: 2.5 }], field: 1 }, 422, ['/levels/0/j term_impossible']],
    [{ levels: [half], field: 1, model: 'intermediate' }, 422, ['/levels term_incomplete']],
    [{ levels: [half], field: '3furlong' }, 400, ['/field field_unit_unknown']],
    [{ levels: [half], field: { values: [1, 20000], unit: 'T' } }, 400, ['/field/values/1 field_too_large']],
    [{ level: { j: 0.5 }, nucleus: { i: 1.5, a_mhz: 885.8 }, field: 1 }, 422, ['/level/g_j g_unknown']],
    [{ level: { j: 0, g_j: 1 }, nucleus: { i: 1.5, a_mhz: 885.8 }, field: 1 }, 422, ['/level/g_j g_impossible']],
    [{ level: { j: 0.3, g_j: 2 }, nucleus: { i: 1.5, a_mhz: 885.8 }, field: 1 }, 400, ['/level/j half_integer_malformed']],
  ])('refuses %j', async (body, status, faults) => {
    const reply = await compute(body)
    expect([reply.status, ...faultsOf(reply)]).toEqual([status, ...faults])
  })

  it('says where the answer would be too large', async () => {
    const levels = Array.from({ length: 40 }, (_, i) => ({ energy_invcm: i, s: 25, l: 25, j: i + 10, parity: 'even' }))
    const reply = await compute({ levels, field: { values: Array.from({ length: 10_000 }, () => 1), unit: 'T' } })
    expect([reply.status, reply.json.code]).toEqual([413, 'answer_too_large'])
  })
})
