import type { FieldTerm } from '@/lib/atomic/field-term'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { PhysicsError } from '@/lib/atomic/errors'
import { solveTerm, termSolution } from '@/lib/atomic/field-solver'
import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import { hyperfineBlockStates, type HyperfineReady } from '@/lib/atomic/hyperfine'

/** The difference of two energies at a field with its first two derivatives; any unit of energy, tesla. */
export interface Difference {
  value: number
  slope: number
  curvature: number
}

export interface Stationary {
  fieldTesla: number
  value: number
  curvature: number
  /** Of the difference itself. */
  kind: 'minimum' | 'maximum'
}

export interface DifferenceFeatures {
  /** Fields where both energies are equal, zero field left out. */
  crossings: { fieldTesla: number; slope: number }[]
  /** Fields where the difference does not change with the field to first order. */
  stationary: Stationary[]
  /** For two states of one m, which cannot cross: fields where they are nearest, with the distance. */
  anticrossings: { fieldTesla: number; gap: number }[]
}

type At = (fieldTesla: number) => Difference
type Part = 'value' | 'slope' | 'curvature'
const NEXT = { value: 'slope', slope: 'curvature' } as const

/** Root of one part between fields where its signs differ: Newton on the analytic derivative, a bisection where that leaves the bracket. */
function rootBetween(at: At, part: Part, from: number, to: number): number {
  let [low, high] = [from, to]
  const rising = at(low)[part] < 0
  let field = (low + high) / 2
  for (let step = 0; step < 200; step += 1) {
    const here = at(field)
    if (here[part] === 0) return field
    if (here[part] < 0 === rising) low = field
    else high = field
    const newton = part === 'curvature' ? Number.NaN : field - here[part] / here[NEXT[part]]
    const next = newton > low && newton < high ? newton : (low + high) / 2
    if (next === field || high - low <= 4e-16 * high) return next
    field = next
  }
  return field
}

const opposite = (a: number, b: number): boolean => (a < 0 && b > 0) || (a > 0 && b < 0)

/** Roots of a part over sorted nodes. */
function rootsOver(at: At, part: Part, nodes: readonly number[]): number[] {
  const values = nodes.map((node) => at(node)[part])
  const roots: number[] = []
  nodes.forEach((node, i) => {
    const next = nodes[i + 1]
    if (values[i] === 0 && node > 0 && i > 0) roots.push(node)
    if (next !== undefined && opposite(values[i] ?? 0, values[i + 1] ?? 0)) roots.push(rootBetween(at, part, node, next))
  })
  return roots
}

const NODES = 300

/** Equal steps and equal ratios together, so that both ends of the interval are looked at closely. */
function nodesOver(from: number, to: number): number[] {
  const start = from > 0 ? from : to * 1e-7
  const nodes = new Set([from, to])
  for (let i = 0; i <= NODES; i += 1) {
    nodes.add(from + ((to - from) * i) / NODES)
    nodes.add(Math.min(to, start * (to / start) ** (i / NODES)))
  }
  return [...nodes].sort((a, b) => a - b)
}

const merged = (nodes: readonly number[], more: readonly number[]): number[] => [...new Set([...nodes, ...more])].sort((a, b) => a - b)

/** Below this share of the largest difference seen, a difference or a slope is rounding and no root is looked for. */
const ROUNDING = 1e-13

/**
 * Crossings, anticrossings and stationary points of a difference of two energies between two fields (T), by root finding on analytic slopes.
 * Where the curvature changes sign the interval is divided there, so that two stationary points in one step are not missed; so are two
 * crossings on both sides of a stationary point. `sameM`: the states cannot cross.
 */
export function differenceFeatures(at: At, from: number, to: number, sameM: boolean): DifferenceFeatures {
  const nodes = nodesOver(from, to)
  const seen = nodes.map(at)
  const largest = Math.max(...seen.map((d) => Math.abs(d.value)))
  const steepest = Math.max(...seen.map((d) => Math.abs(d.slope)))
  const none: DifferenceFeatures = { crossings: [], stationary: [], anticrossings: [] }
  if (largest === 0) return none
  const moves = steepest * to > ROUNDING * largest
  const finer = moves ? merged(nodes, rootsOver(at, 'curvature', nodes)) : nodes
  // a slope that is rounding of the states' own slopes has no roots; differences of parallel states are left alone
  const fields = moves ? rootsOver(at, 'slope', finer).filter((field) => field > 0) : []
  const stationary = fields.map((fieldTesla): Stationary => {
    const { value, curvature } = at(fieldTesla)
    return { fieldTesla, value, curvature, kind: curvature > 0 ? 'minimum' : 'maximum' }
  })
  if (sameM) {
    const nearest = stationary.filter(({ value, curvature }) => value * curvature > 0)
    return { ...none, stationary, anticrossings: nearest.map(({ fieldTesla, value }) => ({ fieldTesla, gap: Math.abs(value) })) }
  }
  const crossings = rootsOver(at, 'value', merged(finer, fields).filter((field) => field > 0))
  return { ...none, stationary, crossings: crossings.map((fieldTesla) => ({ fieldTesla, slope: at(fieldTesla).slope })) }
}

/** A hyperfine sublevel by its zero-field name, F and m_F. */
export interface SublevelName {
  twoF: TwoJ
  twoMF: TwoJ
}

function finder(ready: HyperfineReady, { twoF, twoMF }: SublevelName) {
  const block = ready.blocks.find((one) => one.twoMF === twoMF)
  const k = block?.fs.findIndex((f) => f.twoF === twoF) ?? -1
  if (!block || k < 0) throw new PhysicsError('no_such_sublevel', `This level has no sublevel F = ${formatHalf(twoF)}, m_F = ${formatHalf(twoMF)}.`, 'sublevels')
  return (fieldTesla: number) => hyperfineBlockStates(ready, block, fieldTesla)[k]
}

/** E(a) - E(b), MHz, of two hyperfine sublevels at a field. */
export function hyperfineDifference(ready: HyperfineReady, a: SublevelName, b: SublevelName): At {
  const [first, second] = [finder(ready, a), finder(ready, b)]
  return (fieldTesla) => {
    const [one, other] = [first(fieldTesla), second(fieldTesla)]
    return {
      value: (one?.energyMhz ?? 0) - (other?.energyMhz ?? 0),
      slope: (one?.derivativeMhzPerTesla ?? 0) - (other?.derivativeMhzPerTesla ?? 0),
      curvature: (one?.curvatureMhzPerTesla2 ?? 0) - (other?.curvatureMhzPerTesla2 ?? 0),
    }
  }
}

/** Crossings, anticrossings and stationary points of two hyperfine sublevels of one level (MHz, T). */
export const hyperfineFeatures = (ready: HyperfineReady, a: SublevelName, b: SublevelName, from: number, to: number): DifferenceFeatures =>
  differenceFeatures(hyperfineDifference(ready, a, b), from, to, a.twoMF === b.twoMF)

/** A sublevel of an LS term by its zero-field name. */
export interface TermStateName {
  twoJ: TwoJ
  twoM: TwoJ
}

function stateIndex(term: FieldTerm, { twoJ, twoM }: TermStateName): { state: number; row: number; block: FieldTerm['blocks'][number] } {
  const block = term.blocks.find((one) => one.twoM === twoM)
  const k = block ? [...block.own].findIndex((own) => block.twoJs[own] === twoJ) : -1
  if (!block || k < 0) throw new PhysicsError('no_such_sublevel', `This term has no sublevel J = ${formatHalf(twoJ)}, m = ${formatHalf(twoM)}.`, 'sublevels')
  return { state: block.firstState + k, row: block.firstVector + k * block.n, block }
}

/** E(a) - E(b), cm^-1, of two sublevels of an LS term at a field. */
export function termDifference(term: FieldTerm, a: TermStateName, b: TermStateName): At {
  const solution = termSolution(term)
  const ends = [stateIndex(term, a), stateIndex(term, b)]
  return (fieldTesla) => {
    solveTerm(term, MU_B_OVER_HC_INVCM_PER_T * fieldTesla, solution, true)
    const [one, other] = ends.map(({ state, row, block }) => {
      const energy = solution.energies[state] ?? 0
      let curvature = 0
      // turning is <p|V|k>/(E_k - E_p), so 2 turning^2 (E_k - E_p) is the second-order term's second derivative
      for (let p = 0; p < block.n; p += 1) curvature += 2 * (solution.turning[row + p] ?? 0) ** 2 * (energy - (solution.energies[block.firstState + p] ?? 0))
      return { value: energy, slope: MU_B_OVER_HC_INVCM_PER_T * (solution.slopes[state] ?? 0), curvature: MU_B_OVER_HC_INVCM_PER_T ** 2 * curvature }
    })
    return { value: (one?.value ?? 0) - (other?.value ?? 0), slope: (one?.slope ?? 0) - (other?.slope ?? 0), curvature: (one?.curvature ?? 0) - (other?.curvature ?? 0) }
  }
}

/** Crossings, anticrossings and stationary points of two sublevels of an LS term (cm^-1, T). */
export const termFeatures = (term: FieldTerm, a: TermStateName, b: TermStateName, from: number, to: number): DifferenceFeatures =>
  differenceFeatures(termDifference(term, a, b), from, to, a.twoM === b.twoM)
