import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type Json, get, ask, faultsOf } from './helpers/client'

/** Components of a line in the linear model; the query begins after `?`. */
async function components(line: string, query: string): Promise<Json> {
  const reply = await get(`/transitions/${line}/components?model=linear&${query}`)
  expect(reply.status, reply.text).toBe(200)
  return reply.json.data
}

/** The line of a species that the window holds, by its id. */
async function lineIn(species: string, minNm: number, maxNm: number, more = ''): Promise<Json> {
  const reply = await get(`/transitions?species=${species}&wavelength_min_nm=${minNm}&wavelength_max_nm=${maxNm}&rules=rigorous${more}`)
  expect(reply.json.data, `lines of ${species} from ${minNm} to ${maxNm} nm`).toHaveLength(1)
  return reply.json.data[0] as Json
}

const of = (list: Json, name: string): number[] => list.map((row: Json) => row[name] as number)
const sum = (values: number[]): number => values.reduce((total, value) => total + value, 0)

describe('the sodium D lines at 1.5 T', () => {
  it('D1 has four components at +-4/3 and +-2/3 with g_s = 2, each q summing to 1', async () => {
    const d1 = await components('Na-I.1~Na-I.2', 'field=1.5T&g_values=ls&g_s=2')
    expect(d1.components).toHaveLength(4)
    expect(of(d1.components, 'q')).toEqual([-1, 0, 0, 1])
    for (const [i, shift] of [-4 / 3, -2 / 3, 2 / 3, 4 / 3].entries()) expect(d1.components[i]?.shift_lorentz).toBeCloseTo(shift, 14)
    expect(of(d1.components, 'strength')).toEqual([1, 0.5, 0.5, 1])
  })

  it('D2 has six components, sorted by q and shift, with the strengths 3/4 and 1/4 of sigma', async () => {
    const d2 = await components('Na-I.1~Na-I.3', 'field=1.5T&g_values=ls&g_s=2')
    expect(of(d2.components, 'q')).toEqual([-1, -1, 0, 0, 1, 1])
    for (const [i, shift] of [-5 / 3, -1, -1 / 3, 1 / 3, 1, 5 / 3].entries()) expect(d2.components[i]?.shift_lorentz).toBeCloseTo(shift, 14)
    for (const [i, strength] of [0.25, 0.75, 0.5, 0.5, 0.75, 0.25].entries()) expect(d2.components[i]?.strength).toBeCloseTo(strength, 15)
    expect(d2.components[0]).toMatchObject({ m_lower: 0.5, m_upper: -0.5, polarisation: 'sigma-', vanishes_by: null, stokes_q: null })
  })

  it('says that the linear law is 2.8 % off for 3p J = 1/2, and what that is for the line', async () => {
    const { validity } = await components('Na-I.1~Na-I.2', 'field=1.5T')
    const { upper, lower } = validity.levels as Json
    expect(upper).toMatchObject({ level: 'Na-I.2', missing_j: [] })
    // 0.00646 cm^-1 of 0.2331 cm^-1: second order between J = 1/2 and 3/2, 17.196 cm^-1 apart
    expect(upper?.error_invcm).toBeCloseTo(0.00645, 4)
    expect(upper?.relative_to_shift).toBeCloseTo(0.0277, 3)
    expect(upper?.relative_error).toBeCloseTo(0.0092, 4)
    expect(lower).toMatchObject({ status: 'valid', error_invcm: 0, field_limit_tesla: null })
    expect(validity.positions).toMatchObject({ status: 'valid', tolerance: 0.01 })
    expect(validity.strengths?.status).toBe('not_valid')
    expect(validity.sentence).toContain('2.8 %')
  })

  it('keeps the whole shape of a component', async () => {
    const reply = await get('/transitions/Na-I.1~Na-I.3/components?field=15kG&theta_deg=90&field_unc=10mT&model=linear')
    const { data, meta } = reply.json
    expect(data).toMatchObject({ transition: 'Na-I.1~Na-I.3', field_tesla: 1.5, model: 'linear', theta_deg: 90 })
    const first = data.components[0] as Json
    expect(Object.keys(first).sort()).toEqual(
      ['budget', 'derivative_invcm_per_tesla', 'frequency_thz', 'intensity', 'intensity_status', 'j_lower', 'j_upper', 'm_l_lower', 'm_l_upper', 'm_lower', 'm_s_lower', 'm_s_upper', 'm_upper', 'polarisation', 'q',
        'shift_ghz', 'shift_invcm', 'shift_lorentz', 'shift_mhz', 'shift_pm', 'stokes_q', 'stokes_v', 'strength', 'vanishes_by', 'wavelength_air_nm', 'wavelength_vac_nm', 'wavenumber_invcm', 'wavenumber_known_unc_invcm', 'wavenumber_unc_invcm'].sort(),
    )
    expect(first.shift_invcm).toBeCloseTo((first.shift_lorentz as number) * 1.5 * MU_B_OVER_HC_INVCM_PER_T, 14)
    expect(first.shift_ghz).toBe((first.shift_invcm as number) * 29.9792458)
    expect(first.wavenumber_invcm).toBe((data.centre?.wavenumber_invcm as number) + (first.shift_invcm as number))
    expect(first.wavelength_vac_nm).toBeCloseTo(1e7 / (first.wavenumber_invcm as number), 12)
    // wavelength grows where wavenumber falls
    expect(first.shift_pm).toBeGreaterThan(0)
    expect(first.shift_pm).toBeCloseTo(1000 * ((first.wavelength_air_nm as number) - (data.centre?.wavelength_air_nm as number)), 8)
    expect(of(first.budget, 'part')).toEqual(['energy_lower', 'energy_upper', 'g_lower', 'g_upper', 'field', 'constants'])
    expect(first.budget[4]).toMatchObject({ status: 'known', value_invcm: expect.closeTo(Math.abs(first.shift_lorentz as number) * 0.01 * MU_B_OVER_HC_INVCM_PER_T, 14) as number })
    expect(first).toMatchObject({ wavenumber_unc_invcm: null })
    expect(meta?.conventions).toMatchObject({ g_l: 1, normalisation: 'line: the strengths of each q sum to 1 at zero field.' })
  })

  it('says which model auto took', async () => {
    const auto = await get('/transitions/Na-I.1~Na-I.3/components?field=1.5T')
    // strengths are off by 3 % there
    expect([auto.json.meta.model, auto.json.data.validity.strengths.status]).toEqual(['intermediate', 'not_valid'])
    const linear = await get('/transitions/Na-I.1~Na-I.3/components?field=1.5T&model=linear')
    expect([linear.json.meta.model, linear.json.data.validity.strengths.status]).toEqual(['linear', 'not_valid'])
  })

  it('warns of the hyperfine structure that is left out, with its size beside that of the field', async () => {
    const sodium = await get('/transitions/Na-I.1~Na-I.2/components?field=0.3T&model=linear')
    const told = sodium.json.meta.warnings.filter((warning: { code: string }) => warning.code === 'hyperfine_ignored')
    expect(of(told, 'detail')).toHaveLength(2)
    // A of 3s, and 2.0023 x 13.996 GHz/T x 0.3 T
    expect(told[0].detail).toMatch(/Na-I\.1 has A = 885\.8130644 MHz for mass number 23; at this field g mu_B B \/ h is 8\.41 GHz/)
    const none = await get('/transitions/Ca-I.1~Ca-I.9/components?field=0.3T&model=linear')
    expect(of(none.json.meta.warnings, 'code')).not.toContain('hyperfine_ignored')
  })

  it('says where g_s does not reach: adopted values that were measured', async () => {
    const reply = await get('/transitions/Na-I.1~Na-I.3/components?field=1T&g_s=2')
    expect(reply.json.meta.warnings).toContainEqual({ code: 'g_s_not_applied', detail: expect.stringContaining('Na-I.1') as string })
    const coupled = await get('/transitions/Na-I.1~Na-I.3/components?field=1T&g_s=2&g_values=coupled')
    expect(of(coupled.json.meta.warnings, 'code')).not.toContain('g_s_not_applied')
  })

  it('gives no error, rather than 0, where an incomplete term says nothing', async () => {
    const { validity } = await components('Fe-I.21~Fe-I.30', 'field=1T')
    expect(validity.positions).toMatchObject({ status: 'unknown', error_invcm: null, relative_error: null })
    expect(validity.levels.lower).toMatchObject({ status: 'unknown', error_invcm: null, relative_to_shift: null })
  })

  it('takes either order of the levels and answers canonically', async () => {
    const [one, other] = [await components('Na-I.1~Na-I.3', 'field=0.3T'), await components('Na-I.3~Na-I.1', 'field=0.3T')]
    expect(other).toEqual(one)
    expect(one.transition).toBe('Na-I.1~Na-I.3')
  })
})

describe('classic patterns', () => {
  it('the red cadmium line, 1P1 - 1D2, is a normal triplet at 0 and +-1 Lorentz unit', async () => {
    const line = await lineIn('Cd-I', 643.7, 644.0)
    expect(line).toMatchObject({ pattern: 'normal', g_eff: 1 })
    const data = await components(line.id as string, 'field=1T')
    expect([...new Set(of(data.components, 'shift_lorentz'))].sort((a, b) => a - b)).toEqual([-1, 0, 1])
  })

  it('calcium 1S0 - 1P1 is a triplet of three components', async () => {
    const line = await lineIn('Ca-I', 422.6, 422.8)
    expect(line).toMatchObject({ lower: { term: { symbol: '1S0' } }, upper: { term: { symbol: '1P*1' } }, pattern: 'normal' })
    const data = await components(line.id as string, 'field=2T&g_values=ls')
    expect(of(data.components, 'shift_lorentz')).toEqual([-1, 0, 1])
    expect(of(data.components, 'shift_invcm')[2]).toBeCloseTo(2 * MU_B_OVER_HC_INVCM_PER_T, 14)
  })

  it('mercury 546.07 nm, 3P2 - 3S1, has nine components', async () => {
    const line = await lineIn('Hg-I', 546.0, 546.15)
    const data = await components(line.id as string, 'field=1T&g_values=ls&g_s=2')
    expect(data.components).toHaveLength(9)
    expect(of(data.components, 'shift_lorentz').map((shift) => Math.round(shift * 1e12) / 1e12)).toEqual([-2, -1.5, -1, -0.5, 0, 0.5, 1, 1.5, 2])
    const q = of(data.components, 'q')
    for (const group of [-1, 0, 1]) expect(sum(of(data.components, 'strength').filter((_, i) => q[i] === group))).toBeCloseTo(1, 14)
  })

  it('iron 557.6 nm, 5F1 - 5D0, does not split at g_s = 2, and hardly with the real g_s', async () => {
    const line = await lineIn('Fe-I', 557.5, 557.7)
    expect(line).toMatchObject({ pattern: 'unsplit' })
    const exact = await components(line.id as string, 'field=1T&g_values=ls&g_s=2')
    expect([...new Set(of(exact.components, 'shift_lorentz'))]).toEqual([0])
    const real = await components(line.id as string, 'field=1T&g_values=ls')
    const largest = Math.max(...of(real.components, 'shift_lorentz').map(Math.abs))
    // g(5F1) = 1 - (g_s - 1) = 2 - g_s
    expect(largest).toBeCloseTo(0.00231930436092, 13)
  })

  it('helium 1083 nm is three lines with 3, 7 and 9 components', async () => {
    const reply = await get('/transitions?species=He-I&wavelength_min_nm=1082.5&wavelength_max_nm=1083.5&medium=air')
    const lines = reply.json.data
    expect(lines.map((line: Json) => [line.lower?.term?.symbol, line.upper?.term?.symbol]).sort()).toEqual([['3S1', '3P*0'], ['3S1', '3P*1'], ['3S1', '3P*2']])
    const counts: number[] = []
    for (const line of lines as Json[]) counts.push((await components(line.id as string, 'field=0.1T')).components.filter((one: Json) => (one.strength as number) > 0).length)
    expect(counts.sort()).toEqual([3, 6, 9])
  })
})

describe('geometry', () => {
  it.each([0, 30, 90, 135])('a line sums to 1 at %d degrees', async (theta) => {
    const data = await components('Na-I.1~Na-I.3', `field=1T&theta_deg=${theta}`)
    expect(sum(of(data.components, 'intensity'))).toBeCloseTo(1, 13)
  })

  it('averaged over angle it is strength / 3, and Stokes members are null', async () => {
    const data = await components('Na-I.1~Na-I.3', 'field=1T')
    for (const one of data.components as Json[]) expect(one).toMatchObject({ intensity: expect.closeTo((one.strength as number) / 3, 15) as number, stokes_q: null, stokes_v: null })
  })

  it('along the field pi is not seen, and sigma+ turns counter-clockwise: V = I', async () => {
    const data = await components('Na-I.1~Na-I.3', 'field=1T&theta_deg=0')
    for (const one of data.components as Json[]) expect(one.stokes_v).toBeCloseTo((one.q as number) * (one.intensity as number), 15)
    expect(sum(of(data.components.filter((one: Json) => one.q === 0) as Json, 'intensity'))).toBe(0)
  })
})

describe('other kinds than E1', () => {
  it('an E2 line (Hg 3P0 - 3P2) has five components by q, no angular intensity and no g_eff', async () => {
    const { data } = (await get('/transitions/Hg-I.2~Hg-I.4')).json
    expect(data).toMatchObject({ kind: 'E2', g_eff: null, g_eff_status: 'not_applicable', verdict: { allowed: true, ls: null } })
    const e2 = await components('Hg-I.2~Hg-I.4', 'field=1T&theta_deg=30')
    expect(e2.components.map((one: Json) => [one.q, one.polarisation, one.strength])).toEqual([[-2, 'q=-2', 1], [-1, 'sigma-', 1], [0, 'pi', 1], [1, 'sigma+', 1], [2, 'q=+2', 1]])
    for (const one of e2.components as Json[]) expect(one).toMatchObject({ intensity: null, intensity_status: 'not_applicable', stokes_q: null })
  })

  it('M1 turns the sign of Stokes Q against E1 of the same J', async () => {
    const m1 = await components('Na-I.2~Na-I.3', 'field=0.1T&theta_deg=90&g_values=ls')
    const e1 = await components('Na-I.1~Na-I.3', 'field=0.1T&theta_deg=90&g_values=ls')
    const byM = (data: Json, sign: number) => Object.fromEntries((data.components as Json[]).map((one) => [`${String(one.m_lower)} ${String(one.m_upper)}`, sign * (one.stokes_q as number)]))
    expect(Object.keys(byM(m1, 1))).toHaveLength(6)
    expect(byM(m1, 1)).toEqual(byM(e1, -1))
  })
})

describe('forbidden pairs and refusals', () => {
  it('a forbidden pair is told with the rule that forbids it', async () => {
    const reply = await get('/transitions/Na-I.1~Na-I.4?kind=E1')
    expect(reply.status).toBe(200)
    const { verdict, g_eff, g_eff_status, pattern } = reply.json.data
    expect(verdict).toMatchObject({ allowed: false, rigorous: false })
    expect(verdict.rules.filter((rule: Json) => rule.verdict === 'fail').map((rule: Json) => rule.rule)).toEqual(['parity', 'l_zero_zero'])
    expect({ g_eff, g_eff_status, pattern }).toEqual({ g_eff: null, g_eff_status: 'not_applicable', pattern: null })
  })

  it.each([
    ['/transitions/Na-I.1~Na-I.4/components?field=1T&kind=E1', 'transition_forbidden', /parity/],
    ['/transitions/Na-I.1~K-I.2', 'species_differ', /one/],
    ['/transitions/Na-I.1~Na-I.1', 'zero_interval', /twice/],
    ['/transitions/C-II.1~C-II.1/components?field=1T', 'zero_interval', /twice/],
  ])('%s is 422 %s', async (at, code, says) => {
    const reply = await get(at)
    expect(reply.status).toBe(422)
    expect(reply.json.code).toBe(code)
    expect(reply.json.detail).toMatch(says)
  })

  it('levels of equal energy make no transition (C II 2s2 4f)', async () => {
    const levels = (await get('/levels?species=C-II&configuration=2s2.4f')).json.data
    expect(levels).toHaveLength(2)
    const reply = await get(`/transitions/${String(levels[0]?.id)}~${String(levels[1]?.id)}`)
    expect([reply.status, reply.json.code]).toEqual([422, 'zero_interval'])
  })

  it('LS values of a pair-coupled line are refused, coupled ones are not', async () => {
    const line = (await get('/transitions?species=Ne-I&wavelength_min_nm=640&wavelength_max_nm=640.5')).json.data[0] as Json
    const refused = await get(`/transitions/${String(line.id)}/components?field=1T&g_values=ls`)
    expect([refused.status, refused.json.code, ...faultsOf(refused)]).toEqual([422, 'no_ls_g', 'g_values no_ls_g'])
    const coupled = await components(line.id as string, 'field=1T&g_values=coupled')
    expect(coupled.validity?.positions).toMatchObject({ status: 'unknown', error_invcm: null })
  })

  it.each([
    ['/transitions/Na-I.1~Na-I.99', 404, 'level_unknown', /Na-I\.1[01]/],
    ['/transitions/Na-I.1', 400, 'transition_malformed', /~/],
    ['/transitions/Na-I.1~Na-I.3/components', 400, 'missing_parameter', /field/],
    ['/transitions/Na-I.1~Na-I.3/components?field=1T&theta_deg=200', 400, 'number_out_of_range', /180/],
  ])('%s is %d %s', async (at, status, code, says) => {
    const reply = await get(at)
    expect([reply.status, reply.json.code]).toEqual([status, code])
    expect(JSON.stringify(reply.json)).toMatch(says)
  })

  it('components of an M1 line that cross zero wavenumber have no wavelength, and a warning says so', async () => {
    const reply = await get('/transitions/Na-I.2~Na-I.3/components?field=100T')
    expect(reply.status).toBe(200)
    expect(of(reply.json.meta.warnings, 'code')).toContain('level_crossing')
    const crossed = reply.json.data.components.filter((one: Json) => (one.wavenumber_invcm as number) <= 0) as Json[]
    expect(crossed.length).toBeGreaterThan(0)
    for (const one of crossed) expect(one).toMatchObject({ wavelength_vac_nm: null, wavelength_air_nm: null, shift_pm: null })
  })

  it('nothing splits at zero field, and the Lorentz shifts stay told', async () => {
    const data = await components('Na-I.1~Na-I.3', 'field=0')
    for (const one of data.components as Json[]) expect(one).toMatchObject({ shift_invcm: 0, shift_ghz: 0, shift_pm: 0 })
    expect(data.components[0]?.shift_lorentz).toBeLessThan(-1.6)
    expect(data.validity?.positions).toMatchObject({ status: 'valid' })
  })
})

describe('judging two levels given in the request', () => {
  const lower = { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }
  const upper = { energy_invcm: 18000, s: 0, l: 1, j: 1, parity: 'odd' }
  const judge = (body: unknown) => ask('post', '/transitions/judge', { body })

  it('gives a transition without ids', async () => {
    const reply = await judge({ lower, upper })
    expect(reply.status).toBe(200)
    expect(reply.json.data).toMatchObject({
      id: null, kind: 'E1', g_eff: 1, pattern: 'normal', verdict: { allowed: true, ls: true },
      lower: { id: null, species: null, g_j: { adopted: null, status: 'not_applicable' } }, upper: { term: { symbol: '1P*1', unicode: '¹P°₁' } },
    })
    expect(reply.json.data.wavelength_vac_nm).toBeCloseTo(1e7 / 18000, 10)
  })

  it('adopts a g_j that is given', async () => {
    const reply = await judge({ lower, upper: { ...upper, g_j: 1.25 } })
    expect(reply.json.data).toMatchObject({ g_eff: 1.25, upper: { g_j: { adopted: 1.25, basis: 'chosen', coupled: 1 } } })
  })

  it('exchanges levels given the wrong way round, and says so', async () => {
    const reply = await judge({ lower: upper, upper: lower })
    expect(reply.json.data.lower?.term?.symbol).toBe('1S0')
    expect(of(reply.json.meta.warnings, 'code')).toEqual(['levels_exchanged'])
  })

  it('lists every impossibility at once, each by its place', async () => {
    const reply = await judge({ lower: { ...lower, j: 1 }, upper: { ...upper, energy_invcm: 0, j: 0.5 } })
    expect(reply.status).toBe(422)
    expect(faultsOf(reply)).toEqual(['/lower/j term_impossible', '/upper/j term_impossible', '/upper/energy_invcm zero_interval'])
  })

  it('refuses members that an inline level does not have', async () => {
    const reply = await judge({ lower: { ...lower, configuration: '3s' }, upper })
    expect([reply.status, ...faultsOf(reply)]).toEqual([400, '/lower/configuration unknown_field'])
  })
})
