import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { BlockLink, FieldMultiplet } from '@/lib/atomic/field-multiplet'
import { readBlock, solveBlock, type TermSolution } from '@/lib/atomic/field-solver'
import { type FieldBlock, type FieldTerm, VANISHING_X } from '@/lib/atomic/field-term'
import { rotationTangent } from '@/lib/atomic/rotation'

/**
 * A term over many fields, one column a field, state by state: what `solveTerm` gives at one field, laid out so that a bulk answer can be
 * written component by component. A state that is alone in its block runs straight and has no column of its own.
 */
export interface TermSweep {
  /** By state: energy from its own level at zero field, cm^-1; null where it runs straight. */
  shifts: (Float64Array | null)[]
  /** By state: dE/dx; null where it runs straight, empty where not asked for. */
  slopes: (Float64Array | null)[]
  /** By state: g_J m of its own level, which is its slope where it runs straight. */
  straight: Float64Array
  /** By element of the flat vectors (`firstVector` + k n + j); null in blocks of one state, empty where not asked for. */
  vectors: (Float64Array | null)[]
}

const NOTHING = new Float64Array(0)

/** Room for the blocks named over so many fields; other blocks stay empty. */
export function termSweep(term: FieldTerm, fields: number, wanted: { slopes: boolean; vectors: boolean }, needed: ReadonlySet<FieldBlock> = new Set(term.blocks)): TermSweep {
  const sweep: TermSweep = {
    shifts: new Array<null>(term.states).fill(null),
    slopes: new Array<null>(term.states).fill(null),
    straight: new Float64Array(term.states),
    vectors: new Array<null>(term.vectorLength).fill(null),
  }
  for (const block of term.blocks) {
    for (let k = 0; k < block.n; k += 1) {
      const state = block.firstState + k
      sweep.straight[state] = block.slopes[block.own[k] as number] as number
      if (block.n === 1) continue
      const has = needed.has(block)
      sweep.shifts[state] = has ? new Float64Array(fields) : NOTHING
      sweep.slopes[state] = has && wanted.slopes ? new Float64Array(fields) : NOTHING
      for (let j = 0; j < block.n; j += 1) sweep.vectors[block.firstVector + k * block.n + j] = has && wanted.vectors ? new Float64Array(fields) : NOTHING
    }
  }
  return sweep
}

/** Any block, field by field. */
function sweepBlock(block: FieldBlock, fieldsTesla: Float64Array, from: number, to: number, sweep: TermSweep, at: number, room: TermSolution): void {
  const { n, firstState, firstVector } = block
  const columnsOf = (list: (Float64Array | null)[], first: number, count: number) => list.slice(first, first + count).filter((column) => column !== null && column.length > 0) as Float64Array[]
  const shifts = columnsOf(sweep.shifts, firstState, n)
  const slopes = columnsOf(sweep.slopes, firstState, n)
  const vectors = columnsOf(sweep.vectors, firstVector, n * n)
  for (let f = from; f < to; f += 1) {
    const x = MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[f] as number)
    solveBlock(block, x, room)
    readBlock(block, x, room)
    const column = at + f - from
    for (let k = 0; k < shifts.length; k += 1) (shifts[k] as Float64Array)[column] = room.shifts[firstState + k] as number
    for (let k = 0; k < slopes.length; k += 1) (slopes[k] as Float64Array)[column] = room.slopes[firstState + k] as number
    for (let i = 0; i < vectors.length; i += 1) (vectors[i] as Float64Array)[column] = room.vectors[firstVector + i] as number
  }
}

/** Blocks of two states, which are most: the same arithmetic as `solveTridiagonal` and `readBlock`, without their calls. */
function sweepPair(block: FieldBlock, fieldsTesla: Float64Array, from: number, to: number, sweep: TermSweep, at: number, room: TermSolution): void {
  const { firstState, firstVector } = block
  const [d0, d1] = [block.diagonal[0] as number, block.diagonal[1] as number]
  const [s0, s1, coupling] = [block.slopes[0] as number, block.slopes[1] as number, block.couplings[0] as number]
  const ownFirst = block.own[0] as number
  const [shift0, shift1] = [sweep.shifts[firstState] as Float64Array, sweep.shifts[firstState + 1] as Float64Array]
  const [slope0, slope1] = [sweep.slopes[firstState] as Float64Array, sweep.slopes[firstState + 1] as Float64Array]
  const v00 = sweep.vectors[firstVector] as Float64Array
  const v01 = sweep.vectors[firstVector + 1] as Float64Array
  const v10 = sweep.vectors[firstVector + 2] as Float64Array
  const v11 = sweep.vectors[firstVector + 3] as Float64Array
  const [withSlopes, withVectors] = [slope0.length > 0, v00.length > 0]
  for (let f = from; f < to; f += 1) {
    const x = MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[f] as number)
    if (Math.abs(x) < VANISHING_X) {
      sweepBlock(block, fieldsTesla, f, f + 1, sweep, at + f - from, room)
      continue
    }
    const column = at + f - from
    const a = d0 + x * s0
    const b = d1 + x * s1
    const c = x * coupling
    const t = rotationTangent(a, b, c)
    const cosine = 1 / Math.sqrt(1 + t * t)
    const sine = t * cosine
    const first = a - t * c
    const second = b + t * c
    const upright = first <= second
    const l0 = upright ? cosine : sine
    const l1 = upright ? 0 - sine : cosine
    const u0 = upright ? sine : cosine
    const u1 = upright ? cosine : 0 - sine
    const low = upright ? first : second
    const high = upright ? second : first
    // the lower state's own level is the one of lower energy at zero field
    const lowOwn = ownFirst === 0 ? l0 : l1
    const lowOther = ownFirst === 0 ? l1 : l0
    const highOwn = ownFirst === 0 ? u1 : u0
    const highOther = ownFirst === 0 ? u0 : u1
    const dLow = ownFirst === 0 ? d0 : d1
    const dHigh = ownFirst === 0 ? d1 : d0
    const straightLow = x * (ownFirst === 0 ? s0 : s1)
    const straightHigh = x * (ownFirst === 0 ? s1 : s0)
    shift0[column] = straightLow + (lowOwn * lowOwn < 0.5 ? low - dLow - straightLow : (x * (coupling * lowOther)) / lowOwn)
    shift1[column] = straightHigh + (highOwn * highOwn < 0.5 ? high - dHigh - straightHigh : (x * (coupling * highOther)) / highOwn)
    if (withSlopes) {
      slope0[column] = l0 * l0 * s0 + 2 * l0 * l1 * coupling + l1 * l1 * s1
      slope1[column] = u0 * u0 * s0 + 2 * u0 * u1 * coupling + u1 * u1 * s1
    }
    if (withVectors) {
      v00[column] = l0
      v01[column] = l1
      v10[column] = u0
      v11[column] = u1
    }
  }
}

/** Solves a term at the fields `from` .. `to` (T) into the columns from `at` on. */
export function sweepTerm(term: FieldTerm, fieldsTesla: Float64Array, from: number, to: number, sweep: TermSweep, at: number, room: TermSolution): void {
  for (const block of term.blocks) {
    if (block.n === 1 || (sweep.shifts[block.firstState] as Float64Array).length === 0) continue
    if (block.n === 2) sweepPair(block, fieldsTesla, from, to, sweep, at, room)
    else sweepBlock(block, fieldsTesla, from, to, sweep, at, room)
  }
}

export interface MultipletSweep {
  lower: TermSweep
  upper: TermSweep
}

/** The part of a grid that a call writes: columns `column` on of the sweep, which hold the fields from `from` to `to`, into `out` from `at` on. */
export interface SweepPart {
  fieldsTesla: Float64Array
  from: number
  to: number
  column: number
}

/** Upper less lower state by state, where either may run straight (null: `x` times its slope). A loop for each case, free of tests. */
function writeShifts(high: Float64Array | null, gHigh: number, low: Float64Array | null, gLow: number, { fieldsTesla, from, to, column }: SweepPart, out: Float64Array, at: number): void {
  const count = to - from
  if (high !== null && low !== null) for (let i = 0; i < count; i += 1) out[at + i] = (high[column + i] as number) - (low[column + i] as number) + 0
  else if (high !== null) for (let i = 0; i < count; i += 1) out[at + i] = (high[column + i] as number) - MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[from + i] as number) * gLow + 0
  else if (low !== null) for (let i = 0; i < count; i += 1) out[at + i] = MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[from + i] as number) * gHigh - (low[column + i] as number) + 0
  else {
    for (let i = 0; i < count; i += 1) {
      const x = MU_B_OVER_HC_INVCM_PER_T * (fieldsTesla[from + i] as number)
      out[at + i] = x * gHigh - x * gLow + 0
    }
  }
}

/** Shifts (cm^-1) of one component from its line at zero field. */
export function sweepShifts(multiplet: FieldMultiplet, sweep: MultipletSweep, component: number, part: SweepPart, out: Float64Array, at: number): void {
  const [l, u] = [multiplet.lowerState[component] as number, multiplet.upperState[component] as number]
  writeShifts(sweep.upper.shifts[u] as Float64Array | null, sweep.upper.straight[u] as number, sweep.lower.shifts[l] as Float64Array | null, sweep.lower.straight[l] as number, part, out, at)
}

/** Derivatives of one component, cm^-1 per tesla. */
export function sweepDerivatives(multiplet: FieldMultiplet, sweep: MultipletSweep, component: number, { from, to, column }: SweepPart, out: Float64Array, at: number): void {
  const [l, u] = [multiplet.lowerState[component] as number, multiplet.upperState[component] as number]
  const [low, high] = [sweep.lower.slopes[l] as Float64Array | null, sweep.upper.slopes[u] as Float64Array | null]
  const [gLow, gHigh] = [sweep.lower.straight[l] as number, sweep.upper.straight[u] as number]
  const count = to - from
  if (high !== null && low !== null) for (let i = 0; i < count; i += 1) out[at + i] = MU_B_OVER_HC_INVCM_PER_T * ((high[column + i] as number) - (low[column + i] as number)) + 0
  else if (high !== null) for (let i = 0; i < count; i += 1) out[at + i] = MU_B_OVER_HC_INVCM_PER_T * ((high[column + i] as number) - gLow) + 0
  else if (low !== null) for (let i = 0; i < count; i += 1) out[at + i] = MU_B_OVER_HC_INVCM_PER_T * (gHigh - (low[column + i] as number)) + 0
  else out.fill(MU_B_OVER_HC_INVCM_PER_T * (gHigh - gLow) + 0, at, at + count)
}

/** Fields whose strengths are summed at once: their numbers stay in the processor's nearest cache. */
const AT_ONCE = 512
/** The vector of a state that is alone in its block. */
const ALONE = new Float64Array(AT_ONCE).fill(1)
const amplitudes = new Float64Array(AT_ONCE)

/** One upper J of an amplitude: upper x (sum of factor x lower) over the lower J's that the dipole joins to it, three at most. */
interface AmplitudeTerm {
  high: Float64Array
  factors: number[]
  lows: Float64Array[]
}

/** Adds one term of an amplitude at some fields; a loop for each number of lower J's. */
function addAmplitudes({ high, factors, lows }: AmplitudeTerm, count: number, highAt: number, lowAt: number): void {
  const [a, b, c] = [factors[0] as number, factors[1] as number, factors[2] as number]
  const [first, second, third] = [lows[0] as Float64Array, lows[1] as Float64Array, lows[2] as Float64Array]
  const sums = amplitudes
  if (factors.length === 1) {
    for (let i = 0; i < count; i += 1) sums[i] = (sums[i] as number) + (high[highAt + i] as number) * (a * (first[lowAt + i] as number))
  } else if (factors.length === 2) {
    for (let i = 0; i < count; i += 1) sums[i] = (sums[i] as number) + (high[highAt + i] as number) * (a * (first[lowAt + i] as number) + b * (second[lowAt + i] as number))
  } else {
    for (let i = 0; i < count; i += 1) sums[i] = (sums[i] as number) + (high[highAt + i] as number) * (a * (first[lowAt + i] as number) + b * (second[lowAt + i] as number) + c * (third[lowAt + i] as number))
  }
}

/** What a component's amplitude is the sum of: one term for each upper J. */
function amplitudeTerms({ lower, upper, dipole }: BlockLink, sweep: MultipletSweep, rowLow: number, rowHigh: number): AmplitudeTerm[] {
  const terms: AmplitudeTerm[] = []
  for (let i = 0; i < upper.n; i += 1) {
    const term: AmplitudeTerm = { high: sweep.upper.vectors[rowHigh + i] ?? ALONE, factors: [], lows: [] }
    for (let j = 0; j < lower.n; j += 1) {
      const factor = dipole[i * lower.n + j] as number
      // elements between other J's are zero but for rounding
      if (factor === 0 || Math.abs((upper.twoJs[i] as number) - (lower.twoJs[j] as number)) > 2) continue
      term.factors.push(factor)
      term.lows.push(sweep.lower.vectors[rowLow + j] ?? ALONE)
    }
    if (term.factors.length > 0) terms.push(term)
  }
  return terms
}

/** Strengths of one component, as a share of the multiplet times `factor`; interference between J's included. */
export function sweepStrengths(multiplet: FieldMultiplet, sweep: MultipletSweep, component: number, { from, to, column }: SweepPart, factor: number, out: Float64Array, at: number): void {
  const link = multiplet.links[multiplet.linkOf[component] as number] as BlockLink
  const rowLow = link.lower.firstVector + ((multiplet.lowerState[component] as number) - link.lower.firstState) * link.lower.n
  const rowHigh = link.upper.firstVector + ((multiplet.upperState[component] as number) - link.upper.firstState) * link.upper.n
  const terms = amplitudeTerms(link, sweep, rowLow, rowHigh)
  const scale = factor / multiplet.norm
  for (let done = 0; done < to - from; done += AT_ONCE) {
    const count = Math.min(AT_ONCE, to - from - done)
    amplitudes.fill(0, 0, count)
    const [highAt, lowAt] = [link.upper.n === 1 ? 0 : column + done, link.lower.n === 1 ? 0 : column + done]
    for (const term of terms) addAmplitudes(term, count, highAt, lowAt)
    const place = at + done
    for (let i = 0; i < count; i += 1) {
      const amplitude = amplitudes[i] as number
      out[place + i] = amplitude * amplitude * scale
    }
  }
}
