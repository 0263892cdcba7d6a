import type { ChangeKind } from '@/openapi/schemas/change'
import type { AnyRow, Published, PublishedTable } from './rows'

/** Where the published thing of a change stands in the table. */
export function publishedIn(table: PublishedTable, kind: ChangeKind, subject: string): Published<AnyRow> | undefined {
  if (kind === 'level') return table.levels.get(subject)
  if (kind === 'source') return table.sources.get(subject)
  if (kind === 'species') return table.species.get(subject)
  return kind === 'isotope' ? table.isotopes.get(subject) : table.hyperfine.get(subject)
}
