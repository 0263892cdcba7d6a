import { formatHalf, parseHalf } from '@/lib/atomic/half'
import { parseTerm, printTerm, type Term } from '@/lib/atomic/term'
import { quoted } from '@/lib/units/number'
import type { Coupling, Parity } from '@/openapi/schemas/common'
import type { Finding } from '@/openapi/schemas/change'
import type { LevelRow } from '../rows'
import { namesUnassigned, splitLabel, splitUnassigned } from '../values/level-term'
import { fault, type RowCells } from './cells'
import { ownOf } from './own'

/** A level's symbol put together from the columns that speak of it; `text` is null where none does. */
export interface ComposedTerm { text: string | null; coupling: string | null; faults: readonly Finding[] }

/** Which coupling a symbol is of, by its brackets. */
const couplingOf = (symbol: string): Coupling => (namesUnassigned(symbol) ? 'unassigned' : symbol.includes('[') ? 'J1K' : splitLabel(symbol).symbol.trimStart().startsWith('(') ? 'jj' : 'LS')

const ODD = new Set(['odd', 'o', '*', '°'])
const EVEN = new Set(['even', 'e'])

function readParity(text: string): Parity | null {
  const word = text.trim().toLowerCase()
  return ODD.has(word) ? 'odd' : EVEN.has(word) ? 'even' : null
}

interface Said { j: number | null; parity: Parity | null; label: string | null }

/** What the columns j, parity and label say, beside the symbol. */
function saidBeside(cells: RowCells, faults: Finding[]): Said {
  const jText = cells.text('j')
  const j = jText === null ? null : parseHalf(jText)
  if (j !== null && !j.ok) faults.push(fault(j.code, 'j', j.detail))
  const parityText = cells.text('parity')
  const parity = parityText === null ? null : readParity(parityText)
  if (parityText !== null && parity === null) faults.push(fault('value_not_listed', 'parity', `${quoted(parityText)} is no parity: write even or odd.`))
  return { j: j !== null && j.ok ? j.value : null, parity, label: cells.text('label')?.trim() ?? null }
}

const against = (field: string, detail: string): Finding => fault('column_contradicts', field, detail)

/** Fills what the symbol leaves open with what stands beside it, and tells where the two say different things. */
function joined(symbol: string, said: Said, base: LevelRow | null, cells: RowCells, faults: Finding[]): string {
  const split = splitLabel(symbol)
  const parsed = parseTerm(split.symbol)
  // what cannot be read is told by the reader of levels, who sees it as it was written
  if (!parsed.ok) return symbol
  const term: Term = parsed.value
  const inSymbol = split.label ?? term.label
  if (term.twoJ !== null && said.j !== null && term.twoJ !== said.j) faults.push(against('j', `The term says J = ${formatHalf(term.twoJ)} and the column j ${formatHalf(said.j)}.`))
  if (term.parity === 'odd' && said.parity === 'even') faults.push(against('parity', 'The term is marked odd and the column parity says even.'))
  // a symbol with J and no mark is that of an even level, unless the table writes its parity in a column of its own
  if (inSymbol !== null && said.label !== null && inSymbol !== said.label) faults.push(against('label', `The term begins with the label ${inSymbol} and the column label says ${quoted(said.label)}.`))
  const label = inSymbol ?? said.label ?? (cells.has('label') ? null : (base?.label ?? null))
  const twoJ = term.twoJ ?? said.j ?? (cells.has('j') ? null : (base?.twoJ ?? null))
  const parity = term.parity ?? said.parity ?? (cells.has('parity') ? null : (base?.parity ?? null))
  return `${label === null ? '' : `${label} `}${printTerm({ ...term, twoJ, parity }, 'ascii')}`
}

/** The symbol of a level that the file has no column for: that of the table, with what other columns say instead. */
function fromBase(base: LevelRow, said: Said, cells: RowCells): string {
  const changed: LevelRow = { ...base, twoJ: said.j ?? base.twoJ, parity: said.parity ?? base.parity, label: null }
  const label = cells.has('label') ? said.label : base.label
  return `${label === null ? '' : `${label} `}${String(ownOf(changed, 'term'))}`
}

const SPEAKING = ['term', 'label', 'j', 'parity', 'coupling']

/** Puts together what the columns term, label, j, parity and coupling say; what the file has no column for comes from `base`. */
export const composeTerm = (cells: RowCells, base: LevelRow | null): ComposedTerm => (base === null ? cells.once(SPEAKING, () => compose(cells, null)) : compose(cells, base))

function compose(cells: RowCells, base: LevelRow | null): ComposedTerm {
  const faults: Finding[] = []
  const said = saidBeside(cells, faults)
  const stated = cells.text('coupling')?.trim() ?? null
  const symbol = cells.text('term')
  if (symbol === null && !cells.has('term') && base !== null) return { text: fromBase(base, said, cells), coupling: stated ?? base.coupling, faults }
  if (symbol === null && stated !== 'unassigned') return { text: null, coupling: stated, faults }
  const coupling = stated ?? couplingOf(symbol ?? '')
  if (coupling !== 'unassigned') return { text: joined(symbol ?? '', said, base, cells, faults), coupling, faults }
  const own = symbol === null ? null : splitUnassigned(symbol)
  if (symbol !== null && own === null) return { text: symbol, coupling, faults }
  const ownJ = own === null ? null : parseHalf(own.j)
  if (ownJ !== null && ownJ.ok && said.j !== null && ownJ.value !== said.j) faults.push(against('j', `The term says J = ${formatHalf(ownJ.value)} and the column j ${formatHalf(said.j)}.`))
  if (own?.odd === true && said.parity === 'even') faults.push(against('parity', 'The term is marked odd and the column parity says even.'))
  const twoJ = ownJ !== null && ownJ.ok ? ownJ.value : said.j
  if (twoJ === null) return { text: symbol, coupling, faults }
  const label = own?.label ?? said.label
  return { text: `${label === null ? '' : `${label} `}J=${formatHalf(twoJ)}${own?.odd === true || said.parity === 'odd' ? '*' : ''}`, coupling, faults }
}
