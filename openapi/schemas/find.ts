import { z } from 'zod'
import { Level } from './level'
import { Transition } from './transition'

export const Find = z
  .strictObject({
    understood: z
      .array(
        z.strictObject({
          kind: z.enum(['species', 'term', 'configuration', 'j', 'parity', 'wavelength', 'energy', 'g', 'line_name', 'level_name', 'level_id', 'text']),
          text: z.string().meta({ description: 'The words of the query this part was read from.' }),
          meaning: z.string().meta({ description: 'What they were taken to mean.' }),
          without: z.string().meta({ description: 'The query with this part taken away.' }),
        }),
      )
      .meta({ description: 'Every part of the query and how it was understood.' }),
    questions: z
      .array(
        z.strictObject({
          text: z.string(),
          options: z.array(z.strictObject({ label: z.string(), q: z.string() })),
        }),
      )
      .meta({ description: 'Parts that can be read in more than one way; they are asked about, not guessed.' }),
    levels: z.array(Level),
    levels_total: z.int(),
    lines: z.array(Transition),
    lines_total: z.int(),
    lines_total_is_lower_bound: z.boolean(),
  })
  .meta({ id: 'Find' })
export type Find = z.infer<typeof Find>
