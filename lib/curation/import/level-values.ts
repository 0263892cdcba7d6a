import { parseHalf } from '@/lib/atomic/half'
import { lsTerm, printTerm } from '@/lib/atomic/term'
import { quoted, readNumber } from '@/lib/units/number'
import type { Finding, LevelValues, MeasuredGValues } from '@/openapi/schemas/change'
import type { LevelRow, MeasuredGRow } from '../rows'
import { readPrinted, writeLevelValues } from '../values'
import { fault, readFlag, type RowCells, says } from './cells'
import { COLUMNS, type OwnColumn, ownColumn } from './columns'
import { ownOf, shownMeasured } from './own'
import { composeTerm } from './term'

/** Columns of a level's values, in groups that are compared and taken over together. */
const DIRECT: readonly OwnColumn[] = ['configuration', 'energy_source', 'energy_evidence', 'g_j_chosen', 'g_j_chosen_reason', 'line_checked', 'repeat_index', 'alternative_name', 'note', 'energy_unc_invcm'].map(named)
const TERM = ['coupling', 'term', 'label', 'j', 'parity'].map(named)
const CORE = ['core_s', 'core_l', 'core_j'].map(named)
const ENERGY = ['energy_invcm', 'energy_literal'].map(named)
const MEASURED = ['g_j_measured', 'g_j_measured_unc', 'g_source', 'g_evidence'].map(named)
const OUTER = [named('l_outer')]
/** Say again what the rest of the row says. */
const CONTROLS = COLUMNS.filter((one) => one.use === 'control' && one.name !== 'revision')

function named(name: string): OwnColumn {
  const column = ownColumn(name)
  if (column === undefined) throw new Error(`there is no column ${name}`)
  return column
}

const number = (text: string | null): number | string | null => (text === null ? null : (readNumber(text) ?? text))

/** Whether the row says anything else than the level has, in the columns that there are. */
const differs = (cells: RowCells, row: LevelRow, columns: readonly OwnColumn[]): boolean =>
  columns.some((column) => cells.has(column.name) && !says(column, cells.text(column.name), ownOf(row, column.name)))

const VALUES = [...DIRECT, ...TERM, ...CORE, ...ENERGY, ...MEASURED, ...OUTER]

/** A row that says what the level has already, whatever way it is written; most rows of an export that comes back. */
export const saysTheSame = (cells: RowCells, row: LevelRow): boolean => !differs(cells, row, VALUES) && !differs(cells, row, CONTROLS)

function composeCore(cells: RowCells, faults: Finding[]): string | null {
  const [s, l, j] = [cells.text('core_s'), cells.text('core_l'), cells.text('core_j')]
  if (s === null && l === null && j === null) return null
  const [readS, readJ] = [parseHalf(s ?? ''), parseHalf(j ?? '')]
  const readL = readNumber(l ?? '')
  if (!readS.ok) faults.push(fault(readS.code, 'core_s', s === null ? 'The core needs core_s, core_l and core_j together.' : readS.detail))
  if (readL === null || !Number.isInteger(readL) || readL < 0 || readL > 20) faults.push(fault('number_malformed', 'core_l', l === null ? 'The core needs core_s, core_l and core_j together.' : `${quoted(l)} is no L: a whole number from 0 to 20.`))
  if (!readJ.ok) faults.push(fault(readJ.code, 'core_j', j === null ? 'The core needs core_s, core_l and core_j together.' : readJ.detail))
  if (!readS.ok || !readJ.ok || readL === null || faults.length > 0) return null
  return printTerm(lsTerm(readS.value, readL, readJ.value, null), 'ascii')
}

/** Energy and printed digits: one that the file has no column for, and no longer agrees, is not kept. */
function energyOf(cells: RowCells, base: LevelValues | null): Pick<LevelValues, 'energy_invcm' | 'energy_literal'> {
  const text = cells.text('energy_invcm')
  const literal = cells.text('energy_literal')
  if (cells.has('energy_literal')) {
    if (cells.has('energy_invcm')) return { energy_literal: literal, energy_invcm: number(text) }
    return { energy_literal: literal, energy_invcm: literal === null ? (base?.energy_invcm ?? null) : null }
  }
  // digits with the uncertainty of the last ones in brackets are printed digits
  if (text !== null && readNumber(text) === null && readPrinted(text) !== null) return { energy_literal: text, energy_invcm: null }
  return { energy_literal: null, energy_invcm: number(text) }
}

const measuredValues = ({ value, unc, literal, source, evidence, note }: MeasuredGRow): MeasuredGValues => ({ value, unc, literal, source, evidence, note })

/** The row's measured g_J takes the place of the one that an export shows; all others stay. Empty cells take it away. */
function measuredOf(cells: RowCells, row: LevelRow | null): MeasuredGValues[] {
  const shown = row === null ? null : shownMeasured(row)
  const others = (row?.measured ?? []).map(measuredValues)
  const at = row === null || shown === null ? -1 : row.measured.indexOf(shown)
  const take = <T>(name: string, read: (text: string | null) => T, own: T): T => (cells.has(name) ? read(cells.text(name)) : own)
  const text = (cell: string | null): string | null => cell
  const value = take('g_j_measured', number, shown?.value ?? null)
  const unc = take('g_j_measured_unc', number, shown?.unc ?? null)
  const source = take('g_source', text, shown?.source ?? null)
  const evidence = take('g_evidence', text, shown?.evidence ?? null)
  const gone = value === null && cells.text('g_j_measured_unc') === null && cells.text('g_source') === null && cells.text('g_evidence') === null
  if (gone) return others.filter((_, i) => i !== at)
  const sameValue = shown !== null && value === shown.value && unc === shown.unc
  const made: MeasuredGValues = { value, unc, literal: sameValue ? shown.literal : null, source, evidence, note: shown !== null && source === shown.source ? shown.note : null }
  return at < 0 ? [...others, made] : others.map((one, i) => (i === at ? made : one))
}

function direct(cells: RowCells, column: OwnColumn, faults: Finding[]): string | number | boolean | null {
  const text = cells.text(column.name)
  if (column.kind === 'number') return number(text)
  if (column.kind !== 'flag') return text
  const flag = readFlag(text)
  if (flag === undefined) faults.push(fault('value_not_listed', column.name, `${quoted(text ?? '')} is neither true nor false.`))
  return flag ?? null
}

export interface RowValues { values: LevelValues; faults: Finding[] }

/**
 * What a row makes of a level: `base` with everything that the row says otherwise, or all that the row says of a new level.
 * Columns that the file does not have stay as they are in the table; an empty cell empties its value.
 */
export function valuesOf(cells: RowCells, base: LevelRow | null): RowValues {
  const faults: Finding[] = []
  const values: LevelValues = base === null ? {} : writeLevelValues(base)
  const changed = (columns: readonly OwnColumn[]): boolean => (base === null ? columns.some((column) => cells.text(column.name) !== null) : differs(cells, base, columns))
  for (const column of DIRECT) if (changed([column])) Object.assign(values, { [column.name]: direct(cells, column, faults) })
  if (changed(TERM)) {
    const term = composeTerm(cells, base)
    faults.push(...term.faults)
    values.term = term.text
    values.coupling = term.coupling
  }
  if (changed(CORE)) values.core = composeCore(cells, faults)
  if (changed(OUTER)) values.l_outer = number(cells.text('l_outer'))
  if (changed(ENERGY)) Object.assign(values, energyOf(cells, base === null ? null : values))
  if (changed(MEASURED)) values.measured_g = measuredOf(cells, base)
  return { values, faults }
}

/** A row that was exported before the level was last published would put back what has been corrected since. */
export function olderRevision(cells: RowCells, level: string, inForce: number | null): Finding[] {
  const from = readNumber(cells.text('revision') ?? '')
  if (from === null || inForce === null || from >= inForce) return []
  return [fault('base_stale', 'revision', `The row comes from revision ${from} of ${level}, and the table has revision ${inForce}: export it again and make the change there, or leave the column revision out.`)]
}

/** Columns that say again what others say, and do not agree with what was read. */
export function contradictions(cells: RowCells, row: LevelRow): Finding[] {
  return CONTROLS.flatMap((column) => {
    const text = cells.text(column.name)
    if (text === null) return []
    const own = ownOf(row, column.name)
    if (says(column, text, own)) return []
    if (column.name === 'status') return [fault('column_contradicts', 'status', `The row says ${quoted(text)} and the level is ${row.status}: a level is retired by a change of its own, with a reason.`)]
    return [fault('column_contradicts', column.name, own === null ? `The column says ${quoted(text)}, and a level of ${row.coupling} coupling has none.` : `The column says ${quoted(text)} and the rest of the row ${String(own)}.`)]
  })
}
