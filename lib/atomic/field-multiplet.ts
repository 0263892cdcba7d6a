import { type FieldBlock, type FieldOptions, type FieldTerm, fieldTerm, termFingerprint } from '@/lib/atomic/field-term'
import { isTriangle, type TwoJ } from '@/lib/atomic/half'
import type { TermLevels } from '@/lib/atomic/mixing'
import { remembering } from '@/lib/atomic/remembering'
import { type Kind, rankOf } from '@/lib/atomic/rules'
import { hasLsDipole, lsDipoleAmplitude } from '@/lib/atomic/term-coupling'
import { sixJ } from '@/lib/atomic/wigner'

/** A pair of m blocks that a component of one q joins. Matrices are [upper][lower], flat. */
export interface BlockLink {
  q: number
  lower: FieldBlock
  upper: FieldBlock
  /** <J_u m_u|D_q|J_l m_l> in J; empty where the terms have no LS amplitude. */
  dipole: Float64Array
  /** Which component joins the k-th upper and the k'-th lower state. */
  components: Int32Array
}

/** All components between two LS terms, in the order (q, m_lower, J_lower, J_upper): everything that does not depend on the field. */
export interface FieldMultiplet {
  kind: Kind
  rank: number
  lower: FieldTerm
  upper: FieldTerm
  count: number
  q: Int8Array
  twoMLower: Int16Array
  twoMUpper: Int16Array
  /** J by continuity; null where zero-field energies coincide. */
  twoJLower: (TwoJ | null)[]
  twoJUpper: (TwoJ | null)[]
  nominalTwoJLower: Int16Array
  nominalTwoJUpper: Int16Array
  /** State indices within the terms, by m and then upwards. */
  lowerState: Int32Array
  upperState: Int32Array
  /** E_Ju - E_Jl at zero field, cm^-1. */
  centresInvcm: Float64Array
  links: BlockLink[]
  /** Which link each component belongs to. */
  linkOf: Int32Array
  /** Sum of all squared amplitudes at any field: 2S + 1, a third of it in each q. */
  norm: number
  /** Why strengths cannot be had; null where they can. */
  noAmplitude: string | null
}

/** Why the strengths of lines between two terms cannot be had from LS coupling; null where they can. */
export function whyNoAmplitude(kind: Kind, lower: { twoS: TwoJ; l: number }, upper: { twoS: TwoJ; l: number }): string | null {
  if (kind !== 'E1') return `strengths of ${kind} lines are followed by the linear model only`
  if (!hasLsDipole(lower, upper)) return 'the line has no LS amplitude: its strength comes from a departure from LS coupling'
  return null
}

interface Found {
  q: number
  lower: FieldBlock
  upper: FieldBlock
  kLower: number
  kUpper: number
  link: number
}

const nominal = (block: FieldBlock, k: number): TwoJ => block.twoJs[block.own[k] ?? 0] ?? 0

function dipoleOf(lower: FieldTerm, upper: FieldTerm, low: FieldBlock, high: FieldBlock): Float64Array {
  const matrix = new Float64Array(low.n * high.n)
  high.twoJs.forEach((twoJUpper, i) => {
    low.twoJs.forEach((twoJLower, j) => {
      matrix[i * low.n + j] = lsDipoleAmplitude(lower.twoS, { l: lower.l, twoJ: twoJLower, twoM: low.twoM }, { l: upper.l, twoJ: twoJUpper, twoM: high.twoM })
    })
  })
  return matrix
}

/** Every pair of states with |q| up to the rank, sorted, and the links between blocks. */
function findAll(multiplet: FieldMultiplet): Found[] {
  const { lower, upper, rank, links } = multiplet
  const found: Found[] = []
  for (let q = -rank; q <= rank; q += 1) {
    for (const low of lower.blocks) {
      const high = upper.blocks.find((block) => block.twoM === low.twoM + 2 * q)
      if (!high) continue
      const dipole = multiplet.noAmplitude === null ? dipoleOf(lower, upper, low, high) : new Float64Array(0)
      const link = links.push({ q, lower: low, upper: high, dipole, components: new Int32Array(low.n * high.n) }) - 1
      for (let kLower = 0; kLower < low.n; kLower += 1) for (let kUpper = 0; kUpper < high.n; kUpper += 1) found.push({ q, lower: low, upper: high, kLower, kUpper, link })
    }
  }
  // within one (q, m_lower) only the J's are left to sort by
  const byJ = (a: Found, b: Found) => a.link - b.link || nominal(a.lower, a.kLower) - nominal(b.lower, b.kLower) || nominal(a.upper, a.kUpper) - nominal(b.upper, b.kUpper)
  return found.sort(byJ)
}

/**
 * Makes all lines between two LS terms ready for fields: every (m_l, J_l, m_u, J_u) with |q| <= 1 (2 for E2) is a component, those without
 * strength and those that only the field induces included. Strengths come from the LS dipole amplitudes (E1, same S, L to L or L +- 1);
 * for other pairs of terms positions alone.
 */
export function fieldMultiplet(lower: FieldTerm, upper: FieldTerm, kind: Kind = 'E1'): FieldMultiplet {
  const empty = { q: new Int8Array(0), twoMLower: new Int16Array(0), twoMUpper: new Int16Array(0), nominalTwoJLower: new Int16Array(0), nominalTwoJUpper: new Int16Array(0) }
  const multiplet: FieldMultiplet = {
    kind, rank: rankOf(kind), lower, upper, count: 0, ...empty, twoJLower: [], twoJUpper: [], lowerState: new Int32Array(0), upperState: new Int32Array(0),
    centresInvcm: new Float64Array(0), links: [], linkOf: new Int32Array(0), norm: lower.twoS + 1, noAmplitude: whyNoAmplitude(kind, lower, upper),
  }
  const found = findAll(multiplet)
  const energyOf = (term: FieldTerm, twoJ: TwoJ) => term.levels.find((level) => level.twoJ === twoJ)?.energyInvcm ?? 0
  multiplet.count = found.length
  multiplet.q = Int8Array.from(found, (c) => c.q)
  multiplet.twoMLower = Int16Array.from(found, (c) => c.lower.twoM)
  multiplet.twoMUpper = Int16Array.from(found, (c) => c.upper.twoM)
  multiplet.nominalTwoJLower = Int16Array.from(found, (c) => nominal(c.lower, c.kLower))
  multiplet.nominalTwoJUpper = Int16Array.from(found, (c) => nominal(c.upper, c.kUpper))
  multiplet.twoJLower = found.map((c) => (c.lower.coincides[c.kLower] ? null : nominal(c.lower, c.kLower)))
  multiplet.twoJUpper = found.map((c) => (c.upper.coincides[c.kUpper] ? null : nominal(c.upper, c.kUpper)))
  multiplet.lowerState = Int32Array.from(found, (c) => c.lower.firstState + c.kLower)
  multiplet.upperState = Int32Array.from(found, (c) => c.upper.firstState + c.kUpper)
  multiplet.linkOf = Int32Array.from(found, (c) => c.link)
  multiplet.centresInvcm = Float64Array.from(found, (c) => energyOf(upper, nominal(c.upper, c.kUpper)) - energyOf(lower, nominal(c.lower, c.kLower)))
  found.forEach((c, i) => {
    const link = multiplet.links[c.link]
    if (link) link.components[c.kUpper * c.lower.n + c.kLower] = i
  })
  return multiplet
}

const shares = remembering<number>(20_000)
/** Components of the multiplets remembered: some 370 bytes each, and 307 of a quintet in iron. */
const COMPONENTS_REMEMBERED = 400_000
const multiplets = remembering<FieldMultiplet>(COMPONENTS_REMEMBERED, ({ count }) => count)

/** `fieldMultiplet` of two lists of levels, remembered, since a slider or a fit asks the same terms again and again. */
export function multipletOfTerms(lower: TermLevels, upper: TermLevels, kind: Kind = 'E1', options: FieldOptions = {}): FieldMultiplet {
  const key = `${kind}|${options.gS}|${options.gL}|${termFingerprint(lower)}|${termFingerprint(upper)}`
  return multiplets(key, () => fieldMultiplet(fieldTerm(lower, options), fieldTerm(upper, options), kind))
}

/**
 * Share of the line J_l - J_u in the strength of its multiplet at zero field: (2J_l + 1)(2J_u + 1){L_l J_l S; J_u L_u 1}^2 / (2S + 1), which
 * over all lines sums to 1. H. N. Russell, Proc. Natl. Acad. Sci. 11, 314 (1925); Condon & Shortley, ch. IX. 0 for a line that only the field makes.
 */
export function lineShare({ lower, upper, noAmplitude }: { lower: { twoS: TwoJ; l: number }; upper: { l: number }; noAmplitude: string | null }, twoJLower: TwoJ, twoJUpper: TwoJ): number {
  if (noAmplitude !== null || !isTriangle(twoJLower, 2, twoJUpper)) return 0
  const key = `${lower.twoS} ${lower.l} ${twoJLower} ${upper.l} ${twoJUpper}`
  return shares(key, () => ((twoJLower + 1) * (twoJUpper + 1) * sixJ(2 * lower.l, twoJLower, lower.twoS, twoJUpper, 2 * upper.l, 2) ** 2) / (lower.twoS + 1))
}

/**
 * What a strength of the multiplet (everything sums to 1) is multiplied by to be a strength of the line (each q sums to 1 at zero field);
 * null where the line has none at zero field.
 */
export function lineNormalisation(multiplet: FieldMultiplet, twoJLower: TwoJ, twoJUpper: TwoJ): number | null {
  const share = lineShare(multiplet, twoJLower, twoJUpper)
  return share > 0 ? 3 / share : null
}
