import { z } from 'zod'
import { TransitionId } from './common'

const row = z.array(z.number())
const rows = z.array(row)

/** Positions and strengths of a multiplet at nodes of field, with slopes, for cubic Hermite interpolation without the network. */
export const FieldTableAnswer = z
  .strictObject({
    transition: TransitionId.nullable().meta({ description: 'The line that named the multiplet; null for levels given inline.' }),
    model: z.enum(['linear', 'intermediate']),
    j_lower: z.array(z.number().nullable()).meta({ description: 'Components as in POST /predictions: by q, m_lower, j_lower, j_upper.' }),
    j_upper: z.array(z.number().nullable()),
    m_lower: row,
    m_upper: row,
    q: z.array(z.int()),
    nodes_tesla: row.meta({ description: 'Upwards, from the first to the last field asked.' }),
    positions_invcm: rows.meta({ description: '[node][component]: wavenumbers.' }),
    position_slopes_invcm_per_tesla: rows,
    strengths: rows.nullable().meta({ description: '[node][component]; everything sums to 1. Null where the terms have no LS amplitude.' }),
    strength_slopes_per_tesla: rows.nullable(),
    strength_normalisation: z.literal('multiplet'),
    max_error_invcm: z.number().meta({ description: 'No interpolated position is farther from the model than this, rounding included.' }),
    max_strength_error: z.number().nullable(),
    proved: z.boolean().meta({ description: 'False only where levels coincide at zero field, so that the bounds do not hold in a last small interval beside it.' }),
    proof: z.string(),
    checksum_sha256: z.string().regex(/^[0-9a-f]{64}$/).meta({ description: 'Of the numbers of the table; meta.conventions.checksum says of what exactly.' }),
  })
  .meta({ id: 'FieldTable' })
export type FieldTableAnswer = z.infer<typeof FieldTableAnswer>
