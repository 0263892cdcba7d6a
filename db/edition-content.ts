import { createHash } from 'node:crypto'
import { and, eq, gt, isNull, lte, or, sql, type SQL } from 'drizzle-orm'
import type { AnyPgColumn } from 'drizzle-orm/pg-core'
import type { Json } from './canonical'
import type { Db, Tx } from './client'
import { type EditionCounts, editions } from './schema'

type Entity = { readonly id: string; readonly [field: string]: Json }

/** Everything that an edition shows, as plain values; what identifies a row only within one database is left out. */
export interface EditionContent {
  species: Entity[]
  isotopes: Entity[]
  sources: Entity[]
  levels: Entity[]
  measured_g: Entity[]
  hyperfine_constants: Entity[]
}

/** The range condition that makes an edition. */
export const inEdition = (t: { publishedFrom: AnyPgColumn; publishedUntil: AnyPgColumn }, edition: number): SQL | undefined =>
  and(lte(t.publishedFrom, edition), or(isNull(t.publishedUntil), gt(t.publishedUntil, edition)))

/** The same on a table called `r` in a query written out. */
const within = (n: number): SQL => sql`r.published_from <= ${n} and (r.published_until is null or r.published_until > ${n})`

/**
 * One query for each kind, the fields in the order of their names: so the text that PostgreSQL makes of a row is, but for some numbers,
 * its canonical one (RFC 8785), since a row is flat. The order of the kinds is that of their names too.
 */
const KINDS: { [kind in keyof EditionContent]: (n: number, species: readonly string[]) => SQL } = {
  hyperfine_constants: (n) => sql`
    select r.a_mhz, r.a_unc_mhz, r.b_mhz, r.b_unc_mhz, r.evidence, h.level_id as id, h.isotope_id as isotope, r.note, r.source
    from hyperfine_revisions r join hyperfine_constants h on h.id = r.hyperfine_id where ${within(n)}`,
  isotopes: (n) => sql`
    select r.abundance_percent, r.evidence, r.g_i, r.isotope_id as id, i.mass_number, r.mass_u, r.note, r.source, i.species_id as species, r.two_i
    from isotope_revisions r join isotopes i on i.id = r.isotope_id where ${within(n)}`,
  // a level's id ends with its ordinal (the constraint levels_id), so that 100 000 of them need not be looked up in levels
  levels: (n, species) => sql`
    select r.alternative_name, r.configuration, r.core_l, r.core_two_j, r.core_two_s, r.coupling, r.energy_evidence, r.energy_invcm, r.energy_literal,
      r.energy_source, r.energy_unc_invcm, r.g_chosen, r.g_chosen_reason, r.level_id as id, r.l, r.l_outer, r.label, r.line_checked, r.note,
      split_part(r.level_id, '.', 2)::integer as ordinal, r.outer_two_j, r.parity, r.repeat_index, r.retired_reason, r.revision, r.species_id as species,
      r.status, r.successor, r.two_j, r.two_k, r.two_s
    from level_revisions r where r.species_id = any(${sql.param(species)}) and ${within(n)}`,
  measured_g: (n) => sql`
    select r.evidence, g.level_id as id, r.literal, r.note, r.source, r.unc, r.value
    from measured_g_revisions r join measured_g g on g.id = r.measured_g_id where ${within(n)}`,
  sources: (n) => sql`
    select r.authors, r.citation, r.doi, r.source_key as id, r.journal, r.kind, r.note, r.title, r.year
    from source_revisions r where ${within(n)}`,
  species: (n) => sql`
    select r.charge, r.core_configuration, r.element, r.species_id as id, r.ionisation_energy_invcm, r.ionisation_evidence, r.ionisation_source, r.name,
      r.note, s.ordinal, r.z
    from species_revisions r join species s on s.id = r.species_id where ${within(n)}`,
}
const KIND_NAMES = Object.keys(KINDS) as (keyof EditionContent)[]

/** Species whose levels are read together: a large edition passes through memory in parts. */
const SPECIES_AT_ONCE = 20

const ascending = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)

/** What ECMAScript may write otherwise than PostgreSQL: numbers with an exponent, and negative zero. */
const OTHERWISE = /:-?[0-9.]+e[+-][0-9]|:-0[,}]/

/**
 * The canonical text of a row from the one that PostgreSQL makes. Both escape the same characters, and both write the shortest digits that
 * give the number back; without an exponent (below 10^15, where no tie between two numbers has so few digits) those are the same.
 */
const canonicalText = (text: string): string => (OTHERWISE.test(text) ? JSON.stringify(JSON.parse(text)) : text)

interface Written extends Record<string, unknown> { id: string; text: string }

/** Species by species, so that a large edition passes through memory in parts: the dot ends a species' name before any letter, so that the whole is in order of the levels' ids. */
async function speciesInParts(db: Db | Tx): Promise<string[][]> {
  const { rows } = await db.execute<{ id: string }>(sql`select id from species`)
  const ids = rows.map(({ id }) => id).sort((a, b) => ascending(`${a}.`, `${b}.`))
  const parts: string[][] = []
  for (let i = 0; i < ids.length; i += SPECIES_AT_ONCE) parts.push(ids.slice(i, i + SPECIES_AT_ONCE))
  return parts
}

/** Asks for parts one after the other; the database reads the next one while this one is written out. */
async function* inTurn<Part, Read>(parts: readonly Part[], ask: (part: Part) => Promise<Read>): AsyncGenerator<Read> {
  const begin = (at: number): Promise<Read> | undefined => {
    const asked = at < parts.length ? ask(parts[at] as Part) : undefined
    // awaited below, unless whoever reads stops before
    asked?.catch(() => undefined)
    return asked
  }
  let asked = begin(0)
  for (let at = 0; at < parts.length; at += 1) {
    const read = (await asked) as Read
    asked = begin(at + 1)
    yield read
  }
}

/** One kind's entities as their canonical texts, part by part, in the order of their ids (several values of one level in the order of their text). */
async function* entitiesOf(db: Db | Tx, n: number, kind: keyof EditionContent): AsyncGenerator<Written[]> {
  const parts = kind === 'levels' ? await speciesInParts(db) : [[]]
  for await (const { rows } of inTurn(parts, (part: readonly string[]) => db.execute<Written>(sql`select e.id, row_to_json(e)::text as text from (${KINDS[kind](n, part)}) e`).then((read) => read))) {
    yield rows.map(({ id, text }) => ({ id, text: canonicalText(text) })).sort((a, b) => ascending(a.id, b.id) || ascending(a.text, b.text))
  }
}

interface Joined { text: string; count: number }

/**
 * One kind's entities with commas between them, part by part, and how many count (of levels, the active ones). Levels, which are many and
 * have ids of their own in ASCII, are put in order and joined by the database: 100 000 rows one by one keep this side busy for a second.
 */
async function* joinedOf(db: Db | Tx, n: number, kind: keyof EditionContent): AsyncGenerator<Joined> {
  if (kind !== 'levels') {
    for await (const part of entitiesOf(db, n, kind)) yield { text: part.map(({ text }) => text).join(','), count: part.length }
    return
  }
  const ask = (part: readonly string[]) => db.execute<{ text: string | null; active: number }>(sql`
    select string_agg(row_to_json(e)::text, ',' order by e.id collate "C") as text, (count(*) filter (where e.status = 'active'))::integer as active from (${KINDS.levels(n, part)}) e`).then((read) => read)
  for await (const { rows } of inTurn(await speciesInParts(db), ask)) {
    const { text, active } = rows[0] ?? { text: null, active: 0 }
    if (text !== null) yield { text: OTHERWISE.test(text) ? (JSON.parse(`[${text}]`) as Json[]).map((one) => JSON.stringify(one)).join(',') : text, count: active }
  }
}

/** Reads all that edition `n` shows, each kind in the order of its ids (several values of one level in the order of their text). */
export async function readEditionContent(db: Db | Tx, n: number): Promise<EditionContent> {
  const content: EditionContent = { species: [], isotopes: [], sources: [], levels: [], measured_g: [], hyperfine_constants: [] }
  for (const kind of KIND_NAMES) for await (const part of entitiesOf(db, n, kind)) for (const { text } of part) content[kind].push(JSON.parse(text) as Entity)
  return content
}

/** How much there is of each kind; of levels, the active ones. */
export const countContent = (content: EditionContent): EditionCounts => ({
  species: content.species.length,
  levels: content.levels.filter((level) => level.status === 'active').length,
  sources: content.sources.length,
  measured_g: content.measured_g.length,
  isotopes: content.isotopes.length,
  hyperfine_constants: content.hyperfine_constants.length,
})

interface EditionHead {
  number: number
  label: string
  notes: string
  constants: string
  /** As they are stored with the edition; counted anew where it has none yet. */
  counts?: EditionCounts
}

/**
 * The canonical text of an edition, piece by piece: one JSON object with what the edition is called, how much it holds, and all
 * that it shows, in the one form of RFC 8785. Returns what it counted at its end.
 */
export async function* canonicalEdition(db: Db | Tx, { number, label, notes, constants, counts: stored }: EditionHead): AsyncGenerator<string, EditionCounts> {
  const counts: EditionCounts = { species: 0, levels: 0, sources: 0, measured_g: 0, isotopes: 0, hyperfine_constants: 0 }
  yield `{"constants":${JSON.stringify(constants)},"content":{`
  for (const [at, kind] of KIND_NAMES.entries()) {
    yield `${at === 0 ? '' : ','}"${kind}":[`
    let begun = false
    for await (const { text, count } of joinedOf(db, number, kind)) {
      if (text === '') continue
      yield begun ? ',' : ''
      yield text
      begun = true
      counts[kind] += count
    }
    yield ']'
  }
  const ordered = Object.entries(stored ?? counts).sort(([a], [b]) => ascending(a, b))
  yield `},"counts":${JSON.stringify(Object.fromEntries(ordered))},"label":${JSON.stringify(label)},"notes":${JSON.stringify(notes)},"number":${number}}`
  return counts
}

/** SHA-256 (hexadecimal) of an edition's canonical text, and its counts. */
async function sumOf(db: Db | Tx, head: EditionHead): Promise<{ checksum: string; counts: EditionCounts }> {
  const hash = createHash('sha256')
  const parts = canonicalEdition(db, head)
  for (;;) {
    const { value, done } = await parts.next()
    if (done) return { checksum: hash.digest('hex'), counts: value }
    hash.update(value, 'utf8')
  }
}

/** Writes the edition's row, last in its transaction, over the revisions already written for it; from then on it is sealed. */
export async function sealEdition(
  tx: Tx,
  edition: EditionHead & { publishedBy: string | null; publisherName?: string },
): Promise<{ checksum: string; counts: EditionCounts }> {
  const sealed = await sumOf(tx, edition)
  await tx.insert(editions).values({ ...edition, ...sealed })
  return sealed
}

/** Whether the stored content still is what was published: computes the checksum anew and compares. */
export async function verifyEdition(db: Db | Tx, n: number): Promise<{ stored: string; computed: string } | null> {
  const [row] = await db.select().from(editions).where(eq(editions.number, n))
  if (row === undefined) return null
  return { stored: row.checksum, computed: (await sumOf(db, row)).checksum }
}
