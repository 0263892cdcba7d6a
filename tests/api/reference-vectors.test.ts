import { describe, expect, it } from 'vitest'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { readCases } from '../reference/read'
import { ask, get, type Json } from './helpers/client'

const half = (two: number | null): number | null => (two === null ? null : two / 2)

/** Largest difference of two lists of the same length; NaN where they are not. */
const apart = (found: readonly number[], wanted: readonly number[]): number => (found.length === wanted.length ? Math.max(...wanted.map((value, i) => Math.abs((found[i] ?? Number.NaN) - value))) : Number.NaN)

describe('vectors 05, levels of a term in a field of any strength, as inline requests', () => {
  type State = [twoM: number, k: number, energy: number, twoJ: number | null, mL: number, twoMS: number, slope: number]
  interface Case { term: string; twoS: number; L: number; levels: [number, number][]; gS: number; B: number; states: State[] }
  const groups = new Map<string, Case[]>()
  for (const row of readCases<Case>('05-full-field-levels.json')) groups.set(`${row.term}, g_s ${row.gS}`, [...(groups.get(`${row.term}, g_s ${row.gS}`) ?? []), row])

  it.each([...groups])('%s', async (_name, rows) => {
    const [{ twoS, L, levels, gS }] = rows as [Case]
    const body = {
      levels: levels.map(([twoJ, energy]) => ({ energy_invcm: energy, s: twoS / 2, l: L, j: twoJ / 2, parity: 'odd' })),
      field: { values: rows.map((row) => row.B), unit: 'T' },
      model: 'intermediate',
      g_s: gS,
    }
    const reply = await ask('post', '/sublevels', { body })
    expect(reply.status, reply.text).toBe(200)
    const { data, meta } = reply.json
    expect(meta).toMatchObject({ model: 'intermediate', warnings: [] })
    rows.forEach(({ states }, at) => {
      expect(data.m).toEqual(states.map(([twoM]) => twoM / 2))
      expect(data.j).toEqual(states.map((state) => half(state[3])))
      expect(data.m_l).toEqual(states.map((state) => state[4]))
      expect(data.m_s).toEqual(states.map((state) => state[5] / 2))
      // header: energies 1e-9 cm^-1; slopes 1e-9, dimensionless
      expect(apart(data.energies_invcm[at], states.map((state) => state[2]))).toBeLessThanOrEqual(1e-9)
      expect(apart((data.derivatives[at] as number[]).map((slope) => slope / MU_B_OVER_HC_INVCM_PER_T), states.map((state) => state[6]))).toBeLessThanOrEqual(1e-9)
    })
  })
})

describe('vectors 07, hyperfine levels in a field, as inline requests', () => {
  type State = [twoMF: number, k: number, energy: number, twoF: number | null, twoMJ: number, twoMI: number]
  interface Case { level: string; twoJ: number; twoI: number; A_MHz: number; Bquad_MHz: number; gJ: number; gIprime: number; B: number; states: State[] }

  it.each(readCases<Case>('07-hyperfine.json'))('$level at $B T', async (row) => {
    const body = {
      level: { j: row.twoJ / 2, g_j: row.gJ },
      nucleus: { i: row.twoI / 2, a_mhz: row.A_MHz, b_mhz: row.Bquad_MHz, g_i: row.gIprime },
      field: { values: [row.B, 0], unit: 'T' },
    }
    const reply = await ask('post', '/sublevels', { body })
    expect(reply.status, reply.text).toBe(200)
    const { data } = reply.json
    expect(reply.json.meta).toMatchObject({ model: 'hyperfine', warnings: [] })
    expect(data.m_f).toEqual(row.states.map(([twoMF]) => twoMF / 2))
    expect(data.f).toEqual(row.states.map((state) => half(state[3])))
    expect([data.m_j, data.m_i]).toEqual([row.states.map((state) => state[4] / 2), row.states.map((state) => state[5] / 2)])
    // header: 1e-7 MHz
    expect(apart(data.energies_mhz[0], row.states.map((state) => state[2]))).toBeLessThanOrEqual(1e-7)
    // shifts are counted from the same F without field: two energies of 1e4 MHz and their rounding
    expect(apart(data.shifts_mhz[0], (data.energies_mhz[0] as number[]).map((energy, i) => energy - (data.energies_mhz[1][i] as number)))).toBeLessThanOrEqual(1e-7)
    expect(data.shifts_mhz[1]).toEqual(row.states.map(() => 0))
  })
})

describe('vectors 08, vacuum and air wavelengths', () => {
  type Formula = { vacToAir_nm: number; airToVac_nm: number }
  interface Case { nm: number; models: Record<'ciddor1996' | 'peckReeder1972' | 'edlen1966', Formula> }
  const NAMES = { ciddor1996: 'ciddor1996', peckReeder1972: 'peck_reeder1972', edlen1966: 'edlen1966' } as const

  it.each(readCases<Case>('08-air.json'))('$nm nm', async ({ nm, models }) => {
    for (const [name, formula] of Object.entries(NAMES)) {
      const wanted = models[name as keyof typeof NAMES]
      const [down, up] = [await get(`/wavelengths/convert?value=${nm}&from=vacuum_nm&to=air_nm&formula=${formula}`), await get(`/wavelengths/convert?value=${nm}&from=air_nm&to=vacuum_nm&formula=${formula}`)]
      // header: 1e-14 of the wavelength; twice that for the one more division of the chain over wavenumber
      expect(Math.abs((down.json.data.result as number) / wanted.vacToAir_nm - 1)).toBeLessThanOrEqual(2e-14)
      expect(Math.abs((up.json.data.result as number) / wanted.airToVac_nm - 1)).toBeLessThanOrEqual(2e-14)
    }
  })
})

describe('vectors 11, viewing geometry and polarisation, on lines of the table', () => {
  type Row = [twoMLower: number, twoMUpper: number, q: number, shiftExact: string, shift: number, strengthExact: string, i: number, stokesQ: number, v: number]
  interface Case { line: string; thetaDeg: number; sumIByQ: Record<string, number>; components: Row[] }
  // a line of the table for each pair of terms; its own energies play no part in the geometry
  const LINES: Record<string, string> = {
    '1S0-1P1': 'Ca-I.1~Ca-I.9', '2S1/2-2P1/2': 'Na-I.1~Na-I.2', '2S1/2-2P3/2': 'Na-I.1~Na-I.3', '3P2-3S1': 'Mg-I.4~Mg-I.6', '3P1-3P1': 'N-II.2~N-II.7', '5P1-5D0': 'Fe-I.14~Fe-I.19', '5D4-5F5': 'Fe-I.1~Fe-I.20',
  }

  it.each(readCases<Case>('11-geometry.json'))('$line at $thetaDeg degrees', async ({ line, thetaDeg, sumIByQ, components }) => {
    const reply = await get(`/transitions/${LINES[line] ?? line}/components?field=1T&model=linear&g_values=ls&g_s=2&theta_deg=${thetaDeg}`)
    expect(reply.status, reply.text).toBe(200)
    const found = reply.json.data.components as Json[]
    // a component of strength zero is listed here and not in the vectors
    expect(found.filter((one) => one.strength > 0)).toHaveLength(components.filter((row) => row[6] > 0 || row[5] !== '0').length)
    const sums = new Map<string, number>()
    for (const one of found) sums.set(String(one.q), (sums.get(String(one.q)) ?? 0) + (one.intensity as number))
    for (const [twoMLower, twoMUpper, q, , shift, , intensity, stokesQ, v] of components) {
      const one = found.find((row) => row.m_lower === twoMLower / 2 && row.m_upper === twoMUpper / 2)
      expect(one?.q).toBe(q)
      // header: 1e-13
      expect(apart([one?.shift_lorentz, one?.intensity, one?.stokes_q, one?.stokes_v] as number[], [shift, intensity, stokesQ, v])).toBeLessThanOrEqual(1e-13)
    }
    for (const [q, sum] of Object.entries(sumIByQ)) expect(Math.abs((sums.get(q) ?? Number.NaN) - sum)).toBeLessThanOrEqual(1e-13)
  })
})
