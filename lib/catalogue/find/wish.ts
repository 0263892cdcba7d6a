import type { Term } from '@/lib/atomic/term'
import type { Bound, ConfigurationWanted } from '@/lib/catalogue/criteria'
import type { Line } from '@/lib/catalogue/lines'
import type { Snapshot } from '@/lib/catalogue/shape'
import type { SpectralWindow } from '@/lib/catalogue/window'
import type { Find } from '@/openapi/schemas/find'
import type { Word } from '@/lib/catalogue/find/words'

export type PartKind = Find['understood'][number]['kind']
export type Question = Find['questions'][number]

/** A stretch of the spectrum asked for, with the place that lines near it are sorted from. */
export interface WindowWish {
  readonly window: SpectralWindow
  readonly centreInvcm: number
}

/** What the parts of a query ask for together. Different members must all hold; within a list any one does. */
export interface Wish {
  /** Indices of species; null: any. */
  species: Set<number> | null
  terms: Term[]
  configurations: ConfigurationWanted[]
  twoJ: number[]
  twoS: number | undefined
  l: number | undefined
  parity: 'even' | 'odd' | undefined
  gMin: Bound | undefined
  gMax: Bound | undefined
  gEffMin: Bound | undefined
  gEffMax: Bound | undefined
  /** Energies of levels; with `alsoIntervals` they are positions of lines as well. */
  energy: { minInvcm: number; maxInvcm: number; alsoIntervals: boolean } | null
  windows: WindowWish[]
  /** Levels named one by one. */
  levels: Set<number> | null
  /** Levels to be shown before the others. */
  favoured: Set<number>
  /** Lines named one by one. */
  lines: Line[] | null
  words: string[]
  /** A part names something that is not in the edition, or cannot be: nothing is found. */
  impossible: boolean
}

export const emptyWish = (): Wish => ({
  species: null,
  terms: [],
  configurations: [],
  twoJ: [],
  twoS: undefined,
  l: undefined,
  parity: undefined,
  gMin: undefined,
  gMax: undefined,
  gEffMin: undefined,
  gEffMax: undefined,
  energy: null,
  windows: [],
  levels: null,
  favoured: new Set(),
  lines: null,
  words: [],
  impossible: false,
})

/** What a reader is given: the words of the query, and the edition they are read against. */
export interface Reading {
  readonly snapshot: Snapshot
  readonly query: string
  readonly words: readonly Word[]
  /** Species named anywhere in the query: a nickname or a Paschen name is read with them in mind. */
  readonly speciesNamed: ReadonlySet<number>
}

/** A part that was understood: it ends before word `next`. */
export interface ReadPart {
  readonly next: number
  readonly kind: PartKind
  readonly meaning: string
  readonly apply: (wish: Wish) => void
  readonly questions?: readonly Question[]
}

/** Tries to read a part that begins at word `at`; null when it is none of this reader's. */
export type Reader = (reading: Reading, at: number) => ReadPart | null

/** The text from the start of word `at` up to the end of the word before `next`. */
export const stretch = ({ query, words }: Reading, at: number, next: number): string => query.slice(words[at]?.start ?? 0, words[next - 1]?.end ?? 0)

/** For readers that match a pattern over several words: the word after the match; null when it ends inside a word. */
export function nextAfter({ words }: Reading, at: number, length: number): number | null {
  const end = (words[at]?.start ?? 0) + length
  for (let next = at + 1; next <= words.length; next += 1) if (words[next - 1]?.end === end) return next
  return null
}

/** The query from the start of word `at`. */
export const restFrom = ({ query, words }: Reading, at: number): string => query.slice(words[at]?.start ?? query.length)

export const addTo = <T>(set: Set<T> | null, items: Iterable<T>): Set<T> => {
  const grown = set ?? new Set<T>()
  for (const item of items) grown.add(item)
  return grown
}

export const keepCommon = <T>(set: Set<T> | null, items: Iterable<T>): Set<T> => {
  const given = new Set(items)
  return set === null ? given : new Set([...set].filter((item) => given.has(item)))
}
