import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { stopImport } from '@/lib/curation/import'
import * as operations from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.stopImport, async (call) => ({ data: await stopImport(getDb(), actingOf(call), call.params.id, call.params.import) })),
)
