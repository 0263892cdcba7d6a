import { componentPlaces, shiftLorentz } from '@/lib/atomic/components'
import type { TwoJ } from '@/lib/atomic/half'
import { beyondLinear, mixedAmplitudes, type MixedLevel, type TermLevels } from '@/lib/atomic/mixing'
import { type Kind, rankOf } from '@/lib/atomic/rules'
import { hasLsDipole, lsDipoleAmplitude } from '@/lib/atomic/term-coupling'

export interface KernelEnd {
  twoJ: TwoJ
  g: number | null
  term: TermLevels | null
  mixed: MixedLevel
}

interface KernelComponent {
  q: number
  twoMLower: TwoJ
  twoMUpper: TwoJ
  lowerIndex: number
  upperIndex: number
  shift: number
  /** Linear strength; each q sums to 1. */
  strength: number
  /** LS dipole amplitudes, [upper: itself, neighbours][lower: itself, neighbours]; empty where the line has none. */
  amplitudes: number[][]
}

/** All that does not depend on the field, so that a scan over fields only adds and multiplies. */
export interface LineKernel {
  lower: MixedLevel
  upper: MixedLevel
  components: KernelComponent[]
  /** Divides squared amplitudes so that each q sums to 1 at zero field. */
  norm: number
  largestShift: number
  /** Largest linear strength of each q, at index q + rank. */
  largestOfQ: number[]
  rank: number
  /** Why strengths cannot be followed into the field; null where they can. */
  noAmplitude: string | null
}

function whyNoAmplitude(kind: Kind, lower: KernelEnd, upper: KernelEnd): string | null {
  if (kind !== 'E1') return `strengths of ${kind} lines are followed by the linear model only`
  if (lower.term === null || upper.term === null) return 'an end of the line has no S and L in its coupling, so it has no LS amplitude'
  if (!hasLsDipole(lower.term, upper.term)) return 'the line has no LS amplitude: its strength comes from a departure from LS coupling'
  return null
}

/** Makes a line ready: components with linear shifts and strengths, and the LS amplitudes between all J that the field mixes. */
export function lineKernel(kind: Kind, lower: KernelEnd, upper: KernelEnd): LineKernel {
  const rank = rankOf(kind)
  const noAmplitude = whyNoAmplitude(kind, lower, upper)
  const lowerJs = [lower.twoJ, ...lower.mixed.neighbours.map((n) => n.twoJ)]
  const upperJs = [upper.twoJ, ...upper.mixed.neighbours.map((n) => n.twoJ)]
  const components = componentPlaces(kind, lower.twoJ, upper.twoJ).map(({ q, twoMLower, twoMUpper, strength }): KernelComponent => {
    const amplitude = (twoJUpper: TwoJ, twoJLower: TwoJ) =>
      Math.abs(twoMUpper) > twoJUpper || Math.abs(twoMLower) > twoJLower
        ? 0
        : lsDipoleAmplitude(lower.term?.twoS ?? 0, { l: lower.term?.l ?? 0, twoJ: twoJLower, twoM: twoMLower }, { l: upper.term?.l ?? 0, twoJ: twoJUpper, twoM: twoMUpper })
    return {
      q,
      twoMLower,
      twoMUpper,
      lowerIndex: (twoMLower + lower.twoJ) / 2,
      upperIndex: (twoMUpper + upper.twoJ) / 2,
      shift: shiftLorentz(lower.g, twoMLower, upper.g, twoMUpper),
      strength,
      amplitudes: noAmplitude === null ? upperJs.map((twoJUpper) => lowerJs.map((twoJLower) => amplitude(twoJUpper, twoJLower))) : [],
    }
  })
  const seen = components.filter((component) => component.strength > 0)
  const largestOfQ = Array.from({ length: 2 * rank + 1 }, (_, i) => Math.max(0, ...seen.filter((c) => c.q === i - rank).map((c) => c.strength)))
  const squares = components.filter((c) => c.q === 0).reduce((sum, c) => sum + (c.amplitudes[0]?.[0] ?? 0) ** 2, 0)
  return {
    lower: lower.mixed,
    upper: upper.mixed,
    components,
    norm: squares,
    largestShift: Math.max(0, ...seen.map((c) => Math.abs(c.shift))),
    largestOfQ,
    rank,
    noAmplitude,
  }
}

/** Largest position error of a component that has linear strength, cm^-1, and divided by the larger of the largest |linear shift| and 0.01 mu_B B. */
export function linePositionError(kernel: LineKernel, x: number): { errorInvcm: number; relativeError: number } {
  let largest = 0
  for (const component of kernel.components) {
    if (component.strength === 0) continue
    const error = beyondLinear(kernel.upper, component.upperIndex, x) - beyondLinear(kernel.lower, component.lowerIndex, x)
    largest = Math.max(largest, Math.abs(error))
  }
  const scale = x * Math.max(kernel.largestShift, 0.01)
  return { errorInvcm: largest, relativeError: largest === 0 ? 0 : largest / scale }
}

/** The strength of each component of the kernel with mixing at x = mu_B B; each q sums to 1 at zero field. */
export function mixedStrengths(kernel: LineKernel, x: number): number[] {
  const states = (level: MixedLevel) => Array.from({ length: level.twoJ + 1 }, (_, i) => mixedAmplitudes(level, i, x))
  const [lower, upper] = [states(kernel.lower), states(kernel.upper)]
  return kernel.components.map((component) => {
    const [u, l] = [upper[component.upperIndex] ?? [], lower[component.lowerIndex] ?? []]
    let amplitude = 0
    component.amplitudes.forEach((row, i) => row.forEach((element, k) => (amplitude += element * (u[i] ?? 0) * (l[k] ?? 0))))
    return (amplitude * amplitude) / kernel.norm
  })
}

/** Largest change of a component's strength as a fraction of the largest linear strength in its q. */
export function lineStrengthError(kernel: LineKernel, x: number): number {
  if (kernel.norm === 0) return 0
  const strengths = mixedStrengths(kernel, x)
  let largest = 0
  kernel.components.forEach((component, i) => {
    const most = kernel.largestOfQ[component.q + kernel.rank] ?? 0
    if (most > 0) largest = Math.max(largest, Math.abs((strengths[i] ?? 0) - component.strength) / most)
  })
  return largest
}
