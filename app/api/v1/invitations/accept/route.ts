import { addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { acceptInvitation } from '@/lib/access/invitations'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.acceptInvitation, async ({ body, clientAddress, requestId, requestFields }) => {
    const { data, cookies } = await acceptInvitation(getDb(), body, { ip: clientAddress, requestId, userAgent: requestFields.get('user-agent'), cookie: requestFields.get('cookie') })
    return { data, cookies, headers: { location: addressOf('/me') } }
  }),
)
