/** Refusals about amendments, their changes, reviews and comments. */
export const CURATION_PROBLEMS = {
  amendment_unknown: { status: 404, title: 'No such amendment', explanation: 'There is no amendment of this identifier.', cure: 'GET /amendments lists them.' },
  not_the_author: { status: 403, title: 'Not your amendment', explanation: 'Only its author or an admin may withdraw an amendment.', cure: 'Ask the author; a reviewer returns it instead.' },
  own_amendment: { status: 403, title: 'Your own amendment', explanation: 'Whoever began an amendment, or wrote or edited a change of it, cannot accept it, whatever their role and whichever key they use.', cure: 'Ask a colleague who had no hand in it.' },
  change_unknown: { status: 404, title: 'No such change', explanation: 'The amendment has no change of this identifier; it may have been taken out.', cure: 'GET /amendments/{id}/changes lists them.' },
  change_exists: { status: 409, title: 'Changed in this amendment already', explanation: 'The amendment has a change of the same level, source, species, isotope or hyperfine constants.', cure: 'Edit that change; the answer names it as change.' },
  subject_mismatch: { status: 409, title: 'Change of something else', explanation: 'A change keeps what it is about; only its values and its reason can be edited.', cure: 'Take the change out and make another.' },
  subject_malformed: { status: 400, title: 'It is not said what the change is of', explanation: 'A new level is named by its species, any other by itself; a source by its key; a species by its id; an isotope by species and mass number; hyperfine constants by level and mass number.', cure: 'Give exactly those members.' },
  field_not_applicable: { status: 400, title: 'Field not for this kind of change', explanation: 'The member belongs to another kind of change or action: a level that is retired has no values, and only it has a successor.', cure: 'Leave it out.' },
  action_impossible: { status: 400, title: 'No such action here', explanation: 'Only levels are retired; sources, species, isotopes and hyperfine constants are corrected.', cure: 'Replace it, or retire the levels concerned.' },
  nothing_to_review: { status: 422, title: 'Nothing to review', explanation: 'The amendment has no change.', cure: 'Add a change first.' },
  changes_have_errors: { status: 422, title: 'Changes have errors', explanation: 'Changes of the amendment have errors, which block its review. The answer names each change with what is found.', cure: 'Mend the changes named, or take them out.' },
  warnings_uncommented: { status: 422, title: 'Warnings without a comment', explanation: 'Some changes have warnings and no comment of their own that says why they are no ground to hold the change back.', cure: 'Comment those changes, or give one comment for all when you submit.' },
  base_stale: { status: 409, title: 'Made from values that have changed', explanation: 'An edition published since has changed what the amendment changes, so it would undo that without saying so.', cure: 'Look at the changes named beside the values of today and write them again, with the revision in force as base_revision.' },
  comment_missing: { status: 422, title: 'Comment missing', explanation: 'Whoever returns an amendment says why.', cure: 'Give comment.' },
  comment_unknown: { status: 404, title: 'No such comment', explanation: 'The amendment has no comment of this identifier.', cure: 'GET /amendments/{id}/comments lists them.' },
  thread_malformed: { status: 422, title: 'Not the beginning of a thread', explanation: 'A thread is named by its first comment, and is resolved there.', cure: 'Use the first comment\'s identifier.' },
} as const
