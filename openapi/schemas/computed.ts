import { z } from 'zod'
import { AirFormula, Parity, ValueStatus } from './common'

export const DecodedTerm = z
  .strictObject({
    symbol: z.string(),
    unicode: z.string(),
    label: z.string().nullable(),
    multiplicity: z.int().nullable(),
    s: z.number().nullable(),
    l: z.int().nullable(),
    j: z.number().nullable(),
    possible_j: z.array(z.number()).meta({ description: '|L - S| to L + S.' }),
    parity: Parity.nullable().meta({ description: 'Null where the symbol leaves it open.' }),
    degeneracy: z.int().meta({ description: '2J + 1; (2S + 1)(2L + 1) for a whole term.' }),
    g_j: z.strictObject({ ls: z.number().nullable(), ls_exact: z.string().nullable(), status: ValueStatus }),
  })
  .meta({ id: 'DecodedTerm' })
export type DecodedTerm = z.infer<typeof DecodedTerm>

export const SPECTRAL_SCALES = ['vacuum_nm', 'air_nm', 'wavenumber_invcm', 'frequency_thz', 'energy_ev'] as const
export const SpectralScale = z.enum(SPECTRAL_SCALES).meta({ id: 'SpectralScale' })
export type SpectralScale = z.infer<typeof SpectralScale>

export const Conversion = z
  .strictObject({
    value: z.number(),
    from: SpectralScale,
    to: SpectralScale,
    formula: AirFormula,
    result: z.number().nullable(),
    result_status: ValueStatus,
    wavenumber_invcm: z.number(),
    wavelength_vac_nm: z.number(),
    wavelength_air_nm: z.number().nullable(),
    wavelength_air_status: ValueStatus,
    frequency_thz: z.number(),
    energy_ev: z.number(),
  })
  .meta({ id: 'Conversion' })
export type Conversion = z.infer<typeof Conversion>

/** Columnar answer of `POST /sublevels` with levels; matrices are [field][state], states by m then upwards. */
export const SublevelMatrix = z
  .strictObject({
    m: z.array(z.number()),
    j: z.array(z.number().nullable()),
    m_l: z.array(z.number().nullable()),
    m_s: z.array(z.number().nullable()),
    energies_invcm: z.array(z.array(z.number())),
    derivatives: z.array(z.array(z.number())).meta({ description: 'cm^-1 per tesla.' }),
  })
  .meta({ id: 'SublevelMatrix' })
export type SublevelMatrix = z.infer<typeof SublevelMatrix>

/** Columnar answer of `POST /sublevels` with a nucleus; matrices are [field][state], states by m_F then upwards. */
export const HyperfineMatrix = z
  .strictObject({
    f: z.array(z.number().nullable()).meta({ description: 'By continuity from zero field; null where two zero-field energies coincide.' }),
    m_f: z.array(z.number()),
    m_j: z.array(z.number()).meta({ description: 'High-field name.' }),
    m_i: z.array(z.number()),
    shifts_mhz: z.array(z.array(z.number())).meta({ description: 'From the hyperfine level F at zero field.' }),
    energies_mhz: z.array(z.array(z.number())).meta({ description: 'From the centre of gravity of the level J.' }),
    derivatives: z.array(z.array(z.number())).meta({ description: 'MHz per tesla.' }),
  })
  .meta({ id: 'HyperfineMatrix' })
export type HyperfineMatrix = z.infer<typeof HyperfineMatrix>
