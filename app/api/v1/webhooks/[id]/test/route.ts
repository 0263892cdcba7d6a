import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { testWebhook } from '@/lib/notices/deliveries'
import * as notices from '@/openapi/operations/notices'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(notices.testWebhook, async (call) => ({ data: await testWebhook(getDb(), actingOf(call), call.params.id) })),
)
