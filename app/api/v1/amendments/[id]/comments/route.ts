import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { createComment, listComments } from '@/lib/curation/comments'
import { pageOf } from '@/lib/http/pages'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listComments, async ({ params, after, query }) =>
    pageOf(await listComments(getDb(), params.id, after, query.limit), query.limit, (comment) => [comment.created_at, comment.id])),
  endpoint(operations.createComment, async (call) => {
    const data = await createComment(getDb(), actingOf(call), call.params.id, call.body)
    return { data, etag: data.etag, headers: { location: addressOf(`/amendments/${call.params.id}/comments/${data.id}`) } }
  }),
)
