import type { AmendmentChange, BatchItem } from '@/openapi/schemas/change'
import { KEEPALIVE_BYTES, problemOf, type ProblemDocument } from '../../_components/data/api'
import { type ChangeState, keyOf, requestOf, sameState, stateOf, type Values } from './change-state'
import { isDirty, type Sheet, type SheetRow } from './sheet'

/** The API as far as saving needs it. */
export interface Transport {
  create: (item: BatchItem, idempotencyKey: string) => Promise<AmendmentChange>
  replace: (change: string, etag: string, item: BatchItem) => Promise<AmendmentChange>
  remove: (change: string, etag: string) => Promise<void>
  batch: (items: BatchItem[], remove: { change: string; etag: string }[], idempotencyKey: string) => Promise<AmendmentChange[]>
  /** Null where there is no such change any more. */
  read: (change: string) => Promise<AmendmentChange | null>
  list: () => Promise<AmendmentChange[]>
  /** The published values of a level, and the revision that holds them. */
  values: (level: string) => Promise<{ values: Values; revision: number }>
  /** Sends what is left while the page goes away; nothing is awaited. */
  farewell: (items: BatchItem[], remove: { change: string; etag: string }[]) => void
  newKey: () => string
}

interface Task { key: string; sent: ChangeState | null; row: SheetRow }
const AT_ONCE = 500
const LONGEST_MS = 1000
const WAITS_MS = [2000, 5000, 10_000, 30_000]

/** No answer, a fault of the server, too many requests: the same again may work. Anything else was decided. */
const mayWork = (problem: ProblemDocument): boolean => problem.status === 0 || problem.status === 429 || problem.status >= 500

/** Writes what waits in a sheet: a moment after the last letter, one request at a time, what belongs together in one. */
export class Saver {
  #timer: ReturnType<typeof setTimeout> | null = null
  #running: Promise<void> | null = null
  /** When the first letter came that waits. */
  #since: number | null = null
  #failures = 0
  /** Keys of requests that make something, so that one sent twice makes it once. */
  readonly #keys = new Map<string, { of: string; key: string }>()

  constructor(readonly sheet: Sheet, readonly transport: Transport, readonly onSaved: () => void = () => undefined) {}

  /** A moment after the last letter, and while someone types on and on once a second. */
  later(wait = 600): void {
    if (this.#timer !== null) clearTimeout(this.#timer)
    this.#since ??= Date.now()
    this.#timer = setTimeout(() => void this.now(), Math.max(0, Math.min(wait, this.#since + LONGEST_MS - Date.now())))
  }
  /** Resolves when all that waited was written or found impossible to write. */
  async now(): Promise<void> {
    if (this.#timer !== null) clearTimeout(this.#timer)
    this.#timer = null
    this.#since = null
    while (this.#running !== null) await this.#running
    this.#running = this.#work()
    await this.#running
  }
  /** Failed rows are tried again at once. */
  async retry(): Promise<void> {
    for (const row of this.sheet.rows()) if (row.save === 'failed') this.sheet.patch(row.key, { save: 'waiting', problem: null })
    await this.now()
  }
  /** Says that a change, made from values that an edition has changed since, holds beside the values of today. */
  async rebase(key: string): Promise<void> {
    await this.now()
    const row = this.sheet.row(key)
    if (row?.server == null || row.wanted === null || row.save !== 'saved') return
    const { server, wanted } = row
    this.sheet.saving([key])
    try {
      const action = wanted.action === 'create' && server.current_revision !== null ? 'replace' : wanted.action
      this.sheet.stored(key, wanted, await this.transport.replace(server.id, server.etag, { ...requestOf(row.subject, { ...wanted, action }), base_revision: server.current_revision }))
      this.onSaved()
    } catch (error) {
      await this.#refused({ key, sent: wanted, row }, problemOf(error))
    }
  }
  end(): void {
    if (this.#timer !== null) clearTimeout(this.#timer)
  }

  #waiting(): Task[] {
    return this.sheet.rows().filter((row) => row.save === 'waiting' && isDirty(row)).map((row) => ({ key: row.key, sent: row.wanted, row }))
  }

  async #work(): Promise<void> {
    try {
      let wrote = false
      for (let round = 0; round < 1000; round++) {
        await this.#complete()
        const tasks = this.#waiting().slice(0, AT_ONCE)
        if (tasks.length === 0) break
        this.sheet.saving(tasks.map((task) => task.key))
        wrote = (await this.#send(tasks)) || wrote
      }
      if (wrote) this.onSaved()
    } finally {
      this.#running = null
    }
  }

  /** A row is replaced as a whole, so all its published values must be known first. */
  async #complete(): Promise<void> {
    const rows = this.#waiting().filter(({ row, sent }) => !row.complete && sent?.action === 'replace')
    for (const { key, row } of rows) await this.complete(key, row)
  }
  async complete(key: string, row: SheetRow): Promise<void> {
    if (row.complete || row.subject.level === null) return
    try {
      const { values, revision } = await this.transport.values(row.subject.level)
      this.sheet.completed(key, values, revision)
    } catch (error) {
      if (row.save === 'waiting') this.#fail([{ key, sent: row.wanted, row }], problemOf(error))
    }
  }

  async #send(tasks: Task[]): Promise<boolean> {
    const puts = tasks.filter((task) => task.sent !== null)
    const removals = tasks.filter((task) => task.sent === null)
    if (puts.length > 1 || (puts.length === 1 && removals.length > 0)) return this.#together(puts, removals)
    let wrote = false
    for (const task of tasks) wrote = (await this.#one(task)) || wrote
    return wrote
  }

  async #one(task: Task): Promise<boolean> {
    const { key, sent, row } = task
    try {
      const item = sent === null ? null : requestFor(row, sent)
      if (row.server !== null && item === null) {
        await this.transport.remove(row.server.id, row.server.etag)
        this.sheet.stored(key, null, null)
      } else if (row.server !== null && item !== null) this.sheet.stored(key, sent, await this.transport.replace(row.server.id, row.server.etag, item))
      else if (item !== null) this.sheet.stored(key, sent, await this.transport.create(item, this.#idempotencyKey(key, item)))
      this.#went(key)
      return true
    } catch (error) {
      await this.#refused(task, problemOf(error))
      return false
    }
  }

  async #together(puts: Task[], removals: Task[]): Promise<boolean> {
    const items = puts.map(({ row, sent }): BatchItem => ({ ...requestFor(row, sent as ChangeState), ...(row.server === null ? {} : { change: row.server.id, etag: row.server.etag }) }))
    const remove = removals.flatMap(({ row }) => (row.server === null ? [] : [{ change: row.server.id, etag: row.server.etag }]))
    const name = puts.map((task) => task.key).join(' ')
    try {
      const stored = await this.transport.batch(items, remove, this.#idempotencyKey(name, { items, remove }))
      this.sheet.together(() => {
        puts.forEach((task, index) => this.sheet.stored(task.key, task.sent, stored[index] ?? null))
        for (const task of removals) this.sheet.stored(task.key, null, null)
      })
      this.#went(name)
      return true
    } catch (error) {
      const problem = problemOf(error)
      if (mayWork(problem)) this.#fail([...puts, ...removals], problem)
      // all or nothing: told apart one by one, so that one row does not hold the others back
      else for (const task of [...removals, ...puts]) await this.#one(task)
      return false
    }
  }

  async #refused(task: Task, problem: ProblemDocument): Promise<void> {
    const { key, sent, row } = task
    if (mayWork(problem)) return this.#fail([task], problem)
    const gone = problem.status === 404 && row.server !== null
    // an edition came between: trying again reads its values first, and carries over what was typed
    if (problem.code === 'base_stale' && row.server === null) this.sheet.patch(key, { complete: row.subject.level === null, revision: null })
    if (gone && sent === null) return this.sheet.stored(key, null, null)
    if (problem.status !== 412 && problem.code !== 'change_exists' && !gone) return this.sheet.failed(key, problem)
    const id = row.server?.id ?? (typeof problem.change === 'string' ? problem.change : undefined)
    try {
      const theirs = gone ? null : isChange(problem.current) ? problem.current : isChange(problem.change) ? problem.change : id === undefined ? null : await this.transport.read(id)
      // an answer that was lost, or that an earlier page did not wait for: it is there, and nobody else wrote it otherwise
      if (theirs !== null && sameState(stateOf(theirs), sent)) this.sheet.stored(key, sent, theirs)
      else this.sheet.conflict(key, theirs)
    } catch (error) {
      this.#fail([task], problemOf(error))
    }
  }

  /** Kept here, and tried again by itself after a while that grows. */
  #fail(tasks: readonly Task[], problem: ProblemDocument): void {
    this.sheet.together(() => tasks.forEach(({ key }) => this.sheet.failed(key, problem)))
    if (!mayWork(problem)) return
    const wait = WAITS_MS[Math.min(this.#failures, WAITS_MS.length - 1)] ?? 30_000
    this.#failures += 1
    if (this.#timer !== null) clearTimeout(this.#timer)
    this.#timer = setTimeout(() => void this.retry(), wait)
  }
  #went(name: string): void {
    this.#failures = 0
    this.#keys.delete(name)
  }
  #idempotencyKey(name: string, content: unknown): string {
    const of = JSON.stringify(content)
    const known = this.#keys.get(name)
    if (known?.of === of) return known.key
    const key = this.transport.newKey()
    this.#keys.set(name, { of, key })
    return key
  }

  #unsaved(): SheetRow[] {
    return this.sheet.rows().filter((row) => row.save !== 'saved' && (isDirty(row) || isAhead(row)))
  }
  /**
   * Whether a page that closes now would leave something behind that nobody is told of: what the server does not take as it is, more
   * than a browser sends for a page that is gone, and, unless it is `kept` in the browser, what cannot be sent along.
   */
  mustAsk(kept: boolean): boolean {
    const rows = this.#unsaved()
    if (rows.some((row) => row.save === 'failed' || row.save === 'conflict')) return true
    // what is on its way and has no answer counts beside what goes after it
    const underWay = rows.filter((row) => row.save === 'saving' && row.sent != null).map((row) => sizeOf(requestOf(row.subject, row.sent as ChangeState)) + 160)
    const bytes = rows.reduce((sum, row) => sum + (row.wanted === null ? 160 : sizeOf(partingItem(row, row.wanted)) + 160), 200) + underWay.reduce((sum, size) => sum + size, 0)
    return bytes > KEEPALIVE_BYTES || (!kept && rows.some((row) => (row.save !== 'saving' || isAhead(row)) && !goesAlong(row)))
  }
  /**
   * The page goes away: what waits is sent along, and what was typed beyond a save under way goes after that save, saying what it was.
   * Rows whose published values are not all known are left, since a part would be lost, and so are those that `goesAlong` names: all
   * of that is kept in the browser.
   */
  farewell(): void {
    const rows = this.#unsaved().filter((row) => row.save !== 'conflict' && goesAlong(row))
    // apart, since a batch is written whole or not at all: a save under way may still be refused
    for (const group of [rows.filter((row) => row.save !== 'saving'), rows.filter((row) => row.save === 'saving')]) {
      if (group.length === 0) continue
      const items = group.flatMap((row): BatchItem[] => (row.wanted === null ? [] : [partingItem(row, row.wanted)]))
      const remove = group.flatMap((row) => (row.wanted === null && row.server !== null ? [{ change: row.server.id, etag: row.server.etag }] : []))
      this.transport.farewell(items, remove)
    }
  }
}

/** What writes a row: a new change says which revision its values were read from. */
const requestFor = (row: SheetRow, state: ChangeState): BatchItem => ({ ...requestOf(row.subject, state), ...(row.server === null && row.revision !== null ? { base_revision: row.revision } : {}) })

/** All published values are known, so that the row can be replaced as a whole. */
const isReady = (row: SheetRow): boolean => row.complete || row.wanted?.action !== 'replace'
/** Typed beyond what is being saved. */
const isAhead = (row: SheetRow): boolean => row.save === 'saving' && row.sent !== undefined && !sameState(row.wanted, row.sent)
/**
 * Whether a page that closes can send a row along. What is being saved goes its way already; beyond it only values can go after values:
 * to take out what is being written, or to write what is being taken out, wants the answer.
 */
const goesAlong = (row: SheetRow): boolean => isReady(row) && (row.save !== 'saving' || (isAhead(row) && row.wanted !== null && row.sent != null))

/** A row as a page that closes sends it: with what it sent before and has no answer to, which the server may hold by now. */
function partingItem(row: SheetRow, wanted: ChangeState): BatchItem {
  const item: BatchItem = { ...requestFor(row, wanted), ...(row.server === null ? {} : { change: row.server.id, etag: row.server.etag }) }
  // a new level is found again by nothing but what was sent of it: where that failed, it is not known to be there
  if (row.sent == null || (row.save !== 'saving' && row.server === null && keyOf(row.subject) === null)) return item
  const { action, values, reason, successor, comment } = requestOf(row.subject, row.sent)
  return { ...item, unanswered: { action, values, reason, successor, comment } }
}
const sizeOf = (value: unknown): number => new Blob([JSON.stringify(value)]).size

const isChange = (value: unknown): value is AmendmentChange => typeof value === 'object' && value !== null && 'etag' in value && 'findings' in value
