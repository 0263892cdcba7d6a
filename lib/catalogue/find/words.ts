import { fold } from '@/lib/catalogue/search-index'

/** A word of the query with its place in it. */
export interface Word {
  readonly text: string
  readonly start: number
  readonly end: number
}

const GREEK: Readonly<Record<string, string>> = { α: 'alpha', β: 'beta', γ: 'gamma', δ: 'delta', ε: 'epsilon' }

// white space, control characters, and marks that are not seen
const GAP = /[\s\u0000-\u001f\u007f-\u009f\u200b-\u200f\u2028-\u202e\u2060-\u2064\ufeff]+/u
const EDGES = /^[,;:!?"'“”‘’«»]+|[,;:!?"'“”‘’«»]+$/gu

/** The words of a query, with stops and quotation marks at their edges taken off. */
export function wordsOf(query: string): Word[] {
  const words: Word[] = []
  let at = 0
  for (const piece of query.split(GAP)) {
    const start = piece === '' ? at : query.indexOf(piece, at)
    at = start + piece.length
    const bare = piece.replace(EDGES, '')
    if (bare === '') continue
    const from = start + piece.indexOf(bare)
    words.push({ text: bare, start: from, end: from + bare.length })
  }
  return words
}

/** For comparing names: folded, Greek letters spelt out, nothing but letters and digits. `H-alpha`, `H α` and `Hα` are one. */
export const squash = (text: string): string =>
  fold(text)
    .replace(/[α-ε]/g, (letter) => GREEK[letter] ?? letter)
    .replace(/[^\p{L}\p{N}]+/gu, '')

/** The query with a stretch taken away. */
export const withoutStretch = (query: string, start: number, end: number): string => `${query.slice(0, start)} ${query.slice(end)}`.replace(/\s+/g, ' ').trim()

/** The query with a stretch replaced. */
export const withStretch = (query: string, start: number, end: number, replacement: string): string => `${query.slice(0, start)}${replacement}${query.slice(end)}`.replace(/\s+/g, ' ').trim()
