import { z } from 'zod'
import { LevelId, SpeciesId } from './common'

export const Edition = z
  .strictObject({
    number: z.int(),
    label: z.string(),
    notes: z.string(),
    checksum: z.string().meta({ description: 'SHA-256 of the canonical content, hexadecimal.' }),
    counts: z.strictObject({
      species: z.int(),
      levels: z.int(),
      sources: z.int(),
      measured_g: z.int(),
      isotopes: z.int(),
      hyperfine_constants: z.int(),
    }),
    published_at: z.iso.datetime({ offset: true }),
    published_by: z.string().nullable().meta({ description: 'Name of who published it.' }),
    links: z.strictObject({ self: z.string(), page: z.string(), levels: z.string(), changes: z.string() }),
  })
  .meta({ id: 'Edition' })
export type Edition = z.infer<typeof Edition>

export const Change = z
  .strictObject({
    level: LevelId,
    species: SpeciesId,
    action: z.enum(['created', 'replaced', 'retired']),
    fields: z.array(z.strictObject({ field: z.string(), before: z.unknown(), after: z.unknown() })),
  })
  .meta({ id: 'Change' })
export type Change = z.infer<typeof Change>
