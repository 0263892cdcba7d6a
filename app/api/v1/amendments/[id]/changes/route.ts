import { actingOf, addressOf } from '@/app/api/acting'
import { changeAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { listChanges } from '@/lib/curation/change-view'
import { addChange } from '@/lib/curation/changes'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listChanges, async ({ params, query, after }) => {
    const { rows, positions } = await listChanges(getDb(), params.id, query, after === null ? null : Number(after[0]), query.limit)
    const next = rows.length > query.limit ? (positions[query.limit - 1] ?? null) : null
    return { data: rows.slice(0, query.limit), page: { limit: query.limit, next: next === null ? null : [next] } }
  }),
  endpoint(operations.createChange, async (call) => {
    const id = await addChange(getDb(), actingOf(call), call.params.id, call.body)
    return changeAnswer(call.params.id, id, { location: addressOf(`/amendments/${call.params.id}/changes/${id}`) })
  }),
)
