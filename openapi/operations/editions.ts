import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { numberParameter } from '@/openapi/core/parameters'
import { Change, Edition } from '@/openapi/schemas/edition'
import { Level } from '@/openapi/schemas/level'

const onlyNumber = z.strictObject({ n: numberParameter('Number of the edition.', { min: 1, max: 999_999_999, integer: true, example: 1 }) })

export const listEditions = defineOperation({
  id: 'listEditions',
  method: 'get',
  path: '/editions',
  summary: 'All editions, the newest first',
  tag: 'Editions',
  role: 'reader',
  answer: Edition,
  list: true,
  edition: 'none',
})

export const getEdition = defineOperation({
  id: 'getEdition',
  method: 'get',
  path: '/editions/{n}',
  summary: 'One edition: label, notes, counts, checksum',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  answer: Edition,
  edition: 'stored',
  editionIn: 'path',
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})

export const listEditionChanges = defineOperation({
  id: 'listEditionChanges',
  method: 'get',
  path: '/editions/{n}/changes',
  summary: 'What changed since another edition, level by level, field by field',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({
    since: numberParameter('Earlier edition to compare with; 0 is the empty table. Default: the edition before.', { min: 0, max: 999_999_999, integer: true }).optional(),
  }),
  answer: Change,
  list: true,
  edition: 'stored',
  editionIn: 'path',
  problems: ['edition_unknown'],
  example: { params: { n: '1' }, query: { since: '0' } },
})

export const downloadEditionLevels = defineOperation({
  id: 'downloadEditionLevels',
  method: 'get',
  path: '/editions/{n}/levels',
  summary: 'The whole table of an edition as a file',
  description: 'Not paged. Choose the form with format= or Accept: json, csv, ndjson, ecsv or arrow.',
  tag: 'Editions',
  role: 'reader',
  params: onlyNumber,
  query: z.strictObject({}),
  answer: z.array(Level),
  edition: 'stored',
  editionIn: 'path',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: ['edition_unknown'],
  example: { params: { n: '1' } },
})
