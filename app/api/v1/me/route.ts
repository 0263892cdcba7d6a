import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { knownCaller, readAccount } from '@/lib/access/accounts'
import { getMe } from '@/openapi/operations/account'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getMe, async ({ caller }) => ({ data: await readAccount(getDb(), knownCaller(caller)) })))
