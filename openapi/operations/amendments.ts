import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, textParameter } from '@/openapi/core/parameters'
import { Amendment, AmendmentChanges, AmendmentDetail, AmendmentState, Comment, CommentChange, NewAmendment, NewComment, Statement, Tasks } from '@/openapi/schemas/amendment'
import { AmendmentChange, AmendmentChangeDetail, ChangeBatch, ChangeKind, ChangeRequest, CheckedChange, Consequences, LevelValues } from '@/openapi/schemas/change'
import { LevelId } from '@/openapi/schemas/common'
import { levelPath } from './parameters'

const UUID = '00000000-0000-4000-8000-000000000000'
const id = z.uuid().meta({ description: 'Identifier of the amendment.', example: UUID })
const byId = z.strictObject({ id })
const byChange = z.strictObject({ id, change: z.uuid().meta({ description: 'Identifier of the change.', example: UUID }) })
const byComment = z.strictObject({ id, comment: z.uuid().meta({ description: 'Identifier of the comment.', example: UUID }) })

const tag = 'Amendments'
const role = 'curator'
const edition = 'none'
const common = { tag, role, edition } as const
const at = { params: { id: UUID } }
const atChange = { params: { id: UUID, change: UUID } }
const CHANGE = { action: 'replace', level: 'Na-I.3', values: { configuration: '3p', coupling: 'LS', term: '2P*3/2', energy_literal: '16973.36619', energy_source: 'sansonetti-2008-na', energy_evidence: 'quoted' }, comment: 'Digits checked against the printed table.' }
const editing = ['amendment_unknown', 'state_conflict'] as const
const values = ['base_stale', 'value_not_listed', 'length_out_of_range', 'format_mismatch', 'number_out_of_range', 'subject_malformed', 'field_not_applicable', 'action_impossible'] as const

export const listAmendments = defineOperation({
  ...common, id: 'listAmendments', method: 'get', path: '/amendments',
  summary: 'Amendments, the newest first',
  query: z.strictObject({ state: choiceParameter(AmendmentState.options as unknown as [Amendment['state'], ...Amendment['state'][]], 'Only those in this state.').optional() }),
  answer: Amendment, list: true,
})

export const createAmendment = defineOperation({
  ...common, id: 'createAmendment', method: 'post', path: '/amendments',
  summary: 'Begin an amendment, as a draft',
  body: NewAmendment, answer: AmendmentDetail, status: 201, idempotent: true,
  example: { body: { title: 'Energies of Zn I from the 2019 comb work', note: '' } },
})

export const getAmendment = defineOperation({
  ...common, id: 'getAmendment', method: 'get', path: '/amendments/{id}',
  summary: 'One amendment with its reviews, and what you may do with it',
  params: byId, answer: AmendmentDetail, problems: ['amendment_unknown'], example: at,
})

export const changeAmendment = defineOperation({
  ...common, id: 'changeAmendment', method: 'patch', path: '/amendments/{id}',
  summary: 'Change title or note; any curator may',
  description: 'An amendment that is in review or accepted is a draft again afterwards.',
  params: byId, body: AmendmentChanges, answer: AmendmentDetail, ifMatch: true,
  problems: [...editing, 'etag_stale', 'length_out_of_range'],
  example: { ...at, body: { note: 'Checked against the printed table.' } },
})

export const listChanges = defineOperation({
  ...common, id: 'listAmendmentChanges', method: 'get', path: '/amendments/{id}/changes',
  summary: 'Changes of an amendment, in the order they came',
  params: byId,
  query: z.strictObject({
    kind: choiceParameter(ChangeKind.options as unknown as [ChangeKind, ...ChangeKind[]], 'Only changes of this kind of thing.').optional(),
    severity: choiceParameter(['error', 'warning'], 'Only changes with findings of this severity.').optional(),
    q: textParameter('Words that the subject, the values or the comment hold.', { example: 'Na-I' }).optional(),
  }),
  answer: AmendmentChange, list: true, problems: ['amendment_unknown'], example: at,
})

export const createChange = defineOperation({
  ...common, id: 'createAmendmentChange', method: 'post', path: '/amendments/{id}/changes',
  summary: 'Add a change: make, replace or retire something',
  description: 'It is checked at once. A change with errors is kept, so that it can be mended, and blocks submission. A new level gets its ordinal here.',
  params: byId, body: ChangeRequest, answer: AmendmentChangeDetail, status: 201, idempotent: true,
  problems: [...editing, 'change_exists', ...values], example: { ...at, body: CHANGE },
})

export const getChange = defineOperation({
  ...common, id: 'getAmendmentChange', method: 'get', path: '/amendments/{id}/changes/{change}',
  summary: 'One change with before, after, findings, and the lines it moves',
  params: byChange, answer: AmendmentChangeDetail, problems: ['amendment_unknown', 'change_unknown'], example: atChange,
})

export const replaceChange = defineOperation({
  ...common, id: 'replaceAmendmentChange', method: 'put', path: '/amendments/{id}/changes/{change}',
  summary: 'Edit a change; its subject stays',
  description: 'The revision that it was made from stays too, unless base_revision states the one in force.',
  params: byChange, body: ChangeRequest, answer: AmendmentChangeDetail, ifMatch: true,
  problems: [...editing, 'change_unknown', 'etag_stale', 'subject_mismatch', ...values], example: { ...atChange, body: CHANGE },
})

export const deleteChange = defineOperation({
  ...common, id: 'deleteAmendmentChange', method: 'delete', path: '/amendments/{id}/changes/{change}',
  summary: 'Take a change out',
  description: 'Only of an amendment that is not published yet. The ordinal of a new level is not given again.',
  params: byChange, answer: z.null(), status: 204, ifMatch: true,
  problems: [...editing, 'change_unknown', 'etag_stale'], example: atChange,
})

export const checkBatch = defineOperation({
  ...common, id: 'checkAmendmentChanges', method: 'post', path: '/amendments/{id}/changes/check',
  summary: 'Check changes without writing anything',
  description: 'Findings are those that the changes would have beside the ones that the amendment has already.',
  params: byId, body: ChangeBatch, answer: z.strictObject({ changes: z.array(CheckedChange) }).meta({ id: 'CheckedBatch' }),
  problems: ['amendment_unknown', 'change_unknown', 'change_exists', 'subject_mismatch', 'etag_stale', ...values], example: { ...at, body: { changes: [CHANGE] } },
})

export const writeBatch = defineOperation({
  ...common, id: 'writeAmendmentChanges', method: 'post', path: '/amendments/{id}/changes/batch',
  summary: 'Add, edit and take out several changes, together or not at all',
  params: byId, body: ChangeBatch,
  answer: z.strictObject({ changes: z.array(AmendmentChange).meta({ description: 'Those written, in the order given.' }), removed: z.array(z.uuid()) }).meta({ id: 'WrittenBatch' }),
  idempotent: true,
  problems: [...editing, 'change_unknown', 'change_exists', 'subject_mismatch', 'etag_stale', ...values], example: { ...at, body: { changes: [CHANGE] } },
})

export const getConsequences = defineOperation({
  ...common, id: 'getAmendmentConsequences', method: 'get', path: '/amendments/{id}/consequences',
  summary: 'Which lines the amendment moves, makes or takes away, and which effective Landé factors it changes',
  params: byId, answer: Consequences, problems: ['amendment_unknown'], example: at,
})

const step = (name: 'submit' | 'return' | 'accept' | 'withdraw', summary: string, description: string, problems: readonly string[]) =>
  defineOperation({
    ...common, id: `${name}Amendment`, method: 'post', path: `/amendments/{id}/${name}`, summary, description,
    params: byId, body: Statement, answer: AmendmentDetail, ifMatch: true, idempotent: true,
    problems: ['amendment_unknown', 'state_conflict', 'etag_stale', 'length_out_of_range', ...problems], example: { ...at, body: { comment: 'See the note.' } },
  })

export const submitAmendment = step('submit', 'Ask for a review', 'Errors block it; warnings need a comment, their own or this one. Every check is made again against the newest edition.', ['nothing_to_review', 'changes_have_errors', 'warnings_uncommented', 'base_stale'])
export const returnAmendment = step('return', 'Give an amendment back to its authors as a draft, saying why', 'A comment is needed.', ['comment_missing'])
export const acceptAmendment = step('accept', 'Accept the version reviewed', 'Nobody who began the amendment, or wrote or edited a change of it, may. Binds to this version: a later edit makes it a draft again.', ['own_amendment'])
export const withdrawAmendment = step('withdraw', 'End an amendment without publishing it', 'Its author or an admin may.', ['not_the_author'])

export const listComments = defineOperation({
  ...common, id: 'listAmendmentComments', method: 'get', path: '/amendments/{id}/comments',
  summary: 'What was said about an amendment, the oldest first',
  params: byId, answer: Comment, list: true, problems: ['amendment_unknown'], example: at,
})

export const createComment = defineOperation({
  ...common, id: 'createAmendmentComment', method: 'post', path: '/amendments/{id}/comments',
  summary: 'Say something about an amendment or one of its changes, or answer in a thread',
  params: byId, body: NewComment, answer: Comment, status: 201, idempotent: true,
  problems: ['amendment_unknown', 'change_unknown', 'thread_malformed', 'length_out_of_range', 'format_mismatch'], example: { ...at, body: { text: 'Where does the last digit come from?' } },
})

export const changeComment = defineOperation({
  ...common, id: 'changeAmendmentComment', method: 'patch', path: '/amendments/{id}/comments/{comment}',
  summary: 'Resolve a thread, or open it again',
  params: byComment, body: CommentChange, answer: Comment, ifMatch: true, problems: ['amendment_unknown', 'comment_unknown', 'thread_malformed', 'etag_stale'],
  example: { params: { id: UUID, comment: UUID }, body: { resolved: true } },
})

export const getTasks = defineOperation({ ...common, id: 'getTasks', method: 'get', path: '/me/tasks', summary: 'What waits for you', answer: Tasks })

export const getLevelValues = defineOperation({
  id: 'getLevelValues', method: 'get', path: '/levels/{level}/values', tag, role: 'reader', edition: 'stored',
  summary: 'The values of a level as a curator writes them: what to send back, changed, in a replace',
  params: z.strictObject({ level: levelPath }),
  answer: z.strictObject({ level: LevelId, revision: z.int(), edition: z.int(), values: LevelValues }).meta({ id: 'LevelValuesOf' }),
  problems: ['level_unknown', 'level_retired'], example: { params: { level: 'Na-I.3' } },
})

/** Everything about amendments but imports. */
export const AMENDMENT_OPERATIONS = [
  listAmendments, createAmendment, getAmendment, changeAmendment, listChanges, createChange, checkBatch, writeBatch, getChange, replaceChange, deleteChange,
  getConsequences, submitAmendment, returnAmendment, acceptAmendment, withdrawAmendment, listComments, createComment, changeComment, getTasks, getLevelValues,
]
