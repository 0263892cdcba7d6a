import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkPlan, planRows, type Ground, type PlannedRow, type Steps } from '@/lib/curation/import/plan'
import { type Asked, readFile } from '@/lib/curation/import/read-file'
import type { LevelRow, PublishedTable } from '@/lib/curation/rows'
import { csvParts } from '@/lib/http/writers/csv'
import { levelTable } from '@/lib/prediction/tables/levels'
import { buildLevelForExport, TABLE } from './table'

const steps: Steps = { signal: new AbortController().signal, tell: () => undefined }

async function planned(file: string, ground: Ground = { table: TABLE, own: [] }, asked: Asked = {}): Promise<PlannedRow[]> {
  const rows = await planRows(await readFile(Buffer.from(file), asked, () => undefined), ground, steps)
  await checkPlan(rows, ground, steps)
  return rows
}
const one = async (file: string, ground?: Ground, asked?: Asked): Promise<PlannedRow> => {
  const [row] = await planned(file, ground, asked)
  if (row === undefined) throw new Error('no row')
  return row
}
const codes = (row: PlannedRow): string[] => row.findings.filter((finding) => finding.severity === 'error').map((finding) => `${finding.code} ${finding.field}`)

const exported = (table: PublishedTable): string => [...csvParts(levelTable([...table.levels].map(([id, { row, revision }]) => buildLevelForExport(id, row, revision))))].join('')

/** Any text that a note may hold: formula characters, quotes, line breaks, odd Unicode; the table keeps notes without blanks around them. */
const oddText = fc.array(fc.oneof(fc.constantFrom('=', '+', '-', '@', '\t', '\r', '\n', '\r\n', "'", '"', ',', ';', '\u2028', '\u200b', '\u202e', '\u0301', '\ufeff', '😀', '0', 'true', 'null'), fc.string({ unit: 'grapheme', maxLength: 6 }).map((text) => text.toWellFormed().replaceAll('\0', ''))), { maxLength: 12 })
  .map((parts) => parts.join('').trim()).map((text) => (text === '' ? null : text))
const finite = fc.double({ noNaN: true, noDefaultInfinity: true, min: 0, max: 1e6 }).map((value) => value + 0)

const withNotes = fc.array(fc.record({ note: oddText, alternativeName: oddText, energy: finite, unc: fc.option(finite), checked: fc.boolean(), repeat: fc.integer({ min: 1, max: 90 }) }), { minLength: 1, maxLength: 8 }).map((drawn): PublishedTable => {
  const base = [...TABLE.levels.values()].map(({ row }) => row)
  const levels = drawn.map(({ note, alternativeName, energy, unc, checked, repeat }, i): [string, { revision: number; row: LevelRow }] => {
    const row = base[i % base.length] as LevelRow
    return [`Na-I.${i + 1}`, { revision: 1, row: { ...row, note, alternativeName, energyInvcm: energy, energyUncInvcm: unc, energyLiteral: null, lineChecked: checked, repeatIndex: repeat * 10 + i } }]
  })
  return { ...TABLE, levels: new Map(levels) }
})

describe('an exported table', () => {
  it('comes back to no change, whatever its texts and numbers are, as CSV and with tabs', async () => {
    await fc.assert(fc.asyncProperty(withNotes, async (table) => {
      const file = exported(table)
      for (const row of await planned(file, { table, own: [] })) expect([row.verdict, row.findings, row.level]).toEqual(['same', [], `Na-I.${row.row - 1}`])
      const rows = (await readFile(Buffer.from(file), {}, () => undefined)).rows
      const cell = (text: string) => `"${text.replaceAll('"', '""')}"`
      const tabs = [file.slice(0, file.indexOf('\r\n')).split(','), ...rows.map(({ cells }) => cells)].map((cells) => cells.map(cell).join('\t')).join('\n')
      expect((await planned(tabs, { table, own: [] })).map((row) => row.verdict)).toEqual(rows.map(() => 'same'))
    }), { numRuns: 150 })
  })

  it('makes the same levels anew where the table does not have them', async () => {
    await fc.assert(fc.asyncProperty(withNotes, async (table) => {
      const [header = '', ...lines] = exported(table).split(/\r\n(?=Na-I\.)/)
      const file = `${header}\r\n${lines.map((line) => line.replace(/^Na-I\.\d+,/, ',')).join('\r\n')}`
      const empty = { ...table, levels: new Map() }
      for (const [i, row] of (await planned(file, { table: empty, own: [] })).entries()) {
        const { measured, ...kept } = table.levels.get(`Na-I.${i + 1}`)?.row as LevelRow
        const found = row.findings.filter((finding) => finding.severity === 'error' && finding.code !== 'second_zero')
        expect(found).toEqual([])
        const { measured: read, ...rest } = row.change?.row as LevelRow
        expect(rest).toEqual(kept)
        // an export shows one measured g_J of several
        expect(measured.length === 0 ? read : measured.some((g) => g.value === read[0]?.value)).toEqual(measured.length === 0 ? [] : true)
      }
    }), { numRuns: 60 })
  })
})

describe('a row', () => {
  it('is matched by id, by all that names a level, or by term and J with nearly the same energy', async () => {
    expect(await one('id,note\nNa-I.3,x\n')).toMatchObject({ verdict: 'changed', level: 'Na-I.3' })
    expect(await one('species,configuration,term,energy_invcm\nNa-I,3p,2P*3/2,16973.36619\n')).toMatchObject({ verdict: 'same', level: 'Na-I.3' })
    expect(await one('species,configuration,term,energy_invcm\nNa-I,2p6.3p,2P*3/2,16973.3662\n')).toMatchObject({ level: 'Na-I.3' })
    expect(await one('species,configuration,term,j,parity,energy_invcm\nNa-I,3p,²P,3/2,odd,16973.36619\n')).toMatchObject({ verdict: 'same', level: 'Na-I.3' })
    expect(await one('species,configuration,term,energy_invcm,energy_source,energy_evidence\nNa-I,5p,2P*3/2,35042.85,nist-na,read\n')).toMatchObject({ verdict: 'new', level: null })
    expect(codes(await one('id,note\nNa-I.99,x\n'))).toEqual(['level_unknown id'])
    expect(codes(await one('id,species,note\nNa-I.3,K-I,x\n'))).toEqual(['column_contradicts species'])
    expect(codes(await one('species,configuration,term,energy_invcm\nXx-I,3p,2P*3/2,1\n'))).toEqual(['species_unknown species'])
  })

  it('names its species as papers print it, or is told what it may mean', async () => {
    expect(await one('species,configuration,term,energy_invcm\nNa I,3p,2P*3/2,16973.36619\n')).toMatchObject({ verdict: 'same', level: 'Na-I.3' })
    expect(await one('id,species,note\nNa-I.3,Na\u00a0I,x\n')).toMatchObject({ verdict: 'changed', level: 'Na-I.3' })
    for (const species of ['NaI', 'na-i', 'Na_I', 'na  i']) {
      const [found] = (await one(`species,configuration,term,energy_invcm\n${species},3p,2P*3/2,1\n`)).findings
      expect(found, species).toMatchObject({ code: 'species_unknown', detail: expect.stringContaining('did you mean Na-I?') })
    }
    expect((await one('species,configuration,term,energy_invcm\nXx-I,3p,2P*3/2,1\n')).findings[0]?.detail).toContain('add the species')
  })

  it('contradicting itself is an error that names the column', async () => {
    expect(codes(await one('id,term,j\nNa-I.3,2P*3/2,1/2\n'))).toEqual(['column_contradicts j'])
    expect(codes(await one('id,term,parity\nNa-I.3,2P*3/2,even\n'))).toEqual(['column_contradicts parity'])
    expect(codes(await one('id,note,degeneracy\nNa-I.3,x,2\n'))).toEqual(['column_contradicts degeneracy'])
    expect(codes(await one('id,note,status\nNa-I.3,x,retired\n'))).toEqual(['column_contradicts status'])
    expect(codes(await one('id,parity\nNa-I.3,left\n'))).toEqual(['value_not_listed parity'])
    expect(codes(await one('id,line_checked\nNa-I.3,perhaps\n'))).toEqual(['value_not_listed line_checked'])
  })

  it('of another length, or with marks mixed, is an error', async () => {
    expect(codes(await one('id,note\nNa-I.3,a,b\n'))).toEqual(['row_length null'])
    expect(codes(await one('id,note,\nNa-I.3,a,b\n'))).toEqual(['cell_without_column null'])
    expect(codes(await one('id;energy_invcm\nNa-I.3;16.973,3662\n', undefined, { decimal: ',' }))).toEqual(['decimal_mixed energy_invcm'])
  })

  it('changes only what it says otherwise, and keeps the other measured g_J', async () => {
    const before = TABLE.levels.get('Na-I.3')?.row as LevelRow
    expect(before.measured.length).toBe(2)
    const [shown, other] = before.measured
    const same = await one(`id,g_j_measured\nNa-I.3,${shown?.value}\n`)
    expect(same.verdict).toBe('same')
    const changed = await one('id,g_j_measured,g_j_measured_unc\nNa-I.3,1.3341,0.0002\n')
    expect(changed.change?.row?.measured).toEqual([{ ...shown, value: 1.3341, unc: 0.0002, literal: null }, other])
    const emptied = await one('id,g_j_measured,g_j_measured_unc,g_source,g_evidence\nNa-I.3,,,,\n')
    expect(emptied.change?.row?.measured).toEqual([other])
  })

  it('from an older revision puts nothing back that was corrected since', async () => {
    const table = { ...TABLE, levels: new Map([['Na-I.3', { revision: 2, row: TABLE.levels.get('Na-I.3')?.row as LevelRow }]]) }
    const ground = { table, own: [] }
    expect(codes(await one('id,note,revision\nNa-I.3,old,1\n', ground))).toEqual(['base_stale revision'])
    expect((await one('id,note,revision\nNa-I.3,new,2\n', ground)).verdict).toBe('changed')
    expect((await one('id,note\nNa-I.3,new\n', ground)).verdict).toBe('changed')
    // where it says what the table says, nothing would be put back
    expect((await one(`id,g_j_measured,revision\nNa-I.3,${TABLE.levels.get('Na-I.3')?.row.measured[0]?.value},1\n`, ground)).verdict).toBe('same')
  })

  it('with an energy alone drops printed digits that no longer agree', async () => {
    const table = { ...TABLE, levels: new Map([['Na-I.3', { revision: 1, row: { ...(TABLE.levels.get('Na-I.3')?.row as LevelRow), energyLiteral: '16973.36619' } }]]) }
    expect((await one('id,energy_invcm\nNa-I.3,16973.37\n', { table, own: [] })).change?.row).toMatchObject({ energyInvcm: 16973.37, energyLiteral: null })
    expect((await one('id,energy_literal\nNa-I.3,16973.3700(5)\n', { table, own: [] })).change?.row).toMatchObject({ energyInvcm: 16973.37, energyLiteral: '16973.3700(5)' })
    expect((await one('id,energy_invcm\nNa-I.3,16 973.3700(5)\n', { table, own: [] })).change?.row).toMatchObject({ energyInvcm: 16973.37, energyUncInvcm: 0.0005 })
  })

  it('for a level that another row is about is an error, and so is its twin', async () => {
    const rows = await planned('id,note\nNa-I.3,a\nNa-I.2,b\nNa-I.3,a\n')
    expect(rows.map((row) => row.verdict)).toEqual(['error', 'changed', 'error'])
    const twins = await planned('species,configuration,term,energy_invcm,energy_source,energy_evidence\nNa-I,7p,2P*3/2,39000,nist-na,read\nNa-I,7p,2P*3/2,39001,nist-na,read\n')
    expect(twins.map((row) => row.verdict)).toEqual(['error', 'error'])
    expect(twins[0]?.findings.map((finding) => finding.detail).join()).toContain('row 3')
  })

  it('that fits several levels is ambiguous and names them', async () => {
    const row = TABLE.levels.get('Na-I.3')?.row as LevelRow
    const levels = new Map([['Na-I.3', { revision: 1, row: { ...row, repeatIndex: 1 } }], ['Na-I.4', { revision: 1, row: { ...row, repeatIndex: 2, energyInvcm: 20000 } }]])
    const ground = { table: { ...TABLE, levels }, own: [] }
    const found = await one('species,configuration,term,energy_invcm\nNa-I,3p,2P*3/2,18000\n', ground)
    expect([found.verdict, found.findings[0]?.code]).toEqual(['ambiguous', 'level_ambiguous'])
    expect(found.findings[0]?.detail).toMatch(/Na-I\.3 .* or Na-I\.4/)
    expect((await one('species,configuration,term,energy_invcm\nNa-I,3p,2P*3/2,20000.001\n', ground)).level).toBe('Na-I.4')
    expect((await one('species,configuration,term,repeat_index,energy_invcm\nNa-I,3p,2P*3/2,2,18000\n', ground)).level).toBe('Na-I.4')
  })

  it('about a level that the amendment changes is compared with that change', async () => {
    const row = { ...(TABLE.levels.get('Na-I.3')?.row as LevelRow), note: 'ours' }
    const own = [{ id: 'c1', kind: 'level' as const, action: 'replace' as const, subject: 'Na-I.3', speciesId: 'Na-I', given: {}, reason: null, successor: null, row }]
    expect((await one('id,note\nNa-I.3,ours\n', { table: TABLE, own })).verdict).toBe('same')
    expect(await one('id,note\nNa-I.3,other\n', { table: TABLE, own })).toMatchObject({ verdict: 'changed', fields: [{ field: 'note', before: 'ours', after: 'other' }] })
    expect(await one('id,note\nNa-I.3,\n', { table: TABLE, own })).toMatchObject({ verdict: 'changed', takeOut: 'c1', change: null })
    expect(codes(await one('id,note\nNa-I.3,x\n', { table: TABLE, own: own.map((change) => ({ ...change, action: 'retire' as const, row: null })) }))).toEqual(['level_retiring id'])
  })
})
