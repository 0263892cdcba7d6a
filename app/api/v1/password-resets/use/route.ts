import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { useReset as setByToken } from '@/lib/access/resets'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.usePasswordReset, async (call) => {
    await setByToken(getDb(), actingOf(call), call.body)
    return { data: null }
  }),
)
