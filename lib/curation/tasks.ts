import { desc, inArray } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { amendments } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import type { Caller } from '@/lib/access/caller'
import type { Amendment, Tasks } from '@/openapi/schemas/amendment'
import { describeAmendments } from './amendments'
import { EDITABLE } from './editing'
import { isAuthor } from './possible'

/** Amendments that are neither published nor withdrawn; where there are more, the answer says that it is not complete. */
const MOST = 500

/** What waits for somebody, the last touched first. */
export async function tasksOf(db: Db, given: Caller): Promise<Tasks> {
  const { userId } = knownCaller(given)
  const rows = await db.select().from(amendments).where(inArray(amendments.state, [...EDITABLE])).orderBy(desc(amendments.updatedAt), amendments.id).limit(MOST + 1)
  const open = (await describeAmendments(db, rows.slice(0, MOST))).map(({ amendment }) => amendment)
  const mine = (amendment: Amendment): boolean => isAuthor(amendment, userId)
  const returned = (amendment: Amendment): boolean => amendment.state === 'draft' && amendment.review?.outcome === 'returned'
  return {
    drafts: open.filter((one) => one.state === 'draft' && mine(one) && !returned(one)),
    returned: open.filter((one) => returned(one) && mine(one)),
    in_review: open.filter((one) => one.state === 'in_review' && mine(one)),
    to_review: open.filter((one) => one.state === 'in_review' && !mine(one)),
    accepted: open.filter((one) => one.state === 'accepted'),
    complete: rows.length <= MOST,
    open_threads: open.filter(mine).reduce((sum, one) => sum + one.counts.open_comments, 0),
  }
}
