import { airWavelength, conventionalWavelength } from '@/lib/atomic/air'
import { type LineEnd } from '@/lib/atomic/components'
import { PhysicsError } from '@/lib/atomic/errors'
import { readFraction } from '@/lib/atomic/exact'
import { effectiveG, patternKindOfNumbers, secondMoments } from '@/lib/atomic/moments'
import { defaultKind, judge } from '@/lib/atomic/rules'
import { thzOfWavenumber, vacuumNmOfWavenumber } from '@/lib/units/spectral'
import type { Snapshot } from '@/lib/catalogue/shape'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { judgedOf, type PhysicalLevel, twoJOf } from '@/lib/prediction/levels'
import { levelDiamagnetic } from '@/lib/prediction/diamagnetic'
import { linksOfTransition } from '@/lib/prediction/links'
import { positionUnc } from '@/lib/prediction/uncertainty'
import type { Kind } from '@/openapi/schemas/common'
import type { Pattern, Transition, TransitionDetail } from '@/openapi/schemas/transition'

const ADOPTED: GChoice = { gValues: 'adopted', gS: null }

/** Everything of a Transition but its id and its ends. */
export type LineFacts = Omit<Transition, 'id' | 'lower' | 'upper'>

const patterns = new Map<string, Pattern | null>()
const PATTERNS_KEPT = 20_000

/** The g of an end at g_s = 2, from its fraction; null for J = 0. */
const atTwo = (level: PhysicalLevel): number | null => (level.g_j.coupled_exact === null ? null : (readFraction(level.g_j.coupled_exact)?.valueOf() ?? null))

/**
 * Pattern by exact coupled g at g_s = 2, remembered, for few combinations of J and g occur. Shifts are compared as doubles: unequal ones
 * of these fractions differ by far more than rounding (a test holds this against `patternKind` in exact fractions, which is slow).
 */
function exactPattern(lower: PhysicalLevel, upper: PhysicalLevel, kind: Kind): Pattern | null {
  const key = `${kind} ${lower.term.j} ${lower.g_j.coupled_exact ?? ''} ${upper.term.j} ${upper.g_j.coupled_exact ?? ''}`
  const known = patterns.get(key)
  if (known !== undefined) return known
  if (patterns.size >= PATTERNS_KEPT) patterns.clear()
  const made = patternKindOfNumbers({ twoJ: twoJOf(lower), g: atTwo(lower) }, { twoJ: twoJOf(upper), g: atTwo(upper) }, kind)
  patterns.set(key, made)
  return made
}

function patternOf(lower: PhysicalLevel, upper: PhysicalLevel, ends: readonly [LineEnd, LineEnd], kind: Kind): Pattern | null {
  const exact = (level: PhysicalLevel) => level.term.j === 0 || level.g_j.coupled_exact !== null
  if (!exact(lower) || !exact(upper)) return patternKindOfNumbers(ends[0], ends[1], kind)
  return exactPattern(lower, upper, kind)
}

/**
 * Judges a pair of levels and gives its position, g_eff, moments and pattern. `lower` is the one of lower energy.
 * Without `kind`: E1 where the parities differ, else M1, else E2. g_eff, moments and pattern are of the line, so a pair that
 * the rigorous rules forbid has none; E2 has no g_eff. Throws `zero_interval` for equal energies.
 */
export function lineFacts(lower: PhysicalLevel, upper: PhysicalLevel, kindAsked: Kind | undefined, choice: GChoice = ADOPTED): LineFacts {
  const [judgedLower, judgedUpper] = [judgedOf(lower), judgedOf(upper)]
  const kind = kindAsked ?? defaultKind(judgedLower.parity, judgedUpper.parity, judgedLower.twoJ, judgedUpper.twoJ)
  const verdict = judge(judgedLower, judgedUpper, kind)
  const wavenumber = upper.energy_invcm - lower.energy_invcm
  if (!(wavenumber > 0)) throw new PhysicsError('zero_interval', 'The two levels have equal energies, so no transition joins them: there is no photon.', 'upper')
  const vacuum = vacuumNmOfWavenumber(wavenumber)
  const air = airWavelength(vacuum)
  const conventional = conventionalWavelength(vacuum)
  const ends: [LineEnd, LineEnd] = [
    { twoJ: judgedLower.twoJ, g: chooseG(lower, choice, 'lower').g },
    { twoJ: judgedUpper.twoJ, g: chooseG(upper, choice, 'upper').g },
  ]
  const dipole = kind !== 'E2' && verdict.rigorous
  const gEff = dipole ? effectiveG(...ends) : null
  const moments = dipole ? secondMoments(...ends) : null
  return {
    kind,
    verdict,
    wavenumber_invcm: wavenumber,
    wavelength_vac_nm: vacuum,
    wavelength_air_nm: air.nm,
    wavelength_air_status: air.nm === null ? 'not_applicable' : 'ok',
    wavelength_conventional_nm: conventional.nm,
    conventional_medium: conventional.medium,
    frequency_thz: thzOfWavenumber(wavenumber),
    wavenumber_unc_invcm: positionUnc(lower, upper),
    g_eff: gEff,
    g_eff_status: !dipole ? 'not_applicable' : gEff === null ? 'unknown' : 'ok',
    pattern: verdict.rigorous ? patternOf(lower, upper, ends, kind) : null,
    moments_lorentz: { pi_second: moments?.piSecond ?? null, sigma_first: moments?.sigmaFirst ?? null, sigma_second: moments?.sigmaSecond ?? null },
  }
}

/** Puts two levels in order of energy in the edition read, and refuses what can make no transition. */
export function orderedPair(snapshot: Snapshot, i: number, j: number): readonly [lower: number, upper: number] {
  const { energyInvcm, speciesOf } = snapshot.columns
  if (speciesOf[i] !== speciesOf[j]) {
    throw new PhysicsError('species_differ', `${snapshot.levelId(i)} and ${snapshot.levelId(j)} belong to different species; a transition joins two levels of one.`, 'transition')
  }
  const [a, b] = [energyInvcm[i] ?? 0, energyInvcm[j] ?? 0]
  if (a === b) {
    const which = i === j ? `${snapshot.levelId(i)} is named twice` : `${snapshot.levelId(i)} and ${snapshot.levelId(j)} have equal energies`
    throw new PhysicsError('zero_interval', `${which}, so no transition joins them: there is no photon. Name two levels of different energy.`, 'transition')
  }
  return a < b ? [i, j] : [j, i]
}

/** The transition between two levels of an edition, given in either order. */
export function assembleTransition(snapshot: Snapshot, i: number, j: number, kind?: Kind): Transition {
  const [low, high] = orderedPair(snapshot, i, j)
  const [lower, upper] = [snapshot.level(low), snapshot.level(high)]
  return { id: `${lower.id}~${upper.id}`, lower, upper, ...lineFacts(lower, upper, kind) }
}

/** The levels of the term that a level belongs to, and the J that the table lacks. */
export function membersOf(snapshot: Snapshot, index: number): TransitionDetail['terms']['lower'] {
  const { indices, missingTwoJ } = snapshot.termMembers(index)
  const { term } = snapshot.level(index)
  return {
    s: term.s,
    l: term.l,
    levels: indices.map((member) => {
      const level = snapshot.level(member)
      return { id: level.id, j: level.term.j, energy_invcm: level.energy_invcm, energy_unc_invcm: level.energy_unc_invcm, g_j: level.g_j.adopted, g_j_unc: level.g_j.adopted_unc }
    }),
    missing_j: missingTwoJ.map((twoJ) => twoJ / 2),
  }
}

/** What the quadratic shift of a level of an edition is computed from. */
export function diamagneticOf(snapshot: Snapshot, index: number): TransitionDetail['diamagnetic']['lower'] {
  const species = snapshot.species[snapshot.columns.speciesOf[index] ?? 0]
  return levelDiamagnetic(snapshot.level(index), species ?? { ionisation_energy_invcm: null, charge: 0, isotopes: [] })
}

/** The transition with the terms of both ends and links. */
export function transitionDetail(snapshot: Snapshot, i: number, j: number, kind?: Kind): TransitionDetail {
  const [low, high] = orderedPair(snapshot, i, j)
  const transition = assembleTransition(snapshot, low, high, kind)
  return {
    ...transition,
    terms: { lower: membersOf(snapshot, low), upper: membersOf(snapshot, high) },
    diamagnetic: { lower: diamagneticOf(snapshot, low), upper: diamagneticOf(snapshot, high) },
    hyperfine: { lower: [...snapshot.hyperfine(low)], upper: [...snapshot.hyperfine(high)] },
    links: linksOfTransition(transition.lower.id, transition.upper.id),
  }
}

