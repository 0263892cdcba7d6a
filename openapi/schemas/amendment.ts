import { z } from 'zod'
import { Instant } from './session'

export const AmendmentState = z.enum(['draft', 'in_review', 'accepted', 'published', 'withdrawn']).meta({ id: 'AmendmentState' })

export const Amendment = z
  .strictObject({
    id: z.uuid(), title: z.string(), note: z.string(), state: AmendmentState,
    author: z.strictObject({ id: z.uuid(), name: z.string() }),
    version: z.int(), created_at: Instant, updated_at: Instant,
  })
  .meta({ id: 'Amendment' })
export type Amendment = z.infer<typeof Amendment>

const title = z.string().trim().min(1).max(200)
const note = z.string().max(10_000)

export const NewAmendment = z.strictObject({ title, note: note.optional() }).meta({ id: 'NewAmendment', example: { title: 'Energies of Zn I from the 2019 comb work', note: '' } })
export type NewAmendment = z.infer<typeof NewAmendment>

export const AmendmentChanges = z.strictObject({ title: title.optional(), note: note.optional() }).meta({ id: 'AmendmentChanges', example: { note: 'Checked against the printed table.' } })
export type AmendmentChanges = z.infer<typeof AmendmentChanges>
