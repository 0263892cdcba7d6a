import { z } from 'zod'
import { oneLine } from '@/openapi/core/one-line'
import { Instant, RoleName } from './session'

const KEY = {
  id: z.uuid(),
  name: z.string(),
  start: z.string().meta({ description: 'Visible start of the key, to tell keys apart.', example: 'ldt_7Gx2Qa' }),
  role: RoleName,
  owner: z.strictObject({ id: z.uuid(), name: z.string() }),
  made_with: z.uuid().nullable().meta({ description: 'The key it was made with, which takes it along when it is revoked.' }),
  state: z.enum(['active', 'expired', 'revoked']),
  created_at: Instant,
  expires_at: Instant.nullable(),
  revoked_at: Instant.nullable(),
  last_used_at: Instant.nullable().meta({ description: 'To the minute.' }),
}

export const ApiKey = z.strictObject(KEY).meta({ id: 'ApiKey' })
export type ApiKey = z.infer<typeof ApiKey>

export const NewKey = z
  .strictObject({ ...KEY, key: z.string().nullable().meta({ description: 'The key itself, shown this once; null where an Idempotency-Key repeats an earlier request.' }) })
  .meta({ id: 'NewKey' })
export type NewKey = z.infer<typeof NewKey>

export const NewKeyRequest = z
  .strictObject({
    name: oneLine(),
    role: RoleName.optional().meta({ description: 'Your own role or a lower one; default your own.' }),
    expires_at: Instant.nullish().meta({ description: 'When the key ends; null for never.' }),
  })
  .meta({ id: 'NewKeyRequest', example: { name: 'fit notebook', role: 'reader', expires_at: null } })
export type NewKeyRequest = z.infer<typeof NewKeyRequest>
