import { and, desc, eq, gte, lt, sql, type SQL } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { apiKeys, auditEvents, users } from '@/db/schema'
import type { Caller } from '@/lib/access/caller'
import { commitClaim, type HeldClaim } from '@/lib/access/idempotency'
import type { AuditEvent } from '@/openapi/schemas/audit'

/** Where a change came from: who, from which address, in which request, under which claim of an Idempotency-Key. */
export interface Acting { caller: Caller; ip: string | null; requestId: string | null; claim?: HeldClaim | null }

export interface AuditEntry { action: string; subjectKind: string; subjectId: string | null; before?: unknown; after?: unknown }

/**
 * Adds an audit row in the same transaction as the change it tells of, and notes there that the request has had its effect. Passwords
 * and keys never stand in it.
 */
export async function recordAudit(tx: Tx | Db, acting: Acting, entry: AuditEntry): Promise<void> {
  const { caller } = acting
  await tx.insert(auditEvents).values({
    actorUser: caller.userId,
    actorKey: caller.kind === 'key' ? caller.keyId : null,
    actorSession: caller.kind === 'session' ? caller.sessionId : null,
    action: entry.action,
    subjectKind: entry.subjectKind,
    subjectId: entry.subjectId,
    before: entry.before ?? null,
    after: entry.after ?? null,
    ip: acting.ip,
    requestId: acting.requestId,
  })
  if (acting.claim != null) await commitClaim(tx, acting.claim)
}

export interface AuditFilter { action?: string; subject_kind?: string; subject_id?: string; actor?: string; key?: string; session?: string; from?: string; until?: string }

/** A batch is filed under its amendment, and is about everything that it writes or takes out. */
function inBatch(subject: string): SQL {
  const naming = (list: string) => JSON.stringify({ [list]: [{ subject }] })
  return sql`(${auditEvents.action} = 'change.batch' and (${auditEvents.after} @> ${naming('written')}::jsonb or ${auditEvents.before} @> ${naming('changed')}::jsonb or ${auditEvents.before} @> ${naming('removed')}::jsonb))`
}

/** Newest first; `beforeId` is the last one already given. One row more than `limit` tells that there is a next page. */
export async function listAudit(db: Db, filter: AuditFilter, beforeId: number | null, limit: number): Promise<AuditEvent[]> {
  const conditions: SQL[] = []
  if (beforeId !== null) conditions.push(lt(auditEvents.id, beforeId))
  if (filter.action !== undefined) conditions.push(eq(auditEvents.action, filter.action))
  if (filter.subject_kind !== undefined) conditions.push(eq(auditEvents.subjectKind, filter.subject_kind))
  // a change of a level is filed under the change, and is about the level
  if (filter.subject_id !== undefined) conditions.push(sql`(${auditEvents.subjectId} = ${filter.subject_id} or ${auditEvents.after} ->> 'subject' = ${filter.subject_id} or ${auditEvents.before} ->> 'subject' = ${filter.subject_id} or ${inBatch(filter.subject_id)})`)
  if (filter.actor !== undefined) conditions.push(eq(auditEvents.actorUser, filter.actor))
  if (filter.key !== undefined) conditions.push(eq(auditEvents.actorKey, filter.key))
  if (filter.session !== undefined) conditions.push(eq(auditEvents.actorSession, filter.session))
  if (filter.from !== undefined) conditions.push(gte(auditEvents.at, new Date(filter.from)))
  if (filter.until !== undefined) conditions.push(lt(auditEvents.at, new Date(filter.until)))
  const rows = await db
    .select({ event: auditEvents, actorName: users.name, keyName: apiKeys.name })
    .from(auditEvents).leftJoin(users, eq(users.id, auditEvents.actorUser)).leftJoin(apiKeys, eq(apiKeys.id, auditEvents.actorKey))
    .where(and(...conditions)).orderBy(desc(auditEvents.id)).limit(limit + 1)
  return rows.map(({ event, actorName, keyName }) => ({
    id: event.id, at: event.at.toISOString(), action: event.action,
    actor: event.actorUser === null ? null : { id: event.actorUser, name: actorName ?? '' },
    key: event.actorKey, key_name: keyName, session: event.actorSession,
    subject: { kind: event.subjectKind, id: event.subjectId },
    before: event.before ?? null, after: event.after ?? null, ip: event.ip, request_id: event.requestId,
  }))
}
