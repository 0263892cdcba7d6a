import { describe, expect, it } from 'vitest'
import { faultsOf, get, type Json } from './helpers/client'

const ids = (list: Json): string[] => list.map((row: Json) => row.id as string)

/** Follows cursors to the end; the pages' rows in order. */
async function toTheEnd(at: string): Promise<{ rows: Json[]; pages: number }> {
  const rows: Json[] = []
  let pages = 0
  for (let cursor: string | null = null; pages < 200; ) {
    const reply = await get(`${at}${cursor === null ? '' : `&cursor=${encodeURIComponent(cursor)}`}`)
    expect(reply.status, reply.text).toBe(200)
    rows.push(...(reply.json.data as Json[]))
    pages += 1
    cursor = reply.json.page.next_cursor as string | null
    if (cursor === null) break
    expect(reply.headers.link).toContain('rel="next"')
  }
  return { rows, pages }
}

describe('species', () => {
  it('are 33, with isotopes, level counts and sources', async () => {
    const reply = await get('/species')
    expect(reply.json.data).toHaveLength(33)
    const sodium = reply.json.data.find((one: Json) => one.id === 'Na-I')
    expect(sodium).toMatchObject({ element: 'Na', z: 11, stage: 'I', charge: 0, name: 'sodium', core_configuration: '[Ne]', level_count: 11, isotopes: [{ mass_number: 23, nuclear_spin: 1.5 }] })
    expect(reply.json.data.reduce((total: number, one: Json) => total + (one.level_count as number), 0)).toBe(407)
  })

  it('say where isotopes listed are not all', async () => {
    expect((await get('/species/Xe-II')).json.data.isotope_abundance_sum_percent).toBeLessThan(80)
  })

  it.each([
    ['/species/Na-II', 404, 'species_unknown', 'Na-I'],
    ['/species/na-i', 400, 'species_malformed', 'Na-I'],
  ])('%s is %d %s and names %s', async (at, status, code, near) => {
    const reply = await get(at)
    expect([reply.status, reply.json.code]).toEqual([status, code])
    expect(reply.json.detail).toContain(near)
  })
})

describe('a level', () => {
  it('has the whole shape of the contract', async () => {
    const reply = await get('/levels/Na-I.3')
    expect(reply.json.data).toMatchObject({
      id: 'Na-I.3', species: 'Na-I', configuration: '3p', coupling: 'LS',
      term: { symbol: '2P*3/2', unicode: '²P°₃/₂', label: null, multiplicity: 2, s: 0.5, l: 1, j: 1.5, parity: 'odd', degeneracy: 4 },
      energy_invcm: 16973.36619, energy_unc_invcm: null, energy_literal: null,
      g_j: { adopted: 1.3341064347869733, basis: 'coupled', scheme: 'LS', coupled: 1.3341064347869733, coupled_exact: '4/3', ls_exact: '4/3', measured: 1.3342, measured_unc: null, measured_evidence: 'quoted', status: 'ok' },
      energy_evidence: 'recalled', line_checked: true, repeat_index: null, note: null, status: 'active', revision: 1,
      links: { self: '/api/v1/levels/Na-I.3', page: '/levels/Na-I.3' },
    })
    expect(reply.json.data.hyperfine_constants).toHaveLength(1)
  })

  it('every link below the API answers', async () => {
    const { links } = (await get('/levels/Na-I.3')).json.data
    for (const name of ['self', 'species', 'g_factor', 'transitions', 'energy_source']) expect((await get(String(links[name]).replace('/api/v1', ''))).status, name).toBe(200)
  })

  it('of pair coupling tells K, core and outer electron, and has no LS value', async () => {
    const [level] = (await get('/levels?species=Ne-I&energy_min_invcm=134041&energy_max_invcm=134042')).json.data as Json[]
    expect(level).toMatchObject({ coupling: 'J1K', term: { symbol: '2[3/2]*2', unicode: '²[3/2]°₂', s: null, l: null, k: 1.5, core: { s: 0.5, l: 1, j: 1.5 }, l_outer: 0, j: 2 }, g_j: { ls: null, ls_exact: null, coupled_exact: '3/2' } })
  })

  it('of J = 0 has no g_J: null and not applicable, never 0', async () => {
    const reply = await get('/levels/Hg-I.1')
    expect(reply.json.data.g_j).toMatchObject({ adopted: null, coupled: null, coupled_exact: null, basis: 'none', status: 'not_applicable' })
  })

  it('that does not exist is 404 with the nearest ones', async () => {
    const reply = await get('/levels/Na-I.12')
    expect([reply.status, reply.json.code]).toEqual([404, 'level_unknown'])
    expect(reply.json.detail).toContain('Na-I.11')
  })
})

describe('g-factor', () => {
  it('derives 2/3 for 2P1/2 and adopts the finer measurement', async () => {
    const { data } = (await get('/levels/Na-I.2/g-factor')).json
    expect(data).toMatchObject({ adopted: 0.66581, basis: 'measured', measured: 0.66581, measured_unc: 0.00012, coupled_exact: '2/3', g_s: 2.00231930436092 })
    expect(data.difference).toBeCloseTo(0.66581 - 0.6658935652130266, 15)
    expect(data.difference_in_standard_deviations).toBeCloseTo((0.66581 - 0.6658935652130266) / 0.00012, 10)
    expect(data.reason).toMatch(/0\.001/)
    expect(data.derivation.map((step: Json) => step.value)).toContain('2/3')
    expect(data.bounds.lower).toBeLessThan(0.6658)
  })

  it('follows the g_s asked', async () => {
    const { data } = (await get('/levels/Na-I.3/g-factor?g_s=2')).json
    expect(data).toMatchObject({ g_s: 2, basis: 'coupled', coupled: 4 / 3, adopted: 4 / 3, ls: 4 / 3 })
  })
})

describe('sublevels', () => {
  it('are one row per m, E + mu_B g m B', async () => {
    const reply = await get('/levels/Na-I.3/sublevels?field=1.5T&g_values=ls&g_s=2')
    expect(reply.json.data.map((row: Json) => row.m)).toEqual([-1.5, -0.5, 0.5, 1.5])
    const top = reply.json.data[3] as Json
    expect(top.shift_invcm).toBeCloseTo(0.46686447719 * (4 / 3) * 1.5 * 1.5, 14)
    expect(top.energy_invcm).toBe(16973.36619 + (top.shift_invcm as number))
    expect(reply.json.meta).toMatchObject({ model: 'linear', validity: { level: 'Na-I.3', status: 'valid' } })
  })

  it('page like any list', async () => {
    const { rows, pages } = await toTheEnd('/levels/Na-I.3/sublevels?field=1T&limit=3')
    expect([rows.map((row) => row.m), pages]).toEqual([[-1.5, -0.5, 0.5, 1.5], 2])
  })

  it('a level of J = 0 has one, which does not move', async () => {
    expect((await get('/levels/Hg-I.1/sublevels?field=3T')).json.data).toMatchObject([{ j: 0, m: 0, shift_invcm: 0, shift_ghz: 0, shift_mhz: 0, energy_invcm: 0, derivative_invcm_per_tesla: 0 }])
  })
})

describe('the list of levels', () => {
  it('paged to the end equals the whole, in every order', async () => {
    for (const sort of ['energy', '-energy', 'j', 'g', 'species']) {
      const whole = (await get(`/levels?sort=${sort}&limit=1000`)).json
      expect(whole.data).toHaveLength(407)
      const { rows, pages } = await toTheEnd(`/levels?sort=${sort}&limit=90`)
      expect(pages).toBe(5)
      expect(ids(rows as unknown as Json)).toEqual(ids(whole.data))
    }
  })

  it.each([
    ['term=2P*&species=Na-I', (level: Json) => level.term?.symbol === '2P*1/2' || level.term?.symbol === '2P*3/2'],
    ['term=2P&species=C-II', (level: Json) => level.term?.multiplicity === 2 && level.term.l === 1],
    ['term=z5P*&species=Fe-I', (level: Json) => level.term?.label === 'z' && level.term.parity === 'odd' && level.term.multiplicity === 5 && level.term.l === 1],
    ['j=3/2&parity=odd', (level: Json) => level.term?.j === 1.5 && level.term.parity === 'odd'],
    ['s=1&l=1', (level: Json) => level.term?.s === 1 && level.term.l === 1],
    ['configuration=3d6(5D)4s4p(3P)', (level: Json) => level.configuration === '3d6.(5D).4s.4p.(3P*)'],
    ['energy_min_invcm=16956.17025&energy_max_invcm=16973.36619', (level: Json) => (level.energy_invcm as number) >= 16956.17025 && (level.energy_invcm as number) <= 16973.36619],
    ['g_min=2&g_max=2.1', (level: Json) => (level.g_j?.adopted as unknown as number) >= 2 && (level.g_j?.adopted as unknown as number) <= 2.1],
    ['q=Na I 3p', (level: Json) => level.species === 'Na-I' && level.configuration === '3p'],
  ])('%s selects exactly what the whole table holds of it', async (query, fits) => {
    const whole = (await get('/levels?limit=1000')).json.data as Json[]
    const species = /species=([A-Za-z-]+)/.exec(query)?.[1]
    const wanted = whole.filter((level) => (species === undefined || level.species === species) && fits(level)).map((level) => level.id as string)
    expect(wanted.length).toBeGreaterThan(0)
    expect(ids((await get(`/levels?${encodeURI(query)}&limit=1000`)).json.data).sort()).toEqual(wanted.sort())
  })

  it('filters and words must both hold', async () => {
    expect(ids((await get('/levels?q=Na%20I%203p&j=1/2')).json.data)).toEqual(['Na-I.2'])
    expect((await get('/levels?q=Na%20I%203p&species=K-I')).json.data).toEqual([])
  })

  it('counts what has no value to compare, and lists it on request', async () => {
    const reply = await get('/levels?species=Hg-I&g_min=0&explain=true')
    expect(reply.json.meta.excluded).toEqual({ g_not_applicable: reply.json.meta.explained?.length })
    expect(reply.json.meta.explained[0]).toEqual({ level: 'Hg-I.1', reason: 'g_not_applicable' })
  })

  it('refuses sources and species that are not there', async () => {
    expect((await get('/levels?source=nobody')).json.code).toBe('source_unknown')
    expect((await get('/levels?species=Na-I&species=Na-II')).json.code).toBe('species_unknown')
  })

  it('refuses a range turned round', async () => {
    expect(faultsOf(await get('/levels?g_min=2&g_max=1'))).toEqual(['g_min range_reversed'])
  })
})

describe('lines in a window', () => {
  it('holds exactly the two D lines of sodium among its neighbours', async () => {
    const reply = await get('/transitions?species=Na-I&wavelength_min_nm=588&wavelength_max_nm=590&medium=air')
    expect(ids(reply.json.data)).toEqual(['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3'])
    expect(reply.json.meta.total).toBe(2)
  })

  it('includes its bounds, in wavenumber to the last bit', async () => {
    expect(ids((await get('/transitions?wavenumber_min_invcm=16973.36619&wavenumber_max_invcm=16973.36619')).json.data)).toEqual(['Na-I.1~Na-I.3'])
  })

  it('agrees with what the levels make, over all species', async () => {
    const levels = (await get('/levels?limit=1000')).json.data as Json[]
    const expected: string[] = []
    for (const lower of levels) for (const upper of levels) {
      const interval = (upper.energy_invcm as number) - (lower.energy_invcm as number)
      if (lower.species !== upper.species || !(interval >= 18000 && interval <= 18500)) continue
      const [jl, ju] = [lower.term?.j as unknown as number, upper.term?.j as unknown as number]
      if (lower.term?.parity !== upper.term?.parity && Math.abs(jl - ju) <= 1 && jl + ju > 0) expected.push(`${String(lower.id)}~${String(upper.id)}`)
    }
    const found = await toTheEnd('/transitions?wavenumber_min_invcm=18000&wavenumber_max_invcm=18500&rules=rigorous&limit=7')
    expect(found.rows.map((row) => row.id as string).sort()).toEqual(expected.sort())
    const sigma = found.rows.map((row) => row.wavenumber_invcm as number)
    expect(sigma).toEqual([...sigma].sort((a, b) => a - b))
  })

  it('counts what the LS rules leave out, inside the window only', async () => {
    const window = 'species=Hg-I&wavelength_min_nm=253&wavelength_max_nm=254'
    const ls = (await get(`/transitions?${window}&explain=true`)).json
    expect([ls.data, ls.meta.excluded, ls.meta.explained]).toEqual([[], { delta_s: 1 }, [{ transition: 'Hg-I.1~Hg-I.3', reason: 'delta_s' }]])
    const rigorous = (await get(`/transitions?${window}&rules=rigorous`)).json
    expect(rigorous.data[0]).toMatchObject({ id: 'Hg-I.1~Hg-I.3', verdict: { allowed: true, ls: false, intercombination: true } })
  })

  it.each([
    ['wavelength_min_nm=500&frequency_max_thz=600', 'frequency_max_thz two_windows'],
    ['wavelength_min_nm=600&wavelength_max_nm=500', 'wavelength_min_nm range_reversed'],
  ])('refuses %s', async (query, fault) => {
    const reply = await get(`/transitions?${query}`)
    expect([reply.status, ...faultsOf(reply)]).toEqual([400, fault])
  })

  it('takes frequencies', async () => {
    expect(ids((await get('/transitions?frequency_min_thz=508.33&frequency_max_thz=508.34&species=Na-I')).json.data)).toEqual(['Na-I.1~Na-I.2'])
  })
})

describe('partners of a level', () => {
  it('are the allowed ones; the others are counted, or listed with the rules that fail', async () => {
    const allowed = (await get('/levels/Na-I.2/transitions?kind=E1')).json
    const all = (await get('/levels/Na-I.2/transitions?kind=E1&include=forbidden')).json
    const left = Object.values(allowed.meta.excluded as unknown as Record<string, number>).reduce((total, count) => total + count, 0)
    expect((allowed.data.length as number) + left).toBe(10)
    expect(all.data).toHaveLength(10)
    const forbidden = all.data.filter((line: Json) => line.verdict?.allowed === (false as unknown)) as Json[]
    expect(forbidden).toHaveLength(left)
    for (const line of forbidden) expect(JSON.stringify(line.verdict?.rules)).toContain('"verdict":"fail"')
  })

  it('each pair is judged as what it can be where no kind is given', async () => {
    const lines = (await get('/levels/Na-I.2/transitions?include=forbidden')).json.data as Json[]
    for (const line of lines) expect(line.kind === ('E1' as unknown)).toBe(line.lower?.term?.parity !== line.upper?.term?.parity)
  })
})

describe('sources, editions and find', () => {
  it('a source says how many values rest on it', async () => {
    const key = String((await get('/levels/Na-I.3')).json.data.energy_source)
    const { data } = (await get(`/sources/${key}`)).json
    expect(data).toMatchObject({ key, used_by: { levels: 11 } })
    expect((await get('/sources/nobody')).json.code).toBe('source_unknown')
  })

  it('every source is listed once, paged to the end', async () => {
    const { rows } = await toTheEnd('/sources?limit=20')
    const keys = rows.map((row) => row.key as string)
    expect(new Set(keys).size).toBe(keys.length)
    expect(keys).toHaveLength((await get('/editions/1')).json.data.counts?.sources as unknown as number)
  })

  it('edition 1 holds 33 species and 407 levels', async () => {
    const list = (await get('/editions')).json.data
    expect(list[0]).toEqual((await get('/editions/1')).json.data)
    expect(list[0]).toMatchObject({ number: 1, counts: { species: 33, levels: 407 } })
    expect((await get('/editions/2')).json.code).toBe('edition_unknown')
  })

  it('changes since the empty table are its levels, field by field', async () => {
    const { rows } = await toTheEnd('/editions/1/changes?since=0&kind=level&limit=100')
    expect(rows).toHaveLength(407)
    const sodium = rows.find((row) => row.level === ('Na-I.3' as unknown))
    expect(sodium).toMatchObject({ species: 'Na-I', action: 'created' })
    expect(sodium?.fields).toContainEqual({ field: 'energy_invcm', before: null, after: 16973.36619 })
    expect(faultsOf(await get('/editions/1/changes?since=1'))).toEqual(['since number_out_of_range'])
  })

  it('the search box finds levels and lines together and says how it understood', async () => {
    const { data } = (await get('/find?q=sodium%20D1')).json
    expect(ids(data.lines)).toEqual(['Na-I.1~Na-I.2'])
    expect(ids(data.levels)).toEqual(['Na-I.1', 'Na-I.2'])
    expect(data.understood.length).toBeGreaterThan(0)
  })
})
