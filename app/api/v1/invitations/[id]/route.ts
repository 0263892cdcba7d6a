import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { revokeInvitation } from '@/lib/access/invitations'
import { requireVersion } from '@/lib/entity-tag'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.revokeInvitation, async (call) => {
    await revokeInvitation(getDb(), actingOf(call), call.params.id, (invitation) => requireVersion(call.ifMatch, invitation.etag))
    return { data: null }
  }),
)
