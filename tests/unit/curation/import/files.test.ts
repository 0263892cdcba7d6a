import { describe, expect, it } from 'vitest'
import { decimalOf, withPoint } from '@/lib/curation/import/decimal'
import { delimiterOf } from '@/lib/curation/import/dialect'
import { decodingOf } from '@/lib/curation/import/encoding'
import { layoutOf, suggestionFor } from '@/lib/curation/import/layout'
import { type Asked, readFile } from '@/lib/curation/import/read-file'
import { recordsOf, sampleOf } from '@/lib/curation/import/records'
import { FileRefused } from '@/lib/curation/import/refusal'

async function recordsIn(bytes: Buffer, asked?: string): Promise<string[][]> {
  const decoding = decodingOf(bytes, asked)
  const all: string[][] = []
  for await (const { cells } of recordsOf(decoding, delimiterOf(sampleOf(decoding)))) all.push(cells)
  return all
}
const refusals = async (file: string | Buffer, asked: Asked = {}): Promise<string[]> => {
  const error: unknown = await readFile(Buffer.from(file), asked, () => undefined).then(() => null, (caught: unknown) => caught)
  if (error instanceof FileRefused) return error.problems.map((one) => `${one.code}${one.column === undefined ? '' : ` ${one.column}`}`)
  if (error === null) return []
  throw error
}

describe('encodings', () => {
  const text = 'note;name\nGröße ²P°₃/₂ 😀;x\n'
  it.each([
    ['utf-8', Buffer.from(text), 'utf-8'], ['utf-8 with mark', Buffer.from(`\ufeff${text}`), 'utf-8'], ['utf-16le with mark', Buffer.from(`\ufeff${text}`, 'utf16le'), 'utf-16le'],
    ['utf-16be with mark', Buffer.from(`\ufeff${text}`, 'utf16le').swap16(), 'utf-16be'], ['utf-16le', Buffer.from(text, 'utf16le'), 'utf-16le'], ['utf-16be', Buffer.from(text, 'utf16le').swap16(), 'utf-16be'],
  ])('%s is found', async (_, bytes, encoding) => {
    expect(decodingOf(bytes, undefined).encoding).toBe(encoding)
    expect(await recordsIn(bytes)).toEqual([['note', 'name'], ['Größe ²P°₃/₂ 😀', 'x']])
  })

  it('of one byte are read as windows-1252, quotation marks and dashes too', async () => {
    const bytes = Buffer.concat([Buffer.from('note;name\nM\xfcller, Gr\xf6\xdfe \x96 \x93x\x94;y\n', 'latin1')])
    expect(decodingOf(bytes, undefined).encoding).toBe('windows-1252')
    expect((await recordsIn(bytes))[1]).toEqual(['Müller, Größe – “x”', 'y'])
  })

  it('that are named wrongly, or are none, are refused', async () => {
    await expect(recordsIn(Buffer.from([0x61, 0xff]), 'utf-8')).rejects.toMatchObject({ problems: [{ code: 'encoding_mismatch' }] })
    await expect(recordsIn(Buffer.from([0x00, 0xd8, 0x61, 0x00]), 'utf-16le')).rejects.toMatchObject({ problems: [{ code: 'encoding_mismatch' }] })
    expect(() => decodingOf(Buffer.from('a'), 'klingon')).toThrow(FileRefused)
  })
})

describe('delimiters and decimal marks', () => {
  it.each([['a,b,c\n1,2,3\n', ','], ['a;b;c\n1,5;2,5;3,5\n', ';'], ['a\tb\n1,5\t"x;y"\n', '\t'], ['a|b|c\n1|2|3', '|'], ['"a,b";"c,d"\n"1,2";x\n', ';'], ['single\nvalue\n', ','], ['a;b\n"line\nbreak; and more";2\n', ';']])('%j has %j', (sample, delimiter) => {
    expect(delimiterOf(sample)).toBe(delimiter)
  })

  it.each([[['1.5', '2'], '.'], [['1,5', '2'], ','], [['1,5', '2.5', '3.5'], '.'], [['1,234', '0,5'], ','], [['1,234'], null], [['1,234', '1.5'], '.'], [['', 'x'], '.'], [['-0,25', '1,2e-3'], ','], [['16956,170(3)'], ','], [['1,234(5)'], null]])('%j are written with %j', (cells, decimal) => {
    expect(decimalOf(cells)).toBe(decimal)
  })

  it('leave everything but the comma of a number as it is', () => {
    expect(['16973,36619', '-1,5e-3', '1,2,3', '16973,366(2)', 'a,b', ' 1,5 '].map(withPoint)).toEqual(['16973.36619', '-1.5e-3', '1,2,3', '16973.366(2)', 'a,b', ' 1.5 '])
  })
})

describe('cells', () => {
  it('keep quotes, line breaks and odd characters, whatever ends the lines', async () => {
    for (const end of ['\n', '\r\n', '\r']) {
      const file = ['a,b', '"x ""y""\r\nz","\u2028 \u200b=1"', '', '" lead",\u0301'].join(end) + end
      expect(await recordsIn(Buffer.from(file))).toEqual([['a', 'b'], ['x "y"\r\nz', '\u2028 \u200b=1'], [' lead', '\u0301']])
    }
  })

  it('are the same where a slice of the file ends in the middle of a character or of a line end', async () => {
    const row = `${'ä😀'.repeat(5000)},"${'"" ,\r\n'.repeat(3000)}"\r\n`
    const records = await recordsIn(Buffer.from(`a,b\r\n${row.repeat(40)}`))
    expect(records.length).toBe(41)
    expect(new Set(records.slice(1).map((cells) => cells.join('|'))).size).toBe(1)
    expect(records[1]).toEqual(['ä😀'.repeat(5000), '" ,\r\n'.repeat(3000)])
  })

  it.each([['id,note\nNa-I.3,"a\n', 'table_malformed'], ['id,note\nNa-I.3,a"b\n', 'table_malformed'], ['id,note\nNa-I.3,"a"b\n', 'table_malformed'], ['id,note\nNa-I.3,a\0\n', 'table_nul'], ['', 'table_empty'], ['\n\n', 'table_empty'], ['id,note\n', 'table_empty']])('%j is refused', async (file, code) => {
    expect(await refusals(file)).toEqual([code])
  })

  it('of more rows than one import takes are refused', async () => {
    expect(await refusals(`id,note\n${'Na-I.3,x\n'.repeat(100_001)}`)).toEqual(['table_too_long'])
  })
})

describe('headers', () => {
  it.each([['Energy (cm-1)', 'energy_invcm'], ['Level [cm⁻¹]', 'energy_invcm'], ['J', 'j'], ['Term', 'term'], ['Config', 'configuration'], ['Conf.', 'configuration'], ['Parity', 'parity'], ['Landé', 'g_j_measured'], ['Uncertainty (cm-1)', 'energy_unc_invcm'], ['Reference', 'energy_source'], ['enrgy_invcm', 'energy_invcm'], ['Spectrum', 'species'], ['zzz', null]])('%s may be %s', (header, column) => {
    expect(suggestionFor(header)).toBe(column)
  })

  it('are told all that is wrong with them, each by name', async () => {
    expect(await refusals('id,id,Energy (cm-1),Term value\n1,2,3,4\n')).toEqual(['column_unknown Energy (cm-1)', 'column_unknown Term value', 'column_repeated id'])
    expect(await refusals('species,note\nNa-I,x\n')).toEqual(['column_missing configuration', 'column_missing term', 'column_missing energy_invcm'])
    expect(await refusals('id,E,F\nNa-I.1,1,2\n', { mapping: { E: 'energy_invcm', F: 'energy_invcm', G: null } })).toEqual(['mapping_unknown G', 'column_repeated F'])
    expect(await refusals('id,E\nNa-I.1,1\n', { mapping: { E: 'energie_invcm' } })).toEqual(['mapping_unknown E'])
    expect(await refusals('id,note\nNa-I.1,1\n', { defaults: { note: 'x', nothing: 'y' } })).toEqual(['column_repeated note', 'mapping_unknown nothing'])
  })

  it('of an export are all known, and what the table computes is left out and said so', async () => {
    const header = ['id', 'g_j', 'g_j_coupled_exact', 'multiplicity', 'revision', 'note', '']
    const { shown, problems } = layoutOf(header, [], {}, {})
    expect(problems).toEqual([])
    expect(shown.map((one) => one.field)).toEqual(['id', null, null, 'multiplicity', 'revision', 'note', null])
    expect(shown[1]?.note).toContain('computes')
  })

  it('are guessed from their cells too, and no two as the same column', () => {
    const { shown, problems } = layoutOf(['Level', 'E (1/cm)', 'Energy', 'Remark'], [['Na-I.4', '1', '2', 'x'], ['Na-I.6', '3', '4', 'y']], {}, {})
    expect(shown.map((one) => one.suggestion)).toEqual(['id', 'energy_invcm', null, 'note'])
    expect(problems.map((one) => one.code)).toEqual(['column_unknown', 'column_unknown', 'column_unknown', 'column_unknown'])
  })

  it('without a decimal mark that is clear are asked about it', async () => {
    expect(await refusals('id;energy_invcm\nNa-I.1;1,234\n')).toEqual(['decimal_unclear'])
    expect(await refusals('id;energy_invcm\nNa-I.1;1,234\n', { decimal: ',' })).toEqual([])
  })
})
