import { z } from 'zod'
import { Instant } from './session'

export const AuditEvent = z
  .strictObject({
    id: z.int(),
    at: Instant,
    action: z.string().meta({ example: 'key.create' }),
    actor: z.strictObject({ id: z.uuid(), name: z.string() }).nullable().meta({ description: 'Null for what the command line of the server did, and for a link out of a mail.' }),
    key: z.uuid().nullable().meta({ description: 'The key it was done with.' }),
    key_name: z.string().nullable(),
    session: z.uuid().nullable().meta({ description: 'The browser session it was done in.' }),
    subject: z.strictObject({ kind: z.string(), id: z.string().nullable() }),
    before: z.unknown().meta({ description: 'What it was; null where there was nothing.' }),
    after: z.unknown(),
    ip: z.string().nullable(),
    request_id: z.string().nullable(),
  })
  .meta({ id: 'AuditEvent' })
export type AuditEvent = z.infer<typeof AuditEvent>
