import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { listAudit } from '@/lib/access/audit'
import { pageOf } from '@/lib/http/pages'
import * as instance from '@/openapi/operations/instance'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(instance.listAudit, async ({ query, after }) =>
    pageOf(await listAudit(getDb(), query, after === null ? null : Number(after[0]), query.limit), query.limit, (event) => [event.id])),
)
