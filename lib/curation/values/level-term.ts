import { formatHalf, parseHalf, type TwoJ } from '@/lib/atomic/half'
import { lsTerm, parseTerm, printTerm, type Term } from '@/lib/atomic/term'
import { quoted } from '@/lib/units/number'
import type { Coupling, Parity } from '@/openapi/schemas/common'
import type { LevelRow } from '../rows'

/** What a term symbol says of a level. Without an odd mark the parity is even: the table's symbols always carry theirs. */
export interface LevelTerm { label: string | null; term: Term | null; twoJ: TwoJ; parity: Parity }
type Reading = { ok: true; value: LevelTerm } | { ok: false; code: string; detail: string }

const unreadable = (code: string, detail: string): Reading => ({ ok: false, code, detail })

const UNASSIGNED = /^\s*(?:([A-Za-z]{1,4})\s+)?J\s*=\s*([0-9./]+)\s*([*°o]?)\s*$/
const LABELLED = /^\s*([A-Za-z]{1,4})\s*(?=[\d([⁰¹²³⁴-⁹])(.+)$/s

/** What the name of a level of no coupling says, `J=3/2*` or `a J=3/2`; null where the text is none. */
export function splitUnassigned(text: string): { label: string | null; j: string; odd: boolean } | null {
  const found = UNASSIGNED.exec(text)
  return found === null ? null : { label: found[1] ?? null, j: found[2] ?? '', odd: found[3] !== '' }
}

/** Whether a text means to name a level of no coupling, well written or not. */
export const namesUnassigned = (text: string): boolean => /^\s*(?:[A-Za-z]{1,4}\s+)?J\s*=/.test(text)

/** The letters before a repeated term, and the symbol after them: `z5P*2`, `a 5D4`, `y(1/2,3/2)*1`. */
export function splitLabel(text: string): { label: string | null; symbol: string } {
  const found = LABELLED.exec(text)
  return { label: found?.[1] ?? null, symbol: found?.[2] ?? text }
}

const REMEMBERED = 20_000
const readings = new Map<string, Reading>()

function read(text: string, coupling: Coupling): Reading {
  const unassigned = splitUnassigned(text)
  if (coupling === 'unassigned') {
    if (unassigned === null) return unreadable('term_malformed', `${quoted(text)} is not how an unassigned level is named: write J=3/2, or J=3/2* where it is odd.`)
    const j = parseHalf(unassigned.j)
    if (!j.ok) return j
    return { ok: true, value: { label: unassigned.label, term: null, twoJ: j.value, parity: unassigned.odd ? 'odd' : 'even' } }
  }
  if (unassigned !== null) return unreadable('coupling_mismatch', `${quoted(text)} names a level of no coupling: set coupling to unassigned, or give its ${coupling} symbol.`)
  const { label, symbol } = splitLabel(text)
  const term = parseTerm(symbol)
  if (!term.ok) return term
  const { value } = term
  if (value.kind !== coupling) return unreadable('coupling_mismatch', `${quoted(text)} is a symbol of ${value.kind} coupling, and the level is given as ${coupling}: mend the coupling or the symbol.`)
  if (value.twoJ === null) return unreadable('j_missing', `${quoted(text)} has no J: a level's symbol ends with it, such as ${printTerm({ ...value, twoJ: value.kind === 'LS' ? Math.abs(value.twoS - 2 * value.l) : 0 }, 'ascii')}.`)
  return { ok: true, value: { label: label ?? value.label, term: value, twoJ: value.twoJ, parity: value.parity ?? 'even' } }
}

/** Reads the symbol of a level with its J, remembering it by its text. */
export function readLevelTerm(text: string, coupling: Coupling): Reading {
  const key = `${coupling}|${text}`
  const known = readings.get(key)
  if (known !== undefined) return known
  const made = read(text, coupling)
  if (readings.size >= REMEMBERED) readings.clear()
  readings.set(key, made)
  return made
}

/** The symbol of a level as a curator would write it: label, term, odd mark and J. */
export function printLevelTerm(row: Pick<LevelRow, 'coupling' | 'label' | 'twoS' | 'l' | 'twoJ' | 'twoK' | 'coreTwoJ' | 'outerTwoJ' | 'parity'>): string {
  const { twoJ, parity } = row
  const label = row.label === null ? '' : `${row.label} `
  if (row.coupling === 'LS') return label + printTerm(lsTerm(row.twoS ?? 0, row.l ?? 0, twoJ, parity), 'ascii')
  if (row.coupling === 'J1K') return label + printTerm({ kind: 'J1K', twoK: row.twoK ?? 0, twoJ, parity, label: null }, 'ascii')
  if (row.coupling === 'jj') return label + printTerm({ kind: 'jj', twoJ1: row.coreTwoJ ?? 0, twoJ2: row.outerTwoJ ?? 0, twoJ, parity, label: null }, 'ascii')
  return `${label}J=${formatHalf(twoJ)}${parity === 'odd' ? '*' : ''}`
}

/** The parity of the core that an outer electron couples to: the level's, less that electron's. */
const coreParity = (row: Pick<LevelRow, 'parity' | 'lOuter'>): Parity => (((row.parity === 'odd' ? 1 : 0) + (row.lOuter ?? 0)) % 2 === 0 ? 'even' : 'odd')

/** The core's term with its J, `2P*3/2`; null where the level has none. */
export function printCore(row: Pick<LevelRow, 'coreTwoS' | 'coreL' | 'coreTwoJ' | 'parity' | 'lOuter'>): string | null {
  if (row.coreTwoS === null || row.coreL === null || row.coreTwoJ === null) return null
  return printTerm(lsTerm(row.coreTwoS, row.coreL, row.coreTwoJ, row.lOuter === null ? null : coreParity(row)), 'ascii')
}
