import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { keyVersion, readKey, revokeKey } from '@/lib/access/key-store'
import { entityTag, requireVersion } from '@/lib/entity-tag'
import * as account from '@/openapi/operations/account'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(account.getKey, async ({ params, caller }) => {
    const data = await readKey(getDb(), caller, params.id)
    return { data, etag: entityTag(...keyVersion(data)) }
  }),
  endpoint(account.revokeKey, async (call) => {
    await revokeKey(getDb(), actingOf(call), call.params.id, (key) => requireVersion(call.ifMatch, entityTag(...keyVersion(key))))
    return { data: null }
  }),
)
