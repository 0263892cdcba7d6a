import { sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import type { ChangeKind } from '@/openapi/schemas/change'
import { WRITINGS } from './publish-rows'

/** What made the revision of something that is in force: the edition it came with, and the amendment and change behind it where there was one. */
export interface InForce { revision: number; edition: number; amendment: { id: string; title: string } | null; change: string | null }

interface Row extends Record<string, unknown> { subject: string; revision: number; edition: number; amendment: string | null; title: string | null; change: string | null }

/** Identifiers of hyperfine constants are numbers; a subject is written `Na-I.3/23`. */
const SUBJECT: Partial<Record<ChangeKind, { join: string; subject: string }>> = {
  hyperfine: { join: 'join hyperfine_constants h on h.id = r.hyperfine_id', subject: "h.level_id || '/' || split_part(h.isotope_id, '/', 2)" },
}

async function ofKind(db: Db | Tx, edition: number, kind: ChangeKind, subjects: readonly string[]): Promise<Row[]> {
  const { table, identity } = WRITINGS[kind]
  const { join, subject } = SUBJECT[kind] ?? { join: '', subject: `r.${identity}` }
  const { rows } = await db.execute<Row>(sql`
    select ${sql.raw(subject)} as subject, r.revision, r.published_from as edition, a.id as amendment, a.title,
      (select f.change_id from edition_changes f where f.amendment_id = a.id and f.kind = ${kind} and f.subject = ${sql.raw(subject)} limit 1) as change
    from ${sql.raw(table)} r ${sql.raw(join)} left join amendments a on a.id = r.amendment_id
    where r.published_from <= ${edition} and (r.published_until is null or r.published_until > ${edition})
      and ${sql.raw(subject)} in (select jsonb_array_elements_text(${JSON.stringify(subjects)}::jsonb))`)
  return rows
}

/** For the subjects named: which revision an edition holds, and what made it. */
export async function readInForce(db: Db | Tx, edition: number, subjects: readonly { kind: ChangeKind; subject: string }[]): Promise<(kind: ChangeKind, subject: string) => InForce | null> {
  const found = new Map<string, InForce>()
  for (const kind of new Set(subjects.map((one) => one.kind))) {
    for (const { subject, amendment, title, ...row } of await ofKind(db, edition, kind, subjects.flatMap((one) => (one.kind === kind ? [one.subject] : [])))) {
      found.set(`${kind} ${subject}`, { revision: row.revision, edition: row.edition, change: row.change, amendment: amendment === null ? null : { id: amendment, title: title ?? '' } })
    }
  }
  return (kind, subject) => found.get(`${kind} ${subject}`) ?? null
}

/** How the revision that is in force is told in a sentence: `edition 2 made revision 2 of it by “Title”`. */
export function inForceWords(now: InForce | null): string {
  if (now === null) return 'it is not in the table'
  return `edition ${now.edition} made revision ${now.revision}, which is in force${now.amendment === null ? '' : `, by the amendment \u201c${now.amendment.title}\u201d`}`
}

export const baseWords = (base: number | null): string => (base === null ? 'when it was not in the table' : `from revision ${base}`)

/** What is told of a change that was not made from the revision in force. */
export interface StaleBase { change: string | null; subject: string; base_revision: number | null; current_revision: number | null; edition: number | null; amendment: { id: string; title: string } | null }

export const staleBase = (change: string | null, subject: string, base: number | null, now: InForce | null): StaleBase => ({
  change, subject, base_revision: base, current_revision: now?.revision ?? null, edition: now?.edition ?? null, amendment: now?.amendment ?? null,
})

export const staleDetail = (subject: string, base: number | null, now: InForce | null): string => `The change of ${subject} was made ${baseWords(base)}, and now ${inForceWords(now)}.`
