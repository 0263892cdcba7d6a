import type { AmendmentChange } from '@/openapi/schemas/change'
import type { ProblemDocument } from '../../_components/data/api'
import { type ChangeState, keyOf, rebase, sameState, sameValues, stateOf, type Subject, subjectOf, type Values } from './change-state'
import { emptyHistory, type History, record, redo, undo } from './undo'

/** saved: the server holds what is shown. failed: it could not be written and is kept here. conflict: someone else wrote it first. */
export type SaveState = 'saved' | 'waiting' | 'saving' | 'failed' | 'conflict'

export interface SheetRow {
  key: string
  subject: Subject
  /** Values of the newest edition; null where it does not have the subject. */
  base: Values | null
  /** Whether `base` holds all of them: the list of levels leaves some out. */
  complete: boolean
  /** The published revision that `base` was read from; null where that is not known. */
  revision: number | null
  /** The change as the server holds it. */
  server: AmendmentChange | null
  /** What the curator wants; null: no change. */
  wanted: ChangeState | null
  /** What was sent last and not answered, or not answered well; the server may hold it all the same. */
  sent?: ChangeState | null
  save: SaveState
  problem: ProblemDocument | null
  /** What someone else made of it meanwhile; null inside: they took the change out. */
  theirs: { change: AmendmentChange | null } | null
  /** Taken out by the curator: out of sight, unless that is undone. */
  gone: boolean
}

export interface NewRow { key: string; subject: Subject; base: Values | null; complete: boolean }
/** A row as a page that is gone left it: not all of it had come to the server. */
export type Kept = Pick<SheetRow, 'subject' | 'base' | 'complete' | 'revision' | 'server' | 'sent' | 'wanted'>
export type Wanted = ReadonlyMap<string, ChangeState | null>

export const NOTHING: ChangeState = { action: 'create', values: {}, reason: null, successor: null, comment: null }

const storedState = (row: SheetRow): ChangeState | null => (row.server === null ? null : stateOf(row.server))
export const isDirty = (row: SheetRow): boolean => !sameState(row.wanted, storedState(row))
/** What the row shows: the values wanted, else those published. */
export const shownValues = (row: SheetRow): Values => row.wanted?.values ?? row.base ?? {}
export const isRetired = (row: SheetRow): boolean => row.wanted?.action === 'retire'

/** What the sheet is drawn from: a new object after every change, the rows in it replaced one by one. */
export interface SheetView { order: readonly string[]; rows: ReadonlyMap<string, SheetRow>; canUndo: string | null; canRedo: string | null }

/** The rows of an amendment as a curator has them, and what the server holds of each. Knows nothing of the network. */
export class Sheet {
  #order: string[] = []
  readonly #rows = new Map<string, SheetRow>()
  #history: History<ChangeState | null> = emptyHistory()
  #view: SheetView = { order: [], rows: new Map(), canUndo: null, canRedo: null }
  readonly #listeners = new Set<() => void>()
  #made = 0
  #held = 0

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener)
    return () => void this.#listeners.delete(listener)
  }
  readonly view = (): SheetView => this.#view
  row(key: string): SheetRow | undefined {
    return this.#rows.get(key)
  }
  rows(): SheetRow[] {
    return this.#order.flatMap((key) => this.#rows.get(key) ?? [])
  }

  #look(): SheetView {
    const order = this.#order.filter((key) => this.#rows.get(key)?.gone !== true)
    // the same list as long as no row comes or goes, so that what is drawn from it stands still while one types
    const same = order.length === this.#view.order.length && order.every((key, at) => key === this.#view.order[at])
    return { order: same ? this.#view.order : order, rows: new Map(this.#rows), canUndo: this.#history.done.at(-1)?.label ?? null, canRedo: this.#history.undone.at(-1)?.label ?? null }
  }
  /** Several changes told of as one. */
  together(work: () => void): void {
    this.#held += 1
    try {
      work()
    } finally {
      this.#held -= 1
      if (this.#held === 0) this.#tell()
    }
  }
  #tell(): void {
    if (this.#held > 0) return
    this.#view = this.#look()
    for (const listener of this.#listeners) listener()
  }
  #put(row: SheetRow): void {
    if (!this.#rows.has(row.key)) this.#order.push(row.key)
    this.#rows.set(row.key, row)
  }
  patch(key: string, change: Partial<SheetRow>): void {
    const row = this.#rows.get(key)
    if (row === undefined) return
    this.#rows.set(key, { ...row, ...change })
    this.#tell()
  }

  /** Rows to show beside those of the changes; ones already there learn their published values. */
  add(rows: readonly NewRow[]): void {
    for (const given of rows) {
      const known = this.#rows.get(given.key)
      if (known === undefined) this.#put({ ...given, revision: null, server: null, wanted: null, save: 'saved', problem: null, theirs: null, gone: false })
      else if (!known.complete && known.base === null) this.#rows.set(given.key, { ...known, base: given.base, complete: given.complete })
    }
    this.#tell()
  }
  /** Takes rows without a change out of sight again. */
  dropUntouched(keep: (row: SheetRow) => boolean): void {
    for (const row of this.rows()) if (row.server === null && row.wanted === null && row.save === 'saved' && !keep(row)) this.#rows.delete(row.key)
    this.#order = this.#order.filter((key) => this.#rows.has(key))
    this.#tell()
  }
  /** An empty row for a new subject. Levels get their ordinal when they are first written. */
  addNew(subject: Subject): string {
    const key = keyOf(subject) ?? `new:${(this.#made += 1)}`
    if (!this.#rows.has(key)) this.#put({ key, subject, base: null, complete: true, revision: null, server: null, wanted: null, save: 'saved', problem: null, theirs: null, gone: false })
    this.#tell()
    return key
  }

  /** All published values of a row have been read: what was typed meanwhile is carried over. */
  completed(key: string, base: Values, revision: number): void {
    const row = this.#rows.get(key)
    if (row === undefined || row.complete) return
    const values = row.wanted?.values ?? null
    const wanted = row.wanted === null || values === null ? row.wanted : { ...row.wanted, values: rebase(values, row.base ?? {}, base) }
    this.patch(key, { base, complete: true, revision, wanted })
  }

  /** The changes as the server has them now. Rows with work of their own keep it; their next saving finds out about a conflict. */
  absorb(changes: readonly AmendmentChange[], { all = true } = {}): void {
    const seen = new Set<string>()
    const known = new Map<string, string>()
    for (const row of this.#rows.values()) {
      const named = keyOf(row.subject)
      if (named !== null) known.set(named, row.key)
      if (row.server !== null) known.set(row.server.id, row.key)
    }
    for (const change of changes) {
      const subject = subjectOf(change)
      const named = keyOf(subject)
      const key = known.get(change.id) ?? (named === null ? undefined : known.get(named)) ?? named ?? `change:${change.id}`
      seen.add(key)
      const row = this.#rows.get(key)
      const base = (change.before as Values | null) ?? null
      if (row === undefined) this.#put({ key, subject, base, complete: true, revision: change.current_revision, server: change, wanted: stateOf(change), save: 'saved', problem: null, theirs: null, gone: false })
      else if (row.save === 'saved' && !isDirty(row)) this.#rows.set(key, { ...row, subject, base: base ?? row.base, complete: true, revision: change.current_revision, server: change, wanted: stateOf(change) })
    }
    if (all) {
      for (const row of this.rows()) {
        if (row.server === null || seen.has(row.key) || row.save !== 'saved' || isDirty(row)) continue
        if (row.base === null) this.#rows.delete(row.key)
        else this.#rows.set(row.key, { ...row, server: null, wanted: null })
      }
      this.#order = this.#order.filter((key) => this.#rows.has(key))
    }
    this.#tell()
  }
  /** What a row would want with these values: nothing where they are those published. */
  stateWith(row: SheetRow, values: Values): ChangeState | null {
    const comment = row.wanted?.comment ?? null
    if (row.base === null) return Object.values(values).every((value) => value === null || value === '') && row.server === null ? null : { ...(row.wanted ?? NOTHING), action: 'create', values }
    if (sameValues(values, row.base) && comment === null) return null
    return { action: 'replace', values, reason: row.wanted?.reason ?? null, successor: null, comment }
  }

  /** Sets what is wanted, without a step to be undone: for text as it is typed. */
  set(wanted: Wanted): void {
    for (const [key, state] of wanted) {
      const row = this.#rows.get(key)
      if (row === undefined) continue
      const next: SheetRow = { ...row, wanted: state, gone: row.gone && state === null }
      // what is typed while two versions wait for a choice is kept as mine
      const quiet = row.save === 'saving' || row.save === 'conflict' ? row.save : isDirty(next) ? 'waiting' : 'saved'
      this.#rows.set(key, { ...next, save: quiet, problem: null })
    }
    this.#tell()
  }
  /** Sets what is wanted and remembers how it was, under a name; `before` where it differs from what stands now. */
  commit(label: string, wanted: Wanted, before?: Wanted): void {
    const changes = [...wanted].flatMap(([key, after]) => {
      const row = this.#rows.get(key)
      if (row === undefined) return []
      const was = before?.has(key) ? (before.get(key) ?? null) : row.wanted
      return sameState(was, after) ? [] : [{ key, before: was, after }]
    })
    this.#history = record(this.#history, { label, changes })
    this.set(wanted)
  }
  /** Takes a change out: what was published stands again, and a new row goes out of sight. */
  discard(key: string): void {
    const row = this.#rows.get(key)
    if (row === undefined) return
    this.commit('taking out a change', new Map([[key, null]]))
    this.patch(key, { gone: row.base === null })
  }
  #go(take: typeof undo<ChangeState | null>, side: 'before' | 'after'): string[] {
    const taken = take(this.#history)
    if (taken === null) return []
    this.#history = taken.history
    this.set(new Map(taken.step.changes.map((change) => [change.key, change[side]])))
    return taken.step.changes.map((change) => change.key)
  }
  /** Both return the keys of the rows they touched. */
  undo(): string[] {
    return this.#go(undo, 'before')
  }
  redo(): string[] {
    return this.#go(redo, 'after')
  }

  /** The row that a kept one was: a new level has no name before its first answer, and is known by what was sent of it. */
  #rowOf({ subject, server, sent, wanted }: Kept): SheetRow | undefined {
    const name = keyOf(subject)
    if (server !== null || name !== null) return this.rows().find((row) => (server !== null && row.server?.id === server.id) || (name !== null && keyOf(row.subject) === name))
    return this.rows().find((row) => row.server?.action === 'create' && row.subject.kind === subject.kind && row.subject.species === subject.species && row.save === 'saved' &&
      [wanted, sent].some((state) => state !== undefined && state !== null && sameState(storedState(row), state)))
  }
  /** Takes up what a page that is gone left. It waits upon the version that it was typed on, so that a newer one is found when it is saved. */
  restore(kept: Kept): 'brought' | 'known' | 'busy' {
    const { subject, server, sent } = kept
    const known = this.#rowOf(kept)
    if (known !== undefined && known.save !== 'saved') return 'busy'
    const current = known?.server ?? null
    if (sameState(known === undefined ? null : storedState(known), kept.wanted)) return 'known'
    // what the page had sent has arrived: the rest goes upon that
    const mine = current !== null && ((sent !== undefined && sameState(stateOf(current), sent)) || current.etag === server?.etag)
    const key = known?.key ?? this.addNew(subject)
    const found = this.#rows.get(key)
    if (found === undefined) return 'busy'
    // an edition may have come between: what was typed is carried over to its values, which are read anew where the API offers that
    const replacing = kept.wanted?.action === 'replace'
    const anew = replacing && subject.kind === 'level' && subject.level !== null
    const base = anew ? kept.base : (found.base ?? kept.base)
    const wanted = replacing && !anew && found.base !== null && kept.wanted !== null ? { ...kept.wanted, values: rebase(kept.wanted.values ?? {}, kept.base ?? {}, found.base) } : kept.wanted
    const revision = anew ? null : found.base === null ? kept.revision : found.revision
    this.patch(key, { ...found, subject: known?.subject ?? subject, base, complete: anew ? false : kept.complete, revision, server: mine ? current : server, sent, wanted, gone: false, save: 'waiting', problem: null, theirs: null })
    return 'brought'
  }

  // ---- what the saver reports

  saving(keys: readonly string[]): void {
    this.together(() => keys.forEach((key) => this.patch(key, { save: 'saving', problem: null, sent: this.#rows.get(key)?.wanted })))
  }
  /** The server holds `sent` now, as `change`. What was typed meanwhile waits. */
  stored(key: string, sent: ChangeState | null, change: AmendmentChange | null): void {
    const row = this.#rows.get(key)
    if (row === undefined) return
    const wanted = sameState(row.wanted, sent) ? (change === null ? null : stateOf(change)) : row.wanted
    const next: SheetRow = { ...row, server: change, wanted, subject: change === null ? row.subject : subjectOf(change), sent: undefined, problem: null, theirs: null }
    if (change !== null) Object.assign(next, { base: (change.before as Values | null) ?? row.base, complete: true, revision: change.current_revision })
    // a new level taken out again has lost its ordinal
    else if (row.base === null && row.subject.kind === 'level') next.subject = { ...row.subject, level: null }
    this.patch(key, { ...next, save: isDirty(next) ? 'waiting' : 'saved' })
  }
  failed(key: string, problem: ProblemDocument): void {
    this.patch(key, { save: 'failed', problem })
  }
  conflict(key: string, change: AmendmentChange | null): void {
    this.patch(key, { save: 'conflict', theirs: { change }, problem: null })
  }
  /** The choice of the conflict screen: written upon their version. */
  resolve(key: string, wanted: ChangeState | null): void {
    const row = this.#rows.get(key)
    if (row === undefined || row.theirs === null) return
    const next: SheetRow = { ...row, server: row.theirs.change, wanted, sent: undefined, theirs: null, problem: null }
    this.patch(key, { ...next, save: isDirty(next) ? 'waiting' : 'saved' })
  }
}
