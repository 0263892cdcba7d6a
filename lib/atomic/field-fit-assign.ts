import type { Assignment, FitSetup } from '@/lib/atomic/field-fit-problem'
import type { LineModel } from '@/lib/atomic/field-fit-model'

/** What is known of a peak beforehand: its components, or its polarisation alone. */
export interface PeakHint {
  /** Indices into the line's components; null where they are to be found. */
  components: number[] | null
  /** q of the peak, or `sigma` for either sense; null where it is not known. */
  q: number | 'sigma' | null
}

/** A way to read the peaks, with the field it began from. */
export interface Reading {
  fieldTesla: number
  assignments: Assignment[]
  /** Lower is better: chi-squared, and what a reading costs that leaves strong components unseen or peaks doubled. */
  cost: number
}

/** Components of one q that lie together and are seen as one peak. */
interface Cluster {
  components: number[]
  q: number
  place: number
  strength: number
}

/** Weaker components than this share of the strongest are not taken for a peak unless named by hand. */
const VISIBLE = 1e-3
/** Cost of all of a line's strength unseen, and of a second peak on one cluster, in units of chi-squared. */
const UNSEEN = 40
const DOUBLED = 60
/** One peak costs no more than this many, so that one bad reading does not rule a hypothesis. */
const MOST_OF_ONE = 400

const allowed = (cluster: Cluster, hint: PeakHint): boolean =>
  hint.components !== null ? hint.components.some((c) => cluster.components.includes(c)) : hint.q === null || (hint.q === 'sigma' ? Math.abs(cluster.q) === 1 : cluster.q === hint.q)

/** Clusters of a model solved at a field: visible components of one q nearer than `width`, by place. Components named by hand stand alone. */
function clustersOf(model: LineModel, scale: number, width: number, visibleQ: readonly number[]): Cluster[] {
  const strongest = Math.max(...model.strengths)
  const order = model.components
    .map((component, index) => ({ q: component.q, index, place: scale * (model.shifts[index] ?? 0), strength: model.strengths[index] ?? 0 }))
    .filter((c) => c.strength >= VISIBLE * strongest && visibleQ.includes(c.q))
    .sort((a, b) => a.q - b.q || a.place - b.place)
  const clusters: Cluster[] = []
  for (const c of order) {
    const last = clusters.at(-1)
    if (last && last.q === c.q && c.place - last.place <= width) {
      last.components.push(c.index)
      last.place = (last.place * last.strength + c.place * c.strength) / (last.strength + c.strength)
      last.strength += c.strength
    } else clusters.push({ components: [c.index], q: c.q, place: c.place, strength: c.strength })
  }
  return clusters
}

export interface AssignOptions {
  hints: readonly PeakHint[]
  /** Which q can be seen from where the observer stands. */
  visibleQ: readonly number[]
  /** No reading beyond this field, T. */
  mostTesla: number
}

/** Deviation taken for a peak whose own is not known: a hundredth of what the peaks of its line span. */
function deviations(setup: FitSetup): number[] {
  const span = setup.lines.map((_, line) => {
    const places = setup.measurements.filter((one) => one.line === line).map((one) => one.positionInvcm)
    return Math.max(...places) - Math.min(...places)
  })
  const largest = Math.max(...span.filter((value) => Number.isFinite(value)), Number.MIN_VALUE)
  return setup.measurements.map((one) => one.sigmaInvcm ?? (span[one.line] || largest) / 100)
}

interface Group {
  /** Indices of the measurements that share the zero, by position. */
  members: number[]
}

const groupsOf = (setup: FitSetup): Group[] =>
  setup.zeros.map((_, z) => ({
    members: setup.measurements.flatMap((one, i) => (setup.zeroOfLine[one.line] === z ? [i] : [])).sort((a, b) => (setup.measurements[a]?.positionInvcm ?? 0) - (setup.measurements[b]?.positionInvcm ?? 0)),
  }))

/** Everything a hypothesis is judged with, at one field. */
interface Scene {
  setup: FitSetup
  options: AssignOptions
  sigma: number[]
  clusters: Cluster[][]
}

function sceneAt(setup: FitSetup, options: AssignOptions, sigma: number[], fieldTesla: number): Scene {
  const scale = setup.scale.value
  const clusters = setup.models.map((model, line) => {
    model.at(fieldTesla)
    const own = sigma.filter((_, i) => setup.measurements[i]?.line === line)
    const width = Math.max(Math.min(...own, Number.MAX_VALUE), 1e-9 * Math.abs(fieldTesla))
    return clustersOf(model, scale, own.length === 0 ? 0 : width, options.visibleQ)
  })
  return { setup, options, sigma, clusters }
}

const offsetOf = (setup: FitSetup, line: number): number => setup.scale.value * (setup.offsets[line] ?? 0)

/** Assigns each peak of a group to the nearest allowed cluster, given the zero; cost as in `Reading`. */
function assignGroup(scene: Scene, group: Group, zero: number): { assignments: Map<number, Assignment>; cost: number } {
  const { setup, options, sigma, clusters } = scene
  const assignments = new Map<number, Assignment>()
  const taken = new Map<Cluster, number>()
  let cost = 0
  for (const i of group.members) {
    const measurement = setup.measurements[i]
    const hint = options.hints[i] ?? { components: null, q: null }
    if (!measurement) continue
    const where = measurement.positionInvcm - zero - offsetOf(setup, measurement.line)
    let best: { cluster: Cluster; distance: number } | null = null
    for (const cluster of clusters[measurement.line] ?? []) {
      if (!allowed(cluster, hint)) continue
      const distance = Math.abs(where - cluster.place) / (sigma[i] ?? 1)
      // at equal distance (pi and sigma in one place) the stronger is named
      if (!best || distance < best.distance - 1e-9 || (distance < best.distance + 1e-9 && cluster.strength > best.cluster.strength)) best = { cluster, distance }
    }
    if (!best && hint.components === null) cost += MOST_OF_ONE
    assignments.set(i, hint.components ?? best?.cluster.components ?? [])
    if (!best) continue
    cost += Math.min(best.distance ** 2, MOST_OF_ONE)
    taken.set(best.cluster, (taken.get(best.cluster) ?? 0) + 1)
  }
  for (const count of taken.values()) cost += DOUBLED * (count - 1)
  return { assignments, cost: cost + unseenCost(scene, group, zero) }
}

/** Strength of the group's lines that lies where no peak was measured. */
function unseenCost({ setup, sigma, clusters }: Scene, group: Group, zero: number): number {
  const lines = new Set(group.members.map((i) => setup.measurements[i]?.line ?? 0))
  let cost = 0
  for (const line of lines) {
    const places = group.members.filter((i) => setup.measurements[i]?.line === line).map((i) => ({ at: (setup.measurements[i]?.positionInvcm ?? 0) - zero - offsetOf(setup, line), sigma: sigma[i] ?? 1 }))
    const own = clusters[line] ?? []
    const all = own.reduce((sum, cluster) => sum + cluster.strength, 0)
    const unseen = own.filter((cluster) => !places.some((place) => Math.abs(place.at - cluster.place) <= 4 * place.sigma)).reduce((sum, cluster) => sum + cluster.strength, 0)
    if (all > 0) cost += (UNSEEN * unseen) / all
  }
  return cost
}

/** The best zero of a group: one given, or among those that lay one of its outermost peaks on a cluster. */
function bestOfGroup(scene: Scene, group: Group, zeros: readonly number[] | null): { assignments: Map<number, Assignment>; cost: number } {
  const { setup, clusters } = scene
  const tried =
    zeros ??
    [...new Set([group.members[0] ?? 0, group.members.at(-1) ?? 0])].flatMap((i) => {
      const one = setup.measurements[i]
      return one ? (clusters[one.line] ?? []).map((cluster) => one.positionInvcm - cluster.place - offsetOf(setup, one.line)) : []
    })
  let best = assignGroup(scene, group, tried[0] ?? 0)
  for (const zero of tried.slice(1)) {
    const next = assignGroup(scene, group, zero)
    if (next.cost < best.cost) best = next
  }
  return best
}

/** Fields at which component b of one peak lies the measured distance above component a of another: Newton from the linear law. */
function fieldOfPair(setup: FitSetup, low: { line: number; component: number }, high: { line: number; component: number }, distance: number, options: AssignOptions): number | null {
  const [a, b] = [setup.models[low.line], setup.models[high.line]]
  if (!a || !b) return null
  const scale = setup.scale.value
  const apart = distance - offsetOf(setup, high.line) + offsetOf(setup, low.line)
  const difference = (field: number) => {
    a.at(field)
    const [sa, da] = [a.shifts[low.component] ?? 0, a.slopes[low.component] ?? 0]
    b.at(field)
    return { value: scale * ((b.shifts[high.component] ?? 0) - sa), slope: scale * ((b.slopes[high.component] ?? 0) - da) }
  }
  const slope = difference(0).slope
  if (Math.abs(slope) < 1e-12) return null
  let field = apart / slope
  for (let step = 0; step < 12; step += 1) {
    const { value, slope: here } = difference(field)
    const next = field + (apart - value) / here
    if (!Number.isFinite(next) || Math.abs(next) > options.mostTesla) return null
    if (Math.abs(next - field) <= 1e-6 * Math.abs(next)) return next
    field = next
  }
  return null
}

const KEPT = 8

/**
 * Readings of the peaks, best first: the outermost two peaks of the line with most of them are laid on every pair of components, which gives
 * a field; there every peak goes to the nearest component. Without polarisations the field is taken as above zero, since peaks alone do not tell its sign.
 */
export function likelyReadings(setup: FitSetup, options: AssignOptions): Reading[] {
  const sigma = deviations(setup)
  const groups = groupsOf(setup)
  const lead = groups.reduce((most, group) => (group.members.length > most.members.length ? group : most), groups[0] ?? { members: [] })
  const [first, last] = [lead.members[0], lead.members.at(-1)]
  if (first === undefined || last === undefined || first === last) return []
  const [low, high] = [setup.measurements[first], setup.measurements[last]]
  if (!low || !high) return []
  const signed = options.hints.some((hint) => hint.components !== null || hint.q === 1 || hint.q === -1)
  const tried = new Map<string, { fieldTesla: number; zero: number }>()
  for (const a of candidates(setup, options, low.line, first)) {
    for (const b of candidates(setup, options, high.line, last)) {
      const field = fieldOfPair(setup, { line: low.line, component: a }, { line: high.line, component: b }, high.positionInvcm - low.positionInvcm, options)
      if (field === null || !(signed || field > 0)) continue
      // the lower peak on its component gives the zero
      setup.models[low.line]?.at(field)
      const zero = low.positionInvcm - setup.scale.value * (setup.models[low.line]?.shifts[a] ?? 0) - offsetOf(setup, low.line)
      tried.set(`${field.toPrecision(9)} ${zero.toPrecision(12)}`, { fieldTesla: field, zero })
    }
  }
  const readings = [...tried.values()].map(({ fieldTesla, zero }): Reading => {
    const scene = sceneAt(setup, options, sigma, fieldTesla)
    const found = groups.map((group) => bestOfGroup(scene, group, group === lead ? [zero] : null))
    return { fieldTesla, assignments: setup.measurements.map((_, i) => found.map((one) => one.assignments.get(i)).find((one) => one !== undefined) ?? []), cost: found.reduce((sum, one) => sum + one.cost, 0) }
  })
  return readings.sort((a, b) => a.cost - b.cost || Math.abs(a.fieldTesla) - Math.abs(b.fieldTesla)).slice(0, KEPT)
}

function candidates(setup: FitSetup, options: AssignOptions, line: number, measurement: number): number[] {
  const hint = options.hints[measurement] ?? { components: null, q: null }
  if (hint.components !== null) return hint.components.slice(0, 1)
  const model = setup.models[line]
  if (!model) return []
  model.at(0)
  return model.components.flatMap((component, i) => {
    const fits = hint.q === null || (hint.q === 'sigma' ? Math.abs(component.q) === 1 : component.q === hint.q)
    return fits && options.visibleQ.includes(component.q) && (model.strengths[i] ?? 0) > 0 ? [i] : []
  })
}

/** The peaks read anew at a fitted field and zeros, and what that reading costs. */
export function readAt(setup: FitSetup, options: AssignOptions, fieldTesla: number, zeros: readonly number[]): Reading {
  const scene = sceneAt(setup, options, deviations(setup), fieldTesla)
  const found = groupsOf(setup).map((group, z) => bestOfGroup(scene, group, [zeros[z] ?? 0]))
  return { fieldTesla, assignments: setup.measurements.map((_, i) => found.map((one) => one.assignments.get(i)).find((one) => one !== undefined) ?? []), cost: found.reduce((sum, one) => sum + one.cost, 0) }
}
