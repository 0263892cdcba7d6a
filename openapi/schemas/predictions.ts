import { z } from 'zod'
import { TransitionId } from './common'
import { ValidityStatus } from './validity'

/** What the positions of a bulk answer can be told in. */
export const PREDICTION_QUANTITIES = ['wavenumber_invcm', 'shift_invcm', 'wavelength_vac_nm', 'wavelength_air_nm', 'frequency_thz', 'shift_ghz'] as const
export const PredictionQuantity = z.enum(PREDICTION_QUANTITIES).meta({
  id: 'PredictionQuantity',
  description: 'What `values` are. Shifts are from the line without field; derivatives are in the same unit per tesla. Air wavelengths are null below 200 nm, wavelengths where the field has brought the upper sublevel to or below the lower one.',
})
export type PredictionQuantity = z.infer<typeof PredictionQuantity>

const aspect = {
  status: ValidityStatus,
  relative_error: z.number().nullable(),
  tolerance: z.number(),
  field_limit_tesla: z.number().nullable().meta({ description: 'Smallest field where the tolerance is passed; null where it never is or where that is not known.' }),
}

/** Error of the linear law of one block; of a multiplet, that of its worst line. */
export const PredictionValidity = z
  .strictObject({
    field_tesla: z.number().meta({ description: 'The largest field asked, which the errors are of.' }),
    positions: z.strictObject({ ...aspect, error_invcm: z.number().nullable() }),
    strengths: z.strictObject(aspect),
    blend: z.strictObject({ ...aspect, error_invcm: z.number().nullable() }).meta({ description: 'Centroid of the lines that are seen as one.' }),
    method: z.string(),
  })
  .meta({ id: 'PredictionValidity', description: 'How far the linear law may be trusted at the largest field asked, whichever model the block is in.' })
export type PredictionValidity = z.infer<typeof PredictionValidity>

const row = z.array(z.number())
const rowOrHole = z.array(z.number().nullable())
/** One value a component, or a row of them for each field. */
const perComponentOrField = z.union([row, z.array(row)]).nullable()

/** A line's or a multiplet's components over all fields, by columns. */
export const PredictionBlock = z
  .strictObject({
    transition: TransitionId.nullable().meta({ description: 'The line, or the line that named the multiplet; null for levels given inline.' }),
    model: z.enum(['linear', 'intermediate']),
    j_lower: rowOrHole.meta({ description: 'J by continuity from zero field; null where zero-field energies coincide.' }),
    j_upper: rowOrHole,
    m_lower: row,
    m_upper: row,
    q: z.array(z.int()),
    values: z.array(rowOrHole).meta({ description: '[field][component], in the quantity asked.' }),
    derivatives: z.array(rowOrHole).nullable().meta({ description: '[field][component], per tesla; null where not asked.' }),
    strengths: perComponentOrField.meta({ description: '[component] in the linear model, [field][component] in the intermediate one; null where left out or where there is no LS amplitude.' }),
    intensities: perComponentOrField.meta({ description: 'Shaped as strengths: seen at theta_deg, a line summing to 1 at zero field; null where no angle is given.' }),
    strength_normalisation: z.enum(['line', 'multiplet']).meta({ description: 'line: each q sums to 1 at zero field. multiplet: everything sums to 1.' }),
    validity: PredictionValidity,
  })
  .meta({ id: 'PredictionBlock', description: 'Components keep one order over all fields: q, m_lower, j_lower, j_upper.' })
export type PredictionBlock = z.infer<typeof PredictionBlock>
