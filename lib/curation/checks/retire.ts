import type { LevelRow } from '../rows'
import { levelExists, speciesOfLevel, type Union, type Work } from './work'

/** Retiring: of a level in use, with a reason, in favour of another one in use where a successor is named. */
export function readRetirement(work: Work): void {
  const { change, findings } = work
  const before = work.published?.row as LevelRow | undefined
  const reason = change.reason?.trim() ?? ''
  if (before === undefined) findings.error('level_unknown', null, `There is no level ${change.subject} in the edition.`)
  else if (before.status === 'retired') findings.error('level_retired', null, `${change.subject} is retired already.`)
  if (reason === '') findings.error('reason_missing', 'reason', 'A level is retired with a reason: readers who follow its name are told.')
  if (before !== undefined && findings.errors === 0) work.row = { ...before, status: 'retired', retiredReason: reason, successor: change.successor }
}

export function checkSuccessor(union: Union, work: Work): void {
  const { subject, successor } = work.change
  if (successor === null) return
  if (successor === subject) work.findings.error('successor_impossible', 'successor', 'A level cannot take its own place.')
  else if (speciesOfLevel(successor) !== speciesOfLevel(subject)) work.findings.error('successor_impossible', 'successor', 'The successor must be a level of the same species.')
  else if (!levelExists(union, successor)) work.findings.error('successor_impossible', 'successor', `${successor} is no level in use, in the edition or in this amendment.`)
}
