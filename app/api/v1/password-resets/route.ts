import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { askReset } from '@/lib/access/resets'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.askPasswordReset, async (call) => {
    await askReset(getDb(), actingOf(call), call.body)
    return { data: null }
  }),
)
