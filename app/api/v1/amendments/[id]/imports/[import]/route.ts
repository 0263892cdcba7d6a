import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { readImport } from '@/lib/curation/import'
import * as operations from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.getImport, async ({ params }) => ({ data: await readImport(getDb(), params.id, params.import) })),
)
