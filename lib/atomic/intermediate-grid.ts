import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { BlockLink, FieldMultiplet } from '@/lib/atomic/field-multiplet'
import { solveTerm, termSolution, type TermSolution } from '@/lib/atomic/field-solver'

/** Room for one multiplet solved at one field; used again for every field. */
export interface MultipletSolution {
  lower: TermSolution
  upper: TermSolution
  /** Amplitudes between states of one link, [upper][lower], and room for the product with the lower vectors. */
  amplitudes: Float64Array
  halfway: Float64Array
}

export function multipletSolution(multiplet: FieldMultiplet): MultipletSolution {
  const largest = Math.max(1, ...multiplet.links.map((link) => link.lower.n * link.upper.n))
  return { lower: termSolution(multiplet.lower), upper: termSolution(multiplet.upper), amplitudes: new Float64Array(largest), halfway: new Float64Array(largest) }
}

/** <state u|D_q|state l> for all states of a link; D joins J only to J and J +- 1, so only those are summed. */
function amplitudesOf(link: BlockLink, room: MultipletSolution): void {
  const { lower, upper, dipole } = link
  const nl = lower.n
  const nu = upper.n
  const { amplitudes, halfway } = room
  const low = room.lower.vectors
  const high = room.upper.vectors
  const offset = ((upper.twoJs[0] as number) - (lower.twoJs[0] as number)) / 2
  for (let i = 0; i < nu; i += 1) {
    // index of the lower J equal to this upper J; neighbours lie beside it
    const from = Math.max(0, i + offset - 1)
    const to = Math.min(nl - 1, i + offset + 1)
    for (let k = 0; k < nl; k += 1) {
      const row = lower.firstVector + k * nl
      let sum = 0
      for (let j = from; j <= to; j += 1) sum += (dipole[i * nl + j] as number) * (low[row + j] as number)
      halfway[i * nl + k] = sum
    }
  }
  for (let ku = 0; ku < nu; ku += 1) {
    const row = upper.firstVector + ku * nu
    for (let kl = 0; kl < nl; kl += 1) {
      let sum = 0
      for (let i = 0; i < nu; i += 1) sum += (high[row + i] as number) * (halfway[i * nl + kl] as number)
      amplitudes[ku * nl + kl] = sum
    }
  }
}

/** d(amplitude)/dx of one pair: both vectors turn towards the other states of their blocks. */
function turned(link: BlockLink, room: MultipletSolution, ku: number, kl: number): number {
  const { lower, upper } = link
  const low = room.lower.turning
  const high = room.upper.turning
  let sum = 0
  for (let p = 0; p < upper.n; p += 1) sum += (high[upper.firstVector + ku * upper.n + p] as number) * (room.amplitudes[p * lower.n + kl] as number)
  for (let p = 0; p < lower.n; p += 1) sum += (low[lower.firstVector + kl * lower.n + p] as number) * (room.amplitudes[ku * lower.n + p] as number)
  return sum
}

/** Strengths (all sum to 1) and, where asked, their derivatives with respect to x = mu_B B, of a solved multiplet into rows that begin at `at`. */
export function readStrengths(multiplet: FieldMultiplet, room: MultipletSolution, strengths: Float64Array, at: number, derivatives: Float64Array | null): void {
  const { norm } = multiplet
  for (const link of multiplet.links) {
    amplitudesOf(link, room)
    const nl = link.lower.n
    for (let ku = 0; ku < link.upper.n; ku += 1) {
      for (let kl = 0; kl < nl; kl += 1) {
        const amplitude = room.amplitudes[ku * nl + kl] as number
        const place = at + (link.components[ku * nl + kl] as number)
        strengths[place] = (amplitude * amplitude) / norm
        if (derivatives) derivatives[place] = (2 * amplitude * turned(link, room, ku, kl)) / norm
      }
    }
  }
}

/** Strengths (all of the multiplet sum to 1) of some components of a solved multiplet, each at its own place; where few are needed. */
export function readSomeStrengths(multiplet: FieldMultiplet, room: MultipletSolution, components: ArrayLike<number>, strengths: Float64Array): void {
  const low = room.lower.vectors
  const high = room.upper.vectors
  for (let c = 0; c < components.length; c += 1) {
    const index = components[c] as number
    const { lower, upper, dipole } = multiplet.links[multiplet.linkOf[index] as number] as BlockLink
    const rowLow = lower.firstVector + ((multiplet.lowerState[index] as number) - lower.firstState) * lower.n
    const rowHigh = upper.firstVector + ((multiplet.upperState[index] as number) - upper.firstState) * upper.n
    const offset = ((upper.twoJs[0] as number) - (lower.twoJs[0] as number)) / 2
    let amplitude = 0
    for (let i = 0; i < upper.n; i += 1) {
      const to = Math.min(lower.n - 1, i + offset + 1)
      let sum = 0
      for (let j = Math.max(0, i + offset - 1); j <= to; j += 1) sum += (dipole[i * lower.n + j] as number) * (low[rowLow + j] as number)
      amplitude += (high[rowHigh + i] as number) * sum
    }
    strengths[index] = (amplitude * amplitude) / multiplet.norm
  }
}

export interface GridOptions {
  /** Wavenumbers, or shifts from each component's line at zero field; cm^-1. */
  quantity?: 'wavenumber' | 'shift'
  derivatives?: boolean
  strengths?: boolean
  strengthDerivatives?: boolean
}

/** Flat [field][component] arrays in the multiplet's order; null for what was not asked or cannot be had. */
export interface MultipletGrid {
  fields: number
  components: number
  values: Float64Array
  /** Per tesla. */
  derivatives: Float64Array | null
  /** All components of one field sum to 1. */
  strengths: Float64Array | null
  strengthDerivatives: Float64Array | null
}

/**
 * All components of a multiplet over a grid of fields (T; below zero means reversed). Agrees with `multipletComponents`, its specification.
 * `rows` may limit the work to a part of the grid, so that a stream can be made piece by piece.
 */
export function multipletGrid(multiplet: FieldMultiplet, fieldsTesla: ArrayLike<number>, options: GridOptions = {}, rows: { from: number; to: number } = { from: 0, to: fieldsTesla.length }): MultipletGrid {
  const { quantity = 'wavenumber', derivatives = false, strengths = false, strengthDerivatives = false } = options
  const { count } = multiplet
  const fields = rows.to - rows.from
  const hasStrengths = multiplet.noAmplitude === null
  const array = (wanted: boolean) => (wanted ? new Float64Array(fields * count) : null)
  const grid: MultipletGrid = {
    fields,
    components: count,
    values: new Float64Array(fields * count),
    derivatives: array(derivatives),
    strengths: array(strengths && hasStrengths),
    strengthDerivatives: array(strengthDerivatives && hasStrengths),
  }
  const room = multipletSolution(multiplet)
  const spare = grid.strengths === null && grid.strengthDerivatives ? new Float64Array(fields * count) : null
  for (let row = 0; row < fields; row += 1) {
    const x = MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[rows.from + row] as number)
    solveTerm(multiplet.lower, x, room.lower, grid.strengthDerivatives !== null)
    solveTerm(multiplet.upper, x, room.upper, grid.strengthDerivatives !== null)
    readPositions(multiplet, room, grid, row * count, quantity === 'wavenumber')
    const into = grid.strengths ?? spare
    if (into) readStrengths(multiplet, room, into, row * count, grid.strengthDerivatives)
  }
  if (grid.strengthDerivatives) for (let i = 0; i < grid.strengthDerivatives.length; i += 1) (grid.strengthDerivatives[i] as number) *= MU_B_OVER_HC_INVCM_PER_T
  return grid
}

function readPositions(multiplet: FieldMultiplet, { lower, upper }: MultipletSolution, grid: MultipletGrid, at: number, absolute: boolean): void {
  const { count, lowerState, upperState, centresInvcm } = multiplet
  for (let i = 0; i < count; i += 1) {
    const l = lowerState[i] as number
    const u = upperState[i] as number
    const shift = (upper.shifts[u] as number) - (lower.shifts[l] as number)
    grid.values[at + i] = absolute ? (centresInvcm[i] as number) + shift : shift
    if (grid.derivatives) grid.derivatives[at + i] = MU_B_OVER_HC_INVCM_PER_T * ((upper.slopes[u] as number) - (lower.slopes[l] as number))
  }
}
