import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { signIn, signOut } from '@/lib/access/sign-in'
import * as account from '@/openapi/operations/account'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(account.signIn, async ({ body, clientAddress, requestId, requestFields }) => {
    const { data, cookies } = await signIn(getDb(), body, { ip: clientAddress, requestId, userAgent: requestFields.get('user-agent'), cookie: requestFields.get('cookie') })
    return { data, cookies }
  }),
  endpoint(account.signOut, async (call) => ({ data: null, cookies: [await signOut(getDb(), actingOf(call))] })),
)
