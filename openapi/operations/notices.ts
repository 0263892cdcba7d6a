import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { Follow, NewFollow, NewWebhook, NewWebhookAnswer, OutboxMail, Webhook, WebhookChanges, WebhookDelivery } from '@/openapi/schemas/notices'

const UUID = '00000000-0000-4000-8000-000000000000'
const TAG = 'Notices'
const byId = (what: string) => z.strictObject({ id: z.uuid().meta({ description: `Identifier of the ${what}.`, example: UUID }) })
const TARGET = ['webhook_url_malformed', 'webhook_target_unresolved', 'webhook_target_private'] as const

export const listFollows = defineOperation({
  id: 'listFollows', method: 'get', path: '/follows', tag: TAG, role: 'account',
  summary: 'Species, levels and lines that you follow, the newest first',
  query: z.strictObject({ subject: z.string().trim().min(1).max(60).optional().meta({ description: 'Only this species, level or line.', example: 'Na-I.3' }) }),
  answer: Follow, list: true, edition: 'none',
})

export const createFollow = defineOperation({
  id: 'createFollow', method: 'post', path: '/follows', tag: TAG, role: 'account',
  summary: 'Follow a species, level or line: a mail tells you when an edition changes a value of it',
  description: 'A line is told of where either of its levels changes. Following twice is following once.',
  body: NewFollow, answer: Follow, edition: 'none', status: 201, idempotent: true,
  problems: ['species_unknown', 'level_unknown', 'level_retired', 'species_differ', 'zero_interval', 'follow_kind_differs', 'too_many_follows', 'not_ready'], example: { body: { subject: 'Na-I.3' } },
})

export const deleteFollow = defineOperation({
  id: 'deleteFollow', method: 'delete', path: '/follows/{id}', tag: TAG, role: 'account',
  summary: 'Follow no longer', params: byId('follow'), answer: z.null(), edition: 'none', status: 204, ifMatch: true,
  problems: ['follow_unknown', 'etag_stale'], example: { params: { id: UUID } },
})

export const listWebhooks = defineOperation({
  id: 'listWebhooks', method: 'get', path: '/webhooks', tag: TAG, role: 'admin',
  summary: 'Addresses that are told of events, the newest first', answer: Webhook, list: true, edition: 'none',
})

export const createWebhook = defineOperation({
  id: 'createWebhook', method: 'post', path: '/webhooks', tag: TAG, role: 'admin',
  summary: 'Have an address told of events; the signing secret is shown once',
  description: 'Each event is a POST of JSON `{id, event, at, data}` with Lodeterm-Delivery (its id), Lodeterm-Event, Lodeterm-Timestamp (seconds) and Lodeterm-Signature: `v1=` and the hexadecimal HMAC-SHA256 of `timestamp.body` under the secret. Any 2xx is taken for received; redirects are not followed; other answers are tried again with growing pauses, eight times in all.',
  body: NewWebhook, answer: NewWebhookAnswer, edition: 'none', status: 201, idempotent: true,
  problems: [...TARGET, 'too_many_webhooks'], example: { body: { name: 'refit on publication', url: 'https://hooks.bench.example/lodeterm', events: ['edition.published'] } },
})

export const getWebhook = defineOperation({
  id: 'getWebhook', method: 'get', path: '/webhooks/{id}', tag: TAG, role: 'admin',
  summary: 'One webhook, without its secret', params: byId('webhook'), answer: Webhook, edition: 'none',
  problems: ['webhook_unknown'], example: { params: { id: UUID } },
})

export const changeWebhook = defineOperation({
  id: 'changeWebhook', method: 'patch', path: '/webhooks/{id}', tag: TAG, role: 'admin',
  summary: 'Change a webhook, or switch it off and on', params: byId('webhook'), body: WebhookChanges, answer: Webhook, edition: 'none', ifMatch: true,
  problems: ['webhook_unknown', 'etag_stale', ...TARGET], example: { params: { id: UUID }, body: { active: false } },
})

export const deleteWebhook = defineOperation({
  id: 'deleteWebhook', method: 'delete', path: '/webhooks/{id}', tag: TAG, role: 'admin',
  summary: 'Remove a webhook; nothing more is sent to it', params: byId('webhook'), answer: z.null(), edition: 'none', status: 204, ifMatch: true,
  problems: ['webhook_unknown', 'etag_stale'], example: { params: { id: UUID } },
})

export const testWebhook = defineOperation({
  id: 'testWebhook', method: 'post', path: '/webhooks/{id}/test', tag: TAG, role: 'admin',
  summary: 'Send the event ping at once, and say what came of it', params: byId('webhook'), answer: WebhookDelivery, edition: 'none', idempotent: true,
  problems: ['webhook_unknown'], example: { params: { id: UUID } },
})

export const listDeliveries = defineOperation({
  id: 'listDeliveries', method: 'get', path: '/webhooks/{id}/deliveries', tag: TAG, role: 'admin',
  summary: 'What was sent to a webhook and what came of it, the newest first', params: byId('webhook'), answer: WebhookDelivery, list: true, edition: 'none',
  problems: ['webhook_unknown'], example: { params: { id: UUID } },
})

export const listOutbox = defineOperation({
  id: 'listOutbox', method: 'get', path: '/outbox', tag: TAG, role: 'account',
  summary: 'Mail that would have been sent, the newest first, where a local stand-in takes it',
  description: 'Your own mail; an admin at a browser sees all. 404 where mail goes to a real server.',
  answer: OutboxMail, list: true, edition: 'none', problems: ['no_outbox'],
})

export const NOTICE_OPERATIONS = [
  listFollows, createFollow, deleteFollow, listWebhooks, createWebhook, getWebhook, changeWebhook, deleteWebhook, testWebhook, listDeliveries, listOutbox,
]
