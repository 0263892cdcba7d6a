import { z } from 'zod'

export const Warning = z.strictObject({ code: z.string(), detail: z.string() }).meta({ id: 'Warning' })

const asked = z.record(z.string(), z.union([z.string(), z.array(z.string())]))
  .meta({ description: 'The parameters in force, defaults included, as if typed.' })

/** `meta` of every answer. Operations add model, conventions, excluded and the like; nothing here is left out. */
export const Meta = z
  .looseObject({
    edition: z.int().nullable().meta({ description: 'Edition read; the newest one where the answer belongs to none, null while nothing is published.' }),
    constants: z.string().meta({ description: 'Edition of the fundamental constants.', example: 'CODATA 2022' }),
    warnings: z.array(Warning),
    query: asked.optional(),
    physics: z.int().optional().meta({ description: 'Raised whenever a computed number can change. On computed answers.' }),
    model: z.string().optional(),
    conventions: z.record(z.string(), z.unknown()).optional().meta({ description: 'Signs and normalisations.' }),
    excluded: z.record(z.string(), z.int()).optional().meta({ description: 'How many rows default filters and rules took out, by reason.' }),
    explained: z.array(z.unknown()).optional().meta({ description: 'The rows that were taken out, with explain=true.' }),
  })
  .meta({ id: 'Meta', description: 'Facts about the answer. Operations can add members.' })

export const Page = z
  .strictObject({ limit: z.int(), next_cursor: z.string().nullable().meta({ description: 'Where the next page begins; null on the last one.' }) })
  .meta({ id: 'Page' })

export const Fault = z
  .strictObject({
    parameter: z.string().optional().meta({ description: 'Name of a path or query parameter.' }),
    pointer: z.string().optional().meta({ description: 'RFC 6901 JSON pointer into the body.' }),
    code: z.string(),
    detail: z.string(),
  })
  .meta({ id: 'Fault' })

/** RFC 9457, with our `code` and the list of all that is wrong. */
export const ProblemDocument = z
  .looseObject({
    type: z.string().meta({ description: 'Page that explains this kind of problem and its cure.', example: 'http://127.0.0.1:3000/problems/unknown_parameter' }),
    title: z.string(),
    status: z.int(),
    detail: z.string(),
    instance: z.string().meta({ description: 'Identifier of the request, as in X-Request-Id.' }),
    code: z.string(),
    errors: z.array(Fault).optional(),
  })
  .meta({ id: 'Problem' })
export type ProblemDocument = z.infer<typeof ProblemDocument>
