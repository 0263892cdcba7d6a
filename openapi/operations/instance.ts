import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { instantParameter, textParameter } from '@/openapi/core/parameters'
import { AuditEvent } from '@/openapi/schemas/audit'
import { Live, OpenApiDocument, Ready } from '@/openapi/schemas/health'

export const listAudit = defineOperation({
  id: 'listAudit',
  method: 'get',
  path: '/audit',
  summary: 'Who did what, when, from where; the newest first',
  tag: 'Instance',
  role: 'admin',
  query: z.strictObject({
    action: textParameter('Only this action.', { example: 'key.create' }).optional(),
    subject_kind: textParameter('Only about things of this kind.', { example: 'key' }).optional(),
    subject_id: textParameter('Only about this thing, by its identifier; changes are also found by the level or source that they are about, and batches of changes by each that they name.').optional(),
    actor: z.uuid().optional().meta({ description: 'Only what this person did.' }),
    key: z.uuid().optional().meta({ description: 'Only what was done with this key.' }),
    session: z.uuid().optional().meta({ description: 'Only what was done in this browser session.' }),
    from: instantParameter('Only what was done at this time or later.').optional(),
    until: instantParameter('Only what was done before this time.').optional(),
  }),
  answer: AuditEvent,
  list: true,
  edition: 'none',
})

export const getLive = defineOperation({
  id: 'getLive',
  method: 'get',
  path: '/health/live',
  summary: 'The process answers',
  tag: 'Instance',
  role: 'public',
  answer: Live,
  edition: 'none',
  bare: true,
})

export const getReady = defineOperation({
  id: 'getReady',
  method: 'get',
  path: '/health/ready',
  summary: 'The database answers and an edition is published',
  tag: 'Instance',
  role: 'public',
  answer: Ready,
  edition: 'none',
  bare: true,
  problems: ['not_ready'],
})

export const getOpenApi = defineOperation({
  id: 'getOpenApi',
  method: 'get',
  path: '/openapi.json',
  summary: 'This description of the API, as OpenAPI 3.1',
  tag: 'Instance',
  role: 'public',
  answer: OpenApiDocument,
  edition: 'none',
  bare: true,
})
