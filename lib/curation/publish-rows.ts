import { sql, type SQL } from 'drizzle-orm'
import type { Tx } from '@/db/client'
import type { ChangeKind } from '@/openapi/schemas/change'

/** What is being published: the number of the edition, and the amendments that make it. */
export interface Publication { edition: number; amendments: readonly string[] }

/** Columns of a revision with the members of a change's `row` that they come from. */
type Column = readonly [column: string, member: string, type: 'text' | 'integer' | 'double precision' | 'boolean']

const text = (column: string, member = column): Column => [column, member, 'text']
const whole = (column: string, member = column): Column => [column, member, 'integer']
const number = (column: string, member = column): Column => [column, member, 'double precision']

/** How the revisions of one kind are written: table, who they are of, and their values. */
interface Writing {
  table: string
  /** Column of the revision that names its identity. */
  identity: string
  /** The identity that a change `c` is about, as an expression; `join` brings in what it needs. */
  subject: string
  join?: string
  /** More columns that are made from the change itself. */
  extra?: readonly (readonly [column: string, expression: string])[]
  columns: readonly Column[]
}

const LEVEL_COLUMNS: readonly Column[] = [
  text('configuration'), text('coupling'), text('label'), whole('two_s', 'twoS'), whole('l'), whole('two_j', 'twoJ'), whole('two_k', 'twoK'), whole('core_two_s', 'coreTwoS'),
  whole('core_l', 'coreL'), whole('core_two_j', 'coreTwoJ'), whole('l_outer', 'lOuter'), whole('outer_two_j', 'outerTwoJ'), text('parity'), whole('repeat_index', 'repeatIndex'),
  text('alternative_name', 'alternativeName'), number('energy_invcm', 'energyInvcm'), number('energy_unc_invcm', 'energyUncInvcm'), text('energy_literal', 'energyLiteral'),
  text('energy_source', 'energySource'), text('energy_evidence', 'energyEvidence'), ['line_checked', 'lineChecked', 'boolean'], text('note'),
  number('g_chosen', 'gChosen'), text('g_chosen_reason', 'gChosenReason'),
]

const HYPERFINE_JOIN = `join hyperfine_constants h on h.level_id = split_part(c.subject, '/', 1)
  and h.isotope_id = split_part(c.subject, '.', 1) || '/' || split_part(c.subject, '/', 2)`

export const WRITINGS: Record<ChangeKind, Writing> = {
  source: {
    table: 'source_revisions', identity: 'source_key', subject: 'c.subject',
    columns: [text('citation'), text('kind'), text('authors'), text('title'), text('journal'), whole('year'), text('doi'), text('note')],
  },
  species: {
    table: 'species_revisions', identity: 'species_id', subject: 'c.subject',
    columns: [
      text('name'), text('element'), whole('z'), whole('charge'), text('core_configuration', 'coreConfiguration'), number('ionisation_energy_invcm', 'ionisationEnergyInvcm'),
      text('ionisation_source', 'ionisationSource'), text('ionisation_evidence', 'ionisationEvidence'), text('note'),
    ],
  },
  isotope: {
    table: 'isotope_revisions', identity: 'isotope_id', subject: 'c.subject',
    columns: [number('mass_u', 'massU'), whole('two_i', 'twoI'), number('abundance_percent', 'abundancePercent'), number('g_i', 'gI'), text('source'), text('evidence'), text('note')],
  },
  level: { table: 'level_revisions', identity: 'level_id', subject: 'c.subject', extra: [['species_id', "split_part(c.subject, '.', 1)"]], columns: LEVEL_COLUMNS },
  hyperfine: {
    table: 'hyperfine_revisions', identity: 'hyperfine_id', subject: 'h.id', join: HYPERFINE_JOIN,
    columns: [number('a_mhz', 'aMhz'), number('a_unc_mhz', 'aUncMhz'), number('b_mhz', 'bMhz'), number('b_unc_mhz', 'bUncMhz'), text('source'), text('evidence'), text('note')],
  },
}
/** What is named comes before what names it. */
const ORDER: readonly ChangeKind[] = ['source', 'species', 'isotope', 'level', 'hyperfine']

const of = ({ amendments }: Publication, kind: ChangeKind): SQL => sql`c.amendment_id = any(${sql.param(amendments)}::uuid[]) and c.kind = ${kind}`

/** The identities of what is new, the many last. */
const identities = (publication: Publication): [ChangeKind, SQL][] => [
  ['source', sql`insert into sources (key) select c.subject from amendment_changes c where ${of(publication, 'source')} and c.action = 'create' order by c.position`],
  ['species', sql`insert into species (id, ordinal)
      select c.subject, (select coalesce(max(ordinal), 0) from species) + row_number() over (order by c.position)
      from amendment_changes c where ${of(publication, 'species')} and c.action = 'create'`],
  ['isotope', sql`insert into isotopes (id, species_id, mass_number)
      select c.subject, split_part(c.subject, '/', 1), split_part(c.subject, '/', 2)::integer from amendment_changes c where ${of(publication, 'isotope')} and c.action = 'create' order by c.position`],
  ['level', sql`insert into levels (id, species_id, ordinal)
      select c.subject, split_part(c.subject, '.', 1), split_part(c.subject, '.', 2)::integer from amendment_changes c where ${of(publication, 'level')} and c.action = 'create' order by c.position`],
  ['hyperfine', sql`insert into hyperfine_constants (level_id, isotope_id)
      select split_part(c.subject, '/', 1), split_part(c.subject, '.', 1) || '/' || split_part(c.subject, '/', 2)
      from amendment_changes c where ${of(publication, 'hyperfine')} and c.action = 'create' order by c.position`],
]

/** Ends what is replaced or retired. */
function ending(publication: Publication, kind: ChangeKind): SQL {
  const { table, identity, subject, join = '' } = WRITINGS[kind]
  return sql`update ${sql.raw(table)} r set published_until = ${publication.edition}
    from (select ${sql.raw(subject)} as subject from amendment_changes c ${sql.raw(join)} where ${of(publication, kind)} and c.action <> 'create') ended
    where r.${sql.raw(identity)} = ended.subject and r.published_from is not null and r.published_until is null`
}

/** The new revisions. That a change's base is the revision in force has been seen to, so the next number is one more. */
function revisions(publication: Publication, kind: ChangeKind): SQL {
  const { table, identity, subject, join = '', extra = [], columns } = WRITINGS[kind]
  const members = columns.map(([, member, type]) => `"${member}" ${type}`)
  const into = [identity, ...extra.map(([column]) => column), ...columns.map(([column]) => column)]
  const values = [subject, ...extra.map(([, expression]) => expression), ...columns.map(([, member]) => `v."${member}"`)]
  return sql`insert into ${sql.raw(table)} (${sql.raw(into.join(', '))}, revision, published_from, amendment_id)
    select ${sql.raw(values.join(', '))}, coalesce(c.base_revision, 0) + 1, ${publication.edition}::integer, c.amendment_id
    from amendment_changes c ${sql.raw(join)} cross join lateral jsonb_to_record(c.row) as v (${sql.raw(members.join(', '))})
    where ${of(publication, kind)} and c.action <> 'retire' order by c.position`
}

/** A retired level keeps its values; it says why it is gone and what took its place. */
function retirements(publication: Publication): SQL {
  const columns = LEVEL_COLUMNS.map(([column]) => column)
  return sql`insert into level_revisions (level_id, species_id, ${sql.raw(columns.join(', '))}, status, retired_reason, successor, revision, published_from, amendment_id)
    select o.level_id, o.species_id, ${sql.raw(columns.map((column) => `o.${column}`).join(', '))}, 'retired', coalesce(c.reason, c.row ->> 'retiredReason', ''), coalesce(c.successor, c.row ->> 'successor'),
      o.revision + 1, ${publication.edition}::integer, c.amendment_id
    from amendment_changes c join level_revisions o on o.level_id = c.subject and o.published_until = ${publication.edition}
    where ${of(publication, 'level')} and c.action = 'retire' order by c.position`
}

/**
 * Writes the revisions of every kind but measured g_J, which are several for one level. All in sets: an edition may bring 100 000 levels.
 * `onLong` is called when the first statement that may take long has been asked.
 */
export async function writeRevisions(tx: Tx, publication: Publication, kinds: ReadonlySet<ChangeKind>, onLong: () => void): Promise<void> {
  for (const [kind, statement] of identities(publication)) {
    if (!kinds.has(kind)) continue
    const asked = tx.execute(statement).then(() => undefined)
    if (kind === 'level') onLong()
    await asked
  }
  onLong()
  for (const kind of ORDER.filter((one) => kinds.has(one))) {
    await tx.execute(ending(publication, kind))
    await tx.execute(revisions(publication, kind))
    if (kind === 'level') await tx.execute(retirements(publication))
  }
}

/** Marks the amendments as published, and tells the feed of each of their changes in the order in which they came. */
export async function writeFeed(tx: Tx, { edition, amendments }: Publication): Promise<void> {
  await tx.execute(sql`update amendments set state = 'published', published_in = ${edition}, version = version + 1, updated_at = now() where id = any(${sql.param(amendments)}::uuid[])`)
  await tx.execute(sql`insert into edition_changes (edition, kind, subject, action, amendment_id, change_id)
    select ${edition}::integer, c.kind, c.subject, c.action, c.amendment_id, c.id from amendment_changes c where c.amendment_id = any(${sql.param(amendments)}::uuid[]) order by c.position`)
}
