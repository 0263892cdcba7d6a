import { and, count, desc, eq, gt, isNull, lt, or, sql, type SQL } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { users, webhookDeliveries, webhooks } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { getConfig } from '@/lib/config'
import { entityTag } from '@/lib/entity-tag'
import { mintSecret } from '@/lib/notices/signature'
import { requireTarget } from '@/lib/notices/targets'
import { Problem } from '@/lib/problem'
import type { NewWebhook, NewWebhookAnswer, Webhook, WebhookChanges, WebhookEvent } from '@/openapi/schemas/notices'

const MOST_WEBHOOKS = 50

const waiting = sql<number>`(select count(*)::int from ${webhookDeliveries} where ${webhookDeliveries.webhookId} = ${webhooks}.${sql.identifier('id')} and ${webhookDeliveries.deliveredAt} is null and ${webhookDeliveries.failedAt} is null)`
const lastDelivered = sql<string | null>`(select max(${webhookDeliveries.deliveredAt}) from ${webhookDeliveries} where ${webhookDeliveries.webhookId} = ${webhooks}.${sql.identifier('id')})`
const COLUMNS = { hook: webhooks, owner: { id: users.id, name: users.name }, waiting, delivered: lastDelivered }

const shown = ({ hook, owner, waiting: left, delivered }: { hook: typeof webhooks.$inferSelect; owner: { id: string; name: string }; waiting: number; delivered: string | null }): Webhook => ({
  id: hook.id, name: hook.name, url: hook.url, events: hook.events as WebhookEvent[], active: hook.active, owner, created_at: hook.createdAt.toISOString(),
  waiting: left, last_delivered_at: delivered === null ? null : new Date(delivered).toISOString(), etag: entityTag('webhook', hook.id, hook.version),
})

const chosen = (db: Db | Tx, ...conditions: (SQL | undefined)[]) =>
  db.select(COLUMNS).from(webhooks).innerJoin(users, eq(users.id, webhooks.owner)).where(and(isNull(webhooks.removedAt), ...conditions))

/** Newest first. `after` is [creation time, id] of the last one given; one row more than `limit` tells that there is a next page. */
export async function listWebhooks(db: Db, after: readonly (string | number | null)[] | null, limit: number): Promise<Webhook[]> {
  const at = new Date(String(after?.[0]))
  const older = after === null ? undefined : or(lt(webhooks.createdAt, at), and(eq(webhooks.createdAt, at), gt(webhooks.id, String(after[1]))))
  const rows = await chosen(db, older).orderBy(desc(webhooks.createdAt), webhooks.id).limit(limit + 1)
  return rows.map(shown)
}

export async function readWebhook(db: Db | Tx, id: string): Promise<Webhook> {
  const [row] = await chosen(db, eq(webhooks.id, id))
  if (row === undefined) throw new Problem('webhook_unknown', 'There is no webhook of this identifier; GET /webhooks lists them.')
  return shown(row)
}

const told = ({ name, url, events, active }: Webhook) => ({ name, url, events, active })

/** Sets up a webhook. The secret stands in the answer, and otherwise only where it signs. */
export async function createWebhook(db: Db, acting: Acting, given: NewWebhook): Promise<NewWebhookAnswer> {
  const owner = knownCaller(acting.caller).userId
  const url = await requireTarget(given.url, getConfig().webhookPrivateTargets)
  const secret = mintSecret()
  return db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtext('lodeterm webhooks'))`)
    const [kept] = await tx.select({ number: count() }).from(webhooks).where(isNull(webhooks.removedAt))
    if ((kept?.number ?? 0) >= MOST_WEBHOOKS) throw new Problem('too_many_webhooks', `There are ${MOST_WEBHOOKS} webhooks; remove one first.`)
    const [row] = await tx.insert(webhooks).values({ owner, name: given.name, url, secret, events: [...new Set(given.events)], createdAt: new Date() }).returning({ id: webhooks.id })
    if (row === undefined) throw new Error('The webhook was not stored')
    const made = await readWebhook(tx, row.id)
    await recordAudit(tx, acting, { action: 'webhook.create', subjectKind: 'webhook', subjectId: made.id, after: told(made) })
    return { ...made, secret }
  })
}

async function locked(tx: Tx, id: string, check: (hook: Webhook) => void): Promise<Webhook> {
  await tx.select({ id: webhooks.id }).from(webhooks).where(eq(webhooks.id, id)).for('update')
  const hook = await readWebhook(tx, id)
  check(hook)
  return hook
}

/** Changes a webhook. `check` sees it as it is, under lock, and may refuse. */
export async function changeWebhook(db: Db, acting: Acting, id: string, given: WebhookChanges, check: (hook: Webhook) => void): Promise<Webhook> {
  check(await readWebhook(db, id))
  const url = given.url === undefined ? undefined : await requireTarget(given.url, getConfig().webhookPrivateTargets)
  return db.transaction(async (tx) => {
    const before = told(await locked(tx, id, check))
    const after = { name: given.name ?? before.name, url: url ?? before.url, events: given.events === undefined ? before.events : [...new Set(given.events)], active: given.active ?? before.active }
    if (JSON.stringify(before) === JSON.stringify(after)) return readWebhook(tx, id)
    await tx.update(webhooks).set({ ...after, version: sql`${webhooks.version} + 1` }).where(eq(webhooks.id, id))
    await recordAudit(tx, acting, { action: 'webhook.change', subjectKind: 'webhook', subjectId: id, before, after })
    return readWebhook(tx, id)
  })
}

/** Removes a webhook; what still waits for it is given up. */
export async function removeWebhook(db: Db, acting: Acting, id: string, check: (hook: Webhook) => void): Promise<void> {
  await db.transaction(async (tx) => {
    const before = told(await locked(tx, id, check))
    const now = new Date()
    await tx.update(webhooks).set({ removedAt: now, active: false, version: sql`${webhooks.version} + 1` }).where(eq(webhooks.id, id))
    await tx.update(webhookDeliveries).set({ failedAt: now, lastError: 'the webhook was removed' }).where(and(eq(webhookDeliveries.webhookId, id), isNull(webhookDeliveries.deliveredAt), isNull(webhookDeliveries.failedAt)))
    await recordAudit(tx, acting, { action: 'webhook.remove', subjectKind: 'webhook', subjectId: id, before })
  })
}
