import { angularFactors } from '@/lib/atomic/components'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { type HyperfineLevel, hyperfineLevel, type HyperfineReady, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { hyperfineComponents } from '@/lib/atomic/hyperfine-lines'
import { rankOf } from '@/lib/atomic/rules'
import { plusZero } from '@/lib/units/number'
import { centreOf, placer } from '@/lib/prediction/component-places'
import { CROSSED, gSWarnings, gWarnings, mediumWarnings, type Warning } from '@/lib/prediction/component-warnings'
import { type ComponentsAsked, endsOf, type PredictedLine, lineWithG } from '@/lib/prediction/components'
import { chooseG, type GChoice } from '@/lib/prediction/g-values'
import { type HyperfineUncertainLevel, hyperfineUncertainty } from '@/lib/prediction/hyperfine-uncertainty'
import { type IsotopeAsked, takeIsotopes, type TakenIsotope } from '@/lib/prediction/isotopes'
import { twoJOf } from '@/lib/prediction/levels'
import { judgeLinear, toldValidity } from '@/lib/prediction/validity'
import type { HyperfineComponent, HyperfineComponents, UsedIsotope } from '@/openapi/schemas/components'
import type { HyperfineConstants, HyperfineSublevel, Level } from '@/openapi/schemas/level'
import type { Isotope } from '@/openapi/schemas/species'

const halfOrNull = (two: number | null): number | null => (two === null ? null : two / 2)

/** A level of one isotope in numbers: constants that the table does not hold are 0. */
const nuclearLevel = (twoJ: number, g: number | null, isotope: TakenIsotope, constants: HyperfineConstants | null): HyperfineLevel => ({
  twoJ,
  gJ: g,
  twoI: isotope.twoI,
  aMhz: constants?.a_mhz ?? 0,
  bMhz: constants?.b_mhz ?? null,
  gI: isotope.gI,
})

const MHZ_PER_INVCM = GHZ_PER_INVCM * 1000

export interface HyperfineSublevelsAsked extends GChoice {
  fieldTesla: number
  isotope: number | null
  amplitudes: boolean
}

/** A level of the table with the isotopes of its species. */
export interface NuclearLevel {
  level: Level
  constants: readonly HyperfineConstants[]
  isotopes: readonly Isotope[]
}

/** The level and its nucleus made ready for fields, with what was taken. */
export function readyNuclearLevel({ level, constants, isotopes }: NuclearLevel, asked: GChoice & { isotope: number | null }): { ready: HyperfineReady; isotope: TakenIsotope; g: number | null; warnings: Warning[] } {
  const chosen = chooseG(level, asked, 'level')
  const end = { id: level.id, twoJ: twoJOf(level), constants }
  const { isotopes: found, warnings } = takeIsotopes(isotopes, [end], asked.isotope)
  const isotope = found[0] as TakenIsotope
  return {
    ready: hyperfineLevel(nuclearLevel(end.twoJ, chosen.g, isotope, isotope.constants[0] ?? null)),
    isotope,
    g: chosen.g,
    warnings: [...warnings, ...gSWarnings([level], asked), ...gWarnings({ level, chosen }, asked.gValues)],
  }
}

/**
 * The hyperfine sublevels of a level of the table for one isotope at a field, by m_F and then upwards, by full diagonalisation in |m_J, m_I>.
 * Refuses as `takeIsotopes`, `no_ls_g`, `g_unknown`.
 */
export function hyperfineSublevelsOf(found: NuclearLevel, asked: HyperfineSublevelsAsked): { rows: HyperfineSublevel[]; isotope: TakenIsotope; g: number | null; warnings: Warning[] } {
  const { ready, isotope, g, warnings } = readyNuclearLevel(found, asked)
  const rows = hyperfineSublevels(ready, asked.fieldTesla).map((state): HyperfineSublevel => ({
    mass_number: isotope.massNumber,
    f: halfOrNull(state.twoF),
    m_f: state.twoMF / 2,
    m_j: state.twoMJ / 2,
    m_i: state.twoMI / 2,
    shift_mhz: plusZero(state.shiftMhz),
    energy_mhz: plusZero(state.energyMhz),
    energy_invcm: found.level.energy_invcm + state.energyMhz / MHZ_PER_INVCM,
    derivative_mhz_per_tesla: plusZero(state.derivativeMhzPerTesla),
    ...(asked.amplitudes ? { amplitudes: state.amplitudes.map((one) => ({ m_j: one.twoMJ / 2, m_i: one.twoMI / 2, amplitude: one.amplitude })) } : {}),
  }))
  return { rows, isotope, g, warnings }
}

export interface HyperfineAsked extends Omit<ComponentsAsked, 'diamagnetic'> {
  isotope: IsotopeAsked
}

const toldIsotope = (isotope: TakenIsotope, alone: boolean): UsedIsotope => {
  const [lower, upper] = isotope.constants
  return {
    mass_number: isotope.massNumber,
    nuclear_spin: isotope.spinKnown ? isotope.twoI / 2 : null,
    g_i: isotope.gI,
    abundance_percent: isotope.abundancePercent,
    weight: isotope.weight,
    shift_mhz: 0,
    shift_status: alone ? 'not_applicable' : 'unknown',
    a_lower_mhz: lower?.a_mhz ?? null,
    b_lower_mhz: lower?.b_mhz ?? null,
    a_upper_mhz: upper?.a_mhz ?? null,
    b_upper_mhz: upper?.b_mhz ?? null,
  }
}

const uncertainEnd = (level: HyperfineLevel, gUnc: number | null, constants: HyperfineConstants | null): HyperfineUncertainLevel => ({
  level,
  gUnc,
  aUnc: constants === null ? null : constants.a_unc_mhz,
  bUnc: constants === null ? null : constants.b_unc_mhz,
})

/**
 * The components of a line with nuclear spin at a field, for one isotope or the natural mixture, with positions, strengths (over one isotope all
 * sum to 1), weights by isotope and the uncertainty of each detuning. Isotope shifts are not in the table and taken as 0. Pure, as `predictComponents`.
 * Refuses as that and as `takeIsotopes`.
 */
export function predictHyperfine(line: PredictedLine, isotopes: readonly Isotope[], asked: HyperfineAsked): { components: HyperfineComponents; warnings: Warning[] } {
  const used = lineWithG(line, asked)
  const ends = endsOf(used, asked)
  const taken = takeIsotopes(isotopes, [{ id: line.lower.id, twoJ: ends.lower.twoJ, constants: line.hyperfine.lower }, { id: line.upper.id, twoJ: ends.upper.twoJ, constants: line.hyperfine.upper }], asked.isotope)
  const validity = judgeLinear(line, ends, asked)
  const place = placer(line, asked.medium)
  // three for a dipole line, five for E2: what makes a line's strengths, each q summing to 1, of strengths that sum to 1 over everything
  const groups = 2 * rankOf(line.kind) + 1
  const components = taken.isotopes.flatMap((isotope): HyperfineComponent[] => {
    const [lower, upper] = [nuclearLevel(ends.lower.twoJ, used.lower.g, isotope, isotope.constants[0] ?? null), nuclearLevel(ends.upper.twoJ, used.upper.g, isotope, isotope.constants[1] ?? null)]
    const [uncLower, uncUpper] = [uncertainEnd(lower, used.lower.unc, isotope.constants[0] ?? null), uncertainEnd(upper, used.upper.unc, isotope.constants[1] ?? null)]
    return hyperfineComponents(hyperfineLevel(lower), hyperfineLevel(upper), asked.fieldTesla, line.kind).map((one): HyperfineComponent => {
      const angular = angularFactors(line.kind, one.q, asked.thetaDeg)
      const times = (factor: number | null) => (factor === null ? null : plusZero(groups * one.strength * isotope.weight * factor))
      const intensity = times(angular.intensity)
      const { shift_mhz: detuning, ...places } = place(one.detuningMhz / MHZ_PER_INVCM)
      return {
        mass_number: isotope.massNumber,
        f_lower: halfOrNull(one.lower.twoF),
        m_f_lower: one.lower.twoMF / 2,
        f_upper: halfOrNull(one.upper.twoF),
        m_f_upper: one.upper.twoMF / 2,
        q: one.q,
        polarisation: one.polarisation,
        m_j_lower: one.lower.twoMJ / 2,
        m_i_lower: one.lower.twoMI / 2,
        m_j_upper: one.upper.twoMJ / 2,
        m_i_upper: one.upper.twoMI / 2,
        detuning_mhz: detuning,
        derivative_mhz_per_tesla: one.derivativeMhzPerTesla,
        ...places,
        strength: one.strength,
        weight: isotope.weight,
        intensity,
        intensity_status: intensity === null ? 'not_applicable' : 'ok',
        stokes_q: times(angular.stokesQ),
        stokes_v: times(angular.stokesV),
        ...hyperfineUncertainty({ state: one.lower, ...uncLower }, { state: one.upper, ...uncUpper }, asked.fieldTesla, asked.fieldUncTesla),
      }
    })
  })
  components.sort((a, b) => a.q - b.q || a.detuning_mhz - b.detuning_mhz || a.mass_number - b.mass_number || a.m_f_lower - b.m_f_lower)
  const alone = isotopes.length === 1
  const warnings: Warning[] = [...taken.warnings, ...gSWarnings([line.lower, line.upper], asked), ...gWarnings({ level: line.lower, chosen: used.lower }, asked.gValues), ...gWarnings({ level: line.upper, chosen: used.upper }, asked.gValues), ...mediumWarnings(line, asked.medium)]
  if (!alone) warnings.push({ code: 'isotope_shift_unknown', detail: 'The table holds no isotope shifts; they are taken as 0, so every isotope has the centre of gravity of the line of the table.' })
  if (validity.positions.status === 'not_valid') {
    warnings.push({ code: 'j_mixing_ignored', detail: 'At this field levels of other J are mixed in by more than the tolerance, which hyperfine=true leaves out: it diagonalises within one J. model=intermediate shows the mixing, without hyperfine structure.' })
  }
  if (components.some((component) => component.wavelength_vac_nm === null)) warnings.push(CROSSED)
  return {
    components: {
      transition: line.id,
      field_tesla: asked.fieldTesla,
      field_gauss: asked.fieldTesla * 1e4,
      model: 'hyperfine',
      theta_deg: asked.thetaDeg,
      centre: centreOf(line),
      isotopes: taken.isotopes.map((isotope) => toldIsotope(isotope, alone)),
      listed_abundance_percent: taken.listedPercent,
      components,
      validity: toldValidity(line, validity),
    },
    warnings,
  }
}
