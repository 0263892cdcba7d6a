import { printTerm, type Term } from '@/lib/atomic/term'
import type { Snapshot } from '@/lib/catalogue/shape'

export type LevelSort = 'energy' | '-energy' | 'j' | 'g' | 'species'

/** What search derives from a snapshot once: distinct configurations and symbols, folded for comparing, and orders of the levels. */
export interface SearchIndex {
  /** Number of a level's configuration among the distinct ones. */
  readonly configurationNumber: Uint32Array
  readonly configurations: readonly string[]
  /** With a dot at each end, so that whole shells can be looked for inside: `.3d6.(5D).4s.`. */
  readonly dottedConfigurations: readonly string[]
  readonly dottedShells: readonly string[]
  readonly foldedConfigurations: readonly string[]
  /** The same without parent terms: `3d6.4s.4p`. */
  readonly shells: readonly string[]
  /** Number of a level's symbol, label included, among the distinct ones. */
  readonly symbolNumber: Uint32Array
  /** Folded: `z 5p*2`. */
  readonly symbols: readonly string[]
  /** Second name and note of the few levels that have them, folded. */
  readonly remarks: ReadonlyMap<number, string>
  readonly secondNames: ReadonlyMap<number, string>
  /** What was worked out for the configurations and words asked for last. */
  readonly remembered: Remembered
  /** The active levels in an order; null g goes last. Ties are broken by species, energy and ordinal. */
  order(sort: LevelSort): { sequence: Uint32Array; place: Uint32Array }
}

/** A map that forgets its oldest entries. */
export class Remembered {
  private readonly kept = new Map<string, unknown>()

  constructor(private readonly most: number) {}

  /** The value made before under this key, or a new one. A key must always stand for one kind of value. */
  get<T>(key: string, make: () => T): T {
    const found = this.kept.get(key)
    if (found !== undefined) return found as T
    const made = make()
    this.kept.set(key, made)
    if (this.kept.size > this.most) for (const oldest of this.kept.keys()) {
      this.kept.delete(oldest)
      break
    }
    return made
  }
}

/** Small letters, no accents, raised and lowered digits plain, degree sign as *, one space between words. */
export const fold = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .replace(/[°º˚∘]/g, '*')
    .replace(/[\u2212\u2013\u2014]/g, '-')
    .replace(/[\u2044\u2215]/g, '/')
    .toLowerCase()
    .replace(/\s+/g, ' ')
    .trim()

export const withoutParents = (configuration: string): string =>
  configuration
    .split('.')
    .filter((part) => !part.startsWith('('))
    .join('.')

function numbered(total: number, textAt: (i: number) => string): { number: Uint32Array; texts: string[] } {
  const known = new Map<string, number>()
  const texts: string[] = []
  const number = new Uint32Array(total)
  for (let i = 0; i < total; i += 1) {
    const text = textAt(i)
    let at = known.get(text)
    if (at === undefined) {
      at = texts.push(text) - 1
      known.set(text, at)
    }
    number[i] = at
  }
  return { number, texts }
}

/** A symbol's identity as a short text; printed only once for each distinct one. */
function symbolKey(snapshot: Snapshot, i: number): string {
  const { twoS, l, twoJ, parity, lsNamed } = snapshot.columns
  const label = snapshot.labelOf(i) ?? ''
  return lsNamed[i] === 1 ? `${twoS[i]},${l[i]},${twoJ[i]},${parity[i]},${label}` : `${snapshot.couplingOf(i)},${snapshot.twoKOf(i)},${twoJ[i]},${parity[i]},${label},${snapshot.couplingOf(i) === 'jj' ? i : ''}`
}

function printedSymbol(snapshot: Snapshot, i: number): string {
  const { twoS, l, twoJ, parity, lsNamed } = snapshot.columns
  const label = snapshot.labelOf(i)
  const before = label === null ? '' : `${label} `
  if (lsNamed[i] !== 1) return fold(`${before}${snapshot.level(i).term.symbol}`)
  const s = twoS[i] ?? 0
  const term: Term = { kind: 'LS', multiplicity: s + 1, twoS: s, l: l[i] ?? 0, parity: parity[i] === 1 ? 'odd' : 'even', label: null, twoJ: twoJ[i] ?? 0 }
  return fold(`${before}${printTerm(term, 'ascii')}`)
}

function sorted(snapshot: Snapshot, sort: LevelSort): { sequence: Uint32Array; place: Uint32Array } {
  const { energyInvcm, twoJ, gAdopted } = snapshot.columns
  const sequence = new Uint32Array(snapshot.size)
  for (let i = 0; i < sequence.length; i += 1) sequence[i] = i
  const energy = (i: number): number => energyInvcm[i] ?? 0
  // a level without g has no place among the g's: after all of them
  const g = (i: number): number => {
    const value = gAdopted[i] ?? Number.NaN
    return Number.isNaN(value) ? Number.MAX_VALUE : value
  }
  if (sort === 'energy') sequence.sort((a, b) => energy(a) - energy(b) || a - b)
  else if (sort === '-energy') sequence.sort((a, b) => energy(b) - energy(a) || a - b)
  else if (sort === 'j') sequence.sort((a, b) => (twoJ[a] ?? 0) - (twoJ[b] ?? 0) || energy(a) - energy(b) || a - b)
  else if (sort === 'g') sequence.sort((a, b) => g(a) - g(b) || a - b)
  const place = new Uint32Array(snapshot.size)
  for (let at = 0; at < sequence.length; at += 1) place[sequence[at] ?? 0] = at
  return { sequence, place }
}

function build(snapshot: Snapshot): SearchIndex {
  const configuration = numbered(snapshot.total, (i) => snapshot.configurationOf(i))
  const shells = configuration.texts.map(withoutParents)
  const symbolTexts: string[] = []
  const keys = new Map<string, number>()
  const symbolNumber = new Uint32Array(snapshot.total)
  for (let i = 0; i < snapshot.total; i += 1) {
    const key = symbolKey(snapshot, i)
    let at = keys.get(key)
    if (at === undefined) {
      at = symbolTexts.push(printedSymbol(snapshot, i)) - 1
      keys.set(key, at)
    }
    symbolNumber[i] = at
  }
  const remarks = new Map<number, string>()
  const secondNames = new Map<number, string>()
  for (let i = 0; i < snapshot.total; i += 1) {
    const name = snapshot.alternativeNameOf(i)
    const note = snapshot.noteOf(i)
    if (name !== null) secondNames.set(i, fold(name))
    if (name !== null || note !== null) remarks.set(i, fold(`${name ?? ''} ${note ?? ''}`))
  }
  const orders = new Map<LevelSort, { sequence: Uint32Array; place: Uint32Array }>()
  return {
    configurationNumber: configuration.number,
    configurations: configuration.texts,
    dottedConfigurations: configuration.texts.map((text) => `.${text}.`),
    dottedShells: shells.map((text) => `.${text}.`),
    foldedConfigurations: configuration.texts.map(fold),
    shells,
    remembered: new Remembered(300),
    symbolNumber,
    symbols: symbolTexts,
    remarks,
    secondNames,
    order: (sort) => {
      const made = orders.get(sort) ?? sorted(snapshot, sort)
      orders.set(sort, made)
      return made
    },
  }
}

const indexes = new WeakMap<Snapshot, SearchIndex>()

/** The search index of a snapshot, built when first asked for and gone with the snapshot. */
export function searchIndex(snapshot: Snapshot): SearchIndex {
  const found = indexes.get(snapshot)
  if (found) return found
  const made = build(snapshot)
  indexes.set(snapshot, made)
  return made
}
