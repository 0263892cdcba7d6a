import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { pageOf } from '@/lib/http/pages'
import { createWebhook, listWebhooks } from '@/lib/notices/webhooks'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.listWebhooks, async ({ query, after }) => pageOf(await listWebhooks(getDb(), after, query.limit), query.limit, (hook) => [hook.created_at, hook.id])),
  endpoint(notices.createWebhook, async (call) => {
    const data = await createWebhook(getDb(), actingOf(call), call.body)
    return { data, repeatData: { ...data, secret: null }, etag: data.etag, headers: { location: addressOf(`/webhooks/${data.id}`) } }
  }),
)
