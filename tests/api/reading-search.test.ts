import { describe, expect, it } from 'vitest'
import { faultsOf, get, type Json } from './helpers/client'

interface Found extends Json {
  understood: { kind: string; text: string; meaning: string; without: string }[]
  questions: { text: string; options: { label: string; q: string }[] }[]
  levels: { id: string }[]
  levels_total: number
  lines: { id: string }[]
  lines_total: number
  lines_total_is_lower_bound: boolean
}

const find = async (q: string, more = ''): Promise<Found> => {
  const reply = await get(`/find?q=${encodeURIComponent(q)}${more}`)
  expect(reply.status, reply.text).toBe(200)
  return reply.json.data as unknown as Found
}

describe('the search box', () => {
  it.each([
    ['Na I 3p ²P°₃/₂', ['Na-I.3']],
    ['sodium 3p 2P*3/2', ['Na-I.3']],
    ['Ne 1s5', ['Ne-I.2']],
    ['Fe I 6302.5 Å', ['Fe-I.24', 'Fe-I.30']],
  ])('finds levels from %s', async (q, expected) => {
    expect((await find(q)).levels.map(({ id }) => id)).toEqual(expected)
  })

  it.each([
    ['D1', ['Na-I.1~Na-I.2']],
    ['green mercury line', ['Hg-I.4~Hg-I.6']],
    ['Fe I 557.6 nm', ['Fe-I.21~Fe-I.30']],
    ['16973 cm⁻¹', ['Na-I.1~Na-I.3']],
  ])('finds lines from %s', async (q, expected) => {
    expect((await find(q)).lines.map(({ id }) => id)).toEqual(expected)
  })

  it('asks what a bare number is, and each answer is a query that is understood', async () => {
    const { questions, levels_total, lines_total } = await find('6302.5')
    expect([levels_total, lines_total]).toEqual([0, 0])
    expect(questions).toHaveLength(1)
    for (const { q } of questions[0]?.options ?? []) expect((await find(q)).questions).toEqual([])
  })

  it('lets every part be taken away', async () => {
    const whole = await find('Na I 3p 2P*3/2')
    expect(whole.understood.map(({ kind }) => kind)).toEqual(['species', 'configuration', 'term'])
    for (const part of whole.understood) {
      expect((await find(part.without)).understood.map(({ kind }) => kind)).toEqual(whole.understood.map(({ kind }) => kind).filter((kind) => kind !== part.kind))
    }
  })

  it('keeps an open bound and a closed one of g_eff apart', async () => {
    // singlets have exactly 1
    const closed = await find('Cd I g_eff>0.5 g_eff<=1', '&lines_limit=200')
    expect(closed.lines.length).toBeGreaterThan(0)
    const open = await find('Cd I g_eff>0.5 g_eff<1', '&lines_limit=200')
    expect(open.lines_total).toBeLessThan(closed.lines_total)
  })

  it('tells totals whatever the limits', async () => {
    const [few, many] = [await find('Na I', '&levels_limit=0&lines_limit=1'), await find('Na I', '&levels_limit=200&lines_limit=200')]
    expect([few.levels.length, few.lines.length]).toEqual([0, 1])
    expect([few.levels_total, few.lines_total]).toEqual([11, many.lines.length])
    expect(many.levels).toHaveLength(11)
  })

  it.each(['🙂', '%00', 'Ø', '\u202eaN', '((((((', '1e999 nm', "'; --", 'x'.repeat(200)])('any text has an answer: %s', async (q) => {
    const found = await find(q)
    expect(found.understood.length).toBeGreaterThan(0)
  })

  it('refuses what is no query: too long, empty, missing', async () => {
    expect((await get(`/find?q=${'x'.repeat(201)}`)).status).toBe(400)
    expect((await get('/find?q=')).status).toBe(400)
    expect(faultsOf(await get('/find'))).toHaveLength(1)
  })
})

describe('lines over all species', () => {
  it('a species named twice is named once', async () => {
    const once = await get('/transitions?species=Na-I&limit=1000')
    const twice = await get('/transitions?species=Na-I&species=Na-I&limit=1000')
    expect(once.json.data.length).toBeGreaterThan(0)
    expect(twice.json.data).toEqual(once.json.data)
    expect([twice.json.meta.total, twice.json.meta.excluded]).toEqual([once.json.meta.total, once.json.meta.excluded])
  })

  it('paged to the end are those of one page, each once, by wavenumber, with the same counts', async () => {
    const at = '/transitions?wavelength_min_nm=500&wavelength_max_nm=600'
    const whole = await get(`${at}&limit=1000`)
    const rows: Json[] = []
    let cursor: string | null = null
    do {
      const reply = await get(`${at}&limit=7${cursor === null ? '' : `&cursor=${encodeURIComponent(cursor)}`}`)
      rows.push(...(reply.json.data as Json[]))
      expect(reply.json.meta.excluded).toEqual(whole.json.meta.excluded)
      cursor = reply.json.page.next_cursor
    } while (cursor !== null)
    expect(rows.map(({ id }) => id)).toEqual((whole.json.data as Json[]).map(({ id }) => id))
    const positions = rows.map((row) => row.wavenumber_invcm as number)
    expect(positions).toEqual([...positions].sort((a, b) => a - b))
    expect(rows.length).toBeGreaterThan(20)
  })

  it('explain lists every exclusion that is counted', async () => {
    const { meta } = (await get('/transitions?species=Hg-I&wavelength_min_nm=250&wavelength_max_nm=260&explain=true')).json
    const excluded = meta.excluded as Record<string, number>
    const explained = meta.explained as { transition: string; reason: string }[]
    expect(explained.length).toBe(Object.values(excluded).reduce((sum, count) => sum + count, 0))
    expect(explained).toContainEqual({ transition: 'Hg-I.1~Hg-I.3', reason: 'delta_s' })
  })

  it('two levels of equal energy are counted as zero_interval', async () => {
    expect((await get('/transitions?species=C-II')).json.meta.excluded).toMatchObject({ zero_interval: 1 })
  })

  it('an air window says which lines have no air wavelength', async () => {
    const reply = await get('/transitions?species=H-I&wavelength_min_nm=121&wavelength_max_nm=122&medium=air')
    expect(reply.json.data).toEqual([])
    expect(reply.json.meta.excluded).toMatchObject({ no_air_wavelength: 2 })
  })

  it('a bound on g_eff is met by every line given', async () => {
    const lines = (await get('/transitions?species=Fe-I&g_eff_min=2.4')).json.data as Json[]
    expect(lines.length).toBeGreaterThan(0)
    for (const line of lines) expect(line.g_eff).toBeGreaterThanOrEqual(2.4)
  })
})
