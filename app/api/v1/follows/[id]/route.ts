import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { requireVersion } from '@/lib/entity-tag'
import { unfollow } from '@/lib/notices/follows'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.deleteFollow, async (call) => {
    await unfollow(getDb(), actingOf(call), call.params.id, (etag) => requireVersion(call.ifMatch, etag))
    return { data: null }
  }),
)
