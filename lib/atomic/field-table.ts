import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import type { FieldMultiplet } from '@/lib/atomic/field-multiplet'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import type { FieldBlock, FieldTerm } from '@/lib/atomic/field-term'
import { multipletGrid } from '@/lib/atomic/intermediate-grid'
import { solveTridiagonal } from '@/lib/atomic/tridiagonal'

/** Positions and strengths of a multiplet over an interval of fields, to be read by cubic Hermite interpolation; arrays are [node][component]. */
export interface FieldTable {
  nodesTesla: Float64Array
  components: number
  /** Wavenumbers (cm^-1) and their slopes per tesla. */
  positions: Float64Array
  positionSlopes: Float64Array
  /** All components of one field sum to 1; null without an LS amplitude. */
  strengths: Float64Array | null
  strengthSlopes: Float64Array | null
  /** No interpolated position, no interpolated strength is farther than this from the model. */
  maximumErrorInvcm: number
  maximumStrengthError: number | null
  /** False only where levels coincide at zero field, so that the bounds fail in a last small interval beside it. */
  proved: boolean
}

export interface FieldTableOptions {
  fromTesla: number
  toTesla: number
  toleranceInvcm: number
  toleranceStrength: number
}

export const TABLE_PROOF =
  'Cubic Hermite interpolation errs by at most h^4/384 times the largest fourth derivative; that of energies is bounded by 192 V^4/d^3 and that of strengths by Cauchy estimates on spectral projections, with d the distance to the nearest state of the same m, bounded below over each interval, and V half the spread of the slopes'

const MOST_NUMBERS = 5_000_000
/** Intervals shorter than this share of the whole are not divided further. */
const SHORTEST = 2 ** -40
/** Radius of the circles of Cauchy's estimate for projections, as a share of half the distance over V: nearly the best. */
const RADIUS = 2 / 3

/** Half the spread of the slopes of a block: V less its mean. 0 where the field does nothing but shift all states straight. */
function halfSpread(block: FieldBlock): number {
  const straight = block.n === 1 || block.diagonal.every((energy) => energy === block.diagonal[0])
  if (straight) return 0
  const [d, e] = [Float64Array.from(block.slopes), new Float64Array(block.n)]
  e.set(block.couplings)
  solveTridiagonal(block.n, d, e, new Float64Array(block.n * block.n))
  return ((d[block.n - 1] ?? 0) - (d[0] ?? 0)) / 2
}

interface TermBounds {
  term: FieldTerm
  /** By state: half spread of its block. */
  spread: Float64Array
  /** Distance of each state to the nearest of its block at a solved field. */
  distances(x: number): Float64Array
}

function boundsOf(term: FieldTerm): TermBounds {
  const spread = new Float64Array(term.states)
  for (const block of term.blocks) spread.fill(halfSpread(block), block.firstState, block.firstState + block.n)
  const solution = termSolution(term)
  return {
    term,
    spread,
    distances(x) {
      solveTerm(term, x, solution)
      const distances = new Float64Array(term.states).fill(Number.POSITIVE_INFINITY)
      for (const { firstState, n } of term.blocks) {
        for (let k = 1; k < n; k += 1) {
          const gap = (solution.energies[firstState + k] as number) - (solution.energies[firstState + k - 1] as number)
          distances[firstState + k] = Math.min(distances[firstState + k] as number, gap)
          distances[firstState + k - 1] = Math.min(distances[firstState + k - 1] as number, gap)
        }
      }
      return distances
    },
  }
}

interface Node {
  tesla: number
  lower: Float64Array
  upper: Float64Array
}

/**
 * Least distance of a state to its neighbours over an interval of width h in x: two energies of one block part or near each other at most at
 * 2V, so from both ends it is at least (d_a + d_b)/2 - V h.
 */
function leastDistances({ spread }: TermBounds, a: Float64Array, b: Float64Array, h: number): Float64Array {
  return spread.map((v, state) => (v === 0 ? Number.POSITIVE_INFINITY : ((a[state] as number) + (b[state] as number)) / 2 - v * h))
}

/** Error of interpolated energies by state: h^4/384 x 192 V^4/d^3. The eigenvalue is analytic within |x| < d/2V and moves there by d/2 at most. */
function energyErrors({ spread }: TermBounds, distances: Float64Array, h: number): Float64Array {
  return spread.map((v, state) => {
    const d = distances[state] as number
    return v === 0 ? 0 : d > 0 ? ((v * h) ** 4 / d ** 3) * (192 / 384) : Number.POSITIVE_INFINITY
  })
}

/** sqrt(|D|_1 |D|_inf), an upper bound of the norm of a dipole block. */
function dipoleNorm(dipole: Float64Array, rows: number, columns: number): number {
  let [byRow, byColumn] = [0, 0]
  for (let i = 0; i < rows; i += 1) byRow = Math.max(byRow, Array.from({ length: columns }, (_, j) => Math.abs(dipole[i * columns + j] ?? 0)).reduce((a, b) => a + b, 0))
  for (let j = 0; j < columns; j += 1) byColumn = Math.max(byColumn, Array.from({ length: rows }, (_, i) => Math.abs(dipole[i * columns + j] ?? 0)).reduce((a, b) => a + b, 0))
  return Math.sqrt(byRow * byColumn)
}

/**
 * Error of an interpolated strength, tr(P_u D P_l D^T)/(2S + 1): within |x| <= r the projections are analytic and of norm at most
 * 1/(1 - 2 r V/d), so the fourth derivative is at most 4! |D|^2/(2S + 1) over both of these and r^4. T. Kato, Perturbation Theory for Linear
 * Operators (1966), ch. II.
 */
function strengthError(norm: number, states: number, ends: { v: number; d: number }[], h: number): number {
  const radii = ends.map(({ v, d }) => (v === 0 ? Number.POSITIVE_INFINITY : (RADIUS * d) / (2 * v)))
  const r = Math.min(...radii)
  if (r === Number.POSITIVE_INFINITY) return 0
  if (!(r > 0)) return Number.POSITIVE_INFINITY
  const projections = ends.reduce((product, { v, d }) => product / (1 - (v === 0 ? 0 : (2 * r * v) / d)), 1)
  return ((h / r) ** 4 * 24 * norm * norm * projections) / (384 * states)
}

interface Maker {
  multiplet: FieldMultiplet
  lower: TermBounds
  upper: TermBounds
  norms: number[]
}

/** The largest errors that interpolation over an interval can make. */
function intervalErrors({ multiplet, lower, upper, norms }: Maker, a: Node, b: Node): { position: number; strength: number } {
  const h = MU_B_OVER_HC_INVCM_PER_T * (b.tesla - a.tesla)
  const [dl, du] = [leastDistances(lower, a.lower, b.lower, h), leastDistances(upper, a.upper, b.upper, h)]
  const [el, eu] = [energyErrors(lower, dl, h), energyErrors(upper, du, h)]
  let [position, strength] = [0, 0]
  for (let i = 0; i < multiplet.count; i += 1) {
    const [l, u] = [multiplet.lowerState[i] as number, multiplet.upperState[i] as number]
    position = Math.max(position, (el[l] as number) + (eu[u] as number))
  }
  if (multiplet.noAmplitude !== null) return { position, strength }
  multiplet.links.forEach((link, n) => {
    for (let ku = 0; ku < link.upper.n; ku += 1) {
      for (let kl = 0; kl < link.lower.n; kl += 1) {
        const [l, u] = [link.lower.firstState + kl, link.upper.firstState + ku]
        const ends = [{ v: lower.spread[l] as number, d: dl[l] as number }, { v: upper.spread[u] as number, d: du[u] as number }]
        strength = Math.max(strength, strengthError(norms[n] ?? 0, multiplet.norm, ends, h))
      }
    }
  })
  return { position, strength }
}

function check({ fromTesla, toTesla, toleranceInvcm, toleranceStrength }: FieldTableOptions): void {
  if (!(fromTesla >= 0) || !(toTesla > fromTesla) || !Number.isFinite(toTesla)) throw new PhysicsError('field_interval', 'A field table runs from a field of 0 or more to a larger one.', 'field')
  if (!(toleranceInvcm > 0) || !(toleranceStrength > 0)) throw new PhysicsError('tolerance_not_positive', 'The tolerances of a field table must be above zero.', 'tolerance')
}

/** Intervals judged, and nodes computed, before a step ends. */
const INTERVALS_A_STEP = 64
const NODES_A_STEP = 256

/** Positions and strengths with their slopes at all nodes, some nodes a step. */
function* atNodes(multiplet: FieldMultiplet, nodes: readonly number[]): Generator<null, Pick<FieldTable, 'positions' | 'positionSlopes' | 'strengths' | 'strengthSlopes'>> {
  const numbers = () => new Float64Array(nodes.length * multiplet.count)
  const hasStrengths = multiplet.noAmplitude === null
  const all = { positions: numbers(), positionSlopes: numbers(), strengths: hasStrengths ? numbers() : null, strengthSlopes: hasStrengths ? numbers() : null }
  for (let from = 0; from < nodes.length; from += NODES_A_STEP) {
    const rows = { from, to: Math.min(nodes.length, from + NODES_A_STEP) }
    const grid = multipletGrid(multiplet, nodes, { derivatives: true, strengths: true, strengthDerivatives: true }, rows)
    all.positions.set(grid.values, from * multiplet.count)
    all.positionSlopes.set(grid.derivatives ?? [], from * multiplet.count)
    all.strengths?.set(grid.strengths ?? [], from * multiplet.count)
    all.strengthSlopes?.set(grid.strengthDerivatives ?? [], from * multiplet.count)
    yield null
  }
  return all
}

/**
 * Tabulates a multiplet so that interpolation is proved to keep both tolerances: intervals are halved until the bound of each is small enough.
 * Near an anticrossing they are short, where states run straight they are long. Throws `table_too_large` beyond 5 million numbers.
 * In steps, so that whoever shares the thread has a turn in between.
 */
export function* fieldTableSteps(multiplet: FieldMultiplet, options: FieldTableOptions): Generator<null, FieldTable> {
  check(options)
  const { fromTesla, toTesla, toleranceInvcm, toleranceStrength } = options
  const maker: Maker = { multiplet, lower: boundsOf(multiplet.lower), upper: boundsOf(multiplet.upper), norms: multiplet.links.map((link) => dipoleNorm(link.dipole, link.upper.n, link.lower.n)) }
  const nodeAt = (tesla: number): Node => ({ tesla, lower: maker.lower.distances(MU_B_OVER_HC_INVCM_PER_T * tesla), upper: maker.upper.distances(MU_B_OVER_HC_INVCM_PER_T * tesla) })
  const nodes = [fromTesla]
  let [position, strength, proved, judged] = [0, 0, true, 0]
  // the last pushed is the leftmost, so nodes come out upwards
  const open: [Node, Node][] = [[nodeAt(fromTesla), nodeAt(toTesla)]]
  for (let pair = open.pop(); pair !== undefined; pair = open.pop()) {
    judged += 1
    if (judged % INTERVALS_A_STEP === 0) yield null
    const [a, b] = pair
    const errors = intervalErrors(maker, a, b)
    const small = errors.position <= toleranceInvcm && errors.strength <= toleranceStrength
    if (!small && b.tesla - a.tesla > SHORTEST * (toTesla - fromTesla)) {
      const middle = nodeAt((a.tesla + b.tesla) / 2)
      open.push([middle, b], [a, middle])
      continue
    }
    if (small) [position, strength] = [Math.max(position, errors.position), Math.max(strength, errors.strength)]
    else proved = false
    nodes.push(b.tesla)
    if (nodes.length * multiplet.count * 4 > MOST_NUMBERS) throw new PhysicsError('table_too_large', 'The field table asked for would be beyond 5 million numbers; narrow the interval or allow a larger error.', 'tolerance')
  }
  const numbers = yield* atNodes(multiplet, nodes)
  // rounding of the nodes' own values and of the interpolation
  const rounding = 16 * Number.EPSILON * numbers.positions.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0)
  return {
    nodesTesla: Float64Array.from(nodes),
    components: multiplet.count,
    ...numbers,
    maximumErrorInvcm: position + rounding,
    maximumStrengthError: numbers.strengths === null ? null : strength + 1e-13,
    proved,
  }
}

/** `fieldTableSteps` to its end. */
export function fieldTable(multiplet: FieldMultiplet, options: FieldTableOptions): FieldTable {
  const steps = fieldTableSteps(multiplet, options)
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
  }
}

/** Index of the interval that holds a field, by halving. */
function intervalOf(nodes: Float64Array, field: number): number {
  let [low, high] = [0, nodes.length - 1]
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if ((nodes[middle] as number) <= field) low = middle
    else high = middle
  }
  return low
}

/** Reads positions and strengths from a table at a field inside its interval; what a client without this code does in a few lines. */
export function readFieldTable(table: FieldTable, fieldTesla: number): { positions: Float64Array; strengths: Float64Array | null } {
  const { nodesTesla: nodes, components } = table
  const [first, last] = [nodes[0] ?? 0, nodes.at(-1) ?? 0]
  if (!(fieldTesla >= first && fieldTesla <= last)) throw new PhysicsError('field_outside_table', `${fieldTesla} T lies outside the table, which runs from ${first} to ${last} T.`, 'field')
  const n = intervalOf(nodes, fieldTesla)
  const [a, b] = [nodes[n] as number, nodes[n + 1] as number]
  const h = b - a
  const t = (fieldTesla - a) / h
  const [rest, at, next] = [1 - t, n * components, (n + 1) * components]
  // the difference of the values is small beside them, so it is what is interpolated
  const read = (values: Float64Array, slopes: Float64Array) =>
    Float64Array.from({ length: components }, (_, c) => {
      const start = values[at + c] as number
      const rise = (values[next + c] as number) - start
      return start + rise * t * t * (3 - 2 * t) + h * t * rest * (rest * (slopes[at + c] as number) - t * (slopes[next + c] as number))
    })
  return { positions: read(table.positions, table.positionSlopes), strengths: table.strengths && table.strengthSlopes ? read(table.strengths, table.strengthSlopes) : null }
}
