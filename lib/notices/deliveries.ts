import { and, desc, eq, gt, isNull, lt, lte, or, sql } from 'drizzle-orm'
import type { Db } from '@/db/client'
import { webhookDeliveries, webhooks } from '@/db/schema'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { getConfig } from '@/lib/config'
import { MOST_ATTEMPTS, pauseAfter } from '@/lib/notices/backoff'
import { post } from '@/lib/notices/post'
import { deliveryFields } from '@/lib/notices/signature'
import { readWebhook } from '@/lib/notices/webhooks'
import type { WebhookDelivery } from '@/openapi/schemas/notices'

type Row = typeof webhookDeliveries.$inferSelect

const shown = (row: Row): WebhookDelivery => {
  const state = row.deliveredAt !== null ? 'delivered' : row.failedAt !== null ? 'failed' : 'waiting'
  return {
    id: row.id, event: row.event, state, attempts: row.attempts, created_at: row.createdAt.toISOString(), next_attempt_at: state === 'waiting' ? row.nextAttemptAt.toISOString() : null,
    delivered_at: row.deliveredAt?.toISOString() ?? null, failed_at: row.failedAt?.toISOString() ?? null, response_status: row.responseStatus, last_error: row.lastError,
  }
}

/** The log of a webhook, newest first. `after` is [creation time, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listDeliveries(db: Db, webhook: string, after: readonly (string | number | null)[] | null, limit: number): Promise<WebhookDelivery[]> {
  await readWebhook(db, webhook)
  const at = new Date(String(after?.[0]))
  const older = after === null ? undefined : or(lt(webhookDeliveries.createdAt, at), and(eq(webhookDeliveries.createdAt, at), gt(webhookDeliveries.id, String(after[1]))))
  const rows = await db.select().from(webhookDeliveries).where(and(eq(webhookDeliveries.webhookId, webhook), older)).orderBy(desc(webhookDeliveries.createdAt), webhookDeliveries.id).limit(limit + 1)
  return rows.map(shown)
}

interface Hook { url: string; secret: string; active: boolean; removedAt: Date | null }

/** Makes one attempt at a delivery that this process has claimed, and writes down what came of it. */
async function attempt(db: Db, row: Row, hook: Hook, last: boolean): Promise<Row> {
  const now = new Date()
  const outcome = !hook.active || hook.removedAt !== null
    ? { status: null, error: 'the webhook is switched off', off: true }
    : { ...(await post(hook.url, row.body, deliveryFields({ id: row.id, event: row.event, body: row.body, secret: hook.secret, at: now }), { privateToo: getConfig().webhookPrivateTargets })), off: false }
  const failed = outcome.error !== null && (outcome.off || last)
  const [after] = await db.update(webhookDeliveries)
    .set({ responseStatus: outcome.status, lastError: outcome.error, ...(outcome.error === null ? { deliveredAt: new Date() } : failed ? { failedAt: new Date() } : {}) })
    // what was given up meanwhile, with its webhook, stays so
    .where(and(eq(webhookDeliveries.id, row.id), isNull(webhookDeliveries.deliveredAt), isNull(webhookDeliveries.failedAt))).returning()
  return after ?? row
}

/** Sends the event `ping` at once, whatever else waits; one attempt, and the answer tells what came of it. */
export async function testWebhook(db: Db, acting: Acting, id: string): Promise<WebhookDelivery> {
  const made = await db.transaction(async (tx) => {
    const hook = await readWebhook(tx, id)
    const at = new Date()
    const delivery = crypto.randomUUID()
    const body = JSON.stringify({ id: delivery, event: 'ping', at: at.toISOString(), data: { webhook: hook.id, name: hook.name } })
    // claimed from the start: the sender must not take it as well
    const [row] = await tx.insert(webhookDeliveries).values({ id: delivery, webhookId: id, event: 'ping', body, createdAt: at, attempts: MOST_ATTEMPTS, nextAttemptAt: new Date(at.getTime() + 86_400_000) }).returning()
    const [secret] = await tx.select({ url: webhooks.url, secret: webhooks.secret, removedAt: webhooks.removedAt }).from(webhooks).where(eq(webhooks.id, id))
    if (row === undefined || secret === undefined) throw new Error('The delivery was not stored')
    await recordAudit(tx, acting, { action: 'webhook.test', subjectKind: 'webhook', subjectId: id, after: { delivery } })
    return { row, hook: { ...secret, active: true } }
  })
  await attempt(db, made.row, made.hook, true)
  const [row] = await db.update(webhookDeliveries).set({ attempts: 1 }).where(eq(webhookDeliveries.id, made.row.id)).returning()
  return shown(row ?? made.row)
}

const AT_ONCE = 5

/** Makes the attempts that are due. Each is claimed by moving its next attempt on, so that another process leaves it alone. Returns their number. */
export async function sendDeliveries(db: Db): Promise<number> {
  const due = db.select({ id: webhookDeliveries.id }).from(webhookDeliveries)
    .where(and(isNull(webhookDeliveries.deliveredAt), isNull(webhookDeliveries.failedAt), lte(webhookDeliveries.nextAttemptAt, sql`now()`)))
    .orderBy(webhookDeliveries.nextAttemptAt).limit(AT_ONCE).for('update', { skipLocked: true })
  const claimed = await db.update(webhookDeliveries)
    .set({ attempts: sql`${webhookDeliveries.attempts} + 1`, nextAttemptAt: sql`now() + interval '1 minute'` })
    .where(sql`${webhookDeliveries.id} in (${due})`).returning()
  await Promise.all(claimed.map(async (row) => {
    const [hook] = await db.select({ url: webhooks.url, secret: webhooks.secret, active: webhooks.active, removedAt: webhooks.removedAt }).from(webhooks).where(eq(webhooks.id, row.webhookId))
    if (hook === undefined) return
    const pause = pauseAfter(row.attempts)
    const after = await attempt(db, row, hook, pause === null)
    if (pause !== null && after.deliveredAt === null && after.failedAt === null) await db.update(webhookDeliveries).set({ nextAttemptAt: new Date(Date.now() + pause) }).where(eq(webhookDeliveries.id, row.id))
  }))
  return claimed.length
}
