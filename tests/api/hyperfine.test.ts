import { describe, expect, it } from 'vitest'
import { get, faultsOf, type Json } from './helpers/client'

const of = (list: Json, name: string): number[] => list.map((row: Json) => row[name] as number)
const codes = (reply: Json): string[] => of(reply.json.meta.warnings, 'code') as unknown as string[]
const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0)

// CODATA 2022, MHz/T
const MU_B = 13996.2449171
const A_RB = 3417.341305452145

/** J = 1/2, I = 3/2: G. Breit & I. I. Rabi, Phys. Rev. 38, 2082 (1931). MHz from the centre of gravity. */
function breitRabi(f: number, m: number, field: number, gJ: number, gI: number): number {
  const interval = 2 * A_RB
  const x = ((gJ - gI) * MU_B * field) / interval
  const common = -interval / 8 + gI * MU_B * m * field
  if (Math.abs(m) === 2) return common + (interval / 2) * (1 + Math.sign(m) * x)
  return common + ((f === 2 ? 1 : -1) * interval * Math.sqrt(1 + m * x + x * x)) / 2
}

async function answer(at: string): Promise<Json> {
  const reply = await get(at)
  expect(reply.status, reply.text).toBe(200)
  return reply.json
}

describe('the ground level of 87Rb up to 1 T', () => {
  it.each(['0G', '3.229G', '100G', '1kG', '0.5T', '1T'])('at %s is that of Breit and Rabi', async (field) => {
    const { data, meta } = await answer(`/levels/Rb-I.1/sublevels?field=${field}&hyperfine=true&isotope=87`)
    expect(meta).toMatchObject({ model: 'hyperfine', isotope: { mass_number: 87, nuclear_spin: 1.5, g_i: -0.0009951414, a_mhz: A_RB } })
    expect(meta.conventions.energy_origin).toContain('centre of gravity')
    expect(data).toHaveLength(8)
    const [gJ, tesla] = [meta.g_j as number, meta.field_tesla as number]
    for (const row of data as Json[]) {
      // two routes of rounding of some 3e4 MHz
      expect(Math.abs((row.energy_mhz as number) - breitRabi(row.f as number, row.m_f as number, tesla, gJ, -0.0009951414))).toBeLessThan(1e-9)
      expect(row.m_j + row.m_i).toBe(row.m_f)
      expect(row.energy_invcm).toBeCloseTo((row.energy_mhz as number) / 29979.2458, 14)
    }
    expect((data as Json[]).map((row) => `${row.f} ${row.m_f}`).sort()).toEqual(['1 -1', '1 0', '1 1', '2 -1', '2 -2', '2 0', '2 1', '2 2'])
  })

  it('tells slopes, and amplitudes on request', async () => {
    const { data } = await answer('/levels/Rb-I.1/sublevels?field=0.5T&hyperfine=true&isotope=87&amplitudes=true')
    const [low, high] = await Promise.all(['0.4999T', '0.5001T'].map((field) => answer(`/levels/Rb-I.1/sublevels?field=${field}&hyperfine=true&isotope=87`)))
    for (const [i, row] of (data as Json[]).entries()) {
      // h^2/6 of a third derivative below 1e5 MHz/T^3, and rounding of 1e-11 MHz over 2e-4 T
      expect(row.derivative_mhz_per_tesla).toBeCloseTo(((high.data[i].energy_mhz as number) - (low.data[i].energy_mhz as number)) / 2e-4, 2)
      expect(sum((row.amplitudes as Json[]).map((one) => (one.amplitude as number) ** 2))).toBeCloseTo(1, 13)
    }
    const csv = await get('/levels/Rb-I.1/sublevels?field=1T&hyperfine=true&isotope=87&format=csv')
    expect(csv.text.split('\r\n')[0]).toBe('mass_number,f,m_f,m_j,m_i,shift_mhz,energy_mhz,energy_invcm,derivative_mhz_per_tesla')
  })

  it('has the pair (1,-1) - (2,+1) stationary near 3.229 G', async () => {
    // D. M. Harber et al., Phys. Rev. A 66, 053616 (2002): 3.228917 G
    const { data } = await answer('/levels/Rb-I.1/crossings?a=2,1&b=1,-1&from=0G&to=10G&isotope=87&hyperfine=true')
    expect(data).toMatchObject({ level: 'Rb-I.1', mass_number: 87, a: { name: 'F = 2, m_F = 1', f: 2, j: null, m: 1 }, crossings: [], anticrossings: [] })
    expect(data.stationary).toHaveLength(1)
    const [point] = data.stationary as Json[]
    expect(Math.abs((point.field_gauss as number) - 3.228917)).toBeLessThan(0.001)
    expect(point.kind).toBe('minimum')
    // 431.36 Hz/G^2 there, the second derivative twice that: Harber et al., as above
    expect((point.curvature_mhz_per_tesla2 as number) / 2).toBeCloseTo(43136, -2)
    expect(point.difference_mhz).toBeCloseTo(6834.678, 2)
  })

  it('names the parameter of a sublevel that is not there', async () => {
    const reply = await get('/levels/Rb-I.1/crossings?a=3,1&b=1,-1&to=10G&isotope=87&hyperfine=true')
    expect([reply.status, ...faultsOf(reply)]).toEqual([422, 'a no_such_sublevel'])
    const twice = await get('/levels/Rb-I.1/crossings?a=1,1&b=1,1&to=10G&isotope=87&hyperfine=true')
    expect([twice.status, ...faultsOf(twice)]).toEqual([422, 'b same_sublevel'])
    const malformed = await get('/levels/Rb-I.1/crossings?a=1&b=1,x&from=10G&to=1G')
    expect([malformed.status, ...faultsOf(malformed)]).toEqual([400, 'a sublevel_malformed', 'b half_integer_malformed'])
    const reversed = await get('/levels/Rb-I.1/crossings?a=1,1&b=1,0&from=10G&to=1G&hyperfine=true')
    expect([reversed.status, ...faultsOf(reversed)]).toEqual([400, 'to range_reversed'])
  })
})

describe('components of a line with nuclear spin', () => {
  it('sum to 1 over the line, stand at their detunings, and name their origin', async () => {
    const { data, meta } = await answer('/transitions/Rb-I.1~Rb-I.3/components?field=3.229G&hyperfine=true&isotope=87&theta_deg=90&field_unc=0.1uT')
    expect(data).toMatchObject({ model: 'hyperfine', listed_abundance_percent: null, isotopes: [{ mass_number: 87, weight: 1, a_lower_mhz: A_RB, a_upper_mhz: 84.7185, b_upper_mhz: 12.4965, shift_mhz: 0, shift_status: 'unknown' }] })
    expect(data.field_gauss).toBeCloseTo(3.229, 12)
    expect(meta.conventions.detuning).toContain('centres of gravity')
    const components = data.components as Json[]
    expect(sum(of(components, 'strength'))).toBeCloseTo(1, 12)
    for (const q of [-1, 0, 1]) expect(sum(of(components.filter((one) => one.q === q), 'strength'))).toBeCloseTo(1 / 3, 12)
    // at right angles to the field as at any angle the line's intensity sums to 1
    expect(sum(of(components, 'intensity'))).toBeCloseTo(1, 12)
    const cycling = components.find((one) => one.f_lower === 2 && one.m_f_lower === 2 && one.f_upper === 3 && one.m_f_upper === 3) as Json
    // F = 2, m = 2 and F = 3, m = 3 are pure: 3/4 A and 9/4 A + B/4 of theirs, and mu_B/h B (g_J' 3/2 - g_J/2)
    // the measured g of 5p J = 3/2, 1.3362(13), does not displace the LS value
    const [gUpper, gLower] = [1.3341064347869733, 2.00233113]
    expect(cycling.detuning_mhz).toBeCloseTo((9 / 4) * 84.7185 + 12.4965 / 4 - (3 / 4) * A_RB + MU_B * 3.229e-4 * (1.5 * gUpper - 0.5 * gLower), 2)
    // of the third that q = +1 has: 3/4 of m_J = 1/2 to 3/2, and a quarter of that for each m_I
    expect(cycling.strength).toBeCloseTo(1 / 16, 12)
    expect(cycling.shift_invcm).toBeCloseTo((cycling.detuning_mhz as number) / 29979.2458, 12)
    expect(of(cycling.budget, 'part')).toEqual(['a_lower', 'b_lower', 'g_lower', 'a_upper', 'b_upper', 'g_upper', 'field', 'constants'])
    // dE/dA = I J of the stretched state, 9/4 x 0.002 MHz; dE/dB = 1/4
    expect(cycling.budget[3].value_mhz).toBeCloseTo((9 / 4) * 0.002, 10)
    expect(cycling.budget[4].value_mhz).toBeCloseTo(0.0037 / 4, 8)
  })

  it('mix the isotopes by abundance, and say what the table does not hold', async () => {
    const reply = await get('/transitions/Rb-I.1~Rb-I.2/components?field=100G&hyperfine=true&isotope=natural')
    const { data } = reply.json
    expect(of(data.isotopes, 'mass_number')).toEqual([85, 87])
    expect(of(data.isotopes, 'weight')[0]).toBeCloseTo(0.7217, 12)
    expect(data.listed_abundance_percent).toBeCloseTo(100, 12)
    for (const isotope of data.isotopes as Json[]) expect(sum(of((data.components as Json[]).filter((one) => one.mass_number === isotope.mass_number), 'strength'))).toBeCloseTo(1, 12)
    expect(sum(of(data.components, 'intensity'))).toBeCloseTo(1, 12)
    expect(codes(reply)).toEqual(expect.arrayContaining(['isotope_shift_unknown', 'g_i_unknown']))
    // isotopes without spin add the plain pattern; those that the table does not list are made up for
    const calcium = await get('/transitions/Ca-I.1~Ca-I.9/components?field=1T&hyperfine=true&isotope=natural')
    expect(codes(calcium)).toEqual(expect.arrayContaining(['abundance_incomplete', 'hyperfine_constants_missing', 'isotope_shift_unknown']))
    expect((calcium.json.data.components as Json[]).filter((one) => one.mass_number === 40)).toHaveLength(3)
  })

  it('are given as tables too', async () => {
    const csv = await get('/transitions/Na-I.1~Na-I.2/components?field=100G&hyperfine=true&format=csv')
    expect(csv.status, csv.text).toBe(200)
    expect(csv.text.split('\r\n')[0]).toMatch(/^mass_number,f_lower,m_f_lower,f_upper,m_f_upper,q,polarisation,m_j_lower,m_i_lower,m_j_upper,m_i_upper,detuning_mhz,/)
    const lines = (await get('/transitions/Na-I.1~Na-I.2/components?field=100G&hyperfine=true&format=ndjson')).text.trim().split('\n')
    expect(JSON.parse(lines.at(-1) ?? '{}')).toMatchObject({ complete: true, meta: { model: 'hyperfine' } })
    const arrow = await get('/transitions/Na-I.1~Na-I.2/components?field=100G&hyperfine=true&format=arrow')
    expect(arrow.headers['content-type']).toContain('arrow')
  })

  it('say which isotope was taken, and warn where J itself is mixed', async () => {
    const small = await get('/transitions/Na-I.1~Na-I.2/components?field=100G&hyperfine=true')
    expect(small.json.data.isotopes).toMatchObject([{ mass_number: 23, shift_status: 'not_applicable' }])
    expect(codes(small)).toContain('isotope_chosen')
    expect(codes(small)).not.toContain('j_mixing_ignored')
    const large = await get('/transitions/Na-I.1~Na-I.2/components?field=20T&hyperfine=true')
    expect(codes(large)).toContain('j_mixing_ignored')
  })

  it.each([
    ['/levels/Rb-I.1/sublevels?field=1T&hyperfine=true', 422, 'isotope isotope_ambiguous', /85, 87/],
    ['/levels/Rb-I.1/sublevels?field=1T&hyperfine=true&isotope=86', 422, 'isotope isotope_unknown', /85, 87/],
    ['/levels/Rb-I.1/sublevels?field=1T&isotope=87', 400, 'isotope isotope_without_hyperfine', /hyperfine=true/],
    ['/levels/Rb-I.1/sublevels?field=1T&hyperfine=true&isotope=natural', 400, 'isotope number_malformed', /whole number/],
    ['/levels/K-I.1/sublevels?field=1T&hyperfine=true&isotope=41', 422, 'isotope hyperfine_unknown', /39/],
    ['/levels/Fe-I.1/sublevels?field=1T&hyperfine=true', 422, 'hyperfine hyperfine_unknown', /no hyperfine constants/],
    ['/transitions/Na-I.1~Na-I.2/components?field=1T&hyperfine=true&model=intermediate', 400, 'model models_conflict', /one J/],
    ['/transitions/Na-I.1~Na-I.2/components?field=1T&hyperfine=true&diamagnetic=true', 400, 'diamagnetic models_conflict', /quadratic/],
    ['/transitions/Na-I.1~Na-I.2/components?field=1T&hyperfine=true&isotope=twenty', 400, 'isotope number_malformed', /natural/],
  ])('%s is %i %s', async (at, status, fault, says) => {
    const reply = await get(at)
    expect([reply.status, ...faultsOf(reply)]).toEqual([status, fault])
    expect(reply.json.errors[0].detail).toMatch(says)
  })

  it('an isotope without spin has the plain sublevels', async () => {
    const { data } = await answer('/levels/Ca-I.9/sublevels?field=1T&hyperfine=true&isotope=40')
    expect((data as Json[]).map((row) => [row.f, row.m_f, row.m_j, row.m_i])).toEqual([[1, -1, -1, 0], [1, 0, 0, 0], [1, 1, 1, 0]])
  })
})
