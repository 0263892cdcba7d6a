import { nearest } from '@/lib/problem/nearest'
import { quoted } from '@/lib/units/number'
import type { ImportProblem, ImportReading } from '@/openapi/schemas/import'
import { COLUMNS, type OwnColumn, ownColumn, REQUIRED } from './columns'

/** Which cell of a row is which column of ours. */
export interface Layout {
  /** As many as the header has cells; null where a column is left out. */
  columns: readonly (OwnColumn | null)[]
  /** Cells that the file does not have, the same for every row. */
  defaults: ReadonlyMap<string, string>
  shown: ImportReading['columns']
  problems: ImportProblem[]
}

type Mapping = Readonly<Record<string, string | null>>

const SAMPLES = 3
const SAMPLE_LENGTH = 80

const READ = COLUMNS.filter((one) => one.use !== 'computed')
const names = READ.map((one) => one.name)

/** `Energy (cm^-1)` -> `energy`: small letters without marks, units in brackets, or signs. */
const plain = (header: string): string => header.normalize('NFKD').replace(/[\u0300-\u036f]/g, '').toLowerCase().replace(/\([^)]*\)|\[[^\]]*\]/g, ' ').replace(/\bcm\s*\^?\s*[-\u2212]?\s*1\b|\bin\b/g, ' ').replace(/[^a-z0-9+]+/g, ' ').trim()

/** Our column that a foreign header most likely means. */
export function suggestionFor(header: string): string | null {
  const words = plain(header)
  if (words === '') return null
  const same = READ.find((one) => plain(one.name) === words || one.name.replaceAll('_', ' ') === words || one.words.includes(words))
  if (same !== undefined) return same.name
  const begins = READ.flatMap((one) => one.words.filter((word) => word.length > 2 && (words.startsWith(`${word} `) || words.endsWith(` ${word}`))).map((word) => ({ name: one.name, length: word.length }))).sort((a, b) => b.length - a.length)[0]
  return begins?.name ?? (words.length < 4 ? null : nearest(words.replaceAll(' ', '_'), names))
}

const LEVEL = /^[A-Z][a-z]?-[IVXLC]+\.[1-9][0-9]{0,6}$/
/** A column whose cells are all identifiers of levels is one, whatever it is called. */
const holdsLevels = (cells: readonly string[]): boolean => cells.length > 0 && cells.every((cell) => LEVEL.test(cell.trim()))

/** No two headers are guessed to be the same column, nor one that is there already: the first keeps it. */
function distinct(shown: readonly ImportReading['columns'][number][]): ImportReading['columns'] {
  const taken = new Set(shown.flatMap(({ field }) => (field === null ? [] : [field])))
  return shown.map((one) => {
    if (one.suggestion === null) return one
    if (taken.has(one.suggestion)) return { ...one, suggestion: null }
    taken.add(one.suggestion)
    return one
  })
}

const shorten = (text: string): string => (text.length > SAMPLE_LENGTH ? `${text.slice(0, SAMPLE_LENGTH - 3)}...` : text).toWellFormed()

function columnOf(header: string, cells: readonly string[], mapping: Mapping, problems: ImportProblem[]): Omit<ImportReading['columns'][number], 'header' | 'sample'> {
  const told = Object.hasOwn(mapping, header) ? mapping[header] : undefined
  if (told === null) return { field: null, suggestion: null, note: 'Left out, as the mapping says.' }
  const name = told ?? header.trim().toLowerCase()
  const own = ownColumn(name)
  if (own?.use === 'computed') return { field: null, suggestion: null, note: `Left out: the table computes ${own.name} itself.` }
  if (own !== undefined) return { field: own.name, suggestion: null, note: own.use === 'control' ? 'Not imported, and must agree with the rest of the row.' : null }
  if (told !== undefined) {
    problems.push({ code: 'mapping_unknown', detail: `The mapping gives ${quoted(header)} to ${quoted(told)}, which is no column of ours.${near(told)} GET /import-columns lists them.`, column: header })
    return { field: null, suggestion: suggestionFor(header), note: null }
  }
  if (header.trim() === '') return { field: null, suggestion: null, note: 'It has no name: its cells must be empty.' }
  const suggestion = holdsLevels(cells) ? 'id' : suggestionFor(header)
  problems.push({ code: 'column_unknown', detail: `${quoted(header)} is no column of ours${suggestion === null ? '' : `; it may be ${suggestion}`}. Say by the mapping which one it is, or null to leave it out.`, column: header })
  return { field: null, suggestion, note: null }
}

const near = (name: string): string => {
  const found = nearest(name, names)
  return found === null || found === name ? '' : ` Did you mean ${found}?`
}

function twice(headers: readonly string[], shown: ImportReading['columns']): ImportProblem[] {
  const problems: ImportProblem[] = []
  const repeated = new Set(headers.filter((header, i) => header.trim() !== '' && headers.indexOf(header) !== i))
  for (const header of repeated) problems.push({ code: 'column_repeated', detail: `The header names ${quoted(header)} more than once; rename or remove one.`, column: header })
  const byField = new Map<string, string[]>()
  for (const { field, header } of shown) if (field !== null && !repeated.has(header)) byField.set(field, [...(byField.get(field) ?? []), header])
  for (const [field, list] of byField) if (list.length > 1) problems.push({ code: 'column_repeated', detail: `${list.map(quoted).join(' and ')} are both read as ${field}; leave one out by mapping it to null.`, column: list[1] })
  return problems
}

function missing(has: (name: string) => boolean): ImportProblem[] {
  if (has('id')) return []
  return REQUIRED.filter((name) => !has(name) && !(name === 'energy_invcm' && has('energy_literal')))
    .map((name) => ({ code: 'column_missing', detail: `There is no column ${name}, which a file without a column id needs.`, column: name }))
}

function defaultsOf(given: Readonly<Record<string, string>>, present: ReadonlySet<string>, problems: ImportProblem[]): Map<string, string> {
  const kept = new Map<string, string>()
  for (const [name, text] of Object.entries(given)) {
    const own = ownColumn(name)
    if (own === undefined || own.use === 'computed' || name === 'id') problems.push({ code: 'mapping_unknown', detail: `defaults: ${quoted(name)} is no column that can be the same for every row.${near(name)}`, column: name })
    else if (present.has(name)) problems.push({ code: 'column_repeated', detail: `defaults: the file has a column ${name} of its own; leave the default out, or the column by mapping it to null.`, column: name })
    else kept.set(name, text)
  }
  return kept
}

/** Reads a header: what each of its columns is, and everything that is wrong with it as a whole. */
export function layoutOf(header: readonly string[], samples: readonly (readonly string[])[], mapping: Mapping, defaults: Readonly<Record<string, string>>): Layout {
  const problems: ImportProblem[] = []
  for (const name of Object.keys(mapping)) {
    if (!header.includes(name)) problems.push({ code: 'mapping_unknown', detail: `The mapping speaks of ${quoted(name)}, and the file has no such header.`, column: name.slice(0, 200) })
  }
  const shown = distinct(header.map((name, i): ImportReading['columns'][number] => {
    const cells = samples.slice(0, SAMPLES).map((row) => row[i] ?? '')
    return { header: shorten(name), ...columnOf(name, cells, mapping, problems), sample: cells.map(shorten) }
  }))
  problems.push(...twice(header, shown))
  const present = new Set(shown.flatMap(({ field }) => (field === null ? [] : [field])))
  const kept = defaultsOf(defaults, present, problems)
  // one that a header not known yet may be is asked for there
  const perhaps = new Set(shown.flatMap(({ suggestion }) => (suggestion === null ? [] : [suggestion])))
  problems.push(...missing((name) => present.has(name) || kept.has(name) || perhaps.has(name)))
  return { columns: shown.map(({ field }) => (field === null ? null : (ownColumn(field) ?? null))), defaults: kept, shown, problems: problems.slice(0, 200).map((one) => ({ ...one, ...(one.column === undefined ? {} : { column: shorten(one.column) }) })) }
}
