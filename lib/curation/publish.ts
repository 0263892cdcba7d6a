import { eq, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { sealEdition } from '@/db/edition-content'
import { recordEvent } from '@/db/events'
import { users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { CONSTANTS_EDITION } from '@/lib/atomic/constants'
import { Problem } from '@/lib/problem'
import type { NewEdition, NextEdition, PublicationConflict } from '@/openapi/schemas/edition'
import { findParties } from './conflict-parties'
import { collectAfter } from './import/memory'
import { countChanges, MOST_CONFLICTS, suggestedNotes } from './next-edition'
import { type Accepted, type AcceptedAmendment, checkUnion, conflictsOf, readAccepted, readOtherwise } from './publish-accepted'
import { measuredDifference, readMeasuredInForce, writeMeasured } from './publish-measured'
import { writeFeed, writeRevisions } from './publish-rows'
import type { Checked, LevelRow } from './rows'

/** Any number; the guards of the revisions take the same lock, so that there is one publisher at a time. */
const LOCK = 7_272_741
/** One statement may write 100 000 revisions, and the connection waits while their checks run. */
const PATIENCE = '10min'
/** So that 100 000 changes are sorted, and seen by the guards, without files on disk. */
const SORTING = '64MB'

export const conflictProblem = (conflicts: readonly PublicationConflict[]): Problem => {
  const [first] = conflicts
  const more = conflicts.length > 1 ? ` (and ${conflicts.length - 1} more, see conflicts)` : ''
  return new Problem('publication_conflict', `${first?.detail ?? ''}${more}`, { extra: { conflicts: conflicts.slice(0, MOST_CONFLICTS), conflict_count: conflicts.length } })
}

/** Refuses where what is accepted is not what the publisher saw. */
function checkSeen(accepted: readonly AcceptedAmendment[], seen: NewEdition['amendments']): void {
  if (seen === undefined) return
  const wanted = new Map(seen.map(({ id, version }) => [id, version]))
  if (wanted.size === accepted.length && accepted.every(({ id, version }) => wanted.get(id) === version)) return
  throw new Problem('accepted_set_changed', 'Other amendments, or other versions of them, are accepted now than those that were sent; nothing was published.', {
    extra: { accepted: accepted.map(({ id, title, version }) => ({ id, title, version })) },
  })
}

/** Writes everything that the edition changes. Runs beside the checks: where they find a conflict all of it is rolled back. */
async function write(tx: Tx, edition: number, { amendments, changes }: Accepted, measured: () => Promise<Map<string, Checked>>, onLong: () => void): Promise<void> {
  const publication = { edition, amendments: amendments.map(({ id }) => id) }
  await writeRevisions(tx, publication, new Set(changes.map(({ kind }) => kind)), onLong)
  await writeFeed(tx, publication)
  const checked = await measured()
  const levels = changes.filter(({ kind, action }) => kind === 'level' && action !== 'retire')
  const known = levels.filter(({ action }) => action === 'replace').map(({ subject }) => subject)
  const inForce = known.length === 0 ? new Map<string, never[]>() : await readMeasuredInForce(tx, known)
  const wanted = levels.map(({ id, subject, amendment }) => ({ level: subject, amendment, wanted: (checked.get(id)?.row as LevelRow | null)?.measured ?? [] }))
  await writeMeasured(tx, edition, measuredDifference(wanted, inForce))
}

/** What stands in the way of the edition, and what its notes say where nothing does. */
async function judge(accepted: Accepted, checking: Promise<Map<string, Checked>>, notes: string | undefined): Promise<{ conflicts: PublicationConflict[]; otherwise: PublicationConflict[]; notes: string }> {
  const checked = await checking
  const conflicts = conflictsOf(accepted, checked, await findParties(accepted, checked))
  if (conflicts.length > 0) return { conflicts, otherwise: [], notes: '' }
  return { conflicts, otherwise: await readOtherwise(accepted, checked), notes: notes ?? suggestedNotes(accepted, checked) }
}

/** What of the changes is told of the edition once they are written. */
interface Entered { number: number; notes: string; counts: NextEdition['counts']; amendments: AcceptedAmendment[] }

/** Reads, checks and writes all that is accepted. The changes themselves are let go of: the edition is read anew for its checksum, which needs the memory. */
async function enter(tx: Tx, given: NewEdition): Promise<Entered> {
  const accepted = await readAccepted(tx, true)
  checkSeen(accepted.amendments, given.amendments)
  if (accepted.amendments.length === 0) throw new Problem('nothing_to_publish', 'No amendment is accepted and waiting; nothing was published.')
  const number = accepted.table.edition + 1
  // the database writes while the checks run here; what they find goes before what it may refuse. They begin when it has been asked for what
  // takes long and the event loop has sent that, since a short statement would wait for them to pause
  let begin = (): void => undefined
  const checking = new Promise<void>((begun) => void (begin = begun)).then(() => new Promise((sent) => void setImmediate(sent))).then(() => checkUnion(accepted))
  const writing = write(tx, number, accepted, () => checking, begin).then(() => null, (error: unknown) => {
    begin()
    return { error }
  })
  const { conflicts, otherwise, notes } = await judge(accepted, checking, given.notes).catch(async (error: unknown) => {
    // what is being written has to end in this transaction, not after it
    await writing
    throw error
  })
  const refused = await writing
  if (conflicts.length > 0) throw conflictProblem(conflicts)
  if (refused !== null) throw refused.error
  if (otherwise.length > 0) throw conflictProblem(otherwise)
  return { number, notes, counts: countChanges(accepted.changes), amendments: accepted.amendments }
}

/**
 * Publishes all that is accepted as the next edition, in one transaction: whole or not at all.
 *
 * 409 `nothing_to_publish`, `accepted_set_changed`, `publication_conflict` (naming every conflict at once).
 */
export async function publishEdition(db: Db, acting: Acting, given: NewEdition): Promise<number> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    await tx.execute(sql.raw(`set local statement_timeout = '${PATIENCE}'; set local idle_in_transaction_session_timeout = '${PATIENCE}'; set local work_mem = '${SORTING}'`))
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK})`)
    const { number, notes, counts, amendments } = await enter(tx, given)
    collectAfter(counts.changes)
    const [person] = await tx.select({ name: users.name }).from(users).where(eq(users.id, caller.userId))
    const head = { number, label: given.label, notes, constants: CONSTANTS_EDITION, publishedBy: caller.userId, ...(person === undefined ? {} : { publisherName: person.name }) }
    await recordEvent(tx, 'edition.published', { edition: number, label: given.label, since: number - 1 })
    const sealed = await sealEdition(tx, head)
    await recordAudit(tx, acting, {
      action: 'edition.publish', subjectKind: 'edition', subjectId: String(number),
      after: { label: given.label, checksum: sealed.checksum, counts: sealed.counts, changes: counts, amendments: amendments.map(({ id, title, version }) => ({ id, title, version })) },
    })
    return number
  })
}
