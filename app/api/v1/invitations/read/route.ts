import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { readOffer } from '@/lib/access/invitations'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.readInvitation, async ({ body }) => ({ data: await readOffer(getDb(), body.token) })),
)
