import { z } from 'zod'

export const Source = z
  .strictObject({
    key: z.string().meta({ example: 'sansonetti-2008' }),
    citation: z.string().meta({ description: 'The reference as it was given with the value.' }),
    kind: z.string().meta({ description: 'article, report, book, data sheet, abstract or other.' }),
    authors: z.string().nullable(),
    title: z.string().nullable(),
    journal: z.string().nullable(),
    year: z.int().nullable(),
    doi: z.string().nullable(),
    note: z.string().nullable(),
    used_by: z.strictObject({
      species: z.int(),
      levels: z.int(),
      measured_g: z.int(),
      isotopes: z.int(),
      hyperfine_constants: z.int(),
    }).meta({ description: 'How many values of the edition rest on this source.' }),
  })
  .meta({ id: 'Source' })
export type Source = z.infer<typeof Source>
