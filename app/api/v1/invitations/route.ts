import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { createInvitation, listInvitations } from '@/lib/access/invitations'
import { pageOf } from '@/lib/http/pages'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.listInvitations, async ({ query, after }) =>
    pageOf(await listInvitations(getDb(), query, after, query.limit), query.limit, (invitation) => [invitation.created_at, invitation.id])),
  endpoint(accounts.createInvitation, async (call) => {
    const data = await createInvitation(getDb(), actingOf(call), call.body)
    return { data, etag: data.etag, headers: { location: addressOf(`/invitations/${data.id}`) } }
  }),
)
