import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { getDb } from '@/db/client'
import { amendmentChanges, users } from '@/db/schema'
import type { Acting } from '@/lib/access/audit'
import { createAmendment } from '@/lib/curation/amendments'
import { addChange } from '@/lib/curation/changes'
import { createComment } from '@/lib/curation/comments'
import { lockAmendment } from '@/lib/curation/editing'
import { readAccepted } from '@/lib/curation/publish-accepted'

async function curator(): Promise<Acting> {
  const [user] = await getDb().insert(users).values({ email: `${randomUUID()}@test.example`, name: 'Curator', role: 'curator', passwordHash: 'x' }).returning()
  return { caller: { kind: 'session', userId: user!.id, role: 'curator', sessionId: null } as never, ip: null, requestId: null } as never
}
/** Longer than any statement here takes when nothing holds it. */
const PATIENCE = sql.raw("set local lock_timeout = '400ms'")
/** A promise and what settles it. */
function signal(): { done: Promise<void>; tell: () => void } {
  let tell = () => undefined as void
  const done = new Promise<void>((resolve) => { tell = resolve })
  return { done, tell }
}

describe('a comment', () => {
  it('does not wait for whoever edits or publishes the amendment, while a second editor does', async () => {
    const [db, acting] = [getDb(), await curator()]
    const { id } = await createAmendment(db, acting, { title: 'Held' })
    const [held, free] = [signal(), signal()]
    const editing = db.transaction(async (tx) => {
      await lockAmendment(tx, id)
      await readAccepted(tx, true)
      held.tell()
      await free.done
    })
    await held.done
    const comment = await db.transaction(async (tx) => {
      await tx.execute(PATIENCE)
      return createComment(tx as never, acting, id, { text: 'While it is edited.' })
    })
    expect(comment.text).toBe('While it is edited.')
    await expect(db.transaction(async (tx) => {
      await tx.execute(PATIENCE)
      await lockAmendment(tx, id)
    })).rejects.toThrow()
    free.tell()
    await editing
  })

  it('on a change that is being taken out is of no such change', async () => {
    const [db, acting] = [getDb(), await curator()]
    const { id } = await createAmendment(db, acting, { title: 'Taken out' })
    const change = await addChange(db, acting, id, { action: 'create', species: 'Na-I', values: { note: 'half-typed' } })
    const first = await createComment(db, acting, id, { text: 'First', change })
    const [held, free] = [signal(), signal()]
    const removing = db.transaction(async (tx) => {
      await tx.delete(amendmentChanges).where(eq(amendmentChanges.id, change))
      held.tell()
      await free.done
    })
    await held.done
    const [fresh, answer] = [createComment(db, acting, id, { text: 'Late', change }), createComment(db, acting, id, { text: 'Answer', thread: first.id })]
    setTimeout(free.tell, 200)
    await expect(fresh).rejects.toMatchObject({ code: 'change_unknown', status: 404 })
    expect(await answer).toMatchObject({ thread: first.id, change: null })
    await removing
  })
})
