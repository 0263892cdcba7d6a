import { endpoint, resource } from '@/app/api/endpoint'
import { importColumnList } from '@/lib/curation/import'
import { listImportColumns } from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(listImportColumns, ({ after, query }) => importColumnList(after, query.limit)),
)
