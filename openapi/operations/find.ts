import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { numberParameter, textParameter } from '@/openapi/core/parameters'
import { Find } from '@/openapi/schemas/find'

export const find = defineOperation({
  id: 'find',
  method: 'get',
  path: '/find',
  summary: 'The one search box: levels and lines from words, with how each word was understood',
  tag: 'Find',
  role: 'reader',
  query: z.strictObject({
    q: textParameter('What to find: an ion, a configuration, a term, a wavelength with its unit, a line name.', { example: 'sodium D1' }),
    levels_limit: numberParameter('Levels to list.', { min: 0, max: 200, integer: true }).prefault('50'),
    lines_limit: numberParameter('Lines to list.', { min: 0, max: 200, integer: true }).prefault('50'),
  }),
  answer: Find,
  edition: 'computed',
  example: { query: { q: 'sodium D1' } },
})
