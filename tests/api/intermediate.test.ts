import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { ask, faultsOf, get, type Json } from './helpers/client'

const of = (list: Json, name: string): number[] => list.map((row: Json) => row[name] as number)
const codes = (reply: Json): string[] => of(reply.json.meta.warnings, 'code') as unknown as string[]
const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0)

async function answer(at: string): Promise<Json> {
  const reply = await get(at)
  expect(reply.status, reply.text).toBe(200)
  return reply.json
}

describe('the lithium line at 670.8 nm from 0 to 5 T', () => {
  // 2s 2S - 2p 2P*: the fine structure of 2p is 0.335 cm^-1, mu_B B as much at 0.72 T
  const [d1, d2] = ['Li-I.1~Li-I.2', 'Li-I.1~Li-I.3']
  const pattern = async (field: string) => {
    const both = await Promise.all([d1, d2].map((line) => answer(`/transitions/${line}/components?field=${field}&model=intermediate&g_values=ls&g_s=2`)))
    return both.flatMap((one) => one.data.components as Json[])
  }

  it('is the anomalous pattern of both lines at small field', async () => {
    for (const line of [d1, d2]) {
      const [linear, whole] = await Promise.all(['linear', 'intermediate'].map((model) => answer(`/transitions/${line}/components?field=1uT&model=${model}&g_values=ls&g_s=2`)))
      expect(whole.data.components).toHaveLength(linear.data.components.length)
      for (const [i, one] of (whole.data.components as Json[]).entries()) {
        const other = linear.data.components[i]
        // beyond linear by mu_B B over the fine structure, 1.4e-6
        expect(one.shift_lorentz).toBeCloseTo(other.shift_lorentz as number, 5)
        expect(one.strength).toBeCloseTo(other.strength as number, 5)
        expect([one.m_lower, one.m_upper]).toEqual([other.m_lower, other.m_upper])
      }
    }
  })

  it('becomes a triplet: at 5 T all strength lies within 0.13 cm^-1 of three places one Lorentz unit apart', async () => {
    const components = await pattern('5T')
    const lorentz = 5 * MU_B_OVER_HC_INVCM_PER_T
    const centre = 14903.648 + 0.335 * (2 / 3)
    for (const q of [-1, 0, 1]) {
      const own = components.filter((one) => one.q === q && one.strength > 0.01)
      // what is left of the fine structure: M_L M_S of 2/3 x 0.335 cm^-1, and 0.01 of second order
      for (const one of own) expect(Math.abs((one.wavenumber_invcm as number) - centre - q * lorentz), `q ${q}`).toBeLessThan(0.13)
    }
    // Condon & Shortley, ch. XVI: at high field Delta M_S = 0, so the strong components keep M_S and change M_L by q
    for (const one of components.filter((row) => row.strength > 0.05)) expect([one.m_s_upper, (one.m_l_upper as number) - (one.m_l_lower as number)]).toEqual([one.m_s_lower, one.q])
  })

  it('keeps the strength of each q over the multiplet while the lines exchange it', async () => {
    for (const field of ['0.3T', '1T', '5T']) {
      const shares = [1 / 3, 2 / 3]
      const both = await Promise.all([d1, d2].map((line) => answer(`/transitions/${line}/components?field=${field}&model=intermediate`)))
      for (const q of [-1, 0, 1]) {
        const whole = both.map((one, i) => (shares[i] ?? 0) * sum(of((one.data.components as Json[]).filter((row) => row.q === q), 'strength')))
        expect(sum(whole)).toBeCloseTo(1, 12)
      }
    }
  })

  it('tells derivatives that are those of its own positions', async () => {
    const step = 1e-4
    const [at, below, above] = await Promise.all([0.7, 0.7 - step, 0.7 + step].map((field) => answer(`/transitions/${d2}/components?field=${field}&model=intermediate`)))
    const find = (reply: Json, one: Json) => (reply.data.components as Json[]).find((row) => row.m_lower === one.m_lower && row.m_upper === one.m_upper) as Json
    for (const one of at.data.components as Json[]) {
      const slope = ((find(above, one).shift_invcm as number) - (find(below, one).shift_invcm as number)) / (2 * step)
      // a central difference of 1e-4 T errs by h^2/6 of the third derivative, below 1e-7; rounding 1e-15/1e-4
      expect(one.derivative_invcm_per_tesla).toBeCloseTo(slope, 6)
    }
  })

  it('auto takes the model that the errors ask for, and names it', async () => {
    const [small, large] = [await get(`/transitions/${d1}/components?field=1G`), await get(`/transitions/${d1}/components?field=1T`)]
    expect([small.json.data.model, small.json.meta.model]).toEqual(['linear', 'linear'])
    expect([large.json.data.model, large.json.meta.model]).toEqual(['intermediate', 'intermediate'])
    expect(large.json.data.validity.positions).toMatchObject({ status: 'not_valid', tolerance: 0.01 })
    // 1 % of the tolerance asked: it passes earlier
    const strict = await answer(`/transitions/${d1}/components?field=1G&tolerance=0.0001`)
    expect(strict.data.model).toBe('intermediate')
    const [limit, sooner] = [small.json.data.validity.positions.field_limit_tesla as number, strict.data.validity.positions.field_limit_tesla as number]
    expect(sooner).toBeGreaterThan(0)
    expect(sooner).toBeLessThan(limit)
  })

  it('the field limit is where the error is the tolerance', async () => {
    const { validity } = (await answer(`/transitions/${d1}/components?field=1T`)).data
    for (const aspect of ['positions', 'strengths'] as const) {
      const limit = validity[aspect].field_limit_tesla as number
      const there = (await answer(`/transitions/${d1}/components?field=${limit}T`)).data.validity[aspect]
      // the root is told to 1e-12 of the field
      expect(there.relative_error, aspect).toBeCloseTo(0.01, 9)
    }
    // strengths mix in first order, so the centre of both lines seen in one is displaced at any field: physics of He I 1083 nm, here of lithium
    expect(validity.blend.field_limit_tesla).toBe(0)
    const small = (await answer(`/transitions/${d1}/components?field=1G`)).data.validity.blend
    expect(small).toMatchObject({ status: 'not_valid', tolerance: 0.01 })
  })

  it('names the lines that blend with it', async () => {
    const { blend } = (await answer(`/transitions/${d1}/components?field=1T`)).data.validity
    // 0.335 cm^-1 is a forty-thousandth of the wavenumber
    expect(blend.lines).toEqual([{ transition: d1, j_lower: 0.5, j_upper: 0.5 }, { transition: d2, j_lower: 0.5, j_upper: 1.5 }])
    const sodium = (await answer('/transitions/Na-I.1~Na-I.2/components?field=1T')).data.validity
    expect(sodium.blend.lines).toHaveLength(1)
  })

  it('gives every part of the budget, the constants with it', async () => {
    const { components } = (await answer(`/transitions/${d2}/components?field=1T&model=intermediate&field_unc=1mT`)).data
    for (const one of components as Json[]) {
      expect(of(one.budget, 'part')).toEqual(['energy_lower', 'energy_upper', 'g_lower', 'g_upper', 'field', 'constants'])
      expect(one.budget[4].value_invcm).toBeCloseTo(Math.abs(one.derivative_invcm_per_tesla as number) * 1e-3, 12)
    }
  })
})

describe('what the intermediate model says of itself', () => {
  it('a shift in Lorentz units does not exist at zero field', async () => {
    const { components } = (await answer('/transitions/Na-I.1~Na-I.3/components?field=0&model=intermediate')).data
    expect(components.map((one: Json) => [one.shift_lorentz, one.shift_invcm])).toEqual(Array(6).fill([null, 0]))
    expect(sum(of(components, 'strength'))).toBeCloseTo(3, 12)
  })

  it('an incomplete term is refused with the J that is missing, and left linear by auto with a warning', async () => {
    const refused = await get('/transitions/Fe-I.21~Fe-I.30/components?field=1T&model=intermediate')
    expect([refused.status, refused.json.code, ...faultsOf(refused)]).toEqual([422, 'term_incomplete', 'model term_incomplete'])
    expect(refused.json.detail).toMatch(/lacks J = /)
    const auto = await get('/transitions/Fe-I.21~Fe-I.30/components?field=1T')
    expect(auto.json.data).toMatchObject({ model: 'linear', validity: { positions: { status: 'unknown' }, blend: { status: 'unknown' } } })
    expect(codes(auto)).toContain('term_incomplete')
    const level = await get('/levels/Fe-I.30/sublevels?field=1T&model=intermediate')
    expect([level.status, level.json.code]).toEqual([422, 'term_incomplete'])
  })

  it('an intercombination line has positions and no strengths', async () => {
    const line = (await get('/transitions?species=Hg-I&wavelength_min_nm=253.5&wavelength_max_nm=253.8&rules=rigorous')).json.data[0] as Json
    const reply = await get(`/transitions/${String(line.id)}/components?field=20T&model=intermediate&theta_deg=90`)
    expect(reply.status, reply.text).toBe(200)
    expect(codes(reply)).toContain('no_ls_amplitude')
    for (const one of reply.json.data.components as Json[]) {
      expect(one).toMatchObject({ strength: null, intensity: null, intensity_status: 'unknown', stokes_v: null })
      expect(one.wavenumber_invcm).toBeGreaterThan(39000)
    }
  })

  it('a pair that only a field joins is refused, saying so and where it is shown', async () => {
    // Delta J = 2 between the levels of 3s3p 3P* and 3s3d 3D
    const terms = (await get('/levels?species=Mg-I&term=3D')).json.data as Json[]
    const lower = ((await get('/levels?species=Mg-I&term=3P*')).json.data as Json[]).find((level) => level.term.j === 0) as Json
    const upper = terms.find((level) => level.term.j === 2) as Json
    const reply = await get(`/transitions/${String(lower.id)}~${String(upper.id)}/components?field=1T`)
    expect([reply.status, reply.json.code]).toEqual([422, 'transition_forbidden'])
    expect(reply.json.detail).toMatch(/field .* induces it.*\/predictions.*multiplets/)
  })
})

describe('sublevels of a level of the table', () => {
  it('have J, M_L, M_S, derivatives, and the validity of the linear law', async () => {
    const { data, meta } = await answer('/levels/Li-I.3/sublevels?field=1T&amplitudes=true')
    expect(meta).toMatchObject({ model: 'intermediate', field_tesla: 1, validity: { level: 'Li-I.3', status: 'not_valid' } })
    expect(meta.conventions.names).toContain('continuity')
    expect(of(data, 'm')).toEqual([-1.5, -0.5, 0.5, 1.5])
    expect(of(data, 'j')).toEqual([1.5, 1.5, 1.5, 1.5])
    expect(data.map((row: Json) => [row.m_l, row.m_s])).toEqual([[-1, -0.5], [-1, 0.5], [0, 0.5], [1, 0.5]])
    for (const row of data as Json[]) {
      expect(row.shift_mhz).toBeCloseTo((row.shift_invcm as number) * 29979.2458, 6)
      expect(sum((row.amplitudes as Json[]).map((one) => (one.amplitude as number) ** 2))).toBeCloseTo(1, 12)
    }
    // the stretched states are linear at any field: g_J m = (g_L + g_s / 2) for m = 3/2
    expect(data[3].derivative_invcm_per_tesla).toBeCloseTo(MU_B_OVER_HC_INVCM_PER_T * (1 + 2.00231930436092 / 2), 10)
    const linear = await answer('/levels/Li-I.3/sublevels?field=1T&model=linear')
    expect(linear.data.map((row: Json) => [row.m_l, row.m_s])).toEqual(Array(4).fill([null, null]))
  })

  it('add the quadratic shift on request, and warn of one that is large and left out', async () => {
    const [plain, added] = [await get('/levels/Rb-I.10/sublevels?field=100T'), await get('/levels/Rb-I.10/sublevels?field=100T&diamagnetic=true')]
    expect(codes(plain)).toContain('diamagnetic_ignored')
    expect(codes(added)).not.toContain('diamagnetic_ignored')
    for (const [i, row] of (added.json.data as Json[]).entries()) {
      const quadratic = row.diamagnetic_shift_invcm as number
      expect(quadratic).toBeGreaterThan(0)
      expect((row.shift_invcm as number) - (plain.json.data[i].shift_invcm as number)).toBeCloseTo(quadratic, 10)
      expect((row.derivative_invcm_per_tesla as number) - (plain.json.data[i].derivative_invcm_per_tesla as number)).toBeCloseTo((2 * quadratic) / 100, 10)
    }
    const none = await get('/levels/Fe-I.1/sublevels?field=1T&diamagnetic=true')
    expect(codes(none)).toContain('diamagnetic_missing')
    expect(none.json.data[0]).toMatchObject({ diamagnetic_shift_invcm: null, diamagnetic_status: 'not_applicable' })
  })

  it('give the same in a table', async () => {
    const csv = await get('/levels/Li-I.2/sublevels?field=1T&format=csv')
    expect(csv.text.split('\r\n')[0]).toBe('j,m,m_l,m_s,shift_invcm,shift_ghz,shift_mhz,energy_invcm,derivative_invcm_per_tesla,diamagnetic_shift_invcm')
  })

  it('cross where the root is: the lithium levels 2p J = 3/2, m = -3/2 and J = 1/2, m = 1/2', async () => {
    const { data, meta } = await answer('/levels/Li-I.2/crossings?a=3/2,-3/2&b=1/2,1/2&to=1T')
    expect(meta.model).toBe('intermediate')
    expect(data).toMatchObject({ a: { name: 'J = 3/2, m = -3/2', j: 1.5, f: null }, mass_number: null, anticrossings: [] })
    expect(data.crossings).toHaveLength(1)
    const field = data.crossings[0].field_tesla as number
    // E(3/2, -3/2) = D - 2 mu_B B and the m = 1/2 root of the quadratic meet at mu_B B = 4D/9 for g_s = 2; D = 0.335 cm^-1 gives 0.32 T
    expect(field).toBeGreaterThan(0.3)
    expect(field).toBeLessThan(0.34)
    const both = await Promise.all(['Li-I.2', 'Li-I.3'].map((level) => answer(`/levels/${level}/sublevels?field=${field}&model=intermediate`)))
    const energy = (rows: Json, m: number) => (rows.data as Json[]).find((row) => row.m === m)?.energy_invcm as number
    expect(Math.abs(energy(both[1], -1.5) - energy(both[0], 0.5))).toBeLessThan(1e-10)
  })
})

describe('a term given in the request', () => {
  const levels = [{ energy_invcm: 14903.66, s: 0.5, l: 1, j: 0.5, parity: 'odd' }, { energy_invcm: 14903.9953, s: 0.5, l: 1, j: 1.5, parity: 'odd' }]
  const compute = (body: unknown) => ask('post', '/sublevels', { body })

  it('is taken by auto as its largest field asks, once for the answer', async () => {
    const [small, large] = [await compute({ levels, field: '1G' }), await compute({ levels, field: { values: [0.0001, 1], unit: 'T' } })]
    expect([small.json.meta.model, large.json.meta.model]).toEqual(['linear', 'intermediate'])
    expect(large.json.data.m_l).toEqual([-1, 0, -1, 1, 0, 1])
  })

  it('is refused where it is not whole', async () => {
    const reply = await compute({ levels: levels.slice(1), field: 1, model: 'intermediate' })
    expect([reply.status, reply.json.code, ...faultsOf(reply)]).toEqual([422, 'term_incomplete', '/levels term_incomplete'])
    expect(reply.json.detail).toContain('J = 1/2')
    const auto = await compute({ levels: levels.slice(1), field: 1 })
    expect(codes(auto)).toEqual(['term_incomplete'])
  })
})
