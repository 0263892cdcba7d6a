import { and, asc, eq, gt, or } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { Db, Tx } from '@/db/client'
import { amendmentChanges, comments, users } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { entityTag, staleProblem } from '@/lib/entity-tag'
import { bodyProblem, Problem } from '@/lib/problem'
import type { Comment, NewComment } from '@/openapi/schemas/amendment'
import { amendmentRow } from './amendments'
import { changeRow } from './change-view'

const [author, resolver] = [alias(users, 'author'), alias(users, 'resolver')]

const read = (db: Db | Tx) =>
  db.select({ comment: comments, author: { id: author.id, name: author.name }, resolverName: resolver.name })
    .from(comments).innerJoin(author, eq(author.id, comments.author)).leftJoin(resolver, eq(resolver.id, comments.resolvedBy))

/** The tag that If-Match names: of whether the thread is resolved; nothing else of a comment changes. */
export const commentTag = ({ id, version }: { id: string; version: number }): string => entityTag('comment', id, version)

type Row = Awaited<ReturnType<typeof read>>[number]

const shown = ({ comment, author: by, resolverName }: Row): Comment => ({
  id: comment.id, amendment: comment.amendmentId, change: comment.changeId, thread: comment.thread, author: by, text: comment.text, created_at: comment.createdAt.toISOString(),
  version: comment.version, etag: commentTag(comment), resolved_at: comment.resolvedAt?.toISOString() ?? null, resolved_by: comment.resolvedBy === null ? null : { id: comment.resolvedBy, name: resolverName ?? '' },
})

/** The oldest first; one more than `limit` tells that there is a next page. */
export async function listComments(db: Db, amendmentId: string, after: readonly (string | number | null)[] | null, limit: number): Promise<Comment[]> {
  await amendmentRow(db, amendmentId)
  const [at, id] = after === null ? [null, ''] : [new Date(String(after[0])), String(after[1])]
  const beyond = at === null ? undefined : or(gt(comments.createdAt, at), and(eq(comments.createdAt, at), gt(comments.id, id)))
  return (await read(db).where(and(eq(comments.amendmentId, amendmentId), beyond)).orderBy(asc(comments.createdAt), asc(comments.id)).limit(limit + 1)).map(shown)
}

async function commentRow(db: Db | Tx, amendmentId: string, id: string): Promise<Row> {
  const [row] = await read(db).where(and(eq(comments.amendmentId, amendmentId), eq(comments.id, id)))
  if (row === undefined) throw new Problem('comment_unknown', 'The amendment has no comment of this identifier.')
  return row
}

/** The change that a thread is about, held; null where it was taken out meanwhile, which is what its thread then says too. */
async function stillThere(tx: Tx, id: string | null): Promise<string | null> {
  if (id === null) return null
  const [row] = await tx.select({ id: amendmentChanges.id }).from(amendmentChanges).where(eq(amendmentChanges.id, id)).for('key share')
  return row?.id ?? null
}

/** Begins a thread (about one change, or the whole) or answers in one. Possible whatever the state: talk is not an edit. */
export async function createComment(db: Db, acting: Acting, amendmentId: string, given: NewComment): Promise<Comment> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    await amendmentRow(tx, amendmentId)
    // held, so that nobody takes the change out before the comment is there
    if (given.change !== undefined) await changeRow(tx, amendmentId, given.change, 'key share')
    let changeId = given.change ?? null
    if (given.thread !== undefined) {
      const [first] = await tx.select().from(comments).where(and(eq(comments.amendmentId, amendmentId), eq(comments.id, given.thread)))
      if (first === undefined || first.thread !== null) throw bodyProblem('/thread', 'thread_malformed', 'A thread is named by its first comment, and the amendment has no such one.')
      changeId = await stillThere(tx, first.changeId)
    }
    const [row] = await tx.insert(comments).values({ amendmentId, changeId, thread: given.thread ?? null, author: caller.userId, text: given.text, createdAt: new Date() }).returning({ id: comments.id })
    if (row === undefined) throw new Error('The comment was not stored')
    await recordAudit(tx, acting, { action: 'comment.create', subjectKind: 'comment', subjectId: row.id, after: { amendment: amendmentId, change: changeId, thread: given.thread ?? null, text: given.text } })
    return shown(await commentRow(tx, amendmentId, row.id))
  })
}

/** Resolves a thread at its first comment, or opens it again. To say again what is so changes nothing. */
export async function resolveComment(db: Db, acting: Acting, amendmentId: string, id: string, resolved: boolean, ifMatch: string | null): Promise<Comment> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    await amendmentRow(tx, amendmentId)
    const [locked] = await tx.select().from(comments).where(and(eq(comments.amendmentId, amendmentId), eq(comments.id, id))).for('no key update')
    if (locked === undefined) throw new Problem('comment_unknown', 'The amendment has no comment of this identifier.')
    if (locked.thread !== null) throw new Problem('thread_malformed', 'A thread is resolved at its first comment; this one is an answer.', { extra: { thread: locked.thread } })
    if (ifMatch !== commentTag(locked)) throw staleProblem(shown(await commentRow(tx, amendmentId, id)))
    if ((locked.resolvedAt !== null) !== resolved) {
      await tx.update(comments).set({ version: locked.version + 1, ...(resolved ? { resolvedAt: new Date(), resolvedBy: caller.userId } : { resolvedAt: null, resolvedBy: null }) }).where(eq(comments.id, id))
      await recordAudit(tx, acting, { action: resolved ? 'comment.resolve' : 'comment.reopen', subjectKind: 'comment', subjectId: id, before: { resolved: !resolved }, after: { amendment: amendmentId, resolved } })
    }
    return shown(await commentRow(tx, amendmentId, id))
  })
}
