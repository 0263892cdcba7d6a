import { z } from 'zod'
import { LevelId, TransitionId } from './common'

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

/** A line that blends with the one asked for: nearer than a thirty-thousandth of its wavenumber, or joined to it by such neighbours. */
export const BlendedLine = z
  .strictObject({ transition: TransitionId.nullable().meta({ description: 'Null for levels of no table.' }), j_lower: z.number(), j_upper: z.number() })
  .meta({ id: 'BlendedLine' })
export type BlendedLine = z.infer<typeof BlendedLine>

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
    blend: z.strictObject({
      status: ValidityStatus,
      error_invcm: z.number().nullable().meta({ description: 'How far the linear law misplaces the centre of gravity of the lines seen in one, the worst q.' }),
      relative_error: z.number().nullable().meta({ description: 'error_invcm divided by the larger of the largest linear displacement of a centre and 0.01 mu_B B.' }),
      tolerance: z.number(),
      field_limit_tesla: z.number().nullable(),
      lines: z.array(BlendedLine).meta({ description: 'The lines seen in one with this line, itself included.' }),
    }),
    levels: z.strictObject({ lower: LevelValidity, upper: LevelValidity }),
    method: z.string(),
    sentence: z.string(),
  })
  .meta({ id: 'Validity', description: 'How far the linear law may be trusted at this field: positions, strengths, and the centre of an unresolved blend apart.' })
export type Validity = z.infer<typeof Validity>
