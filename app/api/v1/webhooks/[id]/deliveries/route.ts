import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { pageOf } from '@/lib/http/pages'
import { listDeliveries } from '@/lib/notices/deliveries'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.listDeliveries, async ({ params, query, after }) =>
    pageOf(await listDeliveries(getDb(), params.id, after, query.limit), query.limit, (delivery) => [delivery.created_at, delivery.id])),
)
