import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { checkBatch } from '@/lib/curation/changes'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.checkBatch, async ({ params, body }) => ({ data: { changes: await checkBatch(getDb(), params.id, body) } })),
)
