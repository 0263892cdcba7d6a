/** Refusals about publishing and comparing editions. */
export const EDITION_PROBLEMS = {
  nothing_to_publish: { status: 409, title: 'Nothing to publish', explanation: 'No amendment is accepted, so the next edition would be the last one over again.', cure: 'Have an amendment reviewed and accepted first.' },
  accepted_set_changed: { status: 409, title: 'Other amendments are accepted by now', explanation: 'Since the preview was made, an amendment was accepted, edited, returned or withdrawn: what would be published is not what was seen. Nothing was published.', cure: 'Look at GET /editions/next again and publish what it shows.' },
  publication_conflict: { status: 409, title: 'Accepted amendments do not go together', explanation: 'Two accepted amendments change one thing, make two levels of one name or two ground levels, or an amendment was made from values that an edition has changed since. Nothing was published; `conflicts` names each with the amendments and changes that take part.', cure: 'Edit one of the amendments so that they agree, or withdraw it, and have it accepted again.' },
}
