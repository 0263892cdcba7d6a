import type { Table } from '@/openapi/core/table'
import type { Change, FeedEntry, MappedLevel } from '@/openapi/schemas/edition'
import { type Field, integer, number, tableOf, text } from '@/lib/prediction/tables/column'

const INVCM = 'cm-1'

const MAP_FIELDS: readonly Field<MappedLevel>[] = [
  text('level_old', 'Level in the earlier edition', (m) => m.level_old),
  text('level_new', 'Its place in the later edition; successors of retired levels are followed', (m) => m.level_new),
  text('status', 'same, changed, retired or created', (m) => m.status),
  text('species', 'Species', (m) => m.species),
  text('configuration', 'Configuration with parents', (m) => m.configuration),
  text('term', 'Term symbol with J; * marks odd parity', (m) => m.term),
  number('energy_old_invcm', INVCM, 'Energy in the earlier edition', (m) => m.energy_old_invcm),
  number('energy_new_invcm', INVCM, 'Energy in the later edition', (m) => m.energy_new_invcm),
  number('shift_invcm', INVCM, 'New minus old', (m) => m.shift_invcm),
  number('g_j_old', null, 'Adopted g_J in the earlier edition', (m) => m.g_j_old),
  number('g_j_new', null, 'Adopted g_J in the later edition', (m) => m.g_j_new),
]

export const levelMapTable = (levels: Iterable<MappedLevel>, name: string): Table => tableOf(name, MAP_FIELDS, levels)

/** One row a field; what is new, or is not there, has one row without a field. */
interface FieldRow { change: Change; field: string | null; before: unknown; after: unknown }
const written = (value: unknown): string | null => (value === null || value === undefined ? null : typeof value === 'object' ? JSON.stringify(value) : String(value))

const CHANGE_FIELDS: readonly Field<FieldRow>[] = [
  text('kind', 'level, source, species, isotope or hyperfine', (r) => r.change.kind),
  text('subject', 'What it is about', (r) => r.change.subject),
  text('level', 'Level', (r) => r.change.level),
  text('species', 'Species', (r) => r.change.species),
  text('action', 'What happened', (r) => r.change.action),
  text('field', 'Name of the value', (r) => r.field),
  text('before', 'In the edition compared with', (r) => written(r.before)),
  text('after', 'In the edition read', (r) => written(r.after)),
]

export function changeTable(changes: readonly Change[], name: string): Table {
  const rows = changes.flatMap((change): FieldRow[] =>
    change.fields.length === 0 || change.action === 'created' || change.action === 'absent' ? [{ change, field: null, before: null, after: null }] : change.fields.map((field) => ({ change, ...field })))
  return { ...tableOf(name, CHANGE_FIELDS, rows), items: changes }
}

const FEED_FIELDS: readonly Field<FeedEntry>[] = [
  integer('sequence', 'Place in the feed', (f) => f.sequence),
  integer('edition', 'Edition that published it', (f) => f.edition),
  text('kind', 'level, source, species, isotope or hyperfine', (f) => f.kind),
  text('subject', 'What it is about', (f) => f.subject),
  text('action', 'create, replace or retire', (f) => f.action),
  text('amendment', 'Identifier of the amendment', (f) => f.amendment.id),
  text('amendment_title', 'Its title', (f) => f.amendment.title),
]

export const feedTable = (entries: Iterable<FeedEntry>): Table => tableOf('changes', FEED_FIELDS, entries)
