import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { importReport } from '@/lib/curation/import'
import * as operations from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.listImportRows, ({ params, query, after, format }) =>
    importReport(getDb(), { amendment: params.id, id: params.import, verdict: query.verdict, after, limit: query.limit, whole: format !== 'json' })),
)
