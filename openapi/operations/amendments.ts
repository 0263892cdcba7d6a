import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter } from '@/openapi/core/parameters'
import { Amendment, AmendmentChanges, AmendmentState, NewAmendment } from '@/openapi/schemas/amendment'

const UUID = '00000000-0000-4000-8000-000000000000'
const byId = z.strictObject({ id: z.uuid().meta({ description: 'Identifier of the amendment.', example: UUID }) })

export const listAmendments = defineOperation({
  id: 'listAmendments',
  method: 'get',
  path: '/amendments',
  summary: 'Amendments, the newest first',
  tag: 'Amendments',
  role: 'curator',
  query: z.strictObject({ state: choiceParameter(AmendmentState.options as unknown as [Amendment['state'], ...Amendment['state'][]], 'Only those in this state.').optional() }),
  answer: Amendment,
  list: true,
  edition: 'none',
})

export const createAmendment = defineOperation({
  id: 'createAmendment',
  method: 'post',
  path: '/amendments',
  summary: 'Begin an amendment, as a draft',
  tag: 'Amendments',
  role: 'curator',
  body: NewAmendment,
  answer: Amendment,
  edition: 'none',
  status: 201,
  idempotent: true,
  example: { body: { title: 'Energies of Zn I from the 2019 comb work', note: '' } },
})

export const getAmendment = defineOperation({
  id: 'getAmendment',
  method: 'get',
  path: '/amendments/{id}',
  summary: 'One amendment',
  tag: 'Amendments',
  role: 'curator',
  params: byId,
  answer: Amendment,
  edition: 'none',
  problems: ['amendment_unknown'],
  example: { params: { id: UUID } },
})

export const changeAmendment = defineOperation({
  id: 'changeAmendment',
  method: 'patch',
  path: '/amendments/{id}',
  summary: 'Change title or note of a draft',
  tag: 'Amendments',
  role: 'curator',
  params: byId,
  body: AmendmentChanges,
  answer: Amendment,
  edition: 'none',
  ifMatch: true,
  problems: ['amendment_unknown', 'not_the_author', 'etag_stale', 'state_conflict'],
  example: { params: { id: UUID }, body: { note: 'Checked against the printed table.' } },
})
