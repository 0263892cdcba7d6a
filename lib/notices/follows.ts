import { and, count, desc, eq, gt, lt, or } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { follows, users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import type { Caller } from '@/lib/access/caller'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import { entityTag } from '@/lib/entity-tag'
import { levelIndex, speciesIndex, transitionIndices } from '@/lib/prediction/resolve'
import { orderedPair } from '@/lib/prediction/transition'
import { bodyProblem, Problem } from '@/lib/problem'
import type { Follow, NewFollow } from '@/openapi/schemas/notices'

const MOST_FOLLOWS = 1000

type Row = typeof follows.$inferSelect
const tagOf = (id: string): string => entityTag('follow', id)

function retiredIn(snapshot: Snapshot | null, { kind, subject }: Row): boolean {
  if (snapshot === null || kind === 'species') return false
  return subject.split('~').some((level) => snapshot.indexOf(level) === undefined && snapshot.retired(level) !== undefined)
}

const shown = (row: Row, snapshot: Snapshot | null): Follow => ({ id: row.id, kind: row.kind, subject: row.subject, retired: retiredIn(snapshot, row), created_at: row.createdAt.toISOString(), etag: tagOf(row.id) })

/** One's own, newest first. `after` is [creation time, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listFollows(db: Db, caller: Caller, filter: { subject?: string }, after: readonly (string | number | null)[] | null, limit: number, snapshot: Snapshot | null): Promise<Follow[]> {
  const at = new Date(String(after?.[0]))
  const rows = await db.select().from(follows).where(and(
    eq(follows.userId, knownCaller(caller).userId),
    filter.subject === undefined ? undefined : eq(follows.subject, filter.subject),
    after === null ? undefined : or(lt(follows.createdAt, at), and(eq(follows.createdAt, at), gt(follows.id, String(after[1])))),
  )).orderBy(desc(follows.createdAt), follows.id).limit(limit + 1)
  return rows.map((row) => shown(row, snapshot))
}

/** What the latest edition makes of a subject: a line in the order of its energies. Throws the 404s and 410s of reading it. */
function understood(snapshot: Snapshot | null, subject: string): Pick<Row, 'kind' | 'subject'> {
  if (snapshot === null) throw new Problem('not_ready', 'No edition has been published yet.', { headers: { 'retry-after': '30' } })
  if (subject.includes('~')) {
    const [low, high] = orderedPair(snapshot, ...transitionIndices(snapshot, subject))
    return { kind: 'line', subject: `${snapshot.levelId(low)}~${snapshot.levelId(high)}` }
  }
  if (subject.includes('.')) return { kind: 'level', subject: snapshot.levelId(levelIndex(snapshot, subject, 'subject')) }
  speciesIndex(snapshot, subject, 'subject')
  return { kind: 'species', subject }
}

/** Follows a species, level or line of the latest edition; what is followed already is given back as it is. */
export async function follow(db: Db, acting: Acting, given: NewFollow, snapshot: Snapshot | null): Promise<Follow> {
  const { userId } = knownCaller(acting.caller)
  const wanted = understood(snapshot, given.subject)
  if (given.kind !== undefined && given.kind !== wanted.kind) throw bodyProblem('/kind', 'follow_kind_differs', `${given.subject} is a ${wanted.kind}; leave kind out, or name that.`)
  return db.transaction(async (tx) => {
    // the account's row is locked, so that two requests at once are counted one after the other
    await tx.select({ id: users.id }).from(users).where(eq(users.id, userId)).for('update')
    const [there] = await tx.select().from(follows).where(and(eq(follows.userId, userId), eq(follows.kind, wanted.kind), eq(follows.subject, wanted.subject)))
    if (there !== undefined) return shown(there, snapshot)
    const [kept] = await tx.select({ number: count() }).from(follows).where(eq(follows.userId, userId))
    if ((kept?.number ?? 0) >= MOST_FOLLOWS) throw new Problem('too_many_follows', `You follow ${MOST_FOLLOWS} things; follow a whole species instead, or one thing less.`)
    const [row] = await tx.insert(follows).values({ userId, ...wanted, createdAt: new Date() }).returning()
    if (row === undefined) throw new Error('The follow was not stored')
    await recordAudit(tx, acting, { action: 'follow.create', subjectKind: wanted.kind, subjectId: wanted.subject, after: { follow: row.id } })
    return shown(row, snapshot)
  })
}

/** Follows no longer. `check` sees the tag, and may refuse. */
export async function unfollow(db: Db, acting: Acting, id: string, check: (etag: string) => void): Promise<void> {
  const { userId } = knownCaller(acting.caller)
  await db.transaction(async (tx) => {
    const [row] = await tx.select().from(follows).where(and(eq(follows.id, id), eq(follows.userId, userId))).for('update')
    if (row === undefined) throw new Problem('follow_unknown', 'You follow nothing under this identifier; GET /follows lists what you follow.')
    check(tagOf(id))
    await tx.delete(follows).where(eq(follows.id, id))
    await recordAudit(tx, acting, { action: 'follow.delete', subjectKind: row.kind, subjectId: row.subject, before: { follow: row.id } })
  })
}
