import { angularFactors } from '@/lib/atomic/components'
import { PhysicsError } from '@/lib/atomic/errors'
import { voigt, type Widths } from '@/lib/atomic/profile'
import type { Kind } from '@/lib/atomic/rules'

export type StokesSign = 'iau' | 'solar'
export type Light = 'emission' | 'absorption'
export type Analyser = { kind: 'none' } | { kind: 'linear'; angleDeg: number } | { kind: 'counterclockwise' } | { kind: 'clockwise' }

export interface ProfileComponent {
  positionInvcm: number
  q: number
  /** Each q of the line sums to 1 at zero field. */
  strength: number
}

export interface ProfileLine {
  kind: Kind
  /** Integral of I over wavenumber. */
  weight: number
  widths: Widths
  components: readonly ProfileComponent[]
}

export interface ViewOptions {
  /** Between the field and the direction from source to observer; null is the mean over all directions, without Q and V. */
  thetaDeg: number | null
  stokesSign?: StokesSign
  light?: Light
  analyser?: Analyser
}

export interface StokesProfiles {
  /** Light that the lines add (emission) or take away (absorption); above zero in both. */
  intensity: Float64Array
  /** Polarisation of the light that arrives; null without an angle. */
  stokesQ: Float64Array | null
  stokesV: Float64Array | null
  /** What is added or taken away behind the analyser; null where there is none. */
  behindAnalyser: Float64Array | null
}

export const STOKES_CONVENTIONS = {
  q: 'Q > 0 is linear along the field projected on the sky; U = 0 in these axes',
  iau: 'V > 0 where the electric vector turns counter-clockwise as the observer sees it (IAU 1974): q = +1 emitted along the field towards the observer',
  solar: 'V > 0 where the electric vector turns clockwise as the observer sees it: q = -1 emitted along the field towards the observer',
  emission: 'I, Q, V are what the line adds; the integral of I over wavenumber is the weight',
  absorption: 'I is what the line takes away from unpolarised light, its integral the weight; Q and V are those of the light that is left, opposite to emission',
} as const

/** Weights of I, Q and V (IAU) behind an ideal analyser: half the light of the polarisation it passes. */
function passes(analyser: Analyser): { i: number; q: number; v: number } {
  if (analyser.kind === 'none') return { i: 1, q: 0, v: 0 }
  if (analyser.kind === 'linear') return { i: 0.5, q: 0.5 * Math.cos((2 * analyser.angleDeg * Math.PI) / 180), v: 0 }
  return { i: 0.5, q: 0, v: analyser.kind === 'counterclockwise' ? 0.5 : -0.5 }
}

/** A pure Gaussian is nothing beyond this many full widths; a profile with a Lorentzian wing reaches everywhere. */
const GAUSSIAN_REACH = 4

/** Adds amount x Voigt profile around a centre to an array over a grid that rises. */
export function addVoigt(grid: Float64Array, centre: number, amount: number, widths: Widths, into: Float64Array): void {
  // there it is 2^-64 = 5e-20 of its peak
  const reach = widths.lorentzianFwhm === 0 ? GAUSSIAN_REACH * widths.gaussianFwhm : Number.POSITIVE_INFINITY
  for (let i = 0; i < grid.length; i += 1) {
    const distance = (grid[i] as number) - centre
    if (distance > reach) break
    if (distance >= -reach) into[i] = (into[i] as number) + amount * voigt(distance, widths)
  }
}

/**
 * Optically thin Stokes profiles of several lines over a grid of wavenumbers (cm^-1, rising): sums of Voigt profiles with each component's
 * share of I, Q, V at the angle theta (`angularFactors`). Reversing the field (theta -> 180 deg - theta) turns V and leaves I and Q.
 * Landi Degl'Innocenti & Landolfi, Polarization in Spectral Lines (2004), ch. 3 and 5. E2 has no angular factors here and is refused.
 */
export function stokesProfiles(lines: readonly ProfileLine[], grid: Float64Array, view: ViewOptions): StokesProfiles {
  const { thetaDeg, stokesSign = 'iau', light = 'emission', analyser = { kind: 'none' } } = view
  if (lines.some((line) => line.kind === 'E2')) throw new PhysicsError('profile_e2', 'The angular intensity of E2 lines is not computed, so they have no profile here.', 'lines')
  if (thetaDeg === null && analyser.kind !== 'none') throw new PhysicsError('analyser_without_angle', 'Behind an analyser the viewing angle counts; give theta_deg.', 'theta_deg')
  const [intensity, stokesQ, stokesV] = [new Float64Array(grid.length), new Float64Array(grid.length), new Float64Array(grid.length)]
  const shape = new Float64Array(grid.length)
  for (const { kind, weight, widths, components } of lines) {
    for (const q of [-1, 0, 1]) {
      const { intensity: i, stokesQ: qs, stokesV: v } = angularFactors(kind, q, thetaDeg)
      shape.fill(0)
      for (const component of components) if (component.q === q && component.strength !== 0) addVoigt(grid, component.positionInvcm, weight * component.strength, widths, shape)
      for (let n = 0; n < grid.length; n += 1) {
        const amount = shape[n] as number
        intensity[n] = (intensity[n] as number) + amount * (i ?? 0)
        stokesQ[n] = (stokesQ[n] as number) + amount * (qs ?? 0)
        stokesV[n] = (stokesV[n] as number) + amount * (v ?? 0)
      }
    }
  }
  const pass = passes(analyser)
  const behindAnalyser = analyser.kind === 'none' ? null : intensity.map((i, n) => pass.i * i + pass.q * (stokesQ[n] as number) + pass.v * (stokesV[n] as number))
  if (thetaDeg === null) return { intensity, stokesQ: null, stokesV: null, behindAnalyser }
  const left = light === 'absorption' ? -1 : 1
  const sign = left * (stokesSign === 'solar' ? -1 : 1)
  // plus zero: no component shows as -0
  for (let n = 0; n < grid.length; n += 1) {
    stokesQ[n] = left * (stokesQ[n] as number) + 0
    stokesV[n] = sign * (stokesV[n] as number) + 0
  }
  return { intensity, stokesQ, stokesV, behindAnalyser }
}

export const GRID_MOST_POINTS = 100_000

/** An even grid, checked: finite, rising, 2 to 100 000 points. Code `grid_malformed`. */
export function evenGrid(startInvcm: number, stopInvcm: number, count: number): Float64Array {
  const fine = Number.isFinite(startInvcm) && Number.isFinite(stopInvcm) && startInvcm > 0 && stopInvcm > startInvcm
  if (!fine || !Number.isInteger(count) || count < 2 || count > GRID_MOST_POINTS) {
    throw new PhysicsError('grid_malformed', `A grid runs from a wavenumber above 0 up to a larger one in 2 to ${GRID_MOST_POINTS} points.`, 'grid')
  }
  return Float64Array.from({ length: count }, (_, i) => startInvcm + ((stopInvcm - startInvcm) * i) / (count - 1))
}

/** Points on the narrowest width, and widths beyond the outermost components, of a grid that nobody chose. */
const POINTS_A_WIDTH = 12
const WIDTHS_BEYOND = 6

/** A grid that shows the lines well: from beyond the outermost component on either side, twelve points on the narrowest full width, at most `most`. */
export function fittingGrid(lines: readonly ProfileLine[], most = 4000): Float64Array {
  const positions = lines.flatMap((line) => line.components.map((component) => component.positionInvcm))
  const widths = lines.map(({ widths: { gaussianFwhm, lorentzianFwhm } }) => Math.hypot(gaussianFwhm, lorentzianFwhm))
  if (positions.length === 0) throw new PhysicsError('grid_malformed', 'Without a component there is nothing to draw a grid around.', 'grid')
  const [widest, narrowest] = [Math.max(...widths), Math.min(...widths)]
  const [start, stop] = [Math.min(...positions) - WIDTHS_BEYOND * widest, Math.max(...positions) + WIDTHS_BEYOND * widest]
  const wanted = Math.ceil(((stop - start) / narrowest) * POINTS_A_WIDTH) + 1
  return evenGrid(Math.max(start, Number.MIN_VALUE), stop, Math.max(2, Math.min(wanted, most, GRID_MOST_POINTS)))
}

const SEEN: Record<Analyser['kind'], string> = {
  none: 'Without an analyser all polarisations are seen together.',
  linear: 'A linear analyser at this angle from the projected field passes half of I plus half of Q times cos of twice the angle.',
  counterclockwise: 'The analyser passes light whose electric vector turns counter-clockwise as the observer sees it.',
  clockwise: 'The analyser passes light whose electric vector turns clockwise as the observer sees it.',
}

const turnOf = (thetaDeg: number, q: 1 | -1): string => ((Math.cos((thetaDeg * Math.PI) / 180) > 0) === (q > 0) ? 'counter-clockwise' : 'clockwise')

/** What someone at the apparatus sees, in a few sentences: which group, in which polarisation, on which side of the line. */
export function benchSentence({ thetaDeg, light = 'emission', analyser = { kind: 'none' } }: ViewOptions): string {
  const seen = SEEN[analyser.kind]
  if (thetaDeg === null) return 'Averaged over all directions the light is not polarised and pi and both sigma groups share it equally.'
  const along = ((thetaDeg % 180) + 180) % 180
  const verb = light === 'emission' ? 'emitted' : 'absorbed'
  if (along === 90) return `Looking across the field: pi is ${verb} polarised along the field, both sigma groups across it, none circularly. ${seen}`
  const towards = turnOf(thetaDeg, 1) === 'counter-clockwise'
  const [plus, minus] = [turnOf(thetaDeg, 1), turnOf(thetaDeg, -1)]
  const left = light === 'emission' ? '' : ' What is left of unpolarised light turns the other way at each group.'
  const side = '(to the blue where g_eff is positive)'
  if (along === 0) {
    return `Looking ${towards ? 'against' : 'along'} the field, which points ${towards ? 'towards' : 'away from'} the observer: pi is not seen; the sigma+ group ${side} is ${verb} turning ${plus} as the observer sees it, sigma- turning ${minus}.${left} ${seen}`
  }
  return `Looking at ${thetaDeg} degrees to the field, which points partly ${towards ? 'towards' : 'away from'} the observer: pi is ${verb} polarised along the projected field; the sigma+ group ${side} elliptically, turning ${plus} as the observer sees it, sigma- turning ${minus}.${left} ${seen}`
}
