import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { createKey, keyVersion, listKeys } from '@/lib/access/key-store'
import { entityTag } from '@/lib/entity-tag'
import { pageOf } from '@/lib/http/pages'
import * as account from '@/openapi/operations/account'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(account.listKeys, async ({ caller, after, query }) =>
    pageOf(await listKeys(getDb(), caller, after, query.limit), query.limit, (key) => [key.created_at, key.id])),
  endpoint(account.createKey, async (call) => {
    const data = await createKey(getDb(), actingOf(call), call.body)
    return { data, repeatData: { ...data, key: null }, etag: entityTag(...keyVersion(data)), headers: { location: addressOf(`/keys/${data.id}`) } }
  }),
)
