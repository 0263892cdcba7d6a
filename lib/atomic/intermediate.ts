import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { type FieldBlock, type FieldTerm, VANISHING_X } from '@/lib/atomic/field-term'
import type { TwoJ } from '@/lib/atomic/half'
import { type Eigensystem, symmetricEigen } from '@/lib/atomic/jacobi'

/** One state of an LS term in a field. */
export interface TermState {
  twoM: TwoJ
  /** Counted upwards from 1 among the states of one m. */
  k: number
  /** J by continuity from B -> 0+; null where two zero-field energies coincide. */
  twoJ: TwoJ | null
  /** The level that shifts are counted from and lists are sorted by: J itself, or where energies coincide one of them. */
  nominalTwoJ: TwoJ
  /** High-field name. */
  mL: number
  twoMS: TwoJ
  energyInvcm: number
  /** Energy less that of the level at zero field. */
  shiftInvcm: number
  /** The shift less its linear part mu_B B g_J m. */
  beyondLinearInvcm: number
  /** dE/d(mu_B B). */
  slope: number
  derivativeInvcmPerTesla: number
  /** <J m|state>, J upwards. */
  amplitudes: { twoJ: TwoJ; amplitude: number }[]
}

/** Matrix of g_L L_z + g_s S_z in |J m>. */
function fieldMatrix(block: FieldBlock): number[][] {
  return block.twoJs.map((_, i) =>
    block.twoJs.map((_unused, j) => (i === j ? (block.slopes[i] ?? 0) : Math.abs(i - j) === 1 ? (block.couplings[Math.min(i, j)] ?? 0) : 0)),
  )
}

/** At B -> 0+ each level is its own state, but within coinciding energies the field chooses. */
function limitAtZero(block: FieldBlock, field: number[][]): Eigensystem {
  const states: { value: number; slope: number; vector: number[] }[] = []
  const energies = [...block.diagonal]
  for (const energy of new Set(energies)) {
    const group = energies.flatMap((other, i) => (other === energy ? [i] : []))
    const within = symmetricEigen(group.map((i) => group.map((j) => field[i]?.[j] ?? 0)))
    within.vectors.forEach((vector, n) => {
      states.push({ value: energy, slope: within.values[n] ?? 0, vector: energies.map((_, i) => vector[group.indexOf(i)] ?? 0) })
    })
  }
  states.sort((a, b) => a.value - b.value || a.slope - b.slope)
  return { values: states.map((state) => state.value), vectors: states.map((state) => state.vector) }
}

const bilinear = (matrix: number[][], left: number[], right: number[]): number =>
  matrix.reduce((sum, row, i) => sum + (left[i] ?? 0) * row.reduce((part, element, j) => part + element * (right[j] ?? 0), 0), 0)

/** Above this share of its own level a state's shift is had from its vector, which keeps all digits at small fields. */
const MOSTLY_OWN = 0.5

/**
 * Energy beyond E_J + x g_J m. Where the state is mostly its own level: x times the coupled amplitudes over its own, the row of
 * (H - E) v = 0 that belongs to J, without the difference of two large energies.
 */
function beyondLinear(block: FieldBlock, own: number, vector: number[], energy: number, x: number): number {
  const amplitude = vector[own] ?? 0
  if (amplitude * amplitude < MOSTLY_OWN) return energy - (block.diagonal[own] ?? 0) - x * (block.slopes[own] ?? 0)
  return (x * ((block.couplings[own - 1] ?? 0) * (vector[own - 1] ?? 0) + (block.couplings[own] ?? 0) * (vector[own + 1] ?? 0))) / amplitude
}

function statesOf(term: FieldTerm, block: FieldBlock, x: number): TermState[] {
  const field = fieldMatrix(block)
  const { values, vectors } =
    Math.abs(x) < VANISHING_X ? limitAtZero(block, field) : symmetricEigen(field.map((row, i) => row.map((element, j) => (i === j ? (block.diagonal[i] ?? 0) : 0) + x * element)))
  return values.map((energy, k) => {
    const own = block.own[k] ?? 0
    const vector = vectors[k] ?? []
    const beyond = beyondLinear(block, own, vector, energy, x)
    const shift = x * (block.slopes[own] ?? 0) + beyond
    const slope = bilinear(field, vector, vector)
    return {
      twoM: block.twoM,
      k: k + 1,
      twoJ: block.coincides[k] ? null : (block.twoJs[own] ?? 0),
      nominalTwoJ: block.twoJs[own] ?? 0,
      mL: block.pairs[k]?.mL ?? 0,
      twoMS: block.pairs[k]?.twoMS ?? 0,
      energyInvcm: (block.diagonal[own] ?? 0) + term.meanInvcm + shift,
      shiftInvcm: shift,
      beyondLinearInvcm: beyond,
      slope,
      derivativeInvcmPerTesla: MU_B_OVER_HC_INVCM_PER_T * slope,
      amplitudes: block.twoJs.map((twoJ, i) => ({ twoJ, amplitude: vector[i] ?? 0 })),
    }
  })
}

/**
 * All states of an LS term at a field (T), by m and then upwards; B = 0 is the limit B -> 0+. The k-th state of an m takes the k-th lowest
 * J >= |m| (states of one m do not cross) and, at high field, the k-th lowest g_L M_L + g_s M_S. Derivatives by Hellmann-Feynman.
 * C. G. Darwin, Proc. R. Soc. A 115, 1 (1927); Condon & Shortley, ch. XVI. This is the specification of `solveTerm`, which is for bulk.
 */
export function intermediateSublevels(term: FieldTerm, fieldTesla: number): TermState[] {
  return term.blocks.flatMap((block) => statesOf(term, block, MU_B_OVER_HC_INVCM_PER_T * fieldTesla))
}
