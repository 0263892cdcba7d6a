import { actingOf } from '@/app/api/acting'
import { changeAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { editChange, removeChange } from '@/lib/curation/changes'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.getChange, ({ params }) => changeAnswer(params.id, params.change)),
  endpoint(operations.replaceChange, async (call) => {
    await editChange(getDb(), actingOf(call), call.params.id, call.params.change, call.body, call.ifMatch)
    return changeAnswer(call.params.id, call.params.change)
  }),
  endpoint(operations.deleteChange, async (call) => {
    await removeChange(getDb(), actingOf(call), call.params.id, call.params.change, call.ifMatch)
    return { data: null }
  }),
)
