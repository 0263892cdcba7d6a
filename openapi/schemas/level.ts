import { z } from 'zod'
import { Coupling, Evidence, LevelId, Parity, SpeciesId, ValueStatus } from './common'

export const Term = z
  .strictObject({
    symbol: z.string().meta({ description: 'ASCII, * marks odd parity.', example: '2P*3/2' }),
    unicode: z.string().meta({ example: '²P°₃/₂' }),
    label: z.string().nullable().meta({ description: 'Letter that compilations put before repeated terms (a, z, y ...); not part of the symbol.' }),
    multiplicity: z.int().nullable(),
    s: z.number().nullable(),
    l: z.int().nullable(),
    j: z.number(),
    parity: Parity,
    degeneracy: z.int().meta({ description: '2J + 1.' }),
    k: z.number().optional().meta({ description: 'Pair coupling only: K.' }),
    core: z
      .strictObject({ s: z.number(), l: z.int(), j: z.number() })
      .optional()
      .meta({ description: 'Pair and jj coupling only: the core the outer electron couples to.' }),
    l_outer: z.int().optional().meta({ description: 'Pair and jj coupling only: l of the outer electron.' }),
    j_outer: z.number().optional().meta({ description: 'jj coupling only: j of the outer electron.' }),
  })
  .meta({ id: 'Term' })
export type Term = z.infer<typeof Term>

export const MeasuredG = z
  .strictObject({
    value: z.number(),
    unc: z.number().nullable().meta({ description: 'One standard deviation; null is unknown.' }),
    source: z.string(),
    evidence: Evidence,
    note: z.string().nullable(),
  })
  .meta({ id: 'MeasuredG' })
export type MeasuredG = z.infer<typeof MeasuredG>

export const GJ = z
  .strictObject({
    adopted: z.number().nullable(),
    adopted_unc: z.number().nullable().meta({ description: 'Known only where a measured value with an uncertainty was adopted.' }),
    basis: z.enum(['chosen', 'measured', 'coupled', 'none']).meta({ description: 'Where the adopted value comes from; chosen: by a curator, with a reason.' }),
    scheme: z.enum(['LS', 'J1K', 'jj']).nullable(),
    coupled: z.number().nullable().meta({ description: 'In the stated coupling, with g_s of the constants edition.' }),
    coupled_exact: z.string().nullable().meta({ description: 'In the stated coupling, with g_s = 2, as a fraction.', example: '4/3' }),
    ls: z.number().nullable(),
    ls_exact: z.string().nullable(),
    measured: z.number().nullable(),
    measured_unc: z.number().nullable(),
    measured_source: z.string().nullable(),
    measured_evidence: Evidence.nullable(),
    all_measured: z.array(MeasuredG),
    status: ValueStatus,
  })
  .meta({ id: 'GJ', description: 'The Landé factor of a level. J = 0 has none: null, not_applicable.' })
export type GJ = z.infer<typeof GJ>

export const Level = z
  .strictObject({
    id: LevelId,
    species: SpeciesId,
    configuration: z.string().meta({ example: '3d6.(5D).4s.4p.(3P*)' }),
    coupling: Coupling,
    term: Term,
    energy_invcm: z.number(),
    energy_unc_invcm: z.number().nullable(),
    energy_literal: z.string().nullable().meta({ description: 'The digits the source printed; null where they were not kept.' }),
    g_j: GJ,
    energy_source: z.string(),
    energy_evidence: Evidence,
    line_checked: z.boolean().meta({ description: 'A well-known wavelength is reproduced to 0.01 nm with this level.' }),
    repeat_index: z.int().nullable(),
    alternative_name: z.string().nullable().meta({ description: 'Paschen name of a noble-gas level.', example: '1s5' }),
    note: z.string().nullable(),
    status: z.enum(['active', 'retired']),
    revision: z.int(),
  })
  .meta({ id: 'Level' })
export type Level = z.infer<typeof Level>

export const HyperfineConstants = z
  .strictObject({
    mass_number: z.int(),
    a_mhz: z.number().nullable(),
    a_unc_mhz: z.number().nullable(),
    b_mhz: z.number().nullable(),
    b_unc_mhz: z.number().nullable(),
    source: z.string(),
    evidence: Evidence,
    note: z.string().nullable(),
  })
  .meta({ id: 'HyperfineConstants' })
export type HyperfineConstants = z.infer<typeof HyperfineConstants>

export const LevelDetail = Level.extend({
  hyperfine_constants: z.array(HyperfineConstants),
  links: z.strictObject({
    self: z.string(),
    page: z.string(),
    species: z.string(),
    g_factor: z.string(),
    sublevels: z.string(),
    transitions: z.string(),
    energy_source: z.string(),
  }),
}).meta({ id: 'LevelDetail' })
export type LevelDetail = z.infer<typeof LevelDetail>

export const GFactor = z
  .strictObject({
    level: LevelId,
    g_s: z.number(),
    status: ValueStatus,
    adopted: z.number().nullable(),
    adopted_unc: z.number().nullable(),
    basis: z.enum(['chosen', 'measured', 'coupled', 'none']),
    reason: z.string().meta({ description: 'Why this value was adopted, in a sentence.' }),
    scheme: z.enum(['LS', 'J1K', 'jj']).nullable(),
    coupled: z.number().nullable(),
    coupled_exact: z.string().nullable(),
    ls: z.number().nullable(),
    ls_exact: z.string().nullable(),
    measured: z.number().nullable(),
    measured_unc: z.number().nullable(),
    measured_source: z.string().nullable(),
    measured_evidence: Evidence.nullable(),
    all_measured: z.array(MeasuredG),
    difference: z.number().nullable().meta({ description: 'Measured minus coupled.' }),
    difference_in_standard_deviations: z.number().nullable(),
    derivation: z.array(z.strictObject({ label: z.string(), text: z.string(), value: z.string().nullable() })),
    bounds: z.strictObject({ lower: z.number(), upper: z.number() }).nullable().meta({ description: 'Limits of g_J in any coupling of this configuration.' }),
  })
  .meta({ id: 'GFactor' })
export type GFactor = z.infer<typeof GFactor>

export const Sublevel = z
  .strictObject({
    j: z.number().nullable().meta({ description: 'By continuity from zero field; null where two zero-field energies of the term coincide.' }),
    m: z.number(),
    m_l: z.number().nullable().meta({ description: 'M_L that the sublevel tends to at high field; null in the linear model, which names none.' }),
    m_s: z.number().nullable().meta({ description: 'M_S that it tends to at high field.' }),
    shift_invcm: z.number(),
    shift_ghz: z.number(),
    shift_mhz: z.number(),
    energy_invcm: z.number(),
    derivative_invcm_per_tesla: z.number().meta({ description: 'Of the energy with respect to the field; analytic.' }),
    diamagnetic_shift_invcm: z.number().nullable().meta({ description: 'Quadratic shift; part of shift and energy with diamagnetic=true only.' }),
    diamagnetic_status: ValueStatus,
    amplitudes: z
      .array(z.strictObject({ j: z.number(), amplitude: z.number() }))
      .optional()
      .meta({ description: 'Of |J m> in the state; with amplitudes=true.' }),
  })
  .meta({ id: 'Sublevel' })
export type Sublevel = z.infer<typeof Sublevel>

export const HyperfineSublevel = z
  .strictObject({
    mass_number: z.int(),
    f: z.number().nullable().meta({ description: 'By continuity from zero field; null where two zero-field energies coincide.' }),
    m_f: z.number(),
    m_j: z.number().meta({ description: 'm_J that the sublevel tends to at high field.' }),
    m_i: z.number().meta({ description: 'm_I that it tends to at high field.' }),
    shift_mhz: z.number().meta({ description: 'From the hyperfine level F at zero field.' }),
    energy_mhz: z.number().meta({ description: 'From the centre of gravity of the level J.' }),
    energy_invcm: z.number().meta({ description: 'From the ground level.' }),
    derivative_mhz_per_tesla: z.number(),
    amplitudes: z
      .array(z.strictObject({ m_j: z.number(), m_i: z.number(), amplitude: z.number() }))
      .optional()
      .meta({ description: 'Of |m_J, m_I> in the state; with amplitudes=true.' }),
  })
  .meta({ id: 'HyperfineSublevel' })
export type HyperfineSublevel = z.infer<typeof HyperfineSublevel>

const SublevelNamed = z.strictObject({ name: z.string().meta({ example: 'F = 2, m_F = 1' }), f: z.number().nullable(), j: z.number().nullable(), m: z.number() })
const AtField = { field_tesla: z.number(), field_gauss: z.number() }

/** Where two sublevels cross, come nearest, or differ by an amount that the field does not change. */
export const Crossings = z
  .strictObject({
    level: LevelId,
    mass_number: z.int().nullable().meta({ description: 'Null without hyperfine structure.' }),
    a: SublevelNamed,
    b: SublevelNamed,
    from_tesla: z.number(),
    to_tesla: z.number(),
    crossings: z.array(z.strictObject({ ...AtField, slope_mhz_per_tesla: z.number().meta({ description: 'Of E(a) - E(b).' }) })),
    anticrossings: z.array(z.strictObject({ ...AtField, gap_mhz: z.number(), gap_invcm: z.number() })).meta({ description: 'Two sublevels of one m do not cross: where they are nearest.' }),
    stationary: z
      .array(
        z.strictObject({
          ...AtField,
          difference_mhz: z.number(),
          difference_invcm: z.number(),
          curvature_mhz_per_tesla2: z.number(),
          kind: z.enum(['minimum', 'maximum']).meta({ description: 'Of E(a) - E(b).' }),
        }),
      )
      .meta({ description: 'Where the difference does not change with the field to first order.' }),
  })
  .meta({ id: 'Crossings' })
export type Crossings = z.infer<typeof Crossings>
