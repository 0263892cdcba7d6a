import { and, asc, eq, isNull } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { recordEvent } from '@/db/events'
import { amendmentChanges, amendments, reviews, users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { atLeast } from '@/lib/access/caller'
import { bodyProblem, Problem } from '@/lib/problem'
import type { AmendmentDetail, AmendmentState } from '@/openapi/schemas/amendment'
import { describeAmendments, describeDetail, requireAmendment } from './amendments'
import { type ChangeRow, inputOf } from './change-view'
import { checkChangesInSteps } from './checks'
import { type AmendmentRow, amendmentMissing, EDITABLE, lockAmendment, stateConflict } from './editing'
import { readInForce, staleBase, staleDetail } from './in-force'
import { isAuthor } from './possible'
import type { Checked } from './rows'
import { storeFindings } from './stored-findings'
import { publishedIn } from './subjects'
import { loadPublishedTable, newestEdition } from './table'

/** Changes named one by one in a refusal; an imported table may have a hundred thousand. */
const MOST_NAMED = 100

interface Step { acting: Acting; id: string; comment: string; ifMatch: string | null }

/** Moves an amendment on: under lock, the version raised, with its audit row. `act` checks and does what else the step wants. */
async function move(db: Db, { acting, id, comment, ifMatch }: Step, to: AmendmentState, action: string, from: readonly AmendmentState[], act: (tx: Tx, row: AmendmentRow, next: number) => Promise<void>, may: (tx: Tx, row: AmendmentRow) => Promise<void> = async () => undefined): Promise<AmendmentDetail> {
  return db.transaction(async (tx) => {
    const row = await lockAmendment(tx, id)
    await may(tx, row)
    await requireAmendment(tx, row, ifMatch, acting.caller)
    if (!from.includes(row.state)) throw stateConflict(row.state, from, `to ${action.slice(action.indexOf('.') + 1)} it`)
    await act(tx, row, row.version + 1)
    const [changed] = await tx.update(amendments).set({ state: to, version: row.version + 1, updatedAt: new Date() }).where(eq(amendments.id, id)).returning()
    if (changed === undefined) throw amendmentMissing()
    await recordAudit(tx, acting, { action, subjectKind: 'amendment', subjectId: id, before: { state: row.state, version: row.version }, after: { state: to, version: changed.version, comment } })
    return describeDetail(tx, changed, acting.caller)
  })
}

/** What is told of a review to those who are to know. */
async function tell(tx: Tx, acting: Acting, row: AmendmentRow, kind: 'review.asked' | 'review.returned' | 'review.accepted', comment: string): Promise<void> {
  const { userId } = knownCaller(acting.caller)
  const [person] = await tx.select({ name: users.name }).from(users).where(eq(users.id, userId))
  await recordEvent(tx, kind, { amendment: row.id, title: row.title, by: { id: userId, name: person?.name ?? '' }, comment: comment === '' ? null : comment })
}

async function closeReview(tx: Tx, row: AmendmentRow, userId: string, outcome: 'accepted' | 'returned' | 'withdrawn', comment: string): Promise<void> {
  await tx.update(reviews).set({ outcome, closedBy: userId, closedAt: new Date(), closingComment: comment === '' ? null : comment }).where(and(eq(reviews.amendmentId, row.id), isNull(reviews.outcome)))
}

const namedChange = ({ row, checked }: { row: ChangeRow; checked: Checked }, severity: 'error' | 'warning') => ({ change: row.id, subject: row.subject, findings: checked.findings.filter((one) => one.severity === severity) })

/** Checks every change again against the newest edition, and refuses what a review should not be asked for. */
async function checkAll(tx: Tx, amendment: AmendmentRow, comment: string): Promise<void> {
  const rows = await tx.select().from(amendmentChanges).where(eq(amendmentChanges.amendmentId, amendment.id)).orderBy(asc(amendmentChanges.position))
  if (rows.length === 0) throw new Problem('nothing_to_review', 'This amendment has no change: add one first.')
  const table = await loadPublishedTable(tx, await newestEdition(tx), [...new Set(rows.flatMap((row) => row.speciesId ?? []))])
  const checked = await checkChangesInSteps(table, rows.map(inputOf))
  const judged = rows.flatMap((row, at) => { const one = checked[at]; return one === undefined ? [] : [{ row, checked: one }] })
  const stale = judged.filter(({ row }) => (publishedIn(table, row.kind, row.subject)?.revision ?? null) !== row.baseRevision)
  if (stale.length > 0) {
    const named = stale.slice(0, MOST_NAMED).map(({ row }) => row)
    const inForce = await readInForce(tx, table.edition, named)
    const told = named.map((row) => staleBase(row.id, row.subject, row.baseRevision, inForce(row.kind, row.subject)))
    const [first] = named
    const detail = first === undefined ? '' : staleDetail(first.subject, first.baseRevision, inForce(first.kind, first.subject))
    throw new Problem('base_stale', `${detail}${stale.length > 1 ? ` So it is with ${stale.length - 1} more.` : ''} Look at today's values and write the change again, with the revision in force as base_revision.`, { extra: { changes: told } })
  }
  const wrong = judged.filter((one) => one.checked.findings.some((finding) => finding.severity === 'error'))
  if (wrong.length > 0) {
    const subjects = wrong.slice(0, 5).map(({ row }) => row.subject).join(', ')
    throw new Problem('changes_have_errors', `${wrong.length === 1 ? 'A change has' : `${wrong.length} changes have`} errors: ${subjects}${wrong.length > 5 ? ' and more' : ''}.`, { extra: { changes: wrong.slice(0, MOST_NAMED).map((one) => namedChange(one, 'error')) } })
  }
  const warned = judged.filter((one) => one.checked.findings.length > 0 && (one.row.comment ?? '') === '')
  if (warned.length > 0 && comment === '') {
    throw new Problem('warnings_uncommented', `${warned.length === 1 ? 'A change has' : `${warned.length} changes have`} warnings and no comment: say why they are no ground to hold it back, there or here.`, {
      errors: [{ pointer: '/comment', code: 'warnings_uncommented', detail: 'A comment is needed, since changes with warnings have none of their own.' }], extra: { changes: warned.slice(0, MOST_NAMED).map((one) => namedChange(one, 'warning')) },
    })
  }
  await storeFindings(tx, judged)
}

/** draft -> in_review: the review is of this version, and no other. */
export async function submitAmendment(db: Db, step: Step): Promise<AmendmentDetail> {
  const { userId } = knownCaller(step.acting.caller)
  return move(db, step, 'in_review', 'amendment.submit', ['draft'], async (tx, row, version) => {
    await checkAll(tx, row, step.comment)
    await tx.insert(reviews).values({ amendmentId: row.id, version, askedBy: userId, comment: step.comment })
    await tell(tx, step.acting, row, 'review.asked', step.comment)
  })
}

/** in_review -> draft, with the reason. */
export async function returnAmendment(db: Db, step: Step): Promise<AmendmentDetail> {
  const { userId } = knownCaller(step.acting.caller)
  return move(db, step, 'draft', 'amendment.return', ['in_review'], async (tx, row) => {
    if (step.comment === '') throw bodyProblem('/comment', 'comment_missing', 'Say why you return it: its authors read that.')
    await closeReview(tx, row, userId, 'returned', step.comment)
    await tell(tx, step.acting, row, 'review.returned', step.comment)
  })
}

/** in_review -> accepted, by somebody who had no hand in it. */
export async function acceptAmendment(db: Db, step: Step): Promise<AmendmentDetail> {
  const { userId } = knownCaller(step.acting.caller)
  const stranger = async (tx: Tx, row: AmendmentRow) => {
    const [one] = await describeAmendments(tx, [row])
    if (one !== undefined && isAuthor(one.amendment, userId)) throw new Problem('own_amendment', 'You began this amendment, or wrote or edited a change of it: a colleague who had no hand in it has to accept it.')
  }
  return move(db, step, 'accepted', 'amendment.accept', ['in_review'], async (tx, row) => {
    await closeReview(tx, row, userId, 'accepted', step.comment)
    await tell(tx, step.acting, row, 'review.accepted', step.comment)
  }, stranger)
}

/** Ends an amendment that is not published. */
export async function withdrawAmendment(db: Db, step: Step): Promise<AmendmentDetail> {
  const caller = knownCaller(step.acting.caller)
  const authorOrAdmin = async (_: Tx, row: AmendmentRow) => {
    if (row.author !== caller.userId && !atLeast(caller.role, 'admin')) throw new Problem('not_the_author', 'Only its author or an admin may withdraw an amendment; a reviewer returns it.')
  }
  return move(db, step, 'withdrawn', 'amendment.withdraw', EDITABLE, (tx, row) => closeReview(tx, row, caller.userId, 'withdrawn', step.comment), authorOrAdmin)
}
