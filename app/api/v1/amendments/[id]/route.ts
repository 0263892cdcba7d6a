import { actingOf } from '@/app/api/acting'
import { amendmentAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { changeAmendment, readAmendment } from '@/lib/curation/amendments'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.getAmendment, async ({ params, caller }) => amendmentAnswer(await readAmendment(getDb(), params.id, caller))),
  endpoint(operations.changeAmendment, async (call) => amendmentAnswer(await changeAmendment(getDb(), actingOf(call), call.params.id, call.body, call.ifMatch))),
)
