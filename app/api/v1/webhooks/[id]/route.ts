import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { requireVersion } from '@/lib/entity-tag'
import { changeWebhook, readWebhook, removeWebhook } from '@/lib/notices/webhooks'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.getWebhook, async ({ params }) => {
    const data = await readWebhook(getDb(), params.id)
    return { data, etag: data.etag }
  }),
  endpoint(notices.changeWebhook, async (call) => {
    const data = await changeWebhook(getDb(), actingOf(call), call.params.id, call.body, (hook) => requireVersion(call.ifMatch, hook.etag))
    return { data, etag: data.etag }
  }),
  endpoint(notices.deleteWebhook, async (call) => {
    await removeWebhook(getDb(), actingOf(call), call.params.id, (hook) => requireVersion(call.ifMatch, hook.etag))
    return { data: null }
  }),
)
