import { actingOf } from '@/app/api/acting'
import { amendmentAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { submitAmendment } from '@/lib/curation/reviews'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.submitAmendment, async (call) =>
    amendmentAnswer(await submitAmendment(getDb(), { acting: actingOf(call), id: call.params.id, comment: call.body.comment ?? '', ifMatch: call.ifMatch }))),
)
