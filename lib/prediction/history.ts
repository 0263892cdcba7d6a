import { sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { loadLevelPast } from '@/lib/catalogue/load'
import { parameterProblem } from '@/lib/problem'
import type { LevelRevision } from '@/openapi/schemas/edition'
import { fieldsBetween } from './changes'
import { valuesIn } from './comparison-details'

interface Row extends Record<string, unknown> {
  revision: number; edition: number; label: string; published_at: Date | string; until: number | null; status: 'active' | 'retired'
  amendment: string | null; title: string | null; authors: string[] | null; reviewer: string | null; reason: string | null; comment: string | null
}

const actionOf = (status: Row['status'], before: Row['status'] | undefined): LevelRevision['action'] =>
  before === undefined ? 'created' : status === 'retired' ? 'retired' : before === 'retired' ? 'restored' : 'replaced'

/** Every revision of a level, the newest first, each with what it changed and how it came about. 404 `level_unknown`. */
export async function levelHistory(db: Db, level: string): Promise<LevelRevision[]> {
  const { rows } = await db.execute<Row>(sql`
    select r.revision, r.published_from as edition, e.label, e.published_at, r.published_until as until, r.status, a.id as amendment, a.title, c.reason, c.comment,
      (select array_agg(u.name order by u.name) from amendment_authors w join users u on u.id = w.user_id where w.amendment_id = a.id) as authors,
      (select u.name from reviews v join users u on u.id = v.closed_by where v.amendment_id = a.id and v.outcome = 'accepted' order by v.asked_at desc limit 1) as reviewer
    from level_revisions r join editions e on e.number = r.published_from
      left join amendments a on a.id = r.amendment_id left join amendment_changes c on c.amendment_id = a.id and c.kind = 'level' and c.subject = r.level_id
    where r.level_id = ${level} order by r.published_from`)
  if (rows.length === 0) throw parameterProblem('level', 'level_unknown', `No edition has ever held a level ${level}.`)
  const past = await loadLevelPast(db, level, rows.map(({ edition }) => edition))
  const revisions: LevelRevision[] = []
  let before: { values: ReadonlyMap<string, unknown>; status: Row['status'] } | undefined
  for (const row of rows) {
    const content = past.get(row.edition)
    const values: ReadonlyMap<string, unknown> = (content === undefined ? undefined : valuesIn(content).get(level)) ?? new Map<string, unknown>()
    revisions.push({
      revision: row.revision, edition: row.edition, edition_label: row.label, published_at: new Date(row.published_at).toISOString(), until_edition: row.until,
      action: actionOf(row.status, before?.status), fields: before === undefined ? [] : fieldsBetween(before.values, values),
      amendment: row.amendment === null ? null : { id: row.amendment, title: row.title ?? '' }, authors: row.authors ?? [], reviewer: row.reviewer, reason: row.reason, comment: row.comment,
    })
    before = { values, status: row.status }
  }
  return revisions.reverse()
}
