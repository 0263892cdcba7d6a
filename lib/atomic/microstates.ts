import type { Configuration, ConfigurationPart, Shell } from '@/lib/atomic/shells'
import { capacity } from '@/lib/atomic/shells'
import type { TwoJ } from '@/lib/atomic/half'
import type { Parity } from '@/lib/atomic/term'

/** An LS term as `twoS,l`. */
export type TermKey = `${number},${number}`
export const termKey = (twoS: TwoJ, l: number): TermKey => `${twoS},${l}`

const shellTerms = new Map<number, ReadonlyMap<TermKey, number>>()

/**
 * How many ways `count` electrons of a shell give each (M_L, M_S): a sum over its 2l + 1 orbitals, each empty, up, down or full (Pauli).
 * Answer as counts[M_L][twoM_S] for M_L, twoM_S >= 0.
 */
function countMicrostates(l: number, count: number): number[][] {
  const [maxL, maxS] = [count * l, count]
  const width = 2 * maxS + 1
  const size = (2 * maxL + 1) * width
  let ways: Float64Array[] = Array.from({ length: count + 1 }, () => new Float64Array(size))
  const at = (mL: number, twoMS: number) => (mL + maxL) * width + twoMS + maxS
  const [nothing] = ways
  if (nothing) nothing[at(0, 0)] = 1
  for (let m = -l; m <= l; m += 1) {
    const next = ways.map((row) => row.slice())
    for (const [electrons, mL, twoMS] of [[1, m, 1], [1, m, -1], [2, 2 * m, 0]] as const) {
      for (let k = electrons; k <= count; k += 1) {
        const [from, to] = [ways[k - electrons], next[k]]
        if (!from || !to) continue
        const step = mL * width + twoMS
        for (let i = 0; i < size; i += 1) {
          const some = from[i] ?? 0
          if (some !== 0) to[i + step] = (to[i + step] ?? 0) + some
        }
      }
    }
    ways = next
  }
  const full = ways[count] ?? new Float64Array(size)
  return Array.from({ length: maxL + 1 }, (_, mL) => Array.from({ length: maxS + 1 }, (_, twoMS) => full[at(mL, twoMS)] ?? 0))
}

/**
 * The LS terms of `count` equivalent electrons and how often each occurs, by counting microstates
 * (Condon & Shortley, The Theory of Atomic Spectra, ch. VII). Empty map for an impossible count. Remembered.
 */
export function termsOfShell(l: number, count: number): ReadonlyMap<TermKey, number> {
  const key = l * 1000 + count
  const known = shellTerms.get(key)
  if (known) return known
  const terms = new Map<TermKey, number>()
  if (count >= 0 && count <= capacity(l)) {
    // holes make the same terms as electrons
    const few = Math.min(count, capacity(l) - count)
    const states = countMicrostates(l, few)
    const at = (mL: number, twoMS: number) => states[mL]?.[twoMS] ?? 0
    for (let twoS = few; twoS >= 0; twoS -= 2) {
      for (let totalL = few * l; totalL >= 0; totalL -= 1) {
        const times = at(totalL, twoS) - at(totalL + 1, twoS) - at(totalL, twoS + 2) + at(totalL + 1, twoS + 2)
        if (times > 0) terms.set(termKey(twoS, totalL), times)
      }
    }
  }
  shellTerms.set(key, terms)
  return terms
}

/** Terms as small integers inside: twoS * 256 + L. */
type Packed = ReadonlySet<number>
/** No open shell: 1S. */
const NONE: Packed = new Set([0])
const NOTHING: Packed = new Set<number>()
const pack = (twoS: number, l: number): number => twoS * 256 + l

const packedShells = new Map<number, Packed>()

function packedShell(shell: Shell): Packed {
  const key = shell.l * 1000 + shell.count
  const known = packedShells.get(key)
  if (known) return known
  const set = new Set([...termsOfShell(shell.l, shell.count).keys()].map((term) => {
    const [twoS = 0, l = 0] = term.split(',').map(Number)
    return pack(twoS, l)
  }))
  packedShells.set(key, set)
  return set
}

const coupled = new WeakMap<Packed, WeakMap<Packed, Packed>>()

/** Every term that one of `a` and one of `b` make when they are not equivalent: S and L add as vectors. Remembered as long as the sets live. */
function couple(a: Packed, b: Packed): Packed {
  if (a.size === 1 && a.has(0)) return b
  if (b.size === 1 && b.has(0)) return a
  const before = coupled.get(a)?.get(b)
  if (before) return before
  const sum = new Set<number>()
  for (const x of a) {
    for (const y of b) {
      const [twoS1, l1, twoS2, l2] = [x >> 8, x & 255, y >> 8, y & 255]
      for (let twoS = Math.abs(twoS1 - twoS2); twoS <= twoS1 + twoS2; twoS += 2) {
        for (let l = Math.abs(l1 - l2); l <= l1 + l2; l += 1) sum.add(pack(twoS, l))
      }
    }
  }
  const ofA = coupled.get(a) ?? new WeakMap<Packed, Packed>()
  coupled.set(a, ofA.set(b, sum))
  return sum
}

const MOST_OPEN = 8
const MOST_MANY_BODIED = 3

/**
 * A sentence when a configuration has more open shells than any known level: counting its terms would take long and mean nothing. At most
 * eight open shells, of which three may hold more than one electron and more than one hole. Null when it is within that.
 */
export function tooManyOpenShells(parts: readonly ConfigurationPart[]): string | null {
  const open = parts.filter((part): part is Shell => part.kind === 'shell' && part.count > 0 && part.count < capacity(part.l))
  const manyBodied = open.filter((shell) => shell.count > 1 && shell.count < capacity(shell.l) - 1)
  if (open.length <= MOST_OPEN && manyBodied.length <= MOST_MANY_BODIED) return null
  return `it has more open shells than any known level (at most ${MOST_OPEN}, of which ${MOST_MANY_BODIED} with several electrons and holes)`
}

export interface Walk {
  /** The LS terms the whole can make. */
  terms: Packed
  /** For each parent in order: the parity of the shells it stands for. */
  parentParities: Parity[]
  /** Index (among the parents) of the first one that its shells cannot make; -1 when all can. */
  impossibleParent: number
}

const oddShells = (shells: readonly Shell[]): boolean => shells.reduce((sum, shell) => sum + shell.l * shell.count, 0) % 2 === 1

/**
 * Goes along a configuration and takes each parent for what it stands for. A parent is the term either of the shells since the parent
 * before it (`4s4p(3P)` in 3d6(5D)4s4p(3P)) or of everything so far (`(6D)` in 3d6(5D)4s(6D)5s). One electron's or one hole's own term is
 * never written, so after such a shell it is of everything; else of its own shells where these can make it; a parent that ends the
 * configuration is always of its own shells, since everything's term is the level's.
 */
export function walkConfiguration(parts: readonly ConfigurationPart[]): Walk {
  let [whole, group]: [Packed, Packed] = [NONE, NONE]
  let groupShells: Shell[] = []
  const allShells: Shell[] = []
  const walk: Walk = { terms: NONE, parentParities: [], impossibleParent: -1 }
  parts.forEach((part, index) => {
    if (part.kind === 'shell') {
      group = couple(group, packedShell(part))
      groupShells.push(part)
      allShells.push(part)
      return
    }
    const wanted = pack(part.term.twoS, part.term.l)
    const [only] = groupShells
    const trivial = groupShells.length === 1 && only !== undefined && (only.count === 1 || only.count === capacity(only.l) - 1)
    const last = index === parts.length - 1
    const together = couple(whole, group)
    const asWhole = !last && together.has(wanted) && (trivial || !group.has(wanted))
    if (!asWhole && !group.has(wanted) && walk.impossibleParent < 0) walk.impossibleParent = walk.parentParities.length
    walk.parentParities.push(oddShells(asWhole ? allShells : groupShells) ? 'odd' : 'even')
    whole = asWhole ? new Set([wanted]) : couple(whole, new Set([wanted]))
    group = NONE
    groupShells = []
  })
  walk.terms = couple(whole, group)
  return walk
}

const REMEMBERED = 5000
const allowed = new Map<string, Packed>()

function allowedPacked(configuration: Configuration): Packed {
  if (tooManyOpenShells(configuration.parts) !== null) return NOTHING
  const key = configuration.parts.map((part) => (part.kind === 'shell' ? `${part.l}:${part.count}` : `(${part.term.twoS},${part.term.l})`)).join('.')
  const known = allowed.get(key)
  if (known) return known
  const { terms } = walkConfiguration(configuration.parts)
  if (allowed.size >= REMEMBERED) allowed.clear()
  allowed.set(key, terms)
  return terms
}

/** The LS terms that the open shells of a configuration can make, its parents taken into account. */
export const allowedTerms = (configuration: Configuration): Set<TermKey> => new Set([...allowedPacked(configuration)].map((term) => termKey(term >> 8, term & 255)))

/** Whether S and L are among the terms that the configuration can make (Pauli and parents). */
export const termAllowed = (configuration: Configuration, twoS: TwoJ, l: number): boolean => l < 256 && allowedPacked(configuration).has(pack(twoS, l))
