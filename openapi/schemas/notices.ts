import { z } from 'zod'
import { oneLine } from '@/openapi/core/one-line'
import { Person } from './change'
import { LEVEL_ID, SPECIES_ID, TRANSITION_ID } from './common'
import { Instant } from './session'

const etag = z.string().meta({ description: 'For If-Match.' })
const FOLLOWED = `${SPECIES_ID.source}|${LEVEL_ID.source}|${TRANSITION_ID.source}`

export const FollowKind = z.enum(['species', 'level', 'line'])

export const Follow = z
  .strictObject({
    id: z.uuid(), kind: FollowKind, subject: z.string().meta({ example: 'Na-I.1~Na-I.3' }),
    retired: z.boolean().meta({ description: 'Whether the latest edition holds it, or one of its levels, as retired.' }),
    created_at: Instant, etag,
  })
  .meta({ id: 'Follow' })
export type Follow = z.infer<typeof Follow>

export const NewFollow = z
  .strictObject({ kind: FollowKind.optional().meta({ description: 'May be left out: the form of the subject tells it.' }), subject: z.string().max(60).regex(new RegExp(FOLLOWED), 'the name of a species, a level or a line, such as Na-I, Na-I.3 or Na-I.1~Na-I.3').meta({ description: 'A species, level or line: Na-I, Na-I.3, Na-I.1~Na-I.3.' }) })
  .meta({ id: 'NewFollow', example: { subject: 'Na-I.3' } })
export type NewFollow = z.infer<typeof NewFollow>

export const WebhookEvent = z.enum(['review.asked', 'review.returned', 'review.accepted', 'edition.published']).meta({ id: 'WebhookEvent' })
export type WebhookEvent = z.infer<typeof WebhookEvent>

const WEBHOOK = {
  id: z.uuid(), name: z.string(), url: z.string(), events: z.array(WebhookEvent),
  active: z.boolean().meta({ description: 'Nothing is sent while it is off, and what happens meanwhile is not sent later.' }),
  owner: Person, created_at: Instant, etag,
  waiting: z.int().meta({ description: 'Deliveries still to be made.' }),
  last_delivered_at: Instant.nullable(),
}
export const Webhook = z.strictObject(WEBHOOK).meta({ id: 'Webhook' })
export type Webhook = z.infer<typeof Webhook>

export const NewWebhookAnswer = z
  .strictObject({ ...WEBHOOK, secret: z.string().nullable().meta({ description: 'Key of the HMAC-SHA256 in Lodeterm-Signature, shown this once; null where an Idempotency-Key repeats an earlier request.' }) })
  .meta({ id: 'NewWebhookAnswer' })
export type NewWebhookAnswer = z.infer<typeof NewWebhookAnswer>

const name = oneLine()
const url = z.string().trim().min(1).max(2000).meta({ description: 'http or https, without name and password; it must resolve to public addresses only, unless the server is set to allow others.' })
const events = z.array(WebhookEvent).min(1).max(WebhookEvent.options.length)

export const NewWebhook = z
  .strictObject({ name, url, events })
  .meta({ id: 'NewWebhook', example: { name: 'refit on publication', url: 'https://hooks.bench.example/lodeterm', events: ['edition.published'] } })
export type NewWebhook = z.infer<typeof NewWebhook>

export const WebhookChanges = z
  .strictObject({ name: name.optional(), url: url.optional(), events: events.optional(), active: z.boolean().optional() })
  .meta({ id: 'WebhookChanges', example: { active: false } })
export type WebhookChanges = z.infer<typeof WebhookChanges>

export const WebhookDelivery = z
  .strictObject({
    id: z.uuid().meta({ description: 'Sent as Lodeterm-Delivery; the same in every attempt.' }),
    event: z.string().meta({ description: 'A webhook event, or ping.' }),
    state: z.enum(['waiting', 'delivered', 'failed']),
    attempts: z.int(), created_at: Instant,
    next_attempt_at: Instant.nullable(), delivered_at: Instant.nullable(), failed_at: Instant.nullable(),
    response_status: z.int().nullable(),
    last_error: z.string().nullable().meta({ description: 'What went wrong at the last attempt; never anything that the other side sent.' }),
  })
  .meta({ id: 'WebhookDelivery' })
export type WebhookDelivery = z.infer<typeof WebhookDelivery>

export const OutboxMail = z
  .strictObject({ id: z.string(), at: Instant, from: z.string(), to: z.array(z.string()), subject: z.string(), text: z.string() })
  .meta({ id: 'OutboxMail' })
export type OutboxMail = z.infer<typeof OutboxMail>
