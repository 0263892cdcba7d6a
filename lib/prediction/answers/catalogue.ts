import type { Snapshot } from '@/lib/catalogue/shape'
import { limitOf, pageOf, type Position } from '@/lib/prediction/paging'
import { sourceOf, speciesOf } from '@/lib/prediction/resolve'
import { sourceTable, speciesTable } from '@/lib/prediction/tables/catalogue'

/** Species in the order of the table. */
export function speciesList(snapshot: Snapshot, query: object, after: Position) {
  const limit = limitOf(query)
  const { rows, next } = pageOf(snapshot.species, limit, after, (species) => species.id)
  return { data: [...rows], page: { limit, next }, table: () => speciesTable(rows) }
}

export const oneSpecies = (snapshot: Snapshot, id: string) => ({ data: speciesOf(snapshot, id) })

export function sourceList(snapshot: Snapshot, query: object, after: Position) {
  const limit = limitOf(query)
  const { rows, next } = pageOf(snapshot.sources, limit, after, (source) => source.key)
  return { data: [...rows], page: { limit, next }, table: () => sourceTable(rows) }
}

export const oneSource = (snapshot: Snapshot, key: string) => ({ data: sourceOf(snapshot, key) })
