import { termNotPure } from '@/lib/atomic/adopted'
import { G_S } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { coupledRange, formatHalf, type TwoJ } from '@/lib/atomic/half'
import { landeG } from '@/lib/atomic/lande'
import { termLetter } from '@/lib/atomic/letters'
import { missingJ, type TermLevels } from '@/lib/atomic/mixing'
import { spinZElement } from '@/lib/atomic/term-coupling'

export interface FieldOptions {
  /** Spin g factor, |g_e| by default. */
  gS?: number
  /** Orbital g factor, 1 by default. */
  gL?: number
}

/** The states of one m of an LS term: H = diagonal + x (slopes, couplings), tridiagonal in J, with x = mu_B B in cm^-1. */
export interface FieldBlock {
  twoM: TwoJ
  n: number
  /** J >= |m|, upwards. */
  twoJs: TwoJ[]
  /** E_J less the term's mean, cm^-1. */
  diagonal: Float64Array
  /** g_J m. */
  slopes: Float64Array
  /** (g_s - g_L) <J m|S_z|J+1 m>. */
  couplings: Float64Array
  /** Of the k-th state upwards: the index of its J in `twoJs` by continuity from B -> 0+; of coinciding energies the one of smaller J first. */
  own: Int32Array
  /** Whether another J of this m has exactly the same zero-field energy as the k-th state's, so that it has no J of its own. */
  coincides: boolean[]
  /** High-field name of the k-th state: the k-th lowest g_L M_L + g_s M_S. */
  pairs: { mL: number; twoMS: TwoJ }[]
  /** Where this block's states, and its vectors, begin in flat arrays over the whole term. */
  firstState: number
  firstVector: number
}

/** An LS term made ready for fields: all that does not depend on the field. */
export interface FieldTerm {
  twoS: TwoJ
  l: number
  gS: number
  gL: number
  /** Mean of the levels' energies, cm^-1; energies inside are counted from it. */
  meanInvcm: number
  /** By J upwards, with the g in force (LS where none was given). */
  levels: { twoJ: TwoJ; energyInvcm: number; g: number }[]
  /** By m upwards. */
  blocks: FieldBlock[]
  states: number
  vectorLength: number
}

/** Below this mu_B B in cm^-1 (10^-100, so that squares do not underflow) a field is the limit of zero field. */
export const VANISHING_X = 1e-100

const nameOf = ({ twoS, l }: { twoS: TwoJ; l: number }): string => `${twoS + 1}${termLetter(l)}`

/** Refuses a term with a J missing or standing twice, or with a J that S and L do not make. */
function checkComplete(term: TermLevels): void {
  const possible = coupledRange(term.twoS, 2 * term.l)
  const wrong = term.levels.find((level, i) => !possible.includes(level.twoJ) || term.levels.findIndex((other) => other.twoJ === level.twoJ) !== i)
  if (wrong) throw new PhysicsError('term_mixed', `J = ${formatHalf(wrong.twoJ)} stands twice in the term ${nameOf(term)}, or S and L do not make it.`, 'levels')
  const missing = missingJ(term)
  if (missing.length > 0) {
    throw new PhysicsError('term_incomplete', `The term ${nameOf(term)} lacks its level${missing.length > 1 ? 's' : ''} J = ${missing.map(formatHalf).join(', ')}, so its levels cannot be diagonalised in a field.`, 'levels')
  }
}

function highFieldPairs(twoS: TwoJ, l: number, twoM: TwoJ, gS: number, gL: number): { mL: number; twoMS: TwoJ }[] {
  const pairs: { mL: number; twoMS: TwoJ }[] = []
  for (let twoMS = -twoS; twoMS <= twoS; twoMS += 2) {
    const mL = (twoM - twoMS) / 2
    if (Math.abs(mL) <= l) pairs.push({ mL, twoMS })
  }
  return pairs.sort((a, b) => gL * (a.mL - b.mL) + (gS * (a.twoMS - b.twoMS)) / 2)
}

function blockOf(term: FieldTerm, twoM: TwoJ): FieldBlock {
  const levels = term.levels.filter((level) => level.twoJ >= Math.abs(twoM))
  const [n, diagonal] = [levels.length, Float64Array.from(levels, (level) => level.energyInvcm - term.meanInvcm)]
  const own = levels.map((_, i) => i).sort((i, j) => (levels[i]?.energyInvcm ?? 0) - (levels[j]?.energyInvcm ?? 0) || i - j)
  const block: FieldBlock = {
    twoM,
    n,
    twoJs: levels.map((level) => level.twoJ),
    diagonal,
    slopes: Float64Array.from(levels, (level) => (level.g * twoM) / 2),
    couplings: Float64Array.from(levels.slice(1), (level) => (term.gS - term.gL) * spinZElement(term.twoS, term.l, level.twoJ - 2, level.twoJ, twoM)),
    own: Int32Array.from(own),
    coincides: own.map((i) => levels.some((level, j) => j !== i && level.energyInvcm === levels[i]?.energyInvcm)),
    pairs: highFieldPairs(term.twoS, term.l, twoM, term.gS, term.gL),
    firstState: term.states,
    firstVector: term.vectorLength,
  }
  term.states += n
  term.vectorLength += n * n
  return block
}

/**
 * Makes an LS term ready for the intermediate field: H = sum_J E_J |J><J| + mu_B B (g_L L_z + g_s S_z), where the diagonal takes each level's
 * own g_J (LS where it is null) and the off-diagonal elements are those of (g_s - g_L) S_z between J and J + 1.
 * Condon & Shortley, The Theory of Atomic Spectra, ch. XVI, sec. 9. Throws `term_incomplete` naming the missing J, `term_mixed`.
 */
export function fieldTerm(term: TermLevels, { gS = G_S, gL = 1 }: FieldOptions = {}): FieldTerm {
  checkComplete(term)
  const levels = [...term.levels]
    .sort((a, b) => a.twoJ - b.twoJ)
    .map(({ twoJ, energyInvcm, g }) => ({ twoJ, energyInvcm, g: g ?? landeG({ twoS: term.twoS, l: term.l, twoJ }, { gS, gL }) ?? 0 }))
  const meanInvcm = levels.reduce((sum, level) => sum + level.energyInvcm, 0) / levels.length
  const made: FieldTerm = { twoS: term.twoS, l: term.l, gS, gL, meanInvcm, levels, blocks: [], states: 0, vectorLength: 0 }
  const highest = term.twoS + 2 * term.l
  for (let twoM = 0 - highest; twoM <= highest; twoM += 2) made.blocks.push(blockOf(made, twoM))
  return made
}

/** A text that is the same exactly when all that a term's states depend on is; numbers print in full. */
export const termFingerprint = (term: TermLevels): string => `${term.twoS},${term.l}${term.levels.map((level) => `;${level.twoJ},${level.energyInvcm},${level.g}`).join('')}`

/** The same term with the LS g_J of every level: `g_values=ls`. */
export const withLsG = (term: TermLevels, options: FieldOptions = {}): TermLevels => ({
  ...term,
  levels: term.levels.map((level) => ({ ...level, g: landeG({ twoS: term.twoS, l: term.l, twoJ: level.twoJ }, options) })),
})

/** The J's whose g departs from LS by more than 0.5 %, so that the term is not pure and its off-diagonal elements are less sure (`term_not_pure`). */
export const impureJ = (term: TermLevels, options: FieldOptions = {}): TwoJ[] =>
  term.levels.filter(({ twoJ, g }) => g !== null && termNotPure(g, landeG({ twoS: term.twoS, l: term.l, twoJ }, options))).map((level) => level.twoJ)
