import type { Db } from '@/db/client'
import type { NextEdition } from '@/openapi/schemas/edition'
import { editionNotes } from './edition-notes'
import { findParties } from './conflict-parties'
import { type Accepted, type AcceptedChange, checkUnion, conflictsOf, readAccepted } from './publish-accepted'
import type { Checked } from './rows'
import { publishedIn } from './subjects'

const MOST_CONFLICTS = 200
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

/** What POST /editions would publish now, and what stands in its way. Reads one state of the database, and writes nothing. */
export async function previewNextEdition(db: Db): Promise<NextEdition> {
  const accepted = await db.transaction((tx) => readAccepted(tx, false), { isolationLevel: 'repeatable read', accessMode: 'read only' })
  const checked = await checkUnion(accepted)
  const number = accepted.table.edition + 1
  return {
    number,
    label: suggestedLabel(number),
    notes: accepted.changes.length === 0 ? '' : suggestedNotes(accepted, checked),
    amendments: accepted.amendments,
    counts: countChanges(accepted.changes),
    conflicts: conflictsOf(accepted, checked, await findParties(accepted, checked)).slice(0, MOST_CONFLICTS),
  }
}
