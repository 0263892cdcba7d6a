import type { Analyser as AtomicAnalyser, StokesProfiles, ViewOptions } from '@/lib/atomic/profile-stokes'
import { benchSentence, STOKES_CONVENTIONS } from '@/lib/atomic/profile-stokes'
import { PhysicsError } from '@/lib/atomic/errors'
import type { Snapshot } from '@/lib/catalogue/shape'
import { AIR, FIELD_CONVENTIONS } from '@/lib/prediction/conventions'
import { foundLines, type FoundLine, givenTerms, isotopeOf, physicsFault } from '@/lib/prediction/profiles-lines'
import { type Mass, massOf } from '@/lib/prediction/profiles-mass'
import { gridAround, profilesOver, type ProfilesAsked, type ReadyLine, type ReadyLines, readyLinesSteps, type WeighedLine, workOf } from '@/lib/prediction/profiles'
import { gridOfWavenumbers, spectralGrid, type SpectralGrid } from '@/lib/prediction/profiles-grid'
import { profileTable } from '@/lib/prediction/profiles-table'
import { readFields } from '@/lib/prediction/sublevels'
import { boundGivenTerms } from '@/lib/prediction/term-work'
import { bodyProblem, type Fault, faultsProblem, Problem } from '@/lib/problem'
import type { ProfilesRequest } from '@/openapi/operations/profiles'
import type { Analyser, ProfiledLine, Profiles } from '@/openapi/schemas/profiles'
import type { Validity } from '@/openapi/schemas/validity'

type Warn = (code: string, detail: string) => void

/** Voigt functions of one answer: about a second of work. */
export const PROFILE_WORK_MOST = 20_000_000
/** Voigt functions between two pauses, so that other requests are answered meanwhile. */
const WORK_A_SLICE = 100_000

/** Points on a width below which a grid misses the shape of the lines. */
const POINTS_A_WIDTH = 2

const atomicAnalyser = (given: Analyser): AtomicAnalyser =>
  given.kind === 'none' ? { kind: 'none' } : given.kind === 'linear' ? { kind: 'linear', angleDeg: given.angle_deg } : { kind: given.sense }

const askedOf = (body: ProfilesRequest, fieldTesla: number): ProfilesAsked => ({
  fieldTesla,
  fieldUncTesla: null,
  model: body.model,
  gValues: body.g_values,
  gS: body.g_s ?? null,
  thetaDeg: body.theta_deg ?? null,
  medium: 'conventional',
  tolerance: body.tolerance,
  temperatureK: body.temperature_k ?? null,
  microturbulenceKmPerS: body.microturbulence_km_s ?? null,
  instrumentFwhmInvcm: body.instrument_fwhm_invcm ?? null,
  resolvingPower: body.resolving_power ?? null,
  lorentzianFwhmInvcm: body.lorentzian_fwhm_invcm ?? null,
  hyperfine: body.hyperfine ? { isotope: body.isotope ?? 'natural' } : null,
})

/** Collects the faults of a step that can refuse. */
function attempt<T>(faults: Fault[], act: () => T, faultOf: (error: PhysicsError) => Fault): T | null {
  try {
    return act()
  } catch (error) {
    if (error instanceof PhysicsError) faults.push(faultOf(error))
    else if (error instanceof Problem) faults.push(...error.errors)
    else throw error
    return null
  }
}

interface Weighing {
  weighed: WeighedLine
  mass: Mass
  /** Place among the lines of the request. */
  index: number
}

function weigh(body: ProfilesRequest, found: (FoundLine | null)[], faults: Fault[]): Weighing[] {
  const massNumber = typeof body.isotope === 'number' ? body.isotope : null
  return found.flatMap((one, index) => {
    if (one === null) return []
    const { species, line, weight } = one
    if (massNumber !== null && species !== null) attempt(faults, () => isotopeOf(species, massNumber), (error) => physicsFault(error, index))
    const mass = massOf(species, { line: body.lines[index]?.mass_u ?? null, all: body.mass_u ?? null, isotope: massNumber })
    return [{ index, mass, weighed: { line, weight, massU: mass.u, isotopes: species?.isotopes ?? [] } }]
  })
}

/** An isotope is one of a species: lines given in the request have none, so that it would be ignored. */
function isotopeOfTable(body: ProfilesRequest, faults: Fault[], warn: Warn): void {
  // with hyperfine each such line is refused by itself
  if (body.isotope === null || body.isotope === undefined || body.hyperfine) return
  const given = body.lines.flatMap((line, index) => ('lower' in line ? [index] : []))
  if (given.length === body.lines.length) {
    faults.push({ pointer: '/isotope', code: 'isotope_unknown', detail: 'Levels given in the request are of no species and have no isotopes: leave isotope out, and give mass_u for the mass.' })
  } else if (given.length > 0) {
    warn('isotope_not_applied', `isotope is of the lines of the table; of lines ${given.join(', ')} (counted from 0), given in the request, only mass_u tells the mass.`)
  }
}

/** Levels of no table have no id: the names that refusals give them stay out of the answer. */
const nameless = (validity: Validity): Validity => ({
  ...validity,
  blend: { ...validity.blend, lines: validity.blend.lines.map((line) => ({ ...line, transition: null })) },
  levels: { lower: { ...validity.levels.lower, level: null }, upper: { ...validity.levels.upper, level: null } },
})

function lineAnswer({ weighed, components, hyperfine, profile, ...ready }: ReadyLine, mass: Mass, thermal: boolean, given: boolean): ProfiledLine {
  const { line, weight } = weighed
  const { centre } = components
  return {
    transition: given ? null : line.id,
    species: given ? null : line.lower.species,
    kind: line.kind,
    weight,
    model: hyperfine?.model ?? components.model,
    wavenumber_invcm: centre.wavenumber_invcm,
    wavelength_vac_nm: centre.wavelength_vac_nm,
    wavelength_air_nm: centre.wavelength_air_nm,
    component_count: profile.components.length,
    integral: ready.integral,
    doppler_fwhm_invcm: ready.dopplerFwhmInvcm,
    instrument_fwhm_invcm: ready.instrumentFwhmInvcm,
    gaussian_fwhm_invcm: profile.widths.gaussianFwhm,
    lorentzian_fwhm_invcm: profile.widths.lorentzianFwhm,
    fwhm_invcm: ready.fwhmInvcm,
    mass_u: mass.u,
    mass_status: mass.u !== null ? 'ok' : thermal ? 'unknown' : 'not_applicable',
    mass_basis: mass.basis,
    isotopes: (hyperfine?.isotopes ?? []).map(({ mass_number, weight: share, shift_mhz, shift_status, a_lower_mhz, a_upper_mhz }) => ({ mass_number, weight: share, shift_mhz, shift_known: shift_status === 'ok', hyperfine: a_lower_mhz !== null || a_upper_mhz !== null })),
    validity: given ? nameless(components.validity) : components.validity,
  }
}

const pause = (): Promise<void> => new Promise((resolve) => setImmediate(resolve))

/** `readyLines`, other requests being answered between two lines. */
async function readyInTurns(lines: readonly WeighedLine[], asked: ProfilesAsked): Promise<ReadyLines> {
  const steps = readyLinesSteps(lines, asked)
  for (;;) {
    const step = steps.next()
    if (step.done === true) return step.value
    await pause()
  }
}

/** The profiles over a grid that rises, piece by piece: other requests are answered between two pieces. */
async function profilesInPieces(ready: readonly ReadyLine[], grid: Float64Array, view: ViewOptions): Promise<StokesProfiles> {
  const step = Math.max(16, Math.floor(WORK_A_SLICE / Math.max(1, workOf(ready, 1))))
  if (grid.length <= step) return profilesOver(ready, grid, view)
  const whole = (wanted: Float64Array | null): Float64Array | null => (wanted === null ? null : new Float64Array(grid.length))
  let all: StokesProfiles | null = null
  for (let from = 0; from < grid.length; from += step) {
    const piece = profilesOver(ready, grid.subarray(from, from + step), view)
    all ??= { intensity: new Float64Array(grid.length), stokesQ: whole(piece.stokesQ), stokesV: whole(piece.stokesV), behindAnalyser: whole(piece.behindAnalyser) }
    all.intensity.set(piece.intensity, from)
    for (const name of ['stokesQ', 'stokesV', 'behindAnalyser'] as const) all[name]?.set(piece[name] ?? [], from)
    await pause()
  }
  return all as StokesProfiles
}

/** Warns where steps are wider than half of the narrowest width, and where no line is in the grid. */
function warnOfGrid(ready: readonly ReadyLine[], { wavenumberInvcm }: SpectralGrid, warn: Warn): void {
  const [first = 0, last = 0] = [wavenumberInvcm[0], wavenumberInvcm[wavenumberInvcm.length - 1]]
  const [low, high] = [Math.min(first, last), Math.max(first, last)]
  const step = (high - low) / (wavenumberInvcm.length - 1)
  const narrowest = Math.min(...ready.map(({ fwhmInvcm }) => fwhmInvcm))
  if (step * POINTS_A_WIDTH > narrowest) {
    warn('grid_coarse', `The grid takes steps of ${Number(step.toPrecision(3))} cm^-1 and the narrowest line is ${Number(narrowest.toPrecision(3))} cm^-1 wide: its shape is not shown; take more points or a narrower window.`)
  }
  const seen = ready.some(({ profile, fwhmInvcm }) => profile.components.some(({ positionInvcm }) => positionInvcm >= low - 3 * fwhmInvcm && positionInvcm <= high + 3 * fwhmInvcm))
  if (!seen) warn('grid_without_lines', 'No component of the lines asked lies in the grid.')
}

const modelOf = (ready: readonly ReadyLine[]): string => [...new Set(ready.map(({ components, hyperfine }) => hyperfine?.model ?? components.model))].sort().join(' and ')

/** Stokes profiles of the lines of a request; everything that is wrong with it is told at once. */
export async function profilesAnswer(snapshot: Snapshot, body: ProfilesRequest, warn: Warn) {
  const faults: Fault[] = []
  const [fieldTesla = 0] = attempt(faults, () => readFields(body.field), (error) => ({ pointer: '/field', code: error.code, detail: error.detail })) ?? []
  const fixed = body.grid ? attempt(faults, () => spectralGrid(body.grid as NonNullable<typeof body.grid>), (error) => ({ pointer: '/grid', code: error.code, detail: error.detail })) : null
  const { found, faults: missing } = foundLines(snapshot, body.lines, body.g_s ?? null)
  const weighings = weigh(body, found, faults)
  isotopeOfTable(body, faults, warn)
  const asked = askedOf(body, fieldTesla)
  boundGivenTerms(weighings.flatMap(({ weighed: { line }, index }) => (found[index]?.species === null ? [givenTerms(line)] : [])), 'answer_too_large')
  const { ready, refused, warnings } = await readyInTurns(weighings.map(({ weighed }) => weighed), asked)
  faults.push(...missing, ...refused.map(({ index, error }) => physicsFault(error, weighings[index]?.index ?? 0)))
  const told = faults.filter((fault, i) => faults.findIndex((other) => other.pointer === fault.pointer && other.code === fault.code && other.detail === fault.detail) === i)
  if (told.length > 0) throw faultsProblem(told)

  const grid = fixed ?? gridOfWavenumbers(gridAround(ready))
  const work = workOf(ready, grid.wavenumberInvcm.length)
  if (work > PROFILE_WORK_MOST) {
    throw bodyProblem('/grid', 'answer_too_large', `${work} profiles would be added up (points times components); one answer adds up to ${PROFILE_WORK_MOST}. Ask for fewer points or fewer lines.`)
  }
  for (const warning of warnings) warn(warning.code, warning.detail)
  warnOfGrid(ready, grid, warn)

  const view: ViewOptions = { thetaDeg: asked.thetaDeg, stokesSign: body.stokes_sign, light: body.mode, analyser: atomicAnalyser(body.analyser) }
  const rising = grid.falls ? grid.wavenumberInvcm.slice().reverse() : grid.wavenumberInvcm
  const profiles = await profilesInPieces(ready, rising, view)
  const column = (values: Float64Array): number[] => Array.from(grid.falls ? values.slice().reverse() : values)
  const columnOrNone = (values: Float64Array | null): number[] | null => (values === null ? null : column(values))
  const thermal = (asked.temperatureK ?? 0) > 0
  const data: Profiles = {
    field_tesla: fieldTesla,
    theta_deg: asked.thetaDeg,
    mode: body.mode,
    analyser: body.analyser,
    grid: body.grid
      ? { ...body.grid, automatic: false }
      : { unit: 'wavenumber_invcm', start: rising[0] ?? 0, stop: rising[rising.length - 1] ?? 0, count: rising.length, automatic: true },
    wavenumber_invcm: Array.from(grid.wavenumberInvcm),
    wavelength_vac_nm: Array.from(grid.vacuumNm),
    wavelength_air_nm: grid.airNm,
    stokes_i: column(profiles.intensity),
    stokes_q: columnOrNone(profiles.stokesQ),
    stokes_v: columnOrNone(profiles.stokesV),
    behind_analyser: columnOrNone(profiles.behindAnalyser),
    lines: ready.map((line) => {
      const { mass, index } = weighings.find(({ weighed }) => weighed === line.weighed) as Weighing
      return lineAnswer(line, mass, thermal, found[index]?.species === null)
    }),
    bench_sentence: benchSentence(view),
  }
  const conventions = {
    ...FIELD_CONVENTIONS,
    normalisation: 'The integral of I over wavenumber is the weight of the line; weights are 1 where none is given, which is no statement about real intensities.',
    stokes_sign: body.stokes_sign,
    stokes: { q: STOKES_CONVENTIONS.q, v: STOKES_CONVENTIONS[body.stokes_sign], mode: STOKES_CONVENTIONS[body.mode], reversed_field: 'theta_deg to 180 - theta_deg turns V and leaves I and Q' },
    theta: 'Between the field and the direction from source to observer: at 0 the field points at the observer.',
    circular: 'Counter-clockwise as the observer sees it is left circular in traditional optics and right circular to the IEEE.',
    grid: 'Even steps in grid.unit, in which the points rise.',
    air: AIR,
  }
  return { data, meta: { model: modelOf(ready), g_values: body.g_values, conventions }, table: () => profileTable(data) }
}
