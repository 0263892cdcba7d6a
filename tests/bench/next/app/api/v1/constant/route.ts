import { z } from 'zod'
import { endpoint, resource } from '@/app/api/endpoint'
import { defineOperation } from '@/openapi/core/define'

/** An operation with a constant answer through the product's wrapper: key, limit, parsing, edition, envelope, validators. */
const constant = defineOperation({
  id: 'constant',
  method: 'get',
  path: '/constant',
  summary: 'A constant',
  tag: 'Bench',
  role: 'reader',
  answer: z.strictObject({ answer: z.int() }),
  edition: 'stored',
})

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(constant, () => ({ data: { answer: 42 } })))
