import { isDeepStrictEqual } from 'node:util'
import { and, eq } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { amendmentChanges } from '@/db/schema'
import { type Fault, Problem } from '@/lib/problem'
import type { BatchItem, ChangeBatch } from '@/openapi/schemas/change'
import { type ChangeRow, changeTag } from './change-view'
import { storable } from './editing'
import { namedBy, wordsOf } from './request'

type Unanswered = NonNullable<BatchItem['unanswered']>

/** Whether a change is what this account wrote with the request that it has no answer to: the version right after `etag`, or the first. */
function isOwn(row: ChangeRow, userId: string, etag: string | undefined, { action, values, ...words }: Unanswered): boolean {
  const follows = etag === undefined ? row.version === 1 : changeTag({ id: row.id, version: row.version - 1 }) === etag
  return follows && row.author === userId && row.action === action && isDeepStrictEqual(row.given, JSON.parse(storable(values ?? {}))) &&
    isDeepStrictEqual({ reason: row.reason, successor: row.successor, comment: row.comment }, wordsOf({ action, ...words }))
}

/**
 * A batch whose items name the change as it stands by now, where that is what the same account had sent before without having an answer:
 * a page that closes in the middle of a save cannot know the entity tag which that save leads to. Whichever of both requests comes first,
 * the later text stays: where the earlier one has not come yet, it finds its own tag stale. Anything else that stands there is left
 * alone, and refused as ever. Call it under the lock of the amendment.
 */
export async function uponOwn(tx: Db | Tx, amendment: string, batch: ChangeBatch, userId: string): Promise<ChangeBatch> {
  if (batch.changes.every((item) => item.unanswered === undefined)) return batch
  const c = amendmentChanges
  const used = new Set<string>()
  const refused: Fault[] = []
  const changes: BatchItem[] = []
  for (const [at, item] of batch.changes.entries()) {
    const { unanswered, change, etag } = item
    const { kind, subject, speciesId } = namedBy(item)
    if (unanswered === undefined) {
      changes.push(item)
      continue
    }
    const place = change !== undefined ? eq(c.id, change) : subject !== null ? eq(c.subject, subject) : and(eq(c.speciesId, speciesId ?? ''), eq(c.action, 'create'), eq(c.author, userId), eq(c.version, 1))
    const rows = await tx.select().from(c).where(and(eq(c.amendmentId, amendment), eq(c.kind, kind), place)).orderBy(c.position)
    const own = rows.find((row) => !used.has(row.id) && isOwn(row, userId, etag, unanswered))
    if (own !== undefined) used.add(own.id)
    // a new level that is not there yet may still come, and would then be there twice
    else if (change === undefined && subject === null) refused.push({ pointer: `/changes/${at}/unanswered`, code: 'etag_stale', detail: 'The new level that was sent before is not there, or not as it was sent.' })
    changes.push(own === undefined ? item : { ...item, change: own.id, etag: changeTag(own) })
  }
  if (refused.length > 0) throw new Problem('etag_stale', 'A new level of this batch is not there as it was sent before; nothing was written.', { errors: refused })
  return { ...batch, changes }
}
