import {
  countPairs, LINE_EXCLUSIONS, type LineExclusion, type LineRules, LISTED, OUT, pairVerdict, type PairVerdict, visitPairs, widestInterval,
} from '@/lib/catalogue/line-scan'
import { EXPLAINED_LIMIT } from '@/lib/catalogue/levels'
import type { Snapshot } from '@/lib/catalogue/shape'
import type { SpectralWindow } from '@/lib/catalogue/window'

export { effectiveGOfPair, LINE_EXCLUSIONS, type LineExclusion, type LineRules } from '@/lib/catalogue/line-scan'
export { spectralWindow, WHOLE_SPECTRUM, type SpectralWindow, type WindowAsked } from '@/lib/catalogue/window'

/** A line as indices into the snapshot. */
export interface Line {
  readonly lower: number
  readonly upper: number
  readonly wavenumberInvcm: number
}

export interface LineListQuery extends LineRules {
  /** Indices of species; null for all. */
  readonly species: readonly number[] | null
  readonly window: SpectralWindow
  readonly limit: number
  /** Id of the last line already given, `lower~upper`. */
  readonly after: string | null
  readonly explain: boolean
}

export interface LineList {
  readonly lines: readonly Line[]
  /** Id of the last line of this page where more follow. */
  readonly next: string | null
  /** All lines that match, on any page. */
  readonly total: number
  readonly excluded: Partial<Record<LineExclusion, number>>
  readonly explained: readonly { transition: string; reason: LineExclusion }[]
}

export const lineId = (snapshot: Snapshot, lower: number, upper: number): string => `${snapshot.levelId(lower)}~${snapshot.levelId(upper)}`

/** The order of lines: by wavenumber, then by the indices of the lower and the upper level. */
export const inLineOrder = (a: Line, b: Line): number => a.wavenumberInvcm - b.wavenumberInvcm || a.lower - b.lower || a.upper - b.upper

interface Tally {
  readonly total: number
  readonly excluded: LineList['excluded']
}

function explainPair(snapshot: Snapshot, code: number, lower: number, upper: number): { transition: string; reason: LineExclusion } {
  return { transition: lineId(snapshot, lower, upper), reason: LINE_EXCLUSIONS[code - 1] ?? 'parity' }
}

function tally(snapshot: Snapshot, species: readonly number[], window: SpectralWindow, verdict: PairVerdict): Tally {
  const counts = new Float64Array(LINE_EXCLUSIONS.length + 1)
  for (const one of species) {
    visitPairs(snapshot, one, window.minInvcm, window.maxInvcm, true, (lower, upper, interval) => {
      const code = verdict(lower, upper, interval)
      if (code !== OUT) counts[code]! += 1
    })
  }
  const excluded: LineList['excluded'] = {}
  LINE_EXCLUSIONS.forEach((reason, at) => {
    const count = counts[at + 1] ?? 0
    if (count > 0) excluded[reason] = count
  })
  return { total: counts[LISTED] ?? 0, excluded }
}

const TALLIES_KEPT = 64
const tallies = new WeakMap<Snapshot, Map<string, Tally>>()

/** Counts are the same on every page of a query; those of the last queries are kept, since a wide window takes a while to count. */
function keptTally(snapshot: Snapshot, query: LineListQuery, species: readonly number[], verdict: PairVerdict): Tally {
  const kept = tallies.get(snapshot) ?? new Map<string, Tally>()
  tallies.set(snapshot, kept)
  const key = JSON.stringify([query.kind, query.rules, query.gEffMin, query.gEffMax, query.gEffMinOpen, query.gEffMaxOpen, query.species, query.window.key])
  const found = kept.get(key)
  if (found) return found
  const made = tally(snapshot, species, query.window, verdict)
  kept.set(key, made)
  if (kept.size > TALLIES_KEPT) for (const oldest of kept.keys()) {
    kept.delete(oldest)
    break
  }
  return made
}

/** Pairs looked at in one piece: few at first, since a page is short; more while matches are rare. */
const FIRST_PIECE = 20_000
const LARGEST_PIECE = 400_000

/** The end of a piece that begins at `from` and holds about `pairs` pairs at most. Always beyond `from`, so that a walk gets on. */
function pieceEnd(snapshot: Snapshot, species: readonly number[], from: number, top: number, pairs: number): number {
  let end = top
  for (let halvings = 0; halvings < 60 && countPairs(snapshot, species, from, end) > pairs; halvings += 1) {
    const middle = from + (end - from) / 2
    if (!(middle > from && middle < end)) return end
    end = middle
  }
  return end
}

/** The first `limit` lines after a given one, in order. Works piece by piece along the spectrum, so memory stays bounded. */
export function firstLines(snapshot: Snapshot, species: readonly number[], window: SpectralWindow, verdict: PairVerdict, limit: number, after: Line | null = null): Line[] {
  const found: Line[] = []
  const top = Math.min(window.maxInvcm, widestInterval(snapshot, species))
  let from = Math.max(window.minInvcm, after?.wavenumberInvcm ?? 0)
  let pairs = FIRST_PIECE
  while (from <= top) {
    const end = pieceEnd(snapshot, species, from, top, pairs)
    const last = end >= top
    for (const one of species) {
      visitPairs(snapshot, one, from, end, last, (lower, upper, wavenumberInvcm) => {
        if (verdict(lower, upper, wavenumberInvcm) !== LISTED) return
        const line = { lower, upper, wavenumberInvcm }
        if (after === null || inLineOrder(line, after) > 0) found.push(line)
      })
    }
    if (last || found.length >= limit) break
    from = end
    pairs = Math.min(pairs * 4, LARGEST_PIECE)
  }
  return found.sort(inLineOrder).slice(0, limit)
}

/** The levels a transition id names, in order of their energies; null where either is not an active level, or of another species. */
export function lineOf(snapshot: Snapshot, id: string): Line | null {
  const [first, second] = id.split('~').map((level) => snapshot.indexOf(level))
  if (first === undefined || second === undefined || first === second) return null
  const { speciesOf, energyInvcm } = snapshot.columns
  if (speciesOf[first] !== speciesOf[second]) return null
  const [lower, upper] = first < second ? [first, second] : [second, first]
  return { lower, upper, wavenumberInvcm: (energyInvcm[upper] ?? 0) - (energyInvcm[lower] ?? 0) }
}

/**
 * Lines by wavenumber over any species of an edition. What a rule takes out is counted by reason, inside the window only: pairs
 * that fail the rigorous rules of the kind too, each under the first rule it fails. Null when `after` names no line of this edition.
 */
export function listLines(snapshot: Snapshot, query: LineListQuery): LineList | null {
  const species = query.species ?? snapshot.species.map((_, index) => index)
  const verdict = pairVerdict(snapshot, query.window, query)
  const after = query.after === null ? null : lineOf(snapshot, query.after)
  if (query.after !== null && after === null) return null
  const { total, excluded } = keptTally(snapshot, query, species, verdict)
  const found = firstLines(snapshot, species, query.window, verdict, query.limit + 1, after)
  const lines = found.slice(0, query.limit)
  const last = lines.at(-1)
  return {
    lines,
    next: found.length > query.limit && last ? lineId(snapshot, last.lower, last.upper) : null,
    total,
    excluded,
    explained: query.explain ? explainedPairs(snapshot, species, query.window, verdict) : [],
  }
}

/** What was left out, in the order of species and levels, up to EXPLAINED_LIMIT. */
function explainedPairs(snapshot: Snapshot, species: readonly number[], window: SpectralWindow, verdict: PairVerdict): LineList['explained'] {
  const explained: { transition: string; reason: LineExclusion }[] = []
  for (const one of species) {
    if (explained.length >= EXPLAINED_LIMIT) break
    visitPairs(snapshot, one, window.minInvcm, window.maxInvcm, true, (lower, upper, interval) => {
      if (explained.length >= EXPLAINED_LIMIT) return
      const code = verdict(lower, upper, interval)
      if (code > LISTED) explained.push(explainPair(snapshot, code, lower, upper))
    })
  }
  return explained
}
