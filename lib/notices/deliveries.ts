import { and, desc, eq, gt, isNull, lt, or, sql } from 'drizzle-orm'
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

/** Attempts under way in this process, over all webhooks and for one. */
const AT_ONCE = 20
const AT_ONCE_TO_ONE = 2
/** How long attempts that are under way keep from looking what else has become due, in milliseconds. */
const LOOK_AGAIN_MS = 500

/** Claims attempts that are due, by moving the next attempt on, so that another process leaves them alone: a few of each webhook that is not busy. */
async function claim(db: Db, most: number, busy: readonly string[]): Promise<Row[]> {
  const waiting = sql`d.delivered_at is null and d.failed_at is null and d.next_attempt_at <= now() and d.webhook_id <> all(${sql.param(busy)}::uuid[])`
  const due = sql`
    select d.id from webhook_deliveries d where ${waiting} and d.id in (
      select place.id from (select d.id, row_number() over (partition by d.webhook_id order by d.next_attempt_at, d.created_at, d.id) as place from webhook_deliveries d where ${waiting}) place
      where place.place <= ${AT_ONCE_TO_ONE})
    order by d.next_attempt_at limit ${most} for update of d skip locked`
  return db.update(webhookDeliveries)
    .set({ attempts: sql`${webhookDeliveries.attempts} + 1`, nextAttemptAt: sql`now() + interval '1 minute'` })
    // an array is made once, where a subquery may be run once a row and lock anew each time
    .where(sql`${webhookDeliveries.id} = any(array(${due}))`).returning()
}

async function deliver(db: Db, row: Row): Promise<void> {
  const [hook] = await db.select({ url: webhooks.url, secret: webhooks.secret, active: webhooks.active, removedAt: webhooks.removedAt }).from(webhooks).where(eq(webhooks.id, row.webhookId))
  if (hook === undefined) return
  const pause = pauseAfter(row.attempts)
  const after = await attempt(db, row, hook, pause === null)
  if (pause !== null && after.deliveredAt === null && after.failedAt === null) await db.update(webhookDeliveries).set({ nextAttemptAt: new Date(Date.now() + pause) }).where(eq(webhookDeliveries.id, row.id))
}

/**
 * Makes the attempts that are due until there is none left; returns their number. A target that is slow to answer holds up its own
 * deliveries only: while it is waited for, those of others are claimed and sent.
 */
export async function sendDeliveries(db: Db): Promise<number> {
  const running = new Map<string, { hook: string; done: Promise<void> }>()
  const failures: unknown[] = []
  let made = 0
  for (;;) {
    const before = running.size
    const free = AT_ONCE - running.size
    const claimed = free === 0 || failures.length > 0 ? [] : await claim(db, free, [...new Set([...running.values()].map(({ hook }) => hook))])
    for (const row of claimed) {
      const done = deliver(db, row).catch((error: unknown) => void failures.push(error)).finally(() => void running.delete(row.id))
      running.set(row.id, { hook: row.webhookId, done })
    }
    made += claimed.length
    if (running.size > 0) await soonest([...running.values()].map(({ done }) => done))
    // those of a webhook that was busy when it was looked are still to come
    else if (before === 0 || failures.length > 0) break
  }
  if (failures.length > 0) throw failures[0]
  return made
}

/** Until one has ended, or it is time to look for more. */
async function soonest(tasks: readonly Promise<void>[]): Promise<void> {
  let timer: NodeJS.Timeout | undefined
  const tick = new Promise<void>((done) => { timer = setTimeout(done, LOOK_AGAIN_MS) })
  await Promise.race([...tasks, tick])
  clearTimeout(timer)
}
