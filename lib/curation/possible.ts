import { atLeast, type Caller } from '@/lib/access/caller'
import type { Amendment, AmendmentDetail } from '@/openapi/schemas/amendment'
import { EDITABLE } from './editing'

/** Whether somebody began an amendment, or wrote or edited a change of it. A key counts as its owner. */
export const isAuthor = (amendment: Pick<Amendment, 'authors'>, userId: string | null): boolean => amendment.authors.some((person) => person.id === userId)

type Verdict = AmendmentDetail['possible']['edit']
const YES: Verdict = { allowed: true, reason: null }
const no = (reason: string): Verdict => ({ allowed: false, reason })

/** What somebody may do with an amendment now; where not, why: what the operations themselves would answer. */
export function possibleFor(amendment: Amendment, caller: Caller): AmendmentDetail['possible'] {
  const { state, counts } = amendment
  const ended = EDITABLE.includes(state) ? null : no(`It is ${state}, and stays as it is.`)
  const reviewing = state === 'in_review' ? null : no('It is not in review.')
  const submit = (): Verdict => {
    if (state !== 'draft') return no(`It is ${state.replace('_', ' ')}, not a draft.`)
    if (counts.changes === 0) return no('It has no change.')
    return counts.errors > 0 ? no(`${counts.errors === 1 ? 'A change has' : `${counts.errors} changes have`} errors.`) : YES
  }
  const withdraw = caller.userId === amendment.author.id || (caller.role !== null && atLeast(caller.role, 'admin')) ? YES : no('Only its author or an admin may withdraw it.')
  return {
    edit: ended ?? YES,
    submit: submit(),
    accept: reviewing ?? (isAuthor(amendment, caller.userId) ? no('You had a hand in it: a colleague has to accept it.') : YES),
    return: reviewing ?? YES,
    withdraw: ended ?? withdraw,
  }
}
