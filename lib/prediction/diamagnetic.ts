import { parseConfiguration } from '@/lib/atomic/configuration'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { diamagnetic, diamagneticShift, outerElectron, stateSinSquared } from '@/lib/atomic/diamagnetic'
import type { TermState } from '@/lib/atomic/intermediate'
import { remembering } from '@/lib/atomic/remembering'
import { lsNumbers } from '@/lib/prediction/levels'
import type { Level } from '@/openapi/schemas/level'
import type { Species } from '@/openapi/schemas/species'
import type { LevelDiamagnetic } from '@/openapi/schemas/transition'

const outerMemory = remembering<{ electron: ReturnType<typeof outerElectron> }>()

/** The one outer electron of a configuration as a level states it. */
const outerOf = (configuration: string): ReturnType<typeof outerElectron> =>
  outerMemory(configuration, () => {
    const read = parseConfiguration(configuration)
    return { electron: read.ok ? outerElectron(read.value) : null }
  }).electron

const without = (status: LevelDiamagnetic['status'], reason: string, effectiveN: number | null = null): LevelDiamagnetic => ({ status, reason, effective_n: effectiveN, mean_square_radius_bohr2: null, cautions: [] })

/** The heaviest-weighing isotope's mass, u; undefined where none is known. */
const massOf = ({ isotopes }: Pick<Species, 'isotopes'>): number | undefined =>
  [...isotopes].sort((a, b) => (b.abundance_percent ?? 0) - (a.abundance_percent ?? 0)).find((isotope) => isotope.mass_u !== null)?.mass_u ?? undefined

/** <r^2> of a level's outer electron by the hydrogenic formula with effective quantum number, or why there is none. */
export function levelDiamagnetic(level: Pick<Level, 'configuration' | 'coupling' | 'term' | 'energy_invcm'>, species: Pick<Species, 'ionisation_energy_invcm' | 'charge' | 'isotopes'>): LevelDiamagnetic {
  if (lsNumbers(level) === null) return without('not_applicable', 'the level is not named in LS coupling')
  const electron = outerOf(level.configuration)
  if (electron === null) return without('not_applicable', `${level.configuration} is not one electron outside closed shells and s electrons`)
  if (electron.l !== level.term.l) return without('not_applicable', 'the L of the term is not the l of the outer electron')
  if (species.ionisation_energy_invcm === null) return without('unknown', 'the ionisation energy is not in the table')
  const massU = massOf(species)
  const found = diamagnetic({ ...electron, energyInvcm: level.energy_invcm, limitInvcm: species.ionisation_energy_invcm, coreCharge: species.charge + 1, ...(massU === undefined ? {} : { massU }) })
  if (!found.applies) return without('not_applicable', found.reason ?? 'the formula does not apply', found.nStar)
  return { status: 'ok', reason: null, effective_n: found.nStar, mean_square_radius_bohr2: found.meanSquareRadius, cautions: found.warnings }
}

export interface QuadraticShift {
  shiftInvcm: number
  derivativeInvcmPerTesla: number
}

const pureMemory = remembering<number>(20_000)

/** <sin^2 theta> of |J m> of an LS term. */
const pureSinSquared = (twoS: number, l: number, twoJ: number, twoM: number): number =>
  pureMemory(`${twoS} ${l} ${twoJ} ${twoM}`, () => stateSinSquared({ twoS, l }, { twoM, amplitudes: [{ twoJ, amplitude: 1 }] }))

/**
 * Quadratic shift of a sublevel in first order, cm^-1, with its derivative at fixed vectors: of |J m>, or of a state of the term where one is
 * given. Null where the level has no <r^2>.
 */
export function quadraticShift(level: Pick<Level, 'coupling' | 'term'>, { mean_square_radius_bohr2: radius }: LevelDiamagnetic, twoM: number, fieldTesla: number, state: TermState | null): QuadraticShift | null {
  const numbers = lsNumbers(level)
  if (radius === null || numbers === null) return null
  const { twoS, l, twoJ } = numbers
  const sine = state === null ? pureSinSquared(twoS, l, twoJ, twoM) : stateSinSquared({ twoS, l }, state)
  return { shiftInvcm: diamagneticShift(radius, sine, fieldTesla), derivativeInvcmPerTesla: 2 * diamagneticShift(radius, sine, 1) * fieldTesla }
}

/** Whether a quadratic shift is more than the tolerance allows beside mu_B B. */
export const isLarge = (shiftInvcm: number, fieldTesla: number, tolerance: number): boolean => Math.abs(shiftInvcm) > tolerance * MU_B_OVER_HC_INVCM_PER_T * fieldTesla

const CAUTIONS = {
  l_mixing: 'levels of other l lie so near that the field mixes them, so the quadratic shift told is only a guide',
  penetrating: 'the electron is much inside the core, so the effective quantum number measures its size roughly',
} as const

/** What to know of the limits of a level's quadratic shift, as warnings `diamagnetic_rough`. */
export const diamagneticCautions = (id: string, { cautions }: LevelDiamagnetic): { code: string; detail: string }[] =>
  cautions.map((caution) => ({ code: 'diamagnetic_rough', detail: `${id}: ${CAUTIONS[caution]}.` }))
