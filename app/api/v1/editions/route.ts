import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { publishEdition } from '@/lib/curation/publish'
import { editionList, oneEdition } from '@/lib/prediction/answers/editions'
import * as operations from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listEditions, ({ query, after }) => editionList(query, after)),
  endpoint(operations.publishEdition, async (call) => {
    const number = await publishEdition(getDb(), actingOf(call), call.body)
    // the answer is of the edition that it made, not of the one before
    return { ...(await oneEdition(number)), meta: { edition: number }, headers: { location: addressOf(`/editions/${number}`) } }
  }),
)
