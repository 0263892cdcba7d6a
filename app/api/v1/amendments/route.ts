import { actingOf, addressOf } from '@/app/api/acting'
import { amendmentAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { createAmendment, listAmendments } from '@/lib/curation/amendments'
import { pageOf } from '@/lib/http/pages'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listAmendments, async ({ after, query }) =>
    pageOf(await listAmendments(getDb(), query, after, query.limit), query.limit, (amendment) => [amendment.created_at, amendment.id])),
  endpoint(operations.createAmendment, async (call) => {
    const data = await createAmendment(getDb(), actingOf(call), call.body)
    return amendmentAnswer(data, { location: addressOf(`/amendments/${data.id}`) })
  }),
)
