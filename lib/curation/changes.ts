import { and, eq, inArray, notInArray, or, sql } from 'drizzle-orm'
import type { Db, Tx } from '@/db/client'
import { amendmentChanges } from '@/db/schema'
import { knownCaller } from '@/lib/access/accounts'
import { type Acting, recordAudit } from '@/lib/access/audit'
import { type Fault, Problem } from '@/lib/problem'
import { staleProblem } from '@/lib/entity-tag'
import type { AmendmentChange, BatchItem, ChangeBatch, ChangeRequest, CheckedChange, Finding } from '@/openapi/schemas/change'
import { type AmendmentRow, insertChanges, lockForEdit, noteEdit, type PreparedChange, recordAuthors, reserveOrdinals } from './editing'
import { amendmentRow } from './amendments'
import { beforeAndAfter, type ChangeRow, changeMissing, changeRow, changeTag, comparedEdition, describeChanges, inputOf } from './change-view'
import { checkChangesInSteps, recheckSources } from './checks'
import { namedBy, requireSameSubject, wordsOf } from './request'
import { readInForce, staleBase, staleDetail } from './in-force'
import type { AnyRow, ChangeInput, Checked } from './rows'
import { storeFindings } from './stored-findings'
import { publishedIn } from './subjects'
import { loadPublishedTable, newestEdition } from './table'
import { uponOwn } from './unanswered'

/** One change to write, its subject known: of an existing change where `row` is there. */
interface Item { request: ChangeRequest; kind: ChangeRow['kind']; subject: string; speciesId: string | null; row: ChangeRow | null }

const inputOfItem = (item: Item): ChangeInput => ({
  id: item.row?.id ?? item.subject, kind: item.kind, action: item.request.action, subject: item.subject, speciesId: item.speciesId, given: item.request.values ?? {}, ...wordsOf(item.request),
})

/** The changes beside which others are checked: those of the species touched and all of sources. */
async function besides(tx: Db | Tx, amendment: string, species: ReadonlySet<string>): Promise<ChangeRow[]> {
  const c = amendmentChanges
  return tx.select().from(c).where(and(eq(c.amendmentId, amendment), or(eq(c.kind, 'source'), species.size === 0 ? sql`false` : inArray(c.speciesId, [...species])))).orderBy(c.position)
}

/** Changes of other species that name a source which comes or goes: that they can name it is all that becomes different for them. */
async function besidesNaming(tx: Db | Tx, amendment: string, keys: readonly string[], species: ReadonlySet<string>): Promise<ChangeRow[]> {
  if (keys.length === 0) return []
  const c = amendmentChanges
  const named = or(...keys.map((key) => sql`strpos(${c.given}::text, ${key}) > 0`))
  return tx.select().from(c).where(and(eq(c.amendmentId, amendment), sql`${c.kind} <> 'source'`, species.size === 0 ? undefined : notInArray(c.speciesId, [...species]), named))
}

/** 409 where a base that is stated is not the revision in force, naming every such item and what made the revision there is. */
async function requireBases(tx: Db | Tx, edition: number, items: readonly Item[], current: (item: Item) => number | null, place: (at: number) => string): Promise<void> {
  const stale = items.flatMap((item, at) => (item.request.base_revision === undefined || item.request.base_revision === current(item) ? [] : [{ item, at, base: item.request.base_revision }]))
  if (stale.length === 0) return
  const inForce = await readInForce(tx, edition, stale.map(({ item }) => item))
  const told = stale.map(({ item, at, base }) => ({ at, now: staleBase(item.row?.id ?? null, item.subject, base, inForce(item.kind, item.subject)), detail: staleDetail(item.subject, base, inForce(item.kind, item.subject)) }))
  throw new Problem('base_stale', `${told[0]?.detail ?? ''}${told.length > 1 ? ` So it is with ${told.length - 1} more, see changes.` : ''} Nothing was written.`, {
    errors: told.map(({ at, detail }): Fault => ({ pointer: `${place(at)}/base_revision`, code: 'base_stale', detail })), extra: { changes: told.map(({ now }) => now) },
  })
}

interface Judged { checked: Checked[]; others: { row: ChangeRow; checked: Checked }[]; baseOf: (item: Item) => number | null; beforeOf: (item: Item) => AnyRow | null; edition: number }

/** Checks items beside the rest of the amendment, as it would be without `removed`. */
async function judge(tx: Db | Tx, amendment: AmendmentRow, items: readonly Item[], removed: readonly ChangeRow[], exists: (kind: ChangeRow['kind'], subject: string, at: number, id: string) => void, place = (at: number): string => `/changes/${at}`): Promise<Judged> {
  const touched = [...items, ...removed]
  const species = new Set(touched.flatMap((one) => (one.speciesId === null ? [] : [one.speciesId])))
  const all = await besides(tx, amendment.id, species)
  const gone = new Set([...removed, ...items.flatMap((item) => (item.row === null ? [] : [item.row]))].map((row) => row.id))
  const rest = all.filter((row) => !gone.has(row.id))
  const taken = new Map(rest.map((row) => [`${row.kind} ${row.subject}`, row.id]))
  items.forEach((item, at) => {
    const id = taken.get(`${item.kind} ${item.subject}`)
    if (id !== undefined) exists(item.kind, item.subject, at, id)
  })
  const edition = await newestEdition(tx)
  const table = await loadPublishedTable(tx, edition, [...species])
  const checked = await checkChangesInSteps(table, [...rest.map(inputOf), ...items.map(inputOfItem)])
  // an edit of a source leaves it there; one made or taken out is there for others from now on, or no longer
  const coming = [...items.filter((item) => item.row === null), ...removed].flatMap((one) => (one.kind === 'source' && !table.sources.has(one.subject) ? [one.subject] : []))
  const naming = await besidesNaming(tx, amendment.id, coming, species)
  const sources = new Set([...table.sources.keys(), ...[...rest, ...items].flatMap((one) => (one.kind === 'source' ? [one.subject] : []))])
  const published = (item: Item) => publishedIn(table, item.kind, item.subject)
  await requireBases(tx, edition, items, (item) => published(item)?.revision ?? null, place)
  return {
    edition, checked: checked.slice(rest.length),
    others: [
      ...rest.flatMap((row, at) => { const one = checked[at]; return one === undefined ? [] : [{ row, checked: one }] }),
      ...naming.map((row) => ({ row, checked: recheckSources(inputOf(row), { row: row.row as AnyRow | null, findings: row.findings as Finding[] }, sources) })),
    ],
    baseOf: (item) => item.request.base_revision ?? (item.row === null ? (published(item)?.revision ?? null) : item.request.base_revision === null ? null : item.row.baseRevision),
    beforeOf: (item) => published(item)?.row ?? null,
  }
}

const preparedOf = (item: Item, checked: Checked, baseRevision: number | null): PreparedChange => ({
  kind: item.kind, action: item.request.action, subject: item.subject, speciesId: item.speciesId, given: item.request.values ?? {}, row: checked.row, findings: checked.findings, ...wordsOf(item.request), baseRevision,
})

/** Stores what was judged, and the findings of the other changes where they are different now. Identifiers in the order of the items. */
async function store(tx: Tx, amendment: AmendmentRow, userId: string, items: readonly Item[], removed: readonly ChangeRow[], judged: Judged): Promise<string[]> {
  if (removed.length > 0) await tx.delete(amendmentChanges).where(and(eq(amendmentChanges.amendmentId, amendment.id), inArray(amendmentChanges.id, removed.map((row) => row.id))))
  const prepared = items.map((item, at) => preparedOf(item, judged.checked[at] ?? { row: null, findings: [] }, judged.baseOf(item)))
  const ids = await insertChanges(tx, amendment.id, userId, prepared)
  await storeFindings(tx, judged.others)
  await recordAuthors(tx, amendment.id, userId)
  return ids
}

/** Gives new levels their ordinals, each species' in one go and in the order of the items. */
async function withSubjects(tx: Tx | null, requests: readonly { request: ChangeRequest; row: ChangeRow | null }[]): Promise<Item[]> {
  const named = requests.map(({ request, row }) => ({ request, row, ...(row === null ? namedBy(request) : { kind: row.kind, subject: row.subject as string | null, speciesId: row.speciesId }) }))
  const wanted = new Map<string, number>()
  for (const one of named) if (one.subject === null && one.speciesId !== null) wanted.set(one.speciesId, (wanted.get(one.speciesId) ?? 0) + 1)
  const next = new Map<string, number>()
  // in one order everywhere, so that two writers never wait for each other
  for (const [species, count] of [...wanted].sort(([a], [b]) => (a < b ? -1 : 1))) next.set(species, tx === null ? 0 : await reserveOrdinals(tx, species, count))
  return named.map(({ request, row, kind, subject, speciesId }) => {
    if (subject !== null) return { request, row, kind, subject, speciesId }
    const ordinal = next.get(speciesId ?? '') ?? 0
    next.set(speciesId ?? '', ordinal + 1)
    return { request, row, kind, subject: tx === null ? `${speciesId ?? ''}.${UNNUMBERED}${ordinal}` : `${speciesId ?? ''}.${ordinal}`, speciesId }
  })
}
/** Stands for the ordinal of a level that is only being tried. */
const UNNUMBERED = 'new'

const existsProblem = (subject: string, change: string): Problem => new Problem('change_exists', `This amendment has a change of ${subject} already: edit that one.`, { extra: { change } })

const told = (request: ChangeRequest, subject: string, row: ChangeRow | null) => ({
  subject, before: row === null ? null : { action: row.action, values: row.given, reason: row.reason, successor: row.successor, comment: row.comment }, after: { action: request.action, values: request.values ?? null, ...wordsOf(request) },
})

/** Adds a change. Its identifier. */
export async function addChange(db: Db, acting: Acting, amendmentId: string, request: ChangeRequest): Promise<string> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    const amendment = await lockForEdit(tx, amendmentId)
    const items = await withSubjects(tx, [{ request, row: null }])
    const judged = await judge(tx, amendment, items, [], (_, subject, __, id) => { throw existsProblem(subject, id) }, () => '')
    const [id = ''] = await store(tx, amendment, caller.userId, items, [], judged)
    await noteEdit(tx, amendment, caller.userId)
    const { subject, after } = told(request, items[0]?.subject ?? '', null)
    await recordAudit(tx, acting, { action: 'change.create', subjectKind: 'change', subjectId: id, after: { amendment: amendmentId, subject, ...after } })
    return id
  })
}

async function requireChange(tx: Tx, row: ChangeRow, amendment: AmendmentRow, ifMatch: string | null): Promise<void> {
  if (ifMatch === changeTag(row)) return
  const [current] = await describeChanges(tx, [row], await comparedEdition(tx, amendment))
  throw staleProblem({ ...current, consequences: null })
}

/** Edits a change: all of its values are written anew. */
export async function editChange(db: Db, acting: Acting, amendmentId: string, id: string, request: ChangeRequest, ifMatch: string | null): Promise<void> {
  const caller = knownCaller(acting.caller)
  await db.transaction(async (tx) => {
    const amendment = await lockForEdit(tx, amendmentId)
    const row = await changeRow(tx, amendmentId, id)
    await requireChange(tx, row, amendment, ifMatch)
    requireSameSubject(request, row)
    const items = await withSubjects(tx, [{ request, row }])
    await store(tx, amendment, caller.userId, items, [], await judge(tx, amendment, items, [], () => undefined, () => ''))
    await noteEdit(tx, amendment, caller.userId)
    const { subject, before, after } = told(request, row.subject, row)
    await recordAudit(tx, acting, { action: 'change.edit', subjectKind: 'change', subjectId: id, before: { amendment: amendmentId, subject, ...before }, after: { amendment: amendmentId, subject, ...after } })
  })
}

/** Takes a change out. The others are checked again, which may have rested on it. */
export async function removeChange(db: Db, acting: Acting, amendmentId: string, id: string, ifMatch: string | null): Promise<void> {
  const caller = knownCaller(acting.caller)
  await db.transaction(async (tx) => {
    const amendment = await lockForEdit(tx, amendmentId)
    const row = await changeRow(tx, amendmentId, id)
    await requireChange(tx, row, amendment, ifMatch)
    await store(tx, amendment, caller.userId, [], [row], await judge(tx, amendment, [], [row], () => undefined))
    await noteEdit(tx, amendment, caller.userId)
    await recordAudit(tx, acting, { action: 'change.remove', subjectKind: 'change', subjectId: id, before: { amendment: amendmentId, subject: row.subject, action: row.action, values: row.given, reason: row.reason, successor: row.successor, comment: row.comment } })
  })
}

/** The changes that a batch names by identifier, all there and none named twice; 404 or 412 that names every item otherwise. */
async function named(tx: Db | Tx, amendment: AmendmentRow, batch: ChangeBatch): Promise<Map<string, ChangeRow>> {
  const asked = [
    ...batch.changes.flatMap(({ change, etag }, at) => (change === undefined ? [] : [{ change, etag, place: `/changes/${at}` }])),
    ...(batch.remove ?? []).map(({ change, etag }, at) => ({ change, etag, place: `/remove/${at}` })),
  ]
  if (asked.length === 0) return new Map()
  const c = amendmentChanges
  const rows = await tx.select().from(c).where(and(eq(c.amendmentId, amendment.id), inArray(c.id, asked.map((one) => one.change))))
  const byId = new Map(rows.map((row) => [row.id, row]))
  const missing = asked.filter((one) => !byId.has(one.change)).map(({ place, change }): Fault => ({ pointer: `${place}/change`, code: 'change_unknown', detail: `The amendment has no change ${change}; it may have been taken out.` }))
  if (missing.length > 0) throw new Problem('change_unknown', changeMissing().detail, { errors: missing })
  const stale = asked.filter((one) => { const row = byId.get(one.change); return row !== undefined && one.etag !== changeTag(row) })
  if (stale.length > 0) {
    const current = await describeChanges(tx, stale.flatMap((one) => byId.get(one.change) ?? []), await comparedEdition(tx, amendment))
    const errors = stale.map(({ place, change }): Fault => ({ pointer: `${place}/etag`, code: 'etag_stale', detail: `${byId.get(change)?.subject ?? change} was changed after you read it.` }))
    throw new Problem('etag_stale', 'Changes of this batch were changed after you read them; nothing was overwritten.', { errors, extra: { current } })
  }
  const twice = asked.find((one, at) => asked.findIndex((other) => other.change === one.change) !== at)
  if (twice !== undefined) throw new Problem('change_exists', `The batch names the change ${twice.change} twice.`, { errors: [{ pointer: `${twice.place}/change`, code: 'change_exists', detail: 'Named twice in this batch.' }], extra: { change: twice.change } })
  return byId
}

/** Collects the items whose subject has a change already, in the amendment or earlier in the batch, and refuses them all at once. */
function refuseTaken(items: readonly Item[], taken: readonly { at: number; id: string | null; subject: string }[]): void {
  const first = new Map<string, number>()
  const twice = items.flatMap((item, at) => {
    const name = `${item.kind} ${item.subject}`
    if (first.has(name)) return [{ at, id: null, subject: item.subject }]
    first.set(name, at)
    return []
  })
  const all = [...taken, ...twice]
  const [one] = all
  if (one === undefined) return
  const errors = all.map(({ at, id, subject }): Fault => ({ pointer: `/changes/${at}`, code: 'change_exists', detail: id === null ? `${subject} is changed twice in this batch.` : `This amendment has a change of ${subject} already (${id}): edit that one.` }))
  throw new Problem('change_exists', `${all.length === 1 ? `${one.subject} is` : `${all.length} subjects are`} changed already.`, { errors, extra: { change: one.id } })
}

async function judgeBatch(tx: Db | Tx, writing: Tx | null, amendment: AmendmentRow, batch: ChangeBatch): Promise<{ items: Item[]; removed: ChangeRow[]; judged: Judged }> {
  const rows = await named(tx, amendment, batch)
  const requests = batch.changes.map(({ change, ...request }: BatchItem) => ({ request, row: change === undefined ? null : (rows.get(change) ?? null) }))
  for (const { request, row } of requests) if (row !== null) requireSameSubject(request, row)
  const removed = (batch.remove ?? []).flatMap((one) => rows.get(one.change) ?? [])
  const items = await withSubjects(writing, requests)
  const taken: { at: number; id: string; subject: string }[] = []
  const judged = await judge(tx, amendment, items, removed, (_, subject, at, id) => void taken.push({ at, id, subject }))
  refuseTaken(items, taken)
  return { items, removed, judged }
}

/** What a batch would be, had it been written: nothing is. */
export async function checkBatch(db: Db, amendmentId: string, batch: ChangeBatch): Promise<CheckedChange[]> {
  const amendment = await amendmentRow(db, amendmentId)
  const { items, judged } = await judgeBatch(db, null, amendment, batch)
  return items.map((item, at) => {
    const { row, findings } = judged.checked[at] ?? { row: null, findings: [] }
    const unnumbered = item.kind === 'level' && item.row === null && item.request.action === 'create'
    return {
      subject: unnumbered ? null : item.subject, action: item.request.action,
      ...beforeAndAfter({ kind: item.kind, action: item.request.action, row, before: judged.beforeOf(item) }),
      findings: findings.map((finding) => ({ ...finding, detail: finding.detail.replace(/\b[A-Z][a-z]?-[IVXLC]+\.new\d+/g, 'another new level') })),
    }
  })
}

/** Beyond this many changes an audit row names them without their values. */
const MOST_TOLD = 50

/** What the audit tells of a batch. */
function batchTold(items: readonly Item[], removed: readonly ChangeRow[], ids: readonly string[]): { before: unknown; after: unknown } {
  const whole = items.length + removed.length <= MOST_TOLD
  const was = (row: ChangeRow) => ({ change: row.id, subject: row.subject, action: row.action, ...(whole ? { values: row.given } : {}) })
  return {
    before: { changed: items.flatMap(({ row }) => (row === null ? [] : [was(row)])), removed: removed.map(was) },
    after: { written: items.map((item, at) => ({ change: ids[at], subject: item.subject, action: item.request.action, ...(whole ? { values: item.request.values ?? null, ...wordsOf(item.request) } : {}) })), removed: removed.map((row) => row.id) },
  }
}

/** Writes a batch, all of it or nothing. */
export async function writeBatch(db: Db, acting: Acting, amendmentId: string, batch: ChangeBatch): Promise<{ changes: AmendmentChange[]; removed: string[] }> {
  const caller = knownCaller(acting.caller)
  return db.transaction(async (tx) => {
    const amendment = await lockForEdit(tx, amendmentId)
    const { items, removed, judged } = await judgeBatch(tx, tx, amendment, await uponOwn(tx, amendmentId, batch, caller.userId))
    const ids = await store(tx, amendment, caller.userId, items, removed, judged)
    await noteEdit(tx, amendment, caller.userId)
    await recordAudit(tx, acting, { action: 'change.batch', subjectKind: 'amendment', subjectId: amendmentId, ...batchTold(items, removed, ids) })
    const rows = await tx.select().from(amendmentChanges).where(inArray(amendmentChanges.id, ids))
    const described = await describeChanges(tx, rows, judged.edition)
    const byId = new Map(described.map((change) => [change.id, change]))
    return { changes: ids.flatMap((id) => byId.get(id) ?? []), removed: removed.map((row) => row.id) }
  })
}
