import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { writeBatch } from '@/lib/curation/changes'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.writeBatch, async (call) => ({ data: await writeBatch(getDb(), actingOf(call), call.params.id, call.body) })),
)
