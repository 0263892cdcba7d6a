import { sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import type { FeedEntry } from '@/openapi/schemas/edition'

interface Row extends Record<string, unknown> { sequence: number; edition: number; kind: FeedEntry['kind']; subject: string; action: FeedEntry['action']; amendment: string; title: string }

/** What editions changed, one thing after another, after a place in the sequence. One more than `limit` tells that there is more. */
export async function readFeed(db: Db, after: number, limit: number): Promise<FeedEntry[]> {
  const { rows } = await db.execute<Row>(sql`
    select f.sequence::double precision as sequence, f.edition, f.kind, f.subject, f.action, a.id as amendment, a.title
    from edition_changes f join amendments a on a.id = f.amendment_id where f.sequence > ${after} order by f.sequence limit ${limit + 1}`)
  return rows.map(({ amendment, title, ...row }) => ({ ...row, amendment: { id: amendment, title } }))
}
