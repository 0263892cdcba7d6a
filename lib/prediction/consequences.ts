import { conventionalWavelength } from '@/lib/atomic/air'
import { KIND_CODE, RIGOROUS_BITS, ruleMask } from '@/lib/atomic/rules'
import { effectiveGOfPair } from '@/lib/catalogue/lines'
import type { Snapshot } from '@/lib/catalogue/shape'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { Consequences, LineConsequence } from '@/openapi/schemas/change'

type Effect = LineConsequence['effect']

/** A line that is not as it was: the places of its ends in both snapshots, -1 where an end is not there. */
interface Found { effect: Effect; weight: number; before: Pair | null; after: Pair | null }
interface Pair { a: number; b: number }

/** A g is taken as changed beyond what rounding does. */
const SAME_G = 1e-12
/** Pairs looked at before counting stops; the answer then says that it is not complete. */
const MOST_PAIRS = 1e8

interface Ends { before: Int32Array; after: Int32Array; touched: Uint8Array }

/** The levels of one species in both snapshots, by identity, and which of them differ in what a line is made of. */
function endsOf(before: Snapshot, after: Snapshot, species: string): Ends {
  const [wasAt, isAt] = [before.speciesIndex.get(species), after.speciesIndex.get(species)]
  const [b, a] = [wasAt === undefined ? [0, 0] as const : before.speciesRange(wasAt), isAt === undefined ? [0, 0] as const : after.speciesRange(isAt)]
  const byOrdinal = new Map<number, number>()
  for (let i = b[0]; i < b[1]; i += 1) byOrdinal.set(before.columns.ordinal[i] ?? 0, i)
  const pairs: [number, number][] = []
  for (let k = a[0]; k < a[1]; k += 1) {
    const ordinal = after.columns.ordinal[k] ?? 0
    pairs.push([byOrdinal.get(ordinal) ?? -1, k])
    byOrdinal.delete(ordinal)
  }
  for (const i of byOrdinal.values()) pairs.push([i, -1])
  const ends: Ends = { before: new Int32Array(pairs.length), after: new Int32Array(pairs.length), touched: new Uint8Array(pairs.length) }
  pairs.forEach(([i, k], at) => {
    ends.before[at] = i
    ends.after[at] = k
    ends.touched[at] = i < 0 || k < 0 || differs(before, i, after, k) ? 1 : 0
  })
  return ends
}

function differs(before: Snapshot, i: number, after: Snapshot, k: number): boolean {
  const [x, y] = [before.columns, after.columns]
  return x.energyInvcm[i] !== y.energyInvcm[k] || x.twoJ[i] !== y.twoJ[k] || x.parity[i] !== y.parity[k] || !Object.is(x.gAdopted[i], y.gAdopted[k])
}

/** Whether two levels make an allowed E1 line by the rigorous rules; intercombination lines are lines. */
function allowed({ columns }: Snapshot, a: number, b: number): boolean {
  if (a < 0 || b < 0) return false
  const { twoJ, parity, energyInvcm } = columns
  if (parity[a] === parity[b] || energyInvcm[a] === energyInvcm[b]) return false
  return (ruleMask(KIND_CODE.E1, twoJ[a]!, parity[a]!, -1, -1, twoJ[b]!, parity[b]!, -1, -1) & RIGOROUS_BITS) === 0
}

const interval = ({ columns }: Snapshot, { a, b }: Pair): number => Math.abs((columns.energyInvcm[a] ?? 0) - (columns.energyInvcm[b] ?? 0))

/** Lower end first: g_eff does not depend on it, names of lines do. */
const ordered = ({ columns }: Snapshot, a: number, b: number): Pair => ((columns.energyInvcm[a] ?? 0) <= (columns.energyInvcm[b] ?? 0) ? { a, b } : { a: b, b: a })

const gOf = (snapshot: Snapshot, pair: Pair | null): number | null => {
  if (pair === null) return null
  const g = effectiveGOfPair(snapshot, pair.a, pair.b)
  return Number.isNaN(g) ? null : g
}

/** Ranks: moved lines by how far, then lines made and gone, then those whose g_eff alone changes. */
const RANK: Record<Effect, number> = { moved: 2, new: 1, gone: 1, g_changed: 0 }
const farther = (a: Found, b: Found): number => RANK[b.effect] - RANK[a.effect] || b.weight - a.weight

function judgePair(before: Snapshot, after: Snapshot, ends: Ends, x: number, y: number): Found | null {
  const was = allowed(before, ends.before[x]!, ends.before[y]!) ? ordered(before, ends.before[x]!, ends.before[y]!) : null
  const is = allowed(after, ends.after[x]!, ends.after[y]!) ? ordered(after, ends.after[x]!, ends.after[y]!) : null
  if (was === null) return is === null ? null : { effect: 'new', weight: -interval(after, is), before: null, after: is }
  if (is === null) return { effect: 'gone', weight: -interval(before, was), before: was, after: null }
  const shift = interval(after, is) - interval(before, was)
  if (shift !== 0) return { effect: 'moved', weight: Math.abs(shift), before: was, after: is }
  const [old, now] = [gOf(before, was), gOf(after, is)]
  if (old === now || (old !== null && now !== null && Math.abs(now - old) <= SAME_G)) return null
  return { effect: 'g_changed', weight: old === null || now === null ? Number.POSITIVE_INFINITY : Math.abs(now - old), before: was, after: is }
}

function told(before: Snapshot, after: Snapshot, found: Found): LineConsequence {
  const { before: was, after: is } = found
  const [old, now] = [was === null ? null : interval(before, was), is === null ? null : interval(after, is)]
  const nm = (wavenumber: number | null) => (wavenumber === null ? null : { ...conventionalWavelength(vacuumNmOfWavenumber(wavenumber)), vacuum: vacuumNmOfWavenumber(wavenumber) })
  const [oldNm, nowNm] = [nm(old), nm(now)]
  // a line that passes from vacuum to air has not moved by what air does
  const shiftNm = oldNm === null || nowNm === null ? null : oldNm.medium === nowNm.medium ? nowNm.nm - oldNm.nm : nowNm.vacuum - oldNm.vacuum
  const name = is !== null ? `${after.levelId(is.a)}~${after.levelId(is.b)}` : was === null ? '' : `${before.levelId(was.a)}~${before.levelId(was.b)}`
  return {
    transition: name, kind: 'E1', effect: found.effect, wavenumber_before_invcm: old, wavenumber_after_invcm: now, shift_invcm: old === null || now === null ? null : now - old,
    wavelength_before_nm: oldNm?.nm ?? null, wavelength_after_nm: nowNm?.nm ?? null, medium_before: oldNm?.medium ?? null, medium_after: nowNm?.medium ?? null,
    shift_pm: shiftNm === null ? null : shiftNm * 1000, g_eff_before: gOf(before, was), g_eff_after: gOf(after, is),
  }
}

/** Keeps the foremost ones of many, without sorting all of them. */
class Foremost {
  private kept: Found[] = []
  constructor(private readonly limit: number) {}
  add(found: Found): void {
    this.kept.push(found)
    if (this.kept.length >= 4 * this.limit + 1000) this.kept = this.list()
  }
  list(): Found[] {
    return this.kept.sort(farther).slice(0, this.limit)
  }
}

interface Asked { before: Snapshot; after: Snapshot; edition: number; limit: number }

/** Yields after each changed level, so that whoever drives it may pause. */
function* steps({ before, after, edition, limit }: Asked): Generator<void, Consequences, void> {
  const counts: Consequences['counts'] = { moved: 0, g_changed: 0, new: 0, gone: 0 }
  const foremost = new Foremost(limit)
  let pairs = 0
  let cut = false
  for (const species of new Set([...before.speciesIndex.keys(), ...after.speciesIndex.keys()])) {
    const ends = endsOf(before, after, species)
    for (let x = 0; x < ends.touched.length && !cut; x += 1) {
      if (ends.touched[x] === 0) continue
      for (let y = 0; y < ends.touched.length; y += 1) {
        // a pair of two changed levels is looked at once
        if (y === x || (ends.touched[y] === 1 && y < x)) continue
        const found = judgePair(before, after, ends, x, y)
        if (found === null) continue
        counts[found.effect] += 1
        foremost.add(found)
      }
      pairs += ends.touched.length
      cut = pairs > MOST_PAIRS
      yield
    }
  }
  const total = counts.moved + counts.g_changed + counts.new + counts.gone
  const list = foremost.list()
  return { edition, counts, lines: list.map((one) => told(before, after, one)), complete: !cut && total === list.length }
}

/**
 * Which allowed E1 lines two states of the table do not have in common: those that move (and by how much), those whose g_eff changes,
 * new ones and gone ones. Only pairs with a level that differs are looked at, so the cost is the changed levels times those of
 * their species. `limit` lines are told, those that move most first; the counts are of all.
 */
export function consequencesOf(asked: Asked): Consequences {
  const run = steps(asked)
  for (;;) {
    const step = run.next()
    if (step.done === true) return step.value
  }
}

/** Longest piece of work between two turns of the event loop. */
const PIECE_MS = 20

/** The same for many changes, giving the event loop back regularly. */
export async function consequencesInSteps(asked: Asked): Promise<Consequences> {
  const run = steps(asked)
  let begun = performance.now()
  for (;;) {
    const step = run.next()
    if (step.done === true) return step.value
    if (performance.now() - begun < PIECE_MS) continue
    await new Promise((resolve) => void setImmediate(resolve))
    begun = performance.now()
  }
}
