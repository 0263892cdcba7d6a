import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { pageOf } from '@/lib/http/pages'
import { listOutbox } from '@/lib/notices/outbox'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.listOutbox, async ({ caller, query, after }) => pageOf(await listOutbox(getDb(), caller, after, query.limit), query.limit, (mail) => [mail.id])),
)
