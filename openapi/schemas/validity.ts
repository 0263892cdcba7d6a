import { z } from 'zod'
import { LevelId } from './common'

export const ValidityStatus = z.enum(['valid', 'not_valid', 'unknown']).meta({ id: 'ValidityStatus' })
export type ValidityStatus = z.infer<typeof ValidityStatus>

/** Error of the linear law for one level. */
export const LevelValidity = z
  .strictObject({
    level: LevelId.nullable(),
    status: ValidityStatus,
    error_invcm: z.number().nullable().meta({ description: 'Largest error of a sublevel position; a lower bound where status is unknown.' }),
    relative_error: z.number().nullable().meta({ description: 'error_invcm divided by mu_B B.' }),
    relative_to_shift: z.number().nullable().meta({ description: "error_invcm divided by the level's own largest linear shift." }),
    tolerance: z.number(),
    field_limit_tesla: z.number().nullable().meta({ description: 'Field where relative_error passes the tolerance; null where it never does or is unknown.' }),
    missing_j: z.array(z.number()).meta({ description: 'J of the term that the table does not hold.' }),
  })
  .meta({ id: 'LevelValidity' })
export type LevelValidity = z.infer<typeof LevelValidity>

export const Validity = z
  .strictObject({
    positions: z.strictObject({
      status: ValidityStatus,
      error_invcm: z.number().nullable(),
      relative_error: z.number().nullable().meta({ description: 'Largest component error divided by the larger of the largest linear shift and 0.01 mu_B B.' }),
      tolerance: z.number(),
      field_limit_tesla: z.number().nullable(),
    }),
    strengths: z.strictObject({
      status: ValidityStatus,
      relative_error: z.number().nullable().meta({ description: "Largest change of a component's strength as a fraction of the largest in its q." }),
      tolerance: z.number(),
      field_limit_tesla: z.number().nullable(),
    }),
    levels: z.strictObject({ lower: LevelValidity, upper: LevelValidity }),
    method: z.string(),
    sentence: z.string(),
  })
  .meta({ id: 'Validity', description: 'How far the linear law may be trusted at this field, positions and strengths apart.' })
export type Validity = z.infer<typeof Validity>
