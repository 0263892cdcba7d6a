import { componentPlaces, shiftLorentz } from '@/lib/atomic/components'
import { type FieldMultiplet, lineShare } from '@/lib/atomic/field-multiplet'
import type { TwoJ } from '@/lib/atomic/half'
import type { MultipletSolution } from '@/lib/atomic/intermediate-grid'

export interface LinePair {
  twoJLower: TwoJ
  twoJUpper: TwoJ
}

/** Lines of a multiplet nearer to each other than wavenumber over this are taken as seen in one: the pair of He I 1083 nm is, its third line not. */
export const BLEND_RESOLVING_POWER = 30_000

/** Lines that blend with the given one, itself included: a chain of neighbours nearer than wavenumber / resolving power. */
export function blendOf(multiplet: FieldMultiplet, line: LinePair, resolvingPower: number = BLEND_RESOLVING_POWER): LinePair[] {
  const lines = multiplet.lower.levels
    .flatMap((l) => multiplet.upper.levels.map((u) => ({ twoJLower: l.twoJ, twoJUpper: u.twoJ, wavenumber: u.energyInvcm - l.energyInvcm })))
    .filter((pair) => lineShare(multiplet, pair.twoJLower, pair.twoJUpper) > 0)
    .sort((a, b) => a.wavenumber - b.wavenumber)
  const chains: (typeof lines)[] = []
  for (const pair of lines) {
    const last = chains.at(-1)
    const before = last?.at(-1)
    if (last && before && pair.wavenumber - before.wavenumber <= Math.abs(pair.wavenumber) / resolvingPower) last.push(pair)
    else chains.push([pair])
  }
  const chain = chains.find((pairs) => pairs.some((pair) => pair.twoJLower === line.twoJLower && pair.twoJUpper === line.twoJUpper)) ?? []
  return chain.map(({ twoJLower, twoJUpper }) => ({ twoJLower, twoJUpper }))
}

/** A blend made ready: which components belong to it, and where the linear law has its centre in each q. */
export interface BlendKernel {
  multiplet: FieldMultiplet
  lines: LinePair[]
  /** Indices of the blend's components. */
  members: Int32Array
  /** Centre of gravity at zero field, cm^-1. */
  centre: number
  /** Slope of each q's centroid in the linear model, Lorentz units, at q + rank. */
  linearSlopes: number[]
}

export function blendKernel(multiplet: FieldMultiplet, lines: LinePair[]): BlendKernel {
  const shares = lines.map((line) => lineShare(multiplet, line.twoJLower, line.twoJUpper))
  const whole = shares.reduce((sum, share) => sum + share, 0)
  const energy = (levels: { twoJ: TwoJ; energyInvcm: number }[], twoJ: TwoJ) => levels.find((level) => level.twoJ === twoJ)?.energyInvcm ?? 0
  const g = (levels: { twoJ: TwoJ; g: number }[], twoJ: TwoJ) => levels.find((level) => level.twoJ === twoJ)?.g ?? 0
  const linearSlopes = Array.from({ length: 2 * multiplet.rank + 1 }, () => 0)
  let centre = 0
  lines.forEach((line, i) => {
    const weight = (shares[i] ?? 0) / whole
    centre += weight * (energy(multiplet.upper.levels, line.twoJUpper) - energy(multiplet.lower.levels, line.twoJLower))
    const [gl, gu] = [g(multiplet.lower.levels, line.twoJLower), g(multiplet.upper.levels, line.twoJUpper)]
    for (const place of componentPlaces(multiplet.kind, line.twoJLower, line.twoJUpper)) {
      const at = place.q + multiplet.rank
      linearSlopes[at] = (linearSlopes[at] ?? 0) + weight * place.strength * shiftLorentz(gl, place.twoMLower, gu, place.twoMUpper)
    }
  })
  const members = Array.from({ length: multiplet.count }, (_, i) => i).filter((i) => lines.some((line) => line.twoJLower === multiplet.nominalTwoJLower[i] && line.twoJUpper === multiplet.nominalTwoJUpper[i]))
  return { multiplet, lines, members: Int32Array.from(members), centre, linearSlopes }
}

/**
 * How far the linear law misplaces the centre of gravity of an unresolved blend, the worst q: cm^-1, and over the larger of the largest
 * linear displacement and 0.01 mu_B B. Strengths mix first, so this may fail at fields where positions and the sums of strengths are right:
 * He I 1083 nm, Socas-Navarro, Trujillo Bueno & Landi Degl'Innocenti (2004), astro-ph/0409005. The terms are solved at x, and `strengths` holds those of the members there.
 */
export function blendError(kernel: BlendKernel, room: MultipletSolution, strengths: Float64Array, x: number): { errorInvcm: number; relativeError: number } {
  const { multiplet, members, linearSlopes, centre } = kernel
  const size = linearSlopes.length
  const [sums, weights] = [new Float64Array(size), new Float64Array(size)]
  for (const i of members) {
    const at = (multiplet.q[i] as number) + multiplet.rank
    const shift = (room.upper.shifts[multiplet.upperState[i] as number] as number) - (room.lower.shifts[multiplet.lowerState[i] as number] as number)
    const strength = strengths[i] as number
    sums[at] = (sums[at] as number) + strength * ((multiplet.centresInvcm[i] as number) - centre + shift)
    weights[at] = (weights[at] as number) + strength
  }
  let [error, scale] = [0, 0.01 * x]
  for (let at = 0; at < size; at += 1) {
    const linear = (linearSlopes[at] ?? 0) * x
    scale = Math.max(scale, Math.abs(linear))
    const weight = weights[at] as number
    if (weight > 0) error = Math.max(error, Math.abs((sums[at] as number) / weight - linear))
  }
  return { errorInvcm: error, relativeError: scale === 0 ? 0 : error / scale }
}
