import type { ChangeState } from './change-state'
import type { Kept, Sheet, SheetRow } from './sheet'

/** The part of the browser's storage that is needed. */
export type Store = Pick<Storage, 'getItem' | 'setItem' | 'removeItem' | 'key' | 'length'>

interface Written extends Kept {
  /** When it was typed, and when a page that went away sent it along, without hearing what became of it. */
  at: number
  parted: number | null
}
interface Known { id: string; wanted: ChangeState | null; server: SheetRow['server']; sent: SheetRow['sent']; held: boolean }

/** By then a request that a closing page sent has come to the server or never will. */
const SETTLING_MS = 4000
const LONGEST_KEPT_MS = 60 * 24 * 3600 * 1000

/**
 * Text of a sheet that the server does not hold yet, kept in the browser until it does: what is typed while a save is under way, or is
 * too much to be sent by a page that closes, is there again when the amendment is opened. Each page writes under a name of its own.
 */
export class Unsent {
  readonly #known = new Map<string, Known>()
  #made = 0
  #safe = true
  /** One at a time, so that nothing is brought back twice. */
  #restoring: Promise<unknown> = Promise.resolve()

  /** `place` names person and amendment, `page` this page. */
  constructor(readonly sheet: Sheet, readonly store: Store | null, readonly place: string, readonly page: string, readonly now: () => number = Date.now) {}

  /** Whether all that is not sent is kept here. */
  get safe(): boolean {
    return this.#safe && this.store !== null
  }

  /** False where the browser holds no more, or may hold nothing: the page asks before it closes. */
  #write(id: string, written: Written): boolean {
    try {
      this.store?.setItem(id, JSON.stringify(written))
      return true
    } catch {
      return false
    }
  }
  #drop(id: string): void {
    try {
      this.store?.removeItem(id)
    } catch {
      // what cannot be taken out is known by the server when it is read again
    }
  }

  /** Writes down what is new among the rows that wait, and forgets those that the server holds. */
  keep(parted: number | null = null): void {
    if (this.store === null) return
    this.#safe = true
    for (const row of this.sheet.rows()) {
      const known = this.#known.get(row.key)
      if (row.save === 'saved') {
        if (known === undefined) continue
        this.#known.delete(row.key)
        this.#drop(known.id)
      } else if (parted !== null || known?.held !== true || known.wanted !== row.wanted || known.server !== row.server || known.sent !== row.sent) {
        const id = known?.id ?? `${this.place}/${this.page}/${(this.#made += 1)}`
        const { subject, base, complete, revision, server, sent, wanted } = row
        const held = this.#write(id, { subject, base, complete, revision, server, sent, wanted, at: this.now(), parted })
        this.#known.set(row.key, { id, wanted, server, sent, held })
        this.#safe &&= held
      }
    }
  }

  /** What other pages of this place left, the newest first. */
  #left(alive: ReadonlySet<string>): { id: string; written: Written }[] {
    const found: { id: string; written: Written }[] = []
    for (let i = 0; i < (this.store?.length ?? 0); i += 1) {
      const id = this.store?.key(i) ?? ''
      if (!id.startsWith(`${this.place}/`)) continue
      const page = id.slice(this.place.length + 1).split('/')[0] ?? ''
      if (page === this.page || alive.has(page)) continue
      try {
        found.push({ id, written: JSON.parse(this.store?.getItem(id) ?? '') as Written })
      } catch {
        found.push({ id, written: { at: 0 } as Written })
      }
    }
    const old = found.filter(({ written }) => this.now() - written.at > LONGEST_KEPT_MS)
    for (const { id } of old) this.#drop(id)
    return found.filter((one) => !old.includes(one)).sort((a, b) => b.written.at - a.written.at)
  }

  /**
   * Brings back into the sheet what pages that are gone could not send, and resolves to the number of rows. `alive`: pages still open,
   * whose text is theirs. What the server has made of it meanwhile is found out by the next saving, and ends as any other conflict.
   */
  restore(alive: ReadonlySet<string>, reread: () => Promise<void>): Promise<number> {
    const restored = this.#restoring.then(() => this.#bring(alive, reread))
    this.#restoring = restored.catch(() => undefined)
    return restored
  }
  async #bring(alive: ReadonlySet<string>, reread: () => Promise<void>): Promise<number> {
    const left = this.#left(alive)
    const settled = Math.max(0, ...left.map(({ written }) => (written.parted === null ? 0 : written.parted + SETTLING_MS)))
    if (settled > this.now()) {
      await new Promise((done) => { setTimeout(done, settled - this.now()) })
      await reread()
    }
    let brought = 0
    for (const { id, written } of left) {
      const became = this.sheet.restore(written)
      // a row that someone types in already keeps that; what was left stays for another time
      if (became === 'busy') continue
      if (became === 'brought') brought += 1
      this.keep()
      this.#drop(id)
    }
    return brought
  }
}
