import { sql } from 'drizzle-orm'
import type { Tx } from '@/db/client'
import type { ChangeAction, ChangeKind } from '@/openapi/schemas/change'
import type { PublicationConflict } from '@/openapi/schemas/edition'
import { checkChangesInSteps } from './checks'
import type { Parties } from './conflict-parties'
import { baseWords, type InForce, inForceWords, readInForce } from './in-force'
import type { ChangeInput, Checked, PublishedTable } from './rows'
import { storedAs } from './stored-row'
import { publishedIn } from './subjects'
import { loadPublishedTable, newestEdition } from './table'

/** An accepted amendment on its way into the next edition. */
export interface AcceptedAmendment { id: string; title: string; version: number; author: { id: string; name: string }; reviewer: string | null; changes: number }

export interface AcceptedChange extends ChangeInput {
  amendment: string
  baseRevision: number | null
  /** The row stored with it, as the database writes it out; read for publishing, not for a preview. */
  stored?: string | null
}

/** All that is accepted, with what the newest edition holds of it. */
export interface Accepted { amendments: AcceptedAmendment[]; changes: AcceptedChange[]; table: PublishedTable; inForce: (kind: ChangeKind, subject: string) => InForce | null }

interface AmendmentRow extends Record<string, unknown> { id: string; title: string; version: number; author_id: string; author_name: string; reviewer: string | null; changes: number }
interface ChangeRow extends Record<string, unknown> { id: string; amendment: string; kind: ChangeKind; action: ChangeAction; subject: string; species: string | null; given: unknown; reason: string | null; successor: string | null; base: number | null; stored?: string | null }

/**
 * Reads what is accepted. With `lock` the amendments' rows are held to the end of the transaction: an edit of one of them, which
 * locks the same row first, is wholly before (and the amendment no longer accepted) or wholly after.
 */
export async function readAccepted(tx: Tx, lock: boolean): Promise<Accepted> {
  const { rows: found } = await tx.execute<{ id: string }>(sql`select id from amendments where state = 'accepted' order by id ${sql.raw(lock ? 'for no key update' : '')}`)
  const { rows: amendments } = await tx.execute<AmendmentRow>(sql`
    select a.id, a.title, a.version, u.id as author_id, u.name as author_name,
      (select p.name from reviews r join users p on p.id = r.closed_by where r.amendment_id = a.id and r.outcome = 'accepted' and r.voided_at is null order by r.asked_at desc limit 1) as reviewer,
      (select count(*)::integer from amendment_changes c where c.amendment_id = a.id) as changes
    from amendments a join users u on u.id = a.author where a.id = any(${sql.param(found.map(({ id }) => id))}::uuid[]) order by a.created_at, a.id`)
  const { rows } = await tx.execute<ChangeRow>(sql`
    select c.id, c.amendment_id as amendment, c.kind, c.action, c.subject, c.species_id as species, c.given, c.reason, c.successor, c.base_revision as base${sql.raw(lock ? ', c.row::text as stored' : '')}
    from amendment_changes c where c.amendment_id = any(${sql.param(amendments.map(({ id }) => id))}::uuid[]) order by c.position`)
  const changes = rows.map(({ species, base, ...row }): AcceptedChange => ({ ...row, speciesId: species, baseRevision: base }))
  const species = new Set(changes.flatMap(({ speciesId }) => (speciesId === null ? [] : [speciesId])))
  const table = await loadPublishedTable(tx, await newestEdition(tx), [...species])
  return {
    amendments: amendments.map(({ author_id, author_name, ...row }) => ({ ...row, author: { id: author_id, name: author_name } })),
    changes,
    table,
    inForce: await readInForce(tx, table.edition, changes.filter((change) => isStale(table, change))),
  }
}

const isStale = (table: PublishedTable, { kind, subject, baseRevision }: AcceptedChange): boolean => (publishedIn(table, kind, subject)?.revision ?? null) !== baseRevision

const keyOf = ({ kind, subject }: { kind: ChangeKind; subject: string }): string => `${kind} ${subject}`

/** Identifiers in a sentence: levels, hyperfine constants, isotopes, keys of sources. */
const NAMED = /[A-Z][a-z]?-[IVXLC]+(?:\.[0-9]+)?(?:\/[0-9]+)?|[a-z0-9]+(?:-[a-z0-9]+)+/g

/** Things that more than one amendment changes; within one amendment a thing is changed once. */
function changedTwice({ amendments, changes }: Pick<Accepted, 'amendments' | 'changes'>): AcceptedChange[][] {
  if (amendments.length < 2) return []
  const groups = new Map<string, AcceptedChange[]>()
  for (const change of changes) {
    const list = groups.get(keyOf(change))
    if (list === undefined) groups.set(keyOf(change), [change])
    else list.push(change)
  }
  return [...groups.values()].filter(({ length }) => length > 1)
}

/**
 * All that keeps the accepted amendments from being published together: things changed by two of them, changes made from a
 * revision that is no longer in force, and every error that the checks find in the union, with the changes that take part.
 * `checked` is what the checks say of the union (of the first change of each thing), `parties` who else takes part in what they find.
 */
export function conflictsOf({ amendments, changes, table, inForce }: Accepted, checked: ReadonlyMap<string, Checked>, parties: Parties = () => []): PublicationConflict[] {
  const titles = new Map(amendments.map(({ id, title }) => [id, title]))
  const part = (change: AcceptedChange) => ({ amendment: { id: change.amendment, title: titles.get(change.amendment) ?? '' }, change: change.id, subject: change.subject })
  const quoted = (list: readonly AcceptedChange[]): string => [...new Set(list.map(({ amendment }) => amendment))].map((id) => `\u201c${titles.get(id) ?? id}\u201d`).join(' and ')
  const conflicts: PublicationConflict[] = []
  for (const list of changedTwice({ amendments, changes })) {
    const [first] = list
    if (first === undefined) continue
    const detail = `${first.subject} is changed by ${quoted(list)}: take it out of one of them.`
    conflicts.push({ code: 'same_subject', kind: first.kind, subject: first.subject, detail, changes: list.map(part), base_revision: null, current_revision: null })
  }
  for (const change of changes) {
    if (!isStale(table, change)) continue
    const current = publishedIn(table, change.kind, change.subject)?.revision ?? null
    const now = inForce(change.kind, change.subject)
    const detail = `The change of ${change.subject} in ${quoted([change])} was made ${baseWords(change.baseRevision)}, and now ${inForceWords(now)}: look at it again.`
    const made = now === null || now.amendment === null || now.change === null ? [] : [{ amendment: now.amendment, change: now.change, subject: change.subject }]
    conflicts.push({ code: 'base_stale', kind: change.kind, subject: change.subject, detail, changes: [part(change), ...made], base_revision: change.baseRevision, current_revision: current })
  }
  const seen = new Set(conflicts.map(({ changes: parts }) => parts.map(({ change }) => change).sort().join()))
  const wrong = changes.filter(({ id }) => checked.get(id)?.findings.some(({ severity }) => severity === 'error'))
  const bySubject = wrong.length === 0 ? new Map<string, AcceptedChange>() : new Map(changes.map((change) => [change.subject, change]))
  for (const change of wrong) {
    for (const finding of checked.get(change.id)?.findings ?? []) {
      if (finding.severity !== 'error') continue
      const named = [...new Set(finding.detail.match(NAMED) ?? [])].flatMap((name) => bySubject.get(name) ?? []).filter((other) => other.id !== change.id)
      // a finding that names a change of another amendment says itself what it is about
      const others = named.some(({ amendment }) => amendment !== change.amendment) ? named : [...new Set([...named, ...parties(change, finding)])]
      const parts = [change, ...others]
      const key = parts.map(({ id }) => id).sort().join()
      // two levels of one name are found from either side, and told once
      if (parts.length > 1 && seen.has(key)) continue
      seen.add(key)
      conflicts.push({ code: finding.code, kind: change.kind, subject: change.subject, detail: `${change.subject} in ${quoted(parts)}: ${finding.detail}`, changes: parts.map(part), base_revision: null, current_revision: null })
    }
  }
  return conflicts
}

const PAUSE_EVERY = 2000

/**
 * Changes whose values are read otherwise now than when they were stored, which a new release of the readers may bring about: what was
 * accepted is then not what was checked. Gives the event loop back now and then.
 */
export async function readOtherwise({ amendments, changes }: Pick<Accepted, 'amendments' | 'changes'>, checked: ReadonlyMap<string, Checked>): Promise<PublicationConflict[]> {
  const titles = new Map(amendments.map(({ id, title }) => [id, title]))
  const conflicts: PublicationConflict[] = []
  for (const [at, change] of changes.entries()) {
    if (at % PAUSE_EVERY === PAUSE_EVERY - 1) await new Promise((resolve) => void setImmediate(resolve))
    const now = checked.get(change.id)
    if (now === undefined || storedAs(change.stored ?? null, now.row)) continue
    const title = titles.get(change.amendment) ?? ''
    conflicts.push({
      code: 'read_otherwise', kind: change.kind, subject: change.subject, detail: `The values of ${change.subject} in \u201c${title}\u201d are read otherwise now than when they were accepted: save the change again, and have it accepted.`,
      changes: [{ amendment: { id: change.amendment, title }, change: change.id, subject: change.subject }], base_revision: null, current_revision: null,
    })
  }
  return conflicts
}

/** Runs every check on the union of what is accepted; the process goes on answering meanwhile. */
export async function checkUnion({ amendments, changes, table }: Accepted): Promise<Map<string, Checked>> {
  const again = new Set(changedTwice({ amendments, changes }).flatMap((list) => list.slice(1)))
  const first = again.size === 0 ? changes : changes.filter((change) => !again.has(change))
  const checked = await checkChangesInSteps(table, first)
  return new Map(checked.map((one, at) => [first[at]?.id ?? '', one]))
}
