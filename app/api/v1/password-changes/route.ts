import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { changePassword } from '@/lib/access/accounts'
import * as account from '@/openapi/operations/account'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(account.changePassword, async (call) => {
    await changePassword(getDb(), actingOf(call), call.body)
    return { data: null }
  }),
)
