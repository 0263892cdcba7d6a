import fc from 'fast-check'
import { parse } from 'csv-parse/sync'
import { describe, expect, it } from 'vitest'
import { carryWindow, lineQuery, scaleOf } from '@/app/(find)/_parts/line-query'
import { queryString } from '@/app/_components/data/api'
import { fixed, halves, significant, withUncertainty } from '@/app/_components/number'
import { requestText } from '@/app/_components/request-text'
import { latexTerm, tableText, type TextColumn } from '@/app/_components/table-text'

interface Row { name: string; energy: number | null }
const COLUMNS: TextColumn<Row>[] = [
  { name: 'name', value: (row) => row.name },
  { name: 'energy_invcm', value: (row) => row.energy },
]

describe('a table copied as text', () => {
  it('keeps negative numbers as they are and marks text that a spreadsheet would run', () => {
    const text = tableText('csv', COLUMNS, [{ name: '=cmd()', energy: -1.5 }, { name: "'quoted", energy: null }, { name: 'a, "b"', energy: 1e-7 }], 'x')
    expect(text).toBe('name,energy_invcm\r\n\'=cmd(),-1.5\r\n\'\'quoted,\r\n"a, ""b""",1e-7\r\n')
  })
  it('gives every number back bit for bit through CSV', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 1 }), (energies) => {
        const rows = parse(tableText('csv', COLUMNS, energies.map((energy) => ({ name: 'x', energy })), 'x'), { from: 2 }) as string[][]
        // -0 and 0 print alike, and are the same energy.
        expect(rows.map((row) => Number(row[1]) + 0)).toEqual(energies.map((energy) => energy + 0))
      }),
    )
  })
  it('keeps one row per line in TSV', () => {
    expect(tableText('tsv', COLUMNS, [{ name: 'two\nlines\tand a tab', energy: 2 }], 'x')).toBe('name\tenergy_invcm\ntwo lines and a tab\t2\n')
  })
  it('escapes LaTeX and sets term symbols', () => {
    expect(latexTerm('2P*3/2')).toBe('$^{2}\\mathrm{P}^{\\circ}_{3/2}$')
    expect(latexTerm('2[3/2]*2')).toBe('$^{2}[3/2]^{\\circ}_{2}$')
    const text = tableText('latex', COLUMNS, [{ name: '50 %_&', energy: null }], 'A & B')
    expect(text).toContain('\\caption{A \\& B}')
    expect(text).toContain('50 \\%\\_\\& & --')
    expect(text).toContain('energy\\_invcm')
  })
})

describe('numbers for reading', () => {
  it('prints a true minus, thin spaces and no negative zero', () => {
    expect(fixed(-16973.36619, 4)).toBe('\u221216\u2009973.3662')
    expect(fixed(-0.00001, 2)).toBe('0.00')
    expect(significant(-4.6686e-5, 3)).toBe('\u22124.67\u2009×\u200910⁻⁵')
  })
  it('puts the uncertainty in the last two digits', () => {
    expect(withUncertainty(1.3362, 0.0013)).toBe('1.3362(13)')
    expect(withUncertainty(2, 0)).toBeNull()
  })
  it('writes halves as fractions', () => {
    expect([1.5, -0.5, 2, 0].map(halves)).toEqual(['3/2', '\u22121/2', '2', '0'])
  })
})

describe('the request behind a view', () => {
  const request = { path: '/transitions', query: { species: ['Na-I', 'K-I'], wavelength_min_nm: "588'5", edition: 1, medium: undefined } }
  it('is the same address in every language, empty values left out', () => {
    expect(queryString(request.query)).toBe('?edition=1&species=Na-I&species=K-I&wavelength_min_nm=588%275')
    expect(requestText('curl', 'http://h', request)).toBe("curl -sS 'http://h/api/v1/transitions?edition=1&species=Na-I&species=K-I&wavelength_min_nm=588%275'")
    expect(requestText('python', 'http://h', request)).toContain('    ("species", "K-I"),')
    expect(requestText('typescript', 'http://h', request)).toContain('address.searchParams.append("species", "K-I")')
  })
  it('quotes a body for the shell', () => {
    expect(requestText('curl', 'http://h', { path: '/x', method: 'POST', body: { note: "it's" } })).toContain("it'\\''s")
  })
})

describe('the window of a line search', () => {
  it('turns round between wavelength and wavenumber and comes back', () => {
    const there = carryWindow('vacuum', 'wavenumber', { min: '588', max: '590' })
    expect(there).toEqual({ min: '16949.15', max: '17006.8' })
    // Seven figures are kept each way, so the ends agree to one part in 10^6.
    const back = carryWindow('wavenumber', 'vacuum', there)
    expect(Number(back.min) / 588).toBeCloseTo(1, 6)
    expect(Number(back.max) / 590).toBeCloseTo(1, 6)
  })
  it('leaves an open end open and what is no number out', () => {
    expect(carryWindow('air', 'frequency', { min: '', max: 'abc' })).toEqual({ min: '', max: '' })
  })
  it('reads the scale from the names in the address', () => {
    expect(scaleOf(lineQuery({ wavenumber_min_invcm: '1' }))).toBe('wavenumber')
    expect(scaleOf(lineQuery({ wavelength_min_nm: '588', medium: 'vacuum' }))).toBe('vacuum')
    expect(lineQuery({ species: ['Na-I', ''] })).toMatchObject({ species: ['Na-I'], rules: 'rigorous' })
  })
})
