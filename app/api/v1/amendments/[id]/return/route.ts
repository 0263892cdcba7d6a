import { actingOf } from '@/app/api/acting'
import { amendmentAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { returnAmendment } from '@/lib/curation/reviews'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.returnAmendment, async (call) =>
    amendmentAnswer(await returnAmendment(getDb(), { acting: actingOf(call), id: call.params.id, comment: call.body.comment ?? '', ifMatch: call.ifMatch }))),
)
