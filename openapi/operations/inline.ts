import { z } from 'zod'
import { Parity } from '@/openapi/schemas/common'

/** Components of the multiplets that one request may bring with it: about a second of work, since validity alone diagonalises each at many fields. */
export const GIVEN_COMPONENTS_MOST = 30_000

/** J, S, I as a number. */
export const halfInteger = (what: string) =>
  z
    .number()
    .min(0)
    .max(50)
    .refine((value) => Number.isInteger(2 * value), { message: `${what} must be a half-integer, such as 0, 0.5 or 1.`, params: { code: 'half_integer_malformed' } })

/** A level of no table, given in a request: exactly these members. */
export const InlineLevel = z
  .strictObject({
    energy_invcm: z.number().min(-1e9).max(1e9),
    s: halfInteger('s'),
    l: z.int().min(0).max(30),
    j: halfInteger('j'),
    parity: Parity,
    g_j: z.number().min(-20).max(20).nullish().meta({ description: 'Used as the adopted value; without it the LS value.' }),
    label: z.string().max(40).nullish(),
  })
  .meta({ id: 'InlineLevel' })
export type InlineLevel = z.infer<typeof InlineLevel>
