import { type FieldBlock, type FieldTerm, VANISHING_X } from '@/lib/atomic/field-term'
import { solveTridiagonal } from '@/lib/atomic/tridiagonal'

/** What a solved term holds; states by m and then upwards, vectors as rows over J of each block. Used again for every field. */
export interface TermSolution {
  /** Energies from the term's mean, cm^-1. */
  energies: Float64Array
  /** Energies from each state's own level at zero field, and these beyond x g_J m, cm^-1. */
  shifts: Float64Array
  beyond: Float64Array
  /** dE/dx, x = mu_B B in cm^-1. */
  slopes: Float64Array
  vectors: Float64Array
  /** d(vector k)/dx = sum_p turning[k p] vector p; filled when asked for. */
  turning: Float64Array
  diagonal: Float64Array
  offDiagonal: Float64Array
  scratch: Float64Array
}

export function termSolution(term: FieldTerm): TermSolution {
  const widest = Math.max(...term.blocks.map((block) => block.n))
  const states = () => new Float64Array(term.states)
  return {
    energies: states(),
    shifts: states(),
    beyond: states(),
    slopes: states(),
    vectors: new Float64Array(term.vectorLength),
    turning: new Float64Array(term.vectorLength),
    diagonal: new Float64Array(widest),
    offDiagonal: new Float64Array(widest),
    scratch: new Float64Array(widest * widest),
  }
}

/**
 * Within coinciding energies at zero field the states are those that the field chooses in first order: the group is solved alone, vectors
 * spread back over J. (J and J + 2 coinciding without J + 1 are told apart at m = 0 in second order only; that is left undone.)
 */
function solveAtZero(block: FieldBlock, into: TermSolution): void {
  const { n, own, diagonal, firstVector } = block
  const { vectors, diagonal: d, offDiagonal: e, scratch } = into
  vectors.fill(0, firstVector, firstVector + n * n)
  for (let k = 0; k < n; ) {
    const energy = diagonal[own[k] as number] as number
    let size = 1
    while (k + size < n && diagonal[own[k + size] as number] === energy) size += 1
    // `own` lists coinciding levels by J, so neighbours in the group that differ by 1 in J are coupled and others are not
    for (let i = 0; i < size; i += 1) {
      const j = own[k + i] as number
      d[i] = block.slopes[j] as number
      e[i] = i + 1 < size && own[k + i + 1] === j + 1 ? (block.couplings[j] as number) : 0
    }
    solveTridiagonal(size, d, e, scratch)
    for (let i = 0; i < size; i += 1) {
      into.energies[block.firstState + k + i] = energy
      for (let j = 0; j < size; j += 1) vectors[firstVector + (k + i) * n + (own[k + j] as number)] = scratch[i * size + j] as number
    }
    k += size
  }
}

/** One block at x = mu_B B (cm^-1): energies and vectors. */
export function solveBlock(block: FieldBlock, x: number, into: TermSolution): void {
  const { n, diagonal, slopes, couplings, firstState, firstVector } = block
  if (Math.abs(x) < VANISHING_X) return solveAtZero(block, into)
  const { diagonal: d, offDiagonal: e } = into
  for (let j = 0; j < n; j += 1) {
    d[j] = (diagonal[j] as number) + x * (slopes[j] as number)
    e[j] = j + 1 < n ? x * (couplings[j] as number) : 0
  }
  solveTridiagonal(n, d, e, into.vectors, firstVector)
  for (let k = 0; k < n; k += 1) into.energies[firstState + k] = d[k] as number
}

/** Shifts and slopes of a solved block; formulas as `intermediateSublevels` has them. */
export function readBlock(block: FieldBlock, x: number, into: TermSolution): void {
  const { n, own, diagonal, slopes, couplings, firstState, firstVector } = block
  const { vectors } = into
  for (let k = 0; k < n; k += 1) {
    const row = firstVector + k * n
    let slope = 0
    for (let j = 0; j < n; j += 1) {
      const v = vectors[row + j] as number
      slope += v * v * (slopes[j] as number)
      if (j + 1 < n) slope += 2 * v * (vectors[row + j + 1] as number) * (couplings[j] as number)
    }
    const j = own[k] as number
    const v = vectors[row + j] as number
    let beyond: number
    if (v * v < 0.5) beyond = (into.energies[firstState + k] as number) - (diagonal[j] as number) - x * (slopes[j] as number)
    else {
      let mixed = 0
      if (j > 0) mixed += (couplings[j - 1] as number) * (vectors[row + j - 1] as number)
      if (j + 1 < n) mixed += (couplings[j] as number) * (vectors[row + j + 1] as number)
      beyond = (x * mixed) / v
    }
    into.slopes[firstState + k] = slope
    into.beyond[firstState + k] = beyond
    into.shifts[firstState + k] = x * (slopes[j] as number) + beyond
  }
}

/** <vector k|g_L L_z + g_s S_z|vector p> of a block. */
function fieldElement(block: FieldBlock, vectors: Float64Array, k: number, p: number): number {
  const { n, slopes, couplings, firstVector } = block
  const a = firstVector + k * n
  const b = firstVector + p * n
  let sum = 0
  for (let j = 0; j < n; j += 1) {
    sum += (slopes[j] as number) * (vectors[a + j] as number) * (vectors[b + j] as number)
    if (j + 1 < n) sum += (couplings[j] as number) * ((vectors[a + j] as number) * (vectors[b + j + 1] as number) + (vectors[a + j + 1] as number) * (vectors[b + j] as number))
  }
  return sum
}

/** Two states of one energy at zero field turn into each other by way of the others, in second order. */
function turningWithinGroup(block: FieldBlock, into: TermSolution, k: number, p: number): number {
  const { n, firstState } = block
  const energy = into.energies[firstState + k] as number
  let sum = 0
  for (let other = 0; other < n; other += 1) {
    const gap = energy - (into.energies[firstState + other] as number)
    if (gap !== 0) sum += (fieldElement(block, into.vectors, k, other) * fieldElement(block, into.vectors, other, p)) / gap
  }
  const apart = (into.slopes[firstState + k] as number) - (into.slopes[firstState + p] as number)
  return apart === 0 ? 0 : sum / apart
}

/** First-order change of the vectors with x: <p|V|k>/(E_k - E_p). */
function turnBlock(block: FieldBlock, into: TermSolution): void {
  const { n, firstState, firstVector } = block
  for (let k = 0; k < n; k += 1) {
    into.turning[firstVector + k * n + k] = 0
    for (let p = 0; p < k; p += 1) {
      const gap = (into.energies[firstState + k] as number) - (into.energies[firstState + p] as number)
      const turning = gap === 0 ? turningWithinGroup(block, into, k, p) : fieldElement(block, into.vectors, k, p) / gap
      into.turning[firstVector + k * n + p] = turning
      into.turning[firstVector + p * n + k] = -turning
    }
  }
}

/**
 * Solves a term at x = mu_B B (cm^-1; below zero too, for a reversed field) into a solution made by `termSolution`, without allocation.
 * The same physics as `intermediateSublevels`, which is its specification. `turning` asks for the derivatives of the vectors as well.
 */
export function solveTerm(term: FieldTerm, x: number, into: TermSolution, turning = false): void {
  for (const block of term.blocks) {
    solveBlock(block, x, into)
    readBlock(block, x, into)
    if (turning) turnBlock(block, into)
  }
}
