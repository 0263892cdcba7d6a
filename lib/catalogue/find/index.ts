import { levelVerdict, type LevelCriteria } from '@/lib/catalogue/criteria'
import { countPairs, LISTED, pairVerdict, type PairVerdict, visitPairs, widestInterval } from '@/lib/catalogue/line-scan'
import { firstLines, inLineOrder, type Line } from '@/lib/catalogue/lines'
import type { Snapshot } from '@/lib/catalogue/shape'
import { spectralWindow, type SpectralWindow, WHOLE_SPECTRUM } from '@/lib/catalogue/window'
import { understand, type Understanding } from '@/lib/catalogue/find/understand'
import type { Wish } from '@/lib/catalogue/find/wish'

export { understand, type Understanding } from '@/lib/catalogue/find/understand'

export interface Found extends Pick<Understanding, 'understood' | 'questions'> {
  /** Indices of levels, the most exact first. */
  readonly levels: readonly number[]
  readonly levelsTotal: number
  readonly lines: readonly Line[]
  readonly linesTotal: number
  /** The total of lines counts only those looked at; there may be more. */
  readonly linesTotalIsLowerBound: boolean
}

/** Pairs of levels looked at for one search: some tens of milliseconds. */
const PAIR_BUDGET = 600_000

/** The wish about levels as criteria; `energy` is left out where it is about lines. */
function criteriaOf(wish: Wish, withEnergy: boolean): LevelCriteria {
  return {
    ...(wish.species ? { species: wish.species } : {}),
    ...(wish.terms.length > 0 ? { terms: wish.terms } : {}),
    ...(wish.configurations.length > 0 ? { configurations: wish.configurations } : {}),
    ...(wish.twoJ.length > 0 ? { twoJ: wish.twoJ } : {}),
    ...(wish.twoS === undefined ? {} : { twoS: wish.twoS }),
    ...(wish.l === undefined ? {} : { l: wish.l }),
    ...(wish.parity === undefined ? {} : { parity: wish.parity }),
    ...(wish.gMin === undefined ? {} : { gMin: wish.gMin }),
    ...(wish.gMax === undefined ? {} : { gMax: wish.gMax }),
    ...(withEnergy && wish.energy ? { energyMin: wish.energy.minInvcm, energyMax: wish.energy.maxInvcm } : {}),
    ...(wish.levels ? { levels: wish.levels } : {}),
    ...(wish.words.length > 0 ? { words: wish.words } : {}),
  }
}

/** Whether the wish says anything about levels beyond their species. */
const aboutLevels = (wish: Wish, energyIsForLevels: boolean): boolean => {
  return Object.keys(criteriaOf({ ...wish, species: null }, energyIsForLevels)).length > 0
}

/** Parts that only a line can meet: then the levels shown are the ends of the lines. */
const onlyLines = (wish: Wish): boolean => wish.windows.length > 0 || wish.lines !== null || wish.gEffMin !== undefined || wish.gEffMax !== undefined

/** Counts lines and keeps the first of them by an order, in a bounded list. */
class Gathered {
  total = 0
  private held: Line[] = []
  private worst: Line | null = null

  constructor(
    private readonly order: (a: Line, b: Line) => number,
    private readonly wanted: number,
  ) {}

  add(line: Line): void {
    this.total += 1
    if (this.wanted === 0 || (this.worst !== null && this.order(line, this.worst) >= 0)) return
    this.held.push(line)
    if (this.held.length < 2 * this.wanted + 100) return
    this.held = this.first()
    this.worst = this.held.at(-1) ?? null
  }

  first(): Line[] {
    return this.held.sort(this.order).slice(0, this.wanted)
  }
}

interface LineSearch {
  readonly snapshot: Snapshot
  readonly wish: Wish
  readonly species: readonly number[]
  readonly windows: readonly SpectralWindow[]
  readonly verdicts: readonly PairVerdict[]
  /** Marks of the levels that an end must be among; null: any. */
  readonly ends: Uint8Array | null
  /** Two different configurations or terms were named: one for each end. */
  readonly bothEnds: boolean
}

function lineSearch(snapshot: Snapshot, wish: Wish): LineSearch {
  const energyIsForLines = wish.energy !== null && wish.energy.alsoIntervals && wish.windows.length === 0
  const windows = energyIsForLines
    ? [spectralWindow({ scale: 'wavenumber', minInvcm: wish.energy?.minInvcm ?? null, maxInvcm: wish.energy?.maxInvcm ?? null })]
    : wish.windows.length > 0
      ? wish.windows.map(({ window }) => window)
      : [WHOLE_SPECTRUM]
  const rules = {
    kind: 'E1' as const,
    rules: 'rigorous' as const,
    ...(wish.gEffMin === undefined ? {} : { gEffMin: wish.gEffMin.value }),
    ...(wish.gEffMax === undefined ? {} : { gEffMax: wish.gEffMax.value }),
    gEffMinOpen: wish.gEffMin?.open ?? false,
    gEffMaxOpen: wish.gEffMax?.open ?? false,
  }
  let ends: Uint8Array | null = null
  if (aboutLevels(wish, !energyIsForLines)) {
    const verdict = levelVerdict(snapshot, criteriaOf(wish, !energyIsForLines))
    ends = new Uint8Array(snapshot.size)
    for (let i = 0; i < ends.length; i += 1) if (verdict(i) === 'in') ends[i] = 1
  }
  return {
    snapshot,
    wish,
    species: wish.species ? [...wish.species].sort((a, b) => a - b) : snapshot.species.map((_, index) => index),
    windows,
    verdicts: windows.map((window) => pairVerdict(snapshot, window, rules)),
    ends,
    bothEnds: wish.configurations.length > 1 || wish.terms.length > 1,
  }
}

const endsFit = ({ ends, bothEnds }: LineSearch, lower: number, upper: number): boolean =>
  ends === null || (bothEnds ? ends[lower] === 1 && ends[upper] === 1 : ends[lower] === 1 || ends[upper] === 1)

/** Near the middle of the window asked for first; without one, lines that begin lowest, so that resonance lines come first. */
function orderFor(snapshot: Snapshot, wish: Wish): (a: Line, b: Line) => number {
  const energy = snapshot.columns.energyInvcm
  if (wish.windows.length === 0) return (a, b) => energy[a.lower]! - energy[b.lower]! || inLineOrder(a, b)
  const away = (line: Line): number => Math.min(...wish.windows.map(({ centreInvcm }) => Math.abs(line.wavenumberInvcm - centreInvcm)))
  return (a, b) => away(a) - away(b) || inLineOrder(a, b)
}

interface FoundLines {
  readonly lines: Line[]
  readonly total: number
  readonly lowerBound: boolean
}

const NO_LINES: FoundLines = { lines: [], total: 0, lowerBound: false }

/** Lines named one by one are shown whatever the rules say of them; the other parts of the query still hold. */
function namedLines(search: LineSearch, named: readonly Line[], limit: number): FoundLines {
  const { snapshot, wish, windows } = search
  const once = new Map(named.map((line) => [line.lower * snapshot.total + line.upper, line]))
  const kept = [...once.values()].filter(
    (line) =>
      (wish.species === null || wish.species.has(snapshot.columns.speciesOf[line.lower] ?? -1)) &&
      windows.some((window) => window.verdict(line.wavenumberInvcm) === 'in') &&
      ((wish.gEffMin ?? wish.gEffMax) === undefined || search.verdicts.some((verdict) => verdict(line.lower, line.upper, line.wavenumberInvcm) === LISTED)) &&
      endsFit(search, line.lower, line.upper),
  )
  return { lines: kept.sort(orderFor(snapshot, wish)).slice(0, limit), total: kept.length, lowerBound: false }
}

/** Lines of the levels marked, each level's partners in turn: quick where few levels are. */
function linesOfMarked(search: LineSearch, ends: Uint8Array, limit: number): FoundLines {
  const { snapshot, species, bothEnds } = search
  const verdict = search.verdicts[0]
  if (!verdict) return NO_LINES
  const energy = snapshot.columns.energyInvcm
  const gathered = new Gathered(orderFor(snapshot, search.wish), limit)
  let looked = 0
  for (const one of species) {
    const [from, to] = snapshot.speciesRange(one)
    for (let i = from; i < to; i += 1) {
      if (ends[i] !== 1) continue
      if (looked > PAIR_BUDGET) return { lines: gathered.first(), total: gathered.total, lowerBound: true }
      looked += to - from
      for (let other = from; other < to; other += 1) {
        // a pair of two marked levels is met twice, and counted from its lower end
        if (other === i || (ends[other] === 1 ? other < i : bothEnds)) continue
        const [lower, upper] = other < i ? [other, i] : [i, other]
        const wavenumberInvcm = energy[upper]! - energy[lower]!
        if (verdict(lower, upper, wavenumberInvcm) === LISTED) gathered.add({ lower, upper, wavenumberInvcm })
      }
    }
  }
  return { lines: gathered.first(), total: gathered.total, lowerBound: false }
}

/** Lines in the windows asked for. Where a window holds more pairs than the budget, the first lines of it and a lower bound. */
function linesInWindows(search: LineSearch, limit: number): FoundLines {
  const { snapshot, species, windows, verdicts } = search
  const gathered = new Gathered(orderFor(snapshot, search.wish), limit)
  let lowerBound = false
  windows.forEach((window, at) => {
    const verdict = verdicts[at]
    if (!verdict) return
    // a line in two windows is counted in the first
    const isNew = (invcm: number): boolean => !windows.slice(0, at).some((earlier) => earlier.verdict(invcm) === 'in')
    const top = Math.min(window.maxInvcm, widestInterval(snapshot, species))
    if (countPairs(snapshot, species, window.minInvcm, top) > PAIR_BUDGET) lowerBound = true
    let looked = 0
    for (const one of species) {
      if (looked > PAIR_BUDGET) break
      visitPairs(snapshot, one, window.minInvcm, window.maxInvcm, true, (lower, upper, wavenumberInvcm) => {
        looked += 1
        if (looked <= PAIR_BUDGET && verdict(lower, upper, wavenumberInvcm) === LISTED && endsFit(search, lower, upper) && isNew(wavenumberInvcm)) gathered.add({ lower, upper, wavenumberInvcm })
      })
    }
  })
  return { lines: gathered.first(), total: gathered.total, lowerBound }
}

/** All lines of the species named, or of all: counted where that is quick, else the first along the spectrum and a lower bound. */
function linesOfSpecies(search: LineSearch, limit: number): FoundLines {
  const { snapshot, species } = search
  const [verdict] = search.verdicts
  if (!verdict) return NO_LINES
  if (countPairs(snapshot, species, 0, Number.POSITIVE_INFINITY) <= PAIR_BUDGET) return linesInWindows(search, limit)
  const lines = firstLines(snapshot, species, WHOLE_SPECTRUM, verdict, limit + 1)
  return { lines: lines.slice(0, limit), total: lines.length, lowerBound: lines.length > limit }
}

function findLines(snapshot: Snapshot, { wish, asks }: Understanding, limit: number): FoundLines {
  if (!asks || wish.impossible) return NO_LINES
  const search = lineSearch(snapshot, wish)
  if (wish.lines !== null) return namedLines(search, wish.lines, limit)
  if (search.windows[0] !== WHOLE_SPECTRUM) return linesInWindows(search, limit)
  if (search.ends !== null) return linesOfMarked(search, search.ends, limit)
  return linesOfSpecies(search, limit)
}

/** Wanted levels, those whose configuration is exactly the one asked for before those that contain it. */
function rankedLevels(snapshot: Snapshot, wish: Wish, indices: readonly number[]): number[] {
  const exact = new Set(wish.configurations.map(({ canonical }) => canonical))
  if (exact.size === 0 && wish.favoured.size === 0) return [...indices]
  const isExact = (i: number): boolean => wish.favoured.has(i) || exact.has(snapshot.configurationOf(i))
  return [...indices.filter(isExact), ...indices.filter((i) => !isExact(i))]
}

/** For a query about lines, the levels shown are the ends of this many of them at most. */
const ENDS_SHOWN_OF = 1000

const endsOf = (lines: readonly Line[]): number[] => [...new Set(lines.flatMap(({ lower, upper }) => [lower, upper]))].sort((a, b) => a - b)

/** Indices of all levels that a query about levels asks for. */
function levelsAsked(snapshot: Snapshot, { wish, asks }: Understanding): number[] {
  if (!asks || wish.impossible) return []
  const verdict = levelVerdict(snapshot, criteriaOf(wish, true))
  const indices: number[] = []
  for (let i = 0; i < snapshot.size; i += 1) if (verdict(i) === 'in') indices.push(i)
  return rankedLevels(snapshot, wish, indices)
}

/** Criteria that the words of `GET /levels?q=` add to its other filters. For words about lines: the ends of (at most a thousand of) them. */
export function criteriaOfQuery(snapshot: Snapshot, query: string): LevelCriteria {
  const understanding = understand(snapshot, query)
  const { wish, asks } = understanding
  if (!asks || wish.impossible) return { levels: new Set() }
  if (onlyLines(wish)) return { levels: new Set(endsOf(findLines(snapshot, understanding, ENDS_SHOWN_OF).lines)) }
  return criteriaOf(wish, true)
}

/** Answers the one search box: levels and lines together, each with its total, and how every word was understood. */
export function find(snapshot: Snapshot, query: string, limits: { levels: number; lines: number }): Found {
  const understanding = understand(snapshot, query)
  const about = onlyLines(understanding.wish)
  const lines = findLines(snapshot, understanding, about ? Math.max(limits.lines, ENDS_SHOWN_OF) : limits.lines)
  const levels = about ? endsOf(lines.lines) : levelsAsked(snapshot, understanding)
  return {
    understood: understanding.understood,
    questions: understanding.questions,
    levels: levels.slice(0, limits.levels),
    levelsTotal: levels.length,
    lines: lines.lines.slice(0, limits.lines),
    linesTotal: lines.total,
    linesTotalIsLowerBound: lines.lowerBound,
  }
}
