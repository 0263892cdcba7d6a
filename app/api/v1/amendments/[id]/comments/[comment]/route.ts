import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { resolveComment } from '@/lib/curation/comments'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.changeComment, async (call) => {
    const data = await resolveComment(getDb(), actingOf(call), call.params.id, call.params.comment, call.body.resolved, call.ifMatch)
    return { data, etag: data.etag }
  }),
)
