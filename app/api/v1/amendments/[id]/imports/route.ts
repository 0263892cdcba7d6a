import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { listImports } from '@/lib/curation/import'
import { pageOf } from '@/lib/http/pages'
import * as operations from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listImports, async ({ params, after, query }) =>
    pageOf(await listImports(getDb(), params.id, after, query.limit), query.limit, (one) => [one.created_at, one.id])),
)
