import { quoted } from '@/lib/units/number'
import { type Parsed, parsed, refused } from '@/lib/atomic/errors'
import { coupledRange, degeneracy, formatHalf, formatHalfUrl, isTriangle, parseHalf, type TwoJ } from '@/lib/atomic/half'
import { lOfLetter, TERM_LETTERS, termLetter } from '@/lib/atomic/letters'

export { degeneracy, lOfLetter, termLetter }

export type Parity = 'even' | 'odd'

/** A Russell-Saunders term or level symbol. `parity` null: none marked, so either; `label`: the letter before a repeated term. */
export interface LsTerm {
  kind: 'LS'
  multiplicity: number
  twoS: TwoJ
  l: number
  parity: Parity | null
  label: string | null
  twoJ: TwoJ | null
}

/** A pair-coupling (J1 K) symbol, `2[3/2]*2`: K in brackets, 2 the multiplicity of the outer electron's spin. */
export interface PairTerm {
  kind: 'J1K'
  twoK: TwoJ
  twoJ: TwoJ | null
  parity: Parity | null
  label: string | null
}

/** A jj-coupling symbol, `(3/2,1/2)*1`. */
export interface JjTerm {
  kind: 'jj'
  twoJ1: TwoJ
  twoJ2: TwoJ
  twoJ: TwoJ | null
  parity: Parity | null
  label: string | null
}

export type Term = LsTerm | PairTerm | JjTerm

export type TermStyle = 'ascii' | 'unicode' | 'url'

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const SUBSCRIPTS = '₀₁₂₃₄₅₆₇₈₉'
const FORMS = 'write for example 2P*3/2 (odd), 3P2, 5D4, z 5P*, 2[3/2]*2 or (3/2,1/2)*1'

/** Brings every notation to plain ASCII: raised and lowered digits, degree sign, fraction slash, true minus. */
function plainForm(text: string): string {
  return text
    .replace(/[⁰¹²³⁴-⁹]/g, (d) => String(SUPERSCRIPTS.indexOf(d)))
    .replace(/[₀-₉]/g, (d) => String(SUBSCRIPTS.indexOf(d)))
    .replace(/[°º˚ᵒ∘]/g, '*')
    .replace(/[⁄∕]/g, '/')
    .replace(/½/g, '1/2')
    .replace(/[\u2212\u2013]/g, '-')
    .trim()
}

const malformed = (text: string, why: string) => refused('term_malformed', `${quoted(text)} is not a term symbol: ${why}; ${FORMS}.`)

/** The J's a sum of two angular momenta can have, in words: `1/2 or 3/2`. */
function inWords(values: readonly TwoJ[]): string {
  if (values.length > 4) return `${formatHalf(values[0] ?? 0)}, ${formatHalf(values[1] ?? 0)} ... ${formatHalf(values[values.length - 1] ?? 0)}`
  const words = values.map(formatHalf)
  return words.length < 2 ? (words[0] ?? 'none') : `${words.slice(0, -1).join(', ')} or ${words[words.length - 1] ?? ''}`
}

function readJ(text: string | undefined, whole: string, allowJ: boolean): Parsed<TwoJ | null> {
  if (text === undefined || text === '') return parsed(null)
  if (!allowJ) return malformed(whole, `a term without J is wanted here, and "${text}" is a J`)
  const j = parseHalf(text)
  if (!j.ok) return malformed(whole, `"${text}" is not a J`)
  if (j.value < 0) return malformed(whole, 'J cannot be negative')
  return parsed(j.value)
}

/** Checks that J is one that L and S make; the sentence names those that are possible. Code `term_impossible`. */
export function checkLsJ(term: { twoS: TwoJ; l: number }, twoJ: TwoJ): { code: string; detail: string } | null {
  if (isTriangle(term.twoS, 2 * term.l, twoJ)) return null
  const symbol = `${term.twoS + 1}${termLetter(term.l)}`
  return {
    code: 'term_impossible',
    detail: `A ${symbol} term (S = ${formatHalf(term.twoS)}, L = ${term.l}) has J = ${inWords(coupledRange(term.twoS, 2 * term.l))}; J = ${formatHalf(twoJ)} cannot be.`,
  }
}

const parityOf = (mark: string | undefined): Parity | null => (mark ? 'odd' : null)

function readLs(text: string, plain: string, allowJ: boolean): Parsed<Term> {
  const match = /^(?:([a-z])\s*)?(\d{1,3})\s*([A-Za-z])\s*(\*|o(?![a-z]))?\s*_?\s*([\d./ -]*)$/.exec(plain)
  if (!match) {
    if (/^\d+$/.test(plain)) return malformed(text, 'a letter for L must follow the multiplicity')
    if (/^[A-Z]/.test(plain)) return malformed(text, 'the multiplicity 2S + 1 must stand before the letter')
    return malformed(text, 'it is none of the known forms')
  }
  const [, label, multiplicityText = '', letter = '', mark, jText] = match
  const multiplicity = Number(multiplicityText)
  if (letter !== letter.toUpperCase()) return malformed(text, `the letter for L is a capital in a term ("${letter}" alone is an orbital)`)
  const l = lOfLetter(letter)
  if (l === null) return malformed(text, `"${letter}" stands for no L; the letters are ${TERM_LETTERS.split('').join(' ')} (J is left out)`)
  if (multiplicity < 1) return malformed(text, 'the multiplicity 2S + 1 is at least 1')
  const j = readJ(jText?.trim(), text, allowJ)
  if (!j.ok) return j
  const twoS = multiplicity - 1
  if (j.value !== null) {
    const wrong = checkLsJ({ twoS, l }, j.value)
    if (wrong) return refused(wrong.code, wrong.detail)
  }
  return parsed({ kind: 'LS', multiplicity, twoS, l, parity: parityOf(mark), label: label ?? null, twoJ: j.value })
}

function readPair(text: string, plain: string, allowJ: boolean): Parsed<Term> {
  const match = /^(?:([a-z])\s*)?(\d{1,2})?\s*\[\s*([\d./ -]+?)\s*\]\s*(\*|o)?\s*_?\s*([\d./ -]*)$/.exec(plain)
  if (!match) return malformed(text, 'a pair-coupling symbol is K in square brackets, then * if odd, then J')
  const [, label, multiplicity, kText = '', mark, jText] = match
  const k = parseHalf(kText)
  if (!k.ok || k.value < 0) return malformed(text, `"${kText}" in brackets is not a K (a whole or half number, 0 or more)`)
  if (multiplicity !== undefined && Number(multiplicity) !== 2) return refused('term_impossible', `The number before the bracket of ${quoted(text)} is 2s + 1 of one outer electron, so it is 2; ${multiplicity} cannot be.`)
  const j = readJ(jText?.trim(), text, allowJ)
  if (!j.ok) return j
  if (j.value !== null && !isTriangle(k.value, 1, j.value)) return refused('term_impossible', `With K = ${formatHalf(k.value)} and the outer electron's spin 1/2, J is ${inWords(coupledRange(k.value, 1))}; J = ${formatHalf(j.value)} cannot be.`)
  return parsed({ kind: 'J1K', twoK: k.value, twoJ: j.value, parity: parityOf(mark), label: label ?? null })
}

function readJj(text: string, plain: string, allowJ: boolean): Parsed<Term> {
  const match = /^(?:([a-z])\s*)?\(\s*([\d./ -]+?)\s*,\s*([\d./ -]+?)\s*\)\s*(\*|o)?\s*_?\s*([\d./ -]*)$/.exec(plain)
  if (!match) return malformed(text, 'a jj symbol is two angular momenta in round brackets with a comma, then * if odd, then J')
  const [, label, first = '', second = '', mark, jText] = match
  const [j1, j2] = [parseHalf(first), parseHalf(second)]
  if (!j1.ok || j1.value < 0) return malformed(text, `"${first}" is not an angular momentum`)
  if (!j2.ok || j2.value < 0) return malformed(text, `"${second}" is not an angular momentum`)
  const j = readJ(jText?.trim(), text, allowJ)
  if (!j.ok) return j
  if (j.value !== null && !isTriangle(j1.value, j2.value, j.value)) return refused('term_impossible', `J1 = ${formatHalf(j1.value)} and J2 = ${formatHalf(j2.value)} make J = ${inWords(coupledRange(j1.value, j2.value))}; J = ${formatHalf(j.value)} cannot be.`)
  return parsed({ kind: 'jj', twoJ1: j1.value, twoJ2: j2.value, twoJ: j.value, parity: parityOf(mark), label: label ?? null })
}

/**
 * Reads a term symbol in any common notation: `2P*3/2`, `2Po3/2`, `2P*3-2` (as in links), `3P2`, `²P°₃/₂`, `z5P*`, `a 5D`,
 * `2[3/2]*2`, `(3/2,1/2)*1`. An odd mark is `*`, `o` or a degree sign; no mark leaves the parity open (null).
 * Errors: `term_malformed` (not a symbol), `term_impossible` (a symbol that nature has not: `2P5/2`).
 */
export function parseTerm(text: string, options: { allowJ?: boolean } = {}): Parsed<Term> {
  const allowJ = options.allowJ ?? true
  if (text.length > 60) return malformed(text, 'it is too long')
  const plain = plainForm(text)
  if (plain === '') return refused('term_malformed', `A term symbol is missing: ${FORMS}.`)
  if (plain.includes('[')) return readPair(text, plain, allowJ)
  if (plain.startsWith('(') || /^[a-z]\s*\(/.test(plain)) return readJj(text, plain, allowJ)
  return readLs(text, plain, allowJ)
}

const raised = (text: string): string => text.replace(/\d/g, (d) => SUPERSCRIPTS[Number(d)] ?? d)
const lowered = (text: string): string => text.replace(/\d/g, (d) => SUBSCRIPTS[Number(d)] ?? d)

/** Prints the symbol (never the label): `2P*3/2`, `²P°₃/₂`, or `2P*3-2` for links. */
export function printTerm(term: Term, style: TermStyle): string {
  const half = style === 'url' ? formatHalfUrl : formatHalf
  const odd = term.parity === 'odd' ? (style === 'unicode' ? '°' : '*') : ''
  const jText = term.twoJ === null ? '' : half(term.twoJ)
  const j = style === 'unicode' ? lowered(jText) : jText
  const upper = (text: string) => (style === 'unicode' ? raised(text) : text)
  if (term.kind === 'LS') return `${upper(String(term.multiplicity))}${termLetter(term.l)}${odd}${j}`
  if (term.kind === 'J1K') return `${upper('2')}[${half(term.twoK)}]${odd}${j}`
  return `(${half(term.twoJ1)},${half(term.twoJ2)})${odd}${j}`
}

/** The symbol with its label before it where there is one: `z 5P*2`. */
export const printLabelledTerm = (term: Term, style: 'ascii' | 'unicode'): string => `${term.label === null ? '' : `${term.label} `}${printTerm(term, style)}`

/** Makes an LS term from its quantum numbers. */
export const lsTerm = (twoS: TwoJ, l: number, twoJ: TwoJ | null, parity: Parity | null, label: string | null = null): LsTerm => ({
  kind: 'LS',
  multiplicity: twoS + 1,
  twoS,
  l,
  parity,
  label,
  twoJ,
})
