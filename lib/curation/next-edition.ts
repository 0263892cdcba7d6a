import { sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { shared } from '@/lib/access/shared'
import type { NextEdition } from '@/openapi/schemas/edition'
import { editionNotes } from './edition-notes'
import { findParties } from './conflict-parties'
import { type Accepted, type AcceptedChange, checkUnion, conflictsOf, readAccepted } from './publish-accepted'
import type { Checked } from './rows'
import { publishedIn } from './subjects'

/** So many are told one by one, of a preview as of a refusal. */
export const MOST_CONFLICTS = 200
const ORDINALS = ['First', 'Second', 'Third', 'Fourth', 'Fifth', 'Sixth', 'Seventh', 'Eighth', 'Ninth', 'Tenth']

const suggestedLabel = (number: number): string => (ORDINALS[number - 1] === undefined ? `Edition ${number}` : `${ORDINALS[number - 1]} edition`)

export function countChanges(changes: readonly AcceptedChange[]): NextEdition['counts'] {
  const none = () => ({ create: 0, replace: 0, retire: 0 })
  const counts = { changes: changes.length, level: none(), source: none(), species: none(), isotope: none(), hyperfine: none() }
  for (const { kind, action } of changes) counts[kind][action] += 1
  return counts
}

/** Notes of the edition, written from its changes. */
export const suggestedNotes = ({ amendments, changes, table }: Accepted, checked: ReadonlyMap<string, Checked>): string =>
  editionNotes(
    changes,
    { before: ({ kind, subject }) => publishedIn(table, kind, subject)?.row ?? null, after: ({ id }) => checked.get(id)?.row ?? null },
    amendments.map(({ title }) => `\u201c${title}\u201d`),
  )

type Stated = Pick<Accepted['amendments'][number], 'id' | 'version' | 'title' | 'author' | 'reviewer'>
/** What a preview is made of: the newest edition and the versions that are accepted, with the names that it shows. */
const stateOf = (edition: number, amendments: readonly Stated[]): string =>
  JSON.stringify([edition, ...amendments.map(({ id, version, title, author, reviewer }) => [id, version, title, author.id, author.name, reviewer]).sort()])

async function presentState(db: Db): Promise<string> {
  const { rows } = await db.execute<{ edition: number; id: string | null; version: number; title: string; author_id: string; author_name: string; reviewer: string | null }>(sql`
    select (select coalesce(max(number), 0)::integer from editions) as edition, a.id, a.version, a.title, a.author_id, a.author_name, a.reviewer
    from (select 1) as one left join (
      select a.id, a.version, a.title, u.id as author_id, u.name as author_name,
        (select p.name from reviews r join users p on p.id = r.closed_by where r.amendment_id = a.id and r.outcome = 'accepted' order by r.asked_at desc limit 1) as reviewer
      from amendments a join users u on u.id = a.author where a.state = 'accepted') a on true`)
  return stateOf(rows[0]?.edition ?? 0, rows.flatMap(({ id, author_id, author_name, ...row }) => (id === null ? [] : [{ ...row, id, author: { id: author_id, name: author_name } }])))
}

interface Kept { db: Db; state: string; preview: Promise<NextEdition> }
const kept = () => shared<{ last: Kept | null }>('next-edition', () => ({ last: null }))

/**
 * What POST /editions would publish now, and what stands in its way. Checking the union takes seconds, so that one preview serves everyone
 * who asks until an edition is published or what is accepted changes.
 */
export async function previewNextEdition(db: Db): Promise<NextEdition> {
  const holder = kept()
  const state = await presentState(db)
  if (holder.last?.db === db && holder.last.state === state) return holder.last.preview
  const forget = (): void => {
    if (holder.last === mine) holder.last = null
  }
  const preview = makePreview(db).then(({ made, of }) => {
    // the state moved on between the two looks: it serves those who asked, and nobody later
    if (of !== state) forget()
    return made
  }, (error: unknown) => {
    forget()
    throw error
  })
  const mine: Kept = { db, state, preview }
  holder.last = mine
  return preview
}

/** Reads one state of the database, and writes nothing. */
async function makePreview(db: Db): Promise<{ made: NextEdition; of: string }> {
  const accepted = await db.transaction((tx) => readAccepted(tx, false), { isolationLevel: 'repeatable read', accessMode: 'read only' })
  const checked = await checkUnion(accepted)
  const number = accepted.table.edition + 1
  const made: NextEdition = {
    number,
    label: suggestedLabel(number),
    notes: accepted.changes.length === 0 ? '' : suggestedNotes(accepted, checked),
    amendments: accepted.amendments,
    counts: countChanges(accepted.changes),
    conflicts: conflictsOf(accepted, checked, await findParties(accepted, checked)).slice(0, MOST_CONFLICTS),
  }
  return { made, of: stateOf(accepted.table.edition, accepted.amendments) }
}
