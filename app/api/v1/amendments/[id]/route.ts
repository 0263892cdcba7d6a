import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { amendmentVersion, changeAmendment, readAmendment } from '@/lib/curation/drafts'
import { entityTag, requireVersion } from '@/lib/entity-tag'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.getAmendment, async ({ params }) => {
    const data = await readAmendment(getDb(), params.id)
    return { data, etag: entityTag(...amendmentVersion(data)) }
  }),
  endpoint(operations.changeAmendment, async (call) => {
    const current = (amendment: Parameters<typeof amendmentVersion>[0]) => requireVersion(call.ifMatch, entityTag(...amendmentVersion(amendment)))
    const data = await changeAmendment(getDb(), actingOf(call), call.params.id, call.body, current)
    return { data, etag: entityTag(...amendmentVersion(data)) }
  }),
)
