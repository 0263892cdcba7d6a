import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { getSnapshot } from '@/lib/catalogue/snapshot'
import { pageOf } from '@/lib/http/pages'
import { follow, listFollows } from '@/lib/notices/follows'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.listFollows, async ({ caller, query, after, edition }) =>
    pageOf(await listFollows(getDb(), caller, query, after, query.limit, edition === 0 ? null : await getSnapshot(edition)), query.limit, (one) => [one.created_at, one.id])),
  endpoint(notices.createFollow, async (call) => {
    const data = await follow(getDb(), actingOf(call), call.body, call.edition === 0 ? null : await getSnapshot(call.edition))
    return { data, etag: data.etag, headers: { location: addressOf(`/follows/${data.id}`) } }
  }),
)
