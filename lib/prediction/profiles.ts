import { angularFactors } from '@/lib/atomic/components'
import { PhysicsError } from '@/lib/atomic/errors'
import { dopplerRatio, lineWidths, voigtFwhm } from '@/lib/atomic/profile'
import { fittingGrid, type ProfileComponent, type ProfileLine, stokesProfiles, type StokesProfiles, type ViewOptions, evenGrid } from '@/lib/atomic/profile-stokes'
import { type ComponentsAsked, type PredictedLine, predictComponents, type Warning } from '@/lib/prediction/components'
import { predictHyperfine } from '@/lib/prediction/hyperfine'
import type { IsotopeAsked } from '@/lib/prediction/isotopes'
import type { Components, HyperfineComponents } from '@/openapi/schemas/components'
import type { Isotope } from '@/openapi/schemas/species'

/** What broadens all lines of a profile; null is none. */
export interface Broadened {
  temperatureK: number | null
  microturbulenceKmPerS: number | null
  /** The instrument as a width or as a resolving power, never both. */
  instrumentFwhmInvcm: number | null
  resolvingPower: number | null
  lorentzianFwhmInvcm: number | null
}

export interface ProfilesAsked extends ComponentsAsked, Broadened {
  /** Puts the hyperfine structure of an isotope, or of the natural mixture, into the profiles; null or left out: none. */
  hyperfine?: { isotope: IsotopeAsked } | null
}

/** A line to be profiled. */
export interface WeighedLine {
  line: PredictedLine
  /** Integral of I over wavenumber. */
  weight: number
  /** u; null where it is not known. */
  massU: number | null
  /** Isotopes of the species, where hyperfine structure is asked. */
  isotopes?: readonly Isotope[]
}

/** A line with everything that its profile needs. */
export interface ReadyLine {
  weighed: WeighedLine
  components: Components
  /** The components that the profile is made of where hyperfine structure is asked. */
  hyperfine: HyperfineComponents | null
  profile: ProfileLine
  dopplerFwhmInvcm: number
  instrumentFwhmInvcm: number
  /** Of one component, Gaussian and Lorentzian together. */
  fwhmInvcm: number
  /** Integral of I: the weight times what the components of all q sum to. */
  integral: number
}

export interface ReadyLines {
  ready: ReadyLine[]
  /** Lines that have no profile, by their place among those given. */
  refused: { index: number; error: PhysicsError }[]
  warnings: Warning[]
}

const METRES_PER_KM = 1000
/** q = -1, 0, +1. */
const DIPOLE_GROUPS = 3

/** A width below this share of the wavenumber is lost in its digits; one below or above these, cm^-1, takes the profile out of all numbers. */
const NARROWEST = { ofWavenumber: 1e-15, invcm: 1e-30 }
const WIDEST_INVCM = 1e20

/** Refuses widths that are not none and that no profile can be computed with. */
function checkWidths({ gaussianFwhm, lorentzianFwhm }: ProfileLine['widths'], wavenumberInvcm: number): void {
  const least = Math.max(NARROWEST.ofWavenumber * wavenumberInvcm, NARROWEST.invcm)
  for (const [name, width] of [['Gaussian', gaussianFwhm], ['Lorentzian', lorentzianFwhm]] as const) {
    if (width === 0 || (width >= least && width <= WIDEST_INVCM)) continue
    const cure = width < least ? `below the ${least.toExponential(1)} cm^-1 that the digits of the wavenumber resolve: leave out what is so narrow, or give a larger width` : `beyond the ${WIDEST_INVCM.toExponential(0)} cm^-1 computed here: give a smaller width`
    throw new PhysicsError('profile_no_width', `The ${name} width is ${width.toExponential(1)} cm^-1, ${cure}.`, 'widths')
  }
}

/** The widths of a line. Throws `profile_no_width`, `mass_unknown`, `instrument_twice`. */
export function widthsOf(line: Pick<PredictedLine, 'wavenumber_invcm'>, massU: number | null, by: Broadened): Pick<ReadyLine, 'dopplerFwhmInvcm' | 'instrumentFwhmInvcm' | 'fwhmInvcm'> & Pick<ProfileLine, 'widths'> {
  const wavenumberInvcm = line.wavenumber_invcm
  const motion = { temperatureK: by.temperatureK ?? 0, ...(massU === null ? {} : { massU }), microturbulenceMPerS: METRES_PER_KM * (by.microturbulenceKmPerS ?? 0) }
  const widths = lineWidths({
    wavenumberInvcm,
    ...motion,
    ...(by.instrumentFwhmInvcm === null ? {} : { instrumentFwhmInvcm: by.instrumentFwhmInvcm }),
    ...(by.resolvingPower === null ? {} : { resolvingPower: by.resolvingPower }),
    ...(by.lorentzianFwhmInvcm === null ? {} : { lorentzianFwhmInvcm: by.lorentzianFwhmInvcm }),
  })
  checkWidths(widths, wavenumberInvcm)
  return {
    widths,
    dopplerFwhmInvcm: dopplerRatio(motion) * wavenumberInvcm,
    instrumentFwhmInvcm: by.resolvingPower === null ? (by.instrumentFwhmInvcm ?? 0) : wavenumberInvcm / by.resolvingPower,
    fwhmInvcm: voigtFwhm(widths),
  }
}

const STRENGTHS_UNKNOWN = (id: string): PhysicsError =>
  new PhysicsError('no_ls_amplitude', `The strengths of ${id} in the intermediate model are not known: the line has no LS amplitude. Use model=linear or model=auto.`, 'model')

/** The components of a line; where the intermediate model knows no strengths, those of the linear one unless it was asked by name. */
function predicted({ line }: WeighedLine, asked: ProfilesAsked): { components: Components; warnings: Warning[] } {
  const found = predictComponents(line, asked)
  if (found.components.components.every((component) => component.strength !== null)) return found
  if (asked.model === 'intermediate') throw STRENGTHS_UNKNOWN(line.id)
  return predictComponents(line, { ...asked, model: 'linear' })
}

function readyLine(weighed: WeighedLine, asked: ProfilesAsked): { ready: ReadyLine; warnings: Warning[] } {
  const { line, weight, massU } = weighed
  if (line.kind === 'E2') throw new PhysicsError('profile_e2', `The angular intensity of E2 lines is not computed, so ${line.id} has no profile here.`, 'kind')
  const { widths, ...told } = widthsOf(line, massU, asked)
  const { hyperfine, ...plainly } = asked
  const nuclear = hyperfine ? predictHyperfine(line, weighed.isotopes ?? [], { ...plainly, isotope: hyperfine.isotope }) : null
  const { components, warnings } = predicted(weighed, nuclear === null ? plainly : { ...plainly, model: 'linear' })
  // each isotope's strengths sum to 1 over everything; those of a line sum to 1 in each q
  const split = nuclear?.components.components.map(({ wavenumber_invcm: positionInvcm, q, strength, weight: share }): ProfileComponent => ({ positionInvcm, q, strength: DIPOLE_GROUPS * strength * share }))
  const plain = (): ProfileComponent[] => components.components.map((component) => ({ positionInvcm: component.wavenumber_invcm, q: component.q, strength: component.strength ?? 0 }))
  const profile: ProfileLine = { kind: line.kind, weight, widths, components: split ?? plain() }
  const seen = profile.components.reduce((sum, { q, strength }) => sum + strength * (angularFactors(line.kind, q, asked.thetaDeg).intensity ?? 0), 0)
  return { ready: { weighed, components, hyperfine: nuclear?.components ?? null, profile, ...told, integral: weight * seen }, warnings: nuclear?.warnings ?? warnings }
}

/** Whether a refusal of the intermediate model leaves the linear one to a line. */
const LINEAR_INSTEAD = new Set(['term_incomplete', 'no_ls_amplitude', 'intermediate_not_built'])

/**
 * Components, widths and validity of several lines at one field. `auto` decides once for all lines: where linear errs for one, every line
 * that can be is taken in the intermediate model, so that the lines of one multiplet share one picture. A line that cannot be profiled
 * is told in `refused`, the others stand. Pure: the same function serves `POST /profiles` and the page of patterns.
 */
export function readyLines(lines: readonly WeighedLine[], asked: ProfilesAsked): ReadyLines {
  const steps = readyLinesSteps(lines, asked)
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
  }
}

/** `readyLines` line by line, so that whoever shares the thread has a turn in between. */
export function* readyLinesSteps(lines: readonly WeighedLine[], asked: ProfilesAsked): Generator<null, ReadyLines> {
  const refused: ReadyLines['refused'] = []
  const warnings = new Map<string, Warning>()
  const attempt = (weighed: WeighedLine, index: number, model: ProfilesAsked['model']): ReadyLine | null => {
    try {
      const { ready, warnings: told } = readyLine(weighed, { ...asked, model })
      for (const warning of told) warnings.set(`${warning.code} ${warning.detail}`, warning)
      return ready
    } catch (error) {
      if (!(error instanceof PhysicsError)) throw error
      if (model === 'intermediate' && asked.model === 'auto' && LINEAR_INSTEAD.has(error.code)) return null
      refused.push({ index, error })
      return null
    }
  }
  const first: { weighed: WeighedLine; index: number; ready: ReadyLine | null }[] = []
  for (const [index, weighed] of lines.entries()) {
    first.push({ weighed, index, ready: attempt(weighed, index, asked.model) })
    yield null
  }
  const beyond = asked.model === 'auto' && first.some(({ ready }) => ready?.components.model === 'intermediate')
  const ready = first.flatMap(({ weighed, index, ready: found }) => {
    if (found === null) return []
    return [beyond && found.components.model === 'linear' ? (attempt(weighed, index, 'intermediate') ?? found) : found]
  })
  return { ready, refused, warnings: [...warnings.values()] }
}

/** Smallest wavenumber of a grid that nobody chose. */
const LOWEST_INVCM = 1e-3

/** A grid around lines that shows them, see `fittingGrid`. */
export function gridAround(ready: readonly ReadyLine[], most?: number): Float64Array {
  const grid = fittingGrid(ready.map(({ profile }) => profile), most)
  const [start = 0, stop = 0] = [grid[0], grid[grid.length - 1]]
  return start >= LOWEST_INVCM ? grid : evenGrid(LOWEST_INVCM, Math.max(stop, 2 * LOWEST_INVCM), grid.length)
}

/** Stokes I, Q, V of all lines together over a grid of wavenumbers that rises. */
export const profilesOver = (ready: readonly ReadyLine[], grid: Float64Array, view: ViewOptions): StokesProfiles => stokesProfiles(ready.map(({ profile }) => profile), grid, view)

/** Voigt functions that a grid costs. */
export const workOf = (ready: readonly ReadyLine[], points: number): number =>
  points * ready.reduce((sum, { profile }) => sum + profile.components.reduce((n, component) => n + (component.strength === 0 ? 0 : 1), 0), 0)
