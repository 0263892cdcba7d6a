import { describe, expect, it } from 'vitest'
import { AS_FOUND, bytesText, choicesOf, mappingFaults, progressOf, uploadParts, wantsMapping } from '@/app/(curate)/_import/mapping'
import { threadsAbout, threadsOf } from '@/app/(curate)/_review/threads'
import { valuesOfLevel } from '@/app/(curate)/_sheet/level-values'
import { marksOf, NO_FILTER, orderedLevels } from '@/app/(curate)/_sheet/row-order'
import { Sheet } from '@/app/(curate)/_sheet/sheet'
import type { Comment } from '@/openapi/schemas/amendment'
import type { ImportColumn, ImportReading } from '@/openapi/schemas/import'
import type { Level } from '@/openapi/schemas/level'
import { madeChange } from './made'

const column = (header: string, field: string | null, suggestion: string | null = null) => ({ header, field, suggestion, note: null, sample: ['1'] })
const READING: ImportReading = { encoding: 'utf-8', delimiter: ',', decimal: '.', columns: [column('species', 'species'), column('Energy (cm-1)', null, 'energy_invcm'), column('Colour', null)] }
const OURS: ImportColumn[] = ['id', 'species', 'configuration', 'term', 'energy_invcm', 'energy_literal'].map((name) => ({ name, unit: null, required: ['species', 'configuration', 'term', 'energy_invcm'].includes(name), description: '' }))

describe('what the columns of a file are', () => {
  it('begins with what was found and what it looks like; what a person chose goes before', () => {
    expect(choicesOf(READING, {})).toEqual({ species: 'species', 'Energy (cm-1)': 'energy_invcm', Colour: '' })
    expect(choicesOf(READING, { species: '', Colour: 'note' })).toEqual({ species: '', 'Energy (cm-1)': 'energy_invcm', Colour: 'note' })
  })
  it('is asked about where the file was refused for its header, not for its rows', () => {
    expect(wantsMapping({ state: 'refused', problems: [{ code: 'column_unknown', detail: '' }] })).toBe(true)
    expect(wantsMapping({ state: 'refused', problems: [{ code: 'rows_wrong', detail: '' }] })).toBe(false)
    expect(wantsMapping({ state: 'done', problems: [] })).toBe(false)
  })
  it('is wrong where two headers claim one column, or a needed one is missing', () => {
    expect(mappingFaults({ a: 'term', b: 'term', c: '' }, {}, OURS)).toEqual({ twice: new Set(['a', 'b']), missing: ['species', 'configuration', 'energy_invcm'] })
    expect(mappingFaults({ a: 'term', b: 'energy_literal', c: 'configuration' }, { species: 'Na-I' }, OURS).missing).toEqual([])
    expect(mappingFaults({ a: 'id' }, {}, OURS).missing).toEqual([])
  })
  it('is sent as the API wants it, and nothing where all is found out', () => {
    expect(uploadParts(AS_FOUND)).toEqual([])
    expect(uploadParts({ mapping: { a: 'term', b: '' }, defaults: { species: 'Na-I', note: ' ' }, encoding: '', delimiter: 'tab', decimal: ',' })).toEqual([
      ['mapping', '{"a":"term","b":null}'], ['defaults', '{"species":"Na-I"}'], ['delimiter', 'tab'], ['decimal', ','],
    ])
  })
  it('progress and sizes are told in words', () => {
    expect([progressOf({ rows_total: 0, rows_done: 0 }), progressOf({ rows_total: 4, rows_done: 1 })]).toEqual([null, 0.25])
    expect([bytesText(12), bytesText(4096), bytesText(3 * 1024 * 1024)]).toEqual(['12 bytes', '4 kB', '3.0 MB'])
  })
})

describe('comment threads', () => {
  const comment = (id: string, thread: string | null, change: string | null = null, at = id): Comment => ({ id, amendment: 'a', change, thread, author: { id: 'p', name: 'P' }, text: id, created_at: at, resolved_at: null, resolved_by: null, version: 1, etag: '"1"' })
  it('hang answers on what they answer, in order', () => {
    const threads = threadsOf([comment('3', '1'), comment('1', null, 'c'), comment('2', '1'), comment('4', null), comment('5', 'lost')])
    expect(threads.map((thread) => [thread.first.id, thread.answers.map((answer) => answer.id)])).toEqual([['1', ['2', '3']], ['4', []], ['5', []]])
    expect(threadsAbout(threads, 'c').map((thread) => thread.first.id)).toEqual(['1'])
    expect(threadsAbout(threads, null).map((thread) => thread.first.id)).toEqual(['4', '5'])
  })
})

const level = (given: Partial<Level>, term: Partial<Level['term']> = {}, g: Partial<Level['g_j']> = {}): Level => ({
  id: 'Ne-I.2', species: 'Ne-I', configuration: '2p5.(2P*3/2).3s', coupling: 'J1K', energy_invcm: 134041.84, energy_unc_invcm: null, energy_literal: null, energy_source: 's', energy_evidence: 'read',
  line_checked: false, repeat_index: null, alternative_name: '1s5', note: null, status: 'active', revision: 1, ...given,
  term: { symbol: '2[3/2]*2', unicode: '', label: null, multiplicity: null, s: null, l: null, j: 2, parity: 'odd', degeneracy: 5, k: 1.5, core: { s: 0.5, l: 1, j: 1.5 }, l_outer: 0, ...term },
  g_j: { adopted: 1.5, adopted_unc: null, basis: 'measured', scheme: 'J1K', coupled: 1.5, coupled_exact: null, ls: null, ls_exact: null, measured: 1.5, measured_unc: null, measured_source: 's', measured_evidence: 'read', all_measured: [], status: 'ok', ...g },
})

describe('a published level as a row', () => {
  it('gives the core its parity back, from the level and the outer electron', () => {
    expect(valuesOfLevel(level({})).values).toMatchObject({ term: '2[3/2]*2', core: '2P*3/2', l_outer: 0, coupling: 'J1K' })
    expect(valuesOfLevel(level({}, { parity: 'even', l_outer: 1 })).values.core).toBe('2P*3/2')
  })
  it('sets the label before the term, and J alone for a level without one', () => {
    expect(valuesOfLevel(level({ coupling: 'LS' }, { symbol: '5P*2', label: 'z', core: undefined })).values).toMatchObject({ term: 'z5P*2', core: null })
    expect(valuesOfLevel(level({ coupling: 'unassigned' }, { symbol: 'J=3/2*', j: 1.5 })).values.term).toBe('J=3/2*')
  })
})

describe('the order of rows', () => {
  const sheet = new Sheet()
  const add = (id: string, species: string, energy: number) => sheet.add([{ key: `level:${id}`, subject: { kind: 'level', species, level: id, source: null, massNumber: null }, base: { energy_invcm: energy, term: '2S1/2' }, complete: true }])
  add('Na-I.2', 'Na-I', 20)
  add('K-I.1', 'K-I', 5)
  add('Na-I.1', 'Na-I', 10)
  sheet.addNew({ kind: 'level', species: 'Na-I', level: null, source: null, massNumber: null })
  sheet.addNew({ kind: 'source', species: null, level: null, source: 'x', massNumber: null })
  it('is by species and published energy, new levels last, other kinds not there', () => {
    expect(orderedLevels(sheet.rows(), NO_FILTER)).toEqual(['level:K-I.1', 'level:Na-I.1', 'level:Na-I.2', 'new:1'])
  })
  it('is filtered by words, by change and by findings', () => {
    sheet.absorb([madeChange({ subject: 'Na-I.2', before: { energy_invcm: 20 }, values: { energy_invcm: 21 }, findings: [{ severity: 'error', code: 'x', field: 'energy_invcm', detail: 'No.' }, { severity: 'warning', code: 'y', field: 'energy_literal', detail: 'Perhaps.' }] })])
    expect(orderedLevels(sheet.rows(), { ...NO_FILTER, words: 'k-i 2s' })).toEqual(['level:K-I.1'])
    expect(orderedLevels(sheet.rows(), { ...NO_FILTER, changed: true })).toEqual(['level:Na-I.2'])
    expect(orderedLevels(sheet.rows(), { ...NO_FILTER, findings: true })).toEqual(['level:Na-I.2'])
    const row = sheet.row('level:Na-I.2')
    expect(row && [...marksOf(row)]).toEqual([['energy', { severity: 'error', text: 'No. Perhaps.' }]])
  })
})
