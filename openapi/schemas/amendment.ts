import { z } from 'zod'
import { oneLine } from '@/openapi/core/one-line'
import { Person } from './change'
import { Instant } from './session'

export const AmendmentState = z.enum(['draft', 'in_review', 'accepted', 'published', 'withdrawn']).meta({ id: 'AmendmentState', description: 'A returned amendment is a draft again; reviews tell of the return.' })
export type AmendmentState = z.infer<typeof AmendmentState>

export const Review = z
  .strictObject({
    id: z.uuid(),
    version: z.int().meta({ description: 'Version of the amendment that it speaks for.' }),
    asked_by: Person, asked_at: Instant, comment: z.string(),
    outcome: z.enum(['accepted', 'returned', 'withdrawn', 'edited']).nullable().meta({ description: 'Null while it is open. edited: the amendment was edited before it was given.' }),
    closed_by: Person.nullable(), closed_at: Instant.nullable(), closing_comment: z.string().nullable(),
    voided: z.strictObject({ by: Person, at: Instant }).nullable().meta({ description: 'Who edited the amendment after it was accepted: the acceptance no longer holds, and stays on record.' }),
  })
  .meta({ id: 'Review' })
export type Review = z.infer<typeof Review>

/** What the one who asks may do with an amendment now; where not, why. */
const Possible = z.strictObject({ allowed: z.boolean(), reason: z.string().nullable() })

export const Amendment = z
  .strictObject({
    id: z.uuid(), title: z.string(), note: z.string(), state: AmendmentState,
    author: Person,
    authors: z.array(Person).meta({ description: 'Everyone who wrote or edited a change of it: none of them may accept it.' }),
    counts: z.strictObject({ changes: z.int(), errors: z.int().meta({ description: 'Changes with errors.' }), warnings: z.int().meta({ description: 'Changes with warnings.' }), uncommented: z.int().meta({ description: 'Changes with warnings and no comment of their own.' }), open_comments: z.int() }),
    review: Review.nullable().meta({ description: 'The last one.' }),
    published_in: z.int().nullable(),
    version: z.int(), etag: z.string().meta({ description: 'For If-Match.' }), created_at: Instant, updated_at: Instant,
  })
  .meta({ id: 'Amendment' })
export type Amendment = z.infer<typeof Amendment>

export const AmendmentDetail = Amendment.extend({
  reviews: z.array(Review).meta({ description: 'All of them, the oldest first.' }),
  possible: z.strictObject({ edit: Possible, submit: Possible, accept: Possible, return: Possible, withdraw: Possible }),
}).meta({ id: 'AmendmentDetail' })
export type AmendmentDetail = z.infer<typeof AmendmentDetail>

const title = oneLine()
const note = z.string().max(10_000)

export const NewAmendment = z.strictObject({ title, note: note.optional() }).meta({ id: 'NewAmendment', example: { title: 'Energies of Zn I from the 2019 comb work', note: '' } })
export type NewAmendment = z.infer<typeof NewAmendment>

export const AmendmentChanges = z.strictObject({ title: title.optional(), note: note.optional() }).meta({ id: 'AmendmentChanges', example: { note: 'Checked against the printed table.' } })
export type AmendmentChanges = z.infer<typeof AmendmentChanges>

/** What is said on submitting, returning, accepting or withdrawing. A return wants it; a submission with warnings that have no comment of their own wants it too. */
export const Statement = z.strictObject({ comment: z.string().trim().max(10_000).optional() }).meta({ id: 'Statement', example: { comment: 'The shift is real: see the note.' } })
export type Statement = z.infer<typeof Statement>

export const Comment = z
  .strictObject({
    id: z.uuid(), amendment: z.uuid(), change: z.uuid().nullable(),
    thread: z.uuid().nullable().meta({ description: 'First comment of the thread; null for the first itself.' }),
    author: Person, text: z.string(), created_at: Instant,
    resolved_at: Instant.nullable(), resolved_by: Person.nullable(),
    version: z.int(), etag: z.string().meta({ description: 'For If-Match.' }),
  })
  .meta({ id: 'Comment' })
export type Comment = z.infer<typeof Comment>

export const NewComment = z
  .strictObject({ text: z.string().trim().min(1).max(10_000), change: z.uuid().optional(), thread: z.uuid().optional() })
  .meta({ id: 'NewComment', example: { text: 'Where does the last digit come from?' } })
export type NewComment = z.infer<typeof NewComment>

export const CommentChange = z.strictObject({ resolved: z.boolean() }).meta({ id: 'CommentChange', example: { resolved: true } })

/** What waits for the one who asks. */
export const Tasks = z
  .strictObject({
    drafts: z.array(Amendment).meta({ description: 'Drafts with changes of yours that were not returned.' }),
    returned: z.array(Amendment).meta({ description: 'Yours, returned by a reviewer.' }),
    in_review: z.array(Amendment).meta({ description: 'Yours, waiting for a colleague.' }),
    to_review: z.array(Amendment).meta({ description: 'Waiting for a review that you can give.' }),
    accepted: z.array(Amendment).meta({ description: 'Accepted and waiting for an edition.' }),
    complete: z.boolean().meta({ description: 'Whether all of it is here: of more than 500 open amendments only those touched last are looked at, and GET /amendments lists them all.' }),
    open_threads: z.int().meta({ description: 'Open comment threads on amendments of yours.' }),
  })
  .meta({ id: 'Tasks' })
export type Tasks = z.infer<typeof Tasks>
