import { sql, type SQL } from 'drizzle-orm'
import type { Db } from '@/db/client'
import type { ChangeKind } from '@/openapi/schemas/change'
import type { Change, ComparedAction } from '@/openapi/schemas/edition'

/** One thing that two editions show differently; the fields are read for the page that is asked for. */
export interface Difference { kind: ChangeKind; subject: string; species: string | null; action: ComparedAction }

/** Values of each kind that a reader can compare, and how its revisions `a` and `b` (or one, `r`) are named. */
interface Compared { table: string; identity: string; subject: string; join: string; species: string; columns: readonly string[] }

export const COMPARED: Record<ChangeKind, Compared> = {
  source: {
    table: 'source_revisions', identity: 'source_key', subject: 'coalesce(a.source_key, b.source_key)', join: '', species: 'null',
    columns: ['citation', 'kind', 'authors', 'title', 'journal', 'year', 'doi', 'note'],
  },
  species: {
    table: 'species_revisions', identity: 'species_id', subject: 'coalesce(a.species_id, b.species_id)', join: '', species: 'coalesce(a.species_id, b.species_id)',
    columns: ['name', 'core_configuration', 'ionisation_energy_invcm', 'ionisation_source', 'ionisation_evidence', 'note'],
  },
  isotope: {
    table: 'isotope_revisions', identity: 'isotope_id', subject: 'coalesce(a.isotope_id, b.isotope_id)', join: '', species: "split_part(coalesce(a.isotope_id, b.isotope_id), '/', 1)",
    columns: ['mass_u', 'two_i', 'abundance_percent', 'g_i', 'source', 'evidence', 'note'],
  },
  level: {
    table: 'level_revisions', identity: 'level_id', subject: 'coalesce(a.level_id, b.level_id)', join: '', species: 'coalesce(a.species_id, b.species_id)',
    columns: [
      'configuration', 'coupling', 'label', 'two_s', 'l', 'two_j', 'two_k', 'core_two_s', 'core_l', 'core_two_j', 'l_outer', 'outer_two_j', 'parity', 'repeat_index', 'alternative_name',
      'energy_invcm', 'energy_unc_invcm', 'energy_literal', 'energy_source', 'energy_evidence', 'line_checked', 'note', 'g_chosen', 'g_chosen_reason', 'retired_reason', 'successor',
    ],
  },
  hyperfine: {
    table: 'hyperfine_revisions', identity: 'hyperfine_id', subject: "h.level_id || '/' || i.mass_number",
    join: 'join hyperfine_constants h on h.id = coalesce(a.hyperfine_id, b.hyperfine_id) join isotopes i on i.id = h.isotope_id', species: 'i.species_id',
    columns: ['a_mhz', 'a_unc_mhz', 'b_mhz', 'b_unc_mhz', 'source', 'evidence', 'note'],
  },
}
const KINDS = Object.keys(COMPARED) as ChangeKind[]

interface Row extends Record<string, unknown> { subject: string; species: string | null; was: string | null; is: string | null; differs: boolean }

/**
 * Revisions of one kind that only the lower, or only the higher of two editions shows, side by side. What both show is one revision
 * and is not looked at: a comparison costs what differs, not what there is.
 */
function sides(kind: ChangeKind, low: number, high: number): SQL {
  const { table, identity, subject, join, species, columns } = COMPARED[kind]
  const status = (side: string): string => (kind === 'level' ? `${side}.status` : `case when ${side}.id is not null then 'active' end`)
  const content = (side: string): string => `(${columns.map((column) => `${side}.${column}`).join(', ')})`
  return sql`
    select ${sql.raw(subject)} as subject, ${sql.raw(species)} as species, ${sql.raw(status('a'))} as was, ${sql.raw(status('b'))} as is, ${sql.raw(`${content('a')} is distinct from ${content('b')}`)} as differs
    from (select * from ${sql.raw(table)} r where r.published_from <= ${low} and r.published_until > ${low} and r.published_until <= ${high}) a
    full join (select * from ${sql.raw(table)} r where r.published_from > ${low} and r.published_from <= ${high} and (r.published_until is null or r.published_until > ${high})) b
      on a.${sql.raw(identity)} = b.${sql.raw(identity)}
    ${sql.raw(join)}`
}

/** Levels whose measured g_J differ between two editions, as a reader sees them. */
async function measuredDiffers(db: Db, low: number, high: number): Promise<Set<string>> {
  const { rows } = await db.execute<{ level: string }>(sql`
    with side as (
      select g.level_id as level, row(r.value, r.unc, r.source, r.evidence, r.note)::text as content, r.published_from <= ${low} as low
      from measured_g_revisions r join measured_g g on g.id = r.measured_g_id
      where (r.published_from <= ${low} and r.published_until > ${low} and r.published_until <= ${high})
        or (r.published_from > ${low} and r.published_from <= ${high} and (r.published_until is null or r.published_until > ${high})))
    select level from side group by level
    having string_agg(content, ';' order by content) filter (where low) is distinct from string_agg(content, ';' order by content) filter (where not low)`)
  return new Set(rows.map(({ level }) => level))
}

/** What the edition read shows (`is`) against the one compared with (`was`); null for what a reader of both would not notice. */
function actionOf(was: string | null, is: string | null, differs: boolean, backwards: boolean): ComparedAction | null {
  if (was === 'active' && is === 'active') return differs ? 'replaced' : null
  if (is === 'active') return was === null ? 'created' : 'restored'
  if (was === 'active') return is === null ? (backwards ? 'absent' : 'retired') : 'retired'
  return was === 'retired' && is === 'retired' && differs ? 'replaced' : null
}

const numberAfter = (mark: string, text: string): number => Number(text.slice(text.lastIndexOf(mark) + 1))

/** Place of a thing among those of its kind: by species, then by number; hyperfine constants by level and mass number. Sources have none and go by their keys. */
function placeOf({ kind, subject, species }: Difference, ordinals: ReadonlyMap<string, number>): number {
  const base = (ordinals.get(species ?? '') ?? 0) * 1e10
  if (kind === 'isotope') return base + numberAfter('/', subject)
  return kind === 'hyperfine' ? base + Number(subject.slice(subject.indexOf('.') + 1, subject.indexOf('/'))) * 1e3 + numberAfter('/', subject) : base
}

const actionIn = (backwards: boolean, was: string | null, is: string | null, differs: boolean): ComparedAction | null => (backwards ? actionOf(is, was, differs, true) : actionOf(was, is, differs, false))

interface LevelRows extends Record<string, unknown> { species: string; was: string | null; is: string | null; differs: boolean; ordinals: string }

/** Levels, of which there may be 100 000: the database gives the ordinals of a species together, and not a row for each. */
async function compareLevels(db: Db, low: number, high: number, backwards: boolean, ordinals: ReadonlyMap<string, number>): Promise<Difference[]> {
  const measured = await measuredDiffers(db, low, high)
  const { rows } = await db.execute<LevelRows>(sql`
    select species, was, "is", differs, string_agg(split_part(subject, '.', 2), ' ') as ordinals from (${sides('level', low, high)}) one group by species, was, "is", differs`)
  rows.sort((a, b) => (ordinals.get(a.species) ?? 0) - (ordinals.get(b.species) ?? 0))
  const differences: Difference[] = []
  for (let from = 0; from < rows.length; ) {
    const species = rows[from]?.species ?? ''
    const found: { ordinal: number; difference: Difference }[] = []
    for (; rows[from]?.species === species; from += 1) {
      const { was, is, differs, ordinals: list } = rows[from] as LevelRows
      const [told, toldIfMeasured] = [actionIn(backwards, was, is, differs), actionIn(backwards, was, is, true)]
      for (const ordinal of list.split(' ')) {
        const subject = `${species}.${ordinal}`
        const action = measured.size > 0 && measured.has(subject) ? toldIfMeasured : told
        if (action !== null) found.push({ ordinal: Number(ordinal), difference: { kind: 'level', subject, species, action } })
      }
    }
    for (const { difference } of found.sort((a, b) => a.ordinal - b.ordinal)) differences.push(difference)
  }
  return differences
}

async function compareOthers(db: Db, kind: Exclude<ChangeKind, 'level'>, low: number, high: number, backwards: boolean, ordinals: ReadonlyMap<string, number>): Promise<Difference[]> {
  const { rows } = await db.execute<Row>(sides(kind, low, high))
  const differences = rows.flatMap(({ subject, species, was, is, differs }): Difference[] => {
    const action = actionIn(backwards, was, is, differs)
    return action === null ? [] : [{ kind, subject, species, action }]
  })
  const place = new Map(differences.map((difference) => [difference, placeOf(difference, ordinals)]))
  return differences.sort((a, b) => (place.get(a) ?? 0) - (place.get(b) ?? 0) || (a.subject < b.subject ? -1 : 1))
}

async function compare(db: Db, n: number, since: number): Promise<Difference[]> {
  const [low, high, backwards] = since < n ? [since, n, false] : [n, since, true]
  const { rows } = await db.execute<{ id: string; ordinal: number }>(sql`select id, ordinal from species`)
  const ordinals = new Map(rows.map(({ id, ordinal }) => [id, ordinal]))
  const all: Difference[][] = []
  for (const kind of KINDS) all.push(kind === 'level' ? await compareLevels(db, low, high, backwards, ordinals) : await compareOthers(db, kind, low, high, backwards, ordinals))
  return all.flat()
}

/** Comparisons kept, and how many differences they may hold together: editions never change, so neither do these. */
const KEPT = 8
const KEPT_DIFFERENCES = 600_000
const kept = new Map<string, { made: Promise<Difference[]>; size: number }>()

/**
 * All that edition `n` shows otherwise than edition `since`, in the order of the table; either may be the later one, and 0 is the
 * empty table. Kept for a while, so that the pages of one comparison share it.
 */
export function compareEditions(db: Db, n: number, since: number): Promise<Difference[]> {
  const key = `${n} ${since}`
  const found = kept.get(key)
  kept.delete(key)
  const entry = found ?? { made: compare(db, n, since), size: 0 }
  kept.set(key, entry)
  if (found === undefined) {
    entry.made.then(
      (differences) => {
        entry.size = differences.length
        let held = [...kept.values()].reduce((sum, { size }) => sum + size, 0)
        for (const [oldest, { size }] of [...kept].slice(0, -1)) {
          if (kept.size <= KEPT && held <= KEPT_DIFFERENCES) break
          kept.delete(oldest)
          held -= size
        }
      },
      () => void (kept.get(key) === entry && kept.delete(key)),
    )
  }
  return entry.made
}

/** How many there are of each action, by kind. */
export function countDifferences(differences: readonly Difference[]): Record<string, Record<string, number>> {
  const counts: Record<string, Record<string, number>> = {}
  for (const { kind, action } of differences) {
    const of = (counts[kind] ??= {})
    of[action] = (of[action] ?? 0) + 1
  }
  return counts
}

export type Fields = Change['fields']
