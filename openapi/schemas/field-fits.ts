import { z } from 'zod'
import { Kind, TransitionId } from './common'
import { Validity } from './validity'

/** Units of positions and separations; a ring radius has whatever unit of length the etalon's step is the square of. */
export const FIT_UNITS = ['nm', 'pm', 'cm-1', 'mcm-1', 'GHz', 'MHz'] as const
export const FitUnit = z.enum(FIT_UNITS).meta({ id: 'FitUnit', description: 'nm, pm (wavelength, in the medium), cm-1, mcm-1 (10^-3 cm^-1), GHz, MHz (the bare number of each).' })
export type FitUnit = z.infer<typeof FitUnit>

export const FIT_QUANTITIES = ['positions', 'separations', 'ring_radii'] as const
export const FitQuantity = z.enum(FIT_QUANTITIES).meta({
  id: 'FitQuantity',
  description:
    'positions: places in the spectrum. separations: distances from one place in each line, which need not be its centre; to the red is below zero in wavenumber and frequency, above zero in wavelength. ring_radii: radii of the rings of a plane etalon.',
})
export type FitQuantity = z.infer<typeof FitQuantity>

const FitReason = z.strictObject({ code: z.string(), detail: z.string() })

const unc = (of: string) => z.number().nullable().meta({ description: `One standard deviation of ${of}; null where not known.` })

export const FitComponent = z.strictObject({ m_lower: z.number(), m_upper: z.number(), q: z.int() })

/** One measured position beside what the fit makes of it. */
export const FitResidual = z
  .strictObject({
    measurement: z.int().meta({ description: 'Its place in the request, from 0.' }),
    line: z.int().meta({ description: 'Index of its line, from 0.' }),
    transition: TransitionId.nullable(),
    position: z.number().meta({ description: 'As given.' }),
    position_unc: z.number().nullable(),
    position_invcm: z.number().meta({ description: 'Vacuum wavenumber, or distance from the reference of its line.' }),
    position_unc_invcm: z.number().nullable(),
    fitted_invcm: z.number(),
    residual_invcm: z.number().meta({ description: 'Measured minus fitted.' }),
    standardised: z.number().nullable().meta({ description: 'Residual over its own deviation, sigma sqrt(1 - leverage); null where sigma is not known or the fit must pass through the point.' }),
    leverage: z.number().meta({ description: 'Share of the point in its own fitted value, 0 to 1.' }),
    components: z.array(FitComponent).meta({ description: 'What the peak was read as; several where they are not resolved.' }),
    assigned: z.enum(['by_hand', 'automatic']),
    field_without_tesla: z.number().nullable().meta({ description: 'The field fitted without this point; null where nothing is determined without it, and where the field is given.' }),
    influence: z.number().nullable().meta({ description: 'Change of the field by this point, in standard deviations of the field from the positions.' }),
  })
  .meta({ id: 'FieldFitResidual' })
export type FitResidual = z.infer<typeof FitResidual>

const FitLineTold = z.strictObject({
  line: z.int(),
  transition: TransitionId.nullable().meta({ description: 'Null for a line given in the request.' }),
  kind: Kind,
  name: z.string(),
  wavenumber_invcm: z.number().meta({ description: 'Without field, from the levels.' }),
  wavelength_vac_nm: z.number(),
  wavelength_air_nm: z.number().nullable(),
  medium: z.enum(['air', 'vacuum']).nullable().meta({ description: 'In which its wavelengths were read; null where none were given.' }),
  reference_invcm: z.number().nullable().meta({ description: 'Wavenumber that separations in wavelength were taken from; null where none were.' }),
})
export type FitLineTold = z.infer<typeof FitLineTold>

const FitZero = z.strictObject({
  name: z.string(),
  lines: z.array(z.int()),
  position_invcm: z.number().meta({ description: 'Where the first of its lines would stand without field, on the scale of the measurement.' }),
  position_unc_invcm: unc('it'),
  table_offset_invcm: z.number().nullable().meta({ description: 'The same minus the wavenumber from the levels; null for separations and ring radii.' }),
})

const FIT_PARTS = ['positions', 'scale', 'g_lower', 'g_upper', 'energy_lower', 'energy_upper', 'constants'] as const
export type FitPart = (typeof FIT_PARTS)[number]

const status = z.enum(['known', 'unknown', 'exact'])

export const FitValidity = z.strictObject({ line: z.int(), transition: TransitionId.nullable(), linear_law: Validity })

const asked = {
  mode: z.literal('positions'),
  model: z.enum(['linear', 'intermediate']).meta({ description: 'The model used.' }),
  lines: z.array(FitLineTold),
}

export const UndeterminedFit = z
  .strictObject({
    unknown: z.enum(['field', 'g']),
    status: z.literal('undetermined'),
    ...asked,
    reasons: z.array(FitReason).min(1).meta({ description: 'Why the data do not fix what is asked, and what to add.' }),
  })
  .meta({ id: 'UndeterminedFit' })

export const DeterminedField = z
  .strictObject({
    unknown: z.literal('field'),
    status: z.literal('determined'),
    ...asked,
    model_valid: z.boolean().nullable().meta({ description: 'Whether the model used holds at the fitted field for the positions of every line within the tolerance; null where it is not known.' }),
    field_tesla: z.number().meta({ description: 'Below zero where the assignment says that the field is reversed.' }),
    field_unc_tesla: z.number().nullable().meta({ description: 'One standard deviation, all parts of the budget; null where any part is unknown.' }),
    field_known_unc_tesla: z.number().nullable().meta({ description: 'Its known parts alone; null where neither deviations are stated nor anything is left over to judge scatter by.' }),
    expanded_unc_tesla: z.number().nullable().meta({ description: 'coverage_factor times field_known_unc_tesla.' }),
    coverage_factor: z.literal(2),
    uncertainty_complete: z.boolean().meta({ description: 'Whether every part of the budget is known.' }),
    statistical_unc_tesla: z.number().nullable().meta({ description: 'From the positions, and the scale where it is fitted: the last but one entry of the covariance, or the last.' }),
    scaled_unc_tesla: z.number().nullable().meta({ description: 'statistical_unc_tesla times the root of chi-squared per degree of freedom; null without degrees of freedom.' }),
    budget: z.array(z.strictObject({ part: z.enum(FIT_PARTS), value_tesla: z.number().nullable(), status })),
    parameters: z.array(z.string()).meta({ description: 'Zeros by name, field, and scale where it is fitted: the order of covariance.' }),
    parameter_units: z.array(z.string()),
    covariance: z.array(z.array(z.number())).nullable(),
    chi_squared: z.number().nullable().meta({ description: 'Null where no deviations are stated.' }),
    degrees_of_freedom: z.int(),
    zeros: z.array(FitZero),
    scale: z.strictObject({ value: z.number(), unc: z.number().nullable(), status: z.enum(['exact', 'uncertain', 'free']) }),
    residuals: z.array(FitResidual),
    pattern: z
      .array(z.strictObject({ line: z.int(), m_lower: z.number(), m_upper: z.number(), q: z.int(), position_invcm: z.number(), strength: z.number() }))
      .meta({ description: 'Components with any strength at the fitted field, on the scale of the measurement; strengths of each q sum to 1 at zero field.' }),
    validity: z.array(FitValidity).meta({ description: 'How far the linear law holds at the fitted field, line by line.' }),
    alternatives: z
      .array(
        z.strictObject({
          field_tesla: z.number(),
          cost_more: z.number().meta({ description: 'How much worse than the reading taken, in units of chi-squared.' }),
          components: z.array(z.array(FitComponent)).meta({ description: 'By measurement.' }),
        }),
      )
      .meta({ description: 'Other readings of the peaks that fit about as well.' }),
  })
  .meta({ id: 'DeterminedField' })
export type DeterminedField = z.infer<typeof DeterminedField>

export const FittedG = z.strictObject({
  level: z.string(),
  g_j: z.number(),
  g_j_unc: z.number().nullable().meta({ description: 'One standard deviation, all parts; null where any part is unknown.' }),
  g_j_known_unc: z.number().nullable(),
  expanded_unc: z.number().nullable().meta({ description: 'Twice g_j_known_unc.' }),
  statistical_unc: z.number().nullable().meta({ description: 'From the positions alone.' }),
  budget: z.array(z.strictObject({ part: z.enum(['positions', 'field', 'g_held']), value: z.number().nullable(), status })),
  table_g_j: z.number().nullable().meta({ description: 'The value in force without this fit.' }),
})
export type FittedG = z.infer<typeof FittedG>

export const DeterminedG = z
  .strictObject({
    unknown: z.literal('g'),
    status: z.literal('determined'),
    ...asked,
    model_valid: z.boolean().nullable(),
    field_tesla: z.number(),
    field_unc_tesla: z.number().nullable().meta({ description: 'As given, the scale\u2019s uncertainty with it; null: taken as exact.' }),
    coverage_factor: z.literal(2),
    lower: FittedG.nullable().meta({ description: 'Null where it was held.' }),
    upper: FittedG.nullable().meta({ description: 'Null where it was held.' }),
    parameters: z.array(z.string()),
    parameter_units: z.array(z.string()),
    covariance: z.array(z.array(z.number())).nullable(),
    chi_squared: z.number().nullable(),
    degrees_of_freedom: z.int(),
    zeros: z.array(FitZero),
    residuals: z.array(FitResidual),
    validity: z.array(FitValidity),
  })
  .meta({ id: 'DeterminedG' })
export type DeterminedG = z.infer<typeof DeterminedG>

export const FieldFitAnswer = z
  .union([DeterminedField, DeterminedG, UndeterminedFit])
  .meta({ id: 'FieldFit', description: 'A field (or g) from measured positions. An undetermined fit is an answer too: it says why.' })
export type FieldFitAnswer = z.infer<typeof FieldFitAnswer>
