import { z } from 'zod'
import { Kind, LevelId, TransitionId, ValueStatus } from './common'
import { GJ, HyperfineConstants, Level } from './level'

export const RuleName = z
  .enum(['parity', 'delta_j', 'zero_zero', 'delta_s', 'delta_l', 'l_zero_zero', 'delta_m', 'm_zero_zero', 'zero_amplitude'])
  .meta({ id: 'RuleName' })
export type RuleName = z.infer<typeof RuleName>

export const Verdict = z
  .strictObject({
    allowed: z.boolean().meta({ description: 'The rigorous rules of the kind are met.' }),
    rigorous: z.boolean(),
    ls: z.boolean().nullable().meta({ description: 'The LS rules are met too; null where they do not apply.' }),
    intercombination: z.boolean(),
    rules: z.array(
      z.strictObject({
        rule: RuleName,
        basis: z.enum(['rigorous', 'ls']),
        verdict: z.enum(['pass', 'fail', 'not_applicable']),
        detail: z.string(),
      }),
    ),
  })
  .meta({ id: 'Verdict' })
export type Verdict = z.infer<typeof Verdict>

export const Pattern = z.enum(['unsplit', 'normal', 'triplet', 'anomalous']).meta({ id: 'Pattern' })
export type Pattern = z.infer<typeof Pattern>

export const Moments = z
  .strictObject({
    pi_second: z.number().nullable(),
    sigma_first: z.number().nullable(),
    sigma_second: z.number().nullable(),
  })
  .meta({ id: 'Moments', description: "Strength-weighted means of shift^2 (pi, sigma+) and shift (sigma+), in Lorentz units, about the line's centre." })
export type Moments = z.infer<typeof Moments>

export const Transition = z
  .strictObject({
    id: TransitionId,
    lower: Level,
    upper: Level,
    kind: Kind,
    verdict: Verdict,
    wavenumber_invcm: z.number(),
    wavelength_vac_nm: z.number(),
    wavelength_air_nm: z.number().nullable(),
    wavelength_air_status: ValueStatus,
    wavelength_conventional_nm: z.number(),
    conventional_medium: z.enum(['air', 'vacuum']),
    frequency_thz: z.number(),
    wavenumber_unc_invcm: z.number().nullable(),
    g_eff: z.number().nullable(),
    g_eff_status: ValueStatus,
    pattern: Pattern.nullable(),
    moments_lorentz: Moments,
  })
  .meta({ id: 'Transition' })
export type Transition = z.infer<typeof Transition>

const TermMembers = z.strictObject({
  s: z.number().nullable(),
  l: z.int().nullable(),
  levels: z.array(
    z.strictObject({
      id: LevelId,
      j: z.number(),
      energy_invcm: z.number(),
      energy_unc_invcm: z.number().nullable(),
      g_j: z.number().nullable(),
      g_j_unc: z.number().nullable().meta({ description: 'One standard deviation of the adopted g_J.' }),
    }),
  ),
  missing_j: z.array(z.number()),
})

/** What the quadratic shift of a level is computed from. */
export const LevelDiamagnetic = z
  .strictObject({
    status: ValueStatus.meta({ description: 'not_applicable: no single electron outside closed shells, or the level is none of a series that the ionisation energy limits.' }),
    reason: z.string().nullable().meta({ description: 'Why there is none; null where there is.' }),
    effective_n: z.number().nullable(),
    mean_square_radius_bohr2: z.number().nullable().meta({ description: '<r^2> in Bohr radii squared, hydrogenic with the effective quantum number.' }),
    cautions: z.array(z.enum(['l_mixing', 'penetrating'])).meta({ description: 'l_mixing: levels of other l lie so near that first order is only a guide; penetrating: the electron is much inside the core.' }),
  })
  .meta({ id: 'LevelDiamagnetic' })
export type LevelDiamagnetic = z.infer<typeof LevelDiamagnetic>

export const TransitionDetail = Transition.extend({
  terms: z
    .strictObject({ lower: TermMembers, upper: TermMembers })
    .meta({ description: 'The levels of both terms: what the intermediate model diagonalises and the linear law is judged by.' }),
  diamagnetic: z.strictObject({ lower: LevelDiamagnetic, upper: LevelDiamagnetic }).meta({ description: 'What the quadratic shifts of both ends are computed from.' }),
  hyperfine: z
    .strictObject({ lower: z.array(HyperfineConstants), upper: z.array(HyperfineConstants) })
    .meta({ description: 'Hyperfine constants stored for both ends; components with hyperfine=true are made with them.' }),
  links: z.strictObject({ self: z.string(), page: z.string(), components: z.string(), lower: z.string(), upper: z.string() }),
}).meta({ id: 'TransitionDetail' })
export type TransitionDetail = z.infer<typeof TransitionDetail>

/** A level given in a request, of no table: exactly these members. */
export const InlineLevelAnswer = Level.extend({
  id: z.null(),
  species: z.null(),
  configuration: z.null(),
  energy_source: z.null(),
  energy_evidence: z.null(),
  revision: z.null(),
  g_j: GJ,
}).meta({ id: 'InlineLevelAnswer', description: 'A level given in the request, decoded; what only a table knows is null.' })
export type InlineLevelAnswer = z.infer<typeof InlineLevelAnswer>

export const JudgedTransition = Transition.extend({ id: z.null(), lower: InlineLevelAnswer, upper: InlineLevelAnswer }).meta({ id: 'JudgedTransition' })
export type JudgedTransition = z.infer<typeof JudgedTransition>
