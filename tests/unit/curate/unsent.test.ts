import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Subject } from '@/app/(curate)/_sheet/change-state'
import { Saver } from '@/app/(curate)/_sheet/saver'
import { Sheet, type SheetRow } from '@/app/(curate)/_sheet/sheet'
import { type Store, Unsent } from '@/app/(curate)/_sheet/unsent'
import { FakeServer, refusal } from './made'

const PUBLISHED = { configuration: '3p', term: '2P*3/2', energy_literal: '16973.36619' }
const KEY = 'level:Na-I.3'
const level = (id: string | null): Subject => ({ kind: 'level', species: 'Na-I', level: id, source: null, massNumber: null })

/** Storage of a browser, which outlives its pages. */
class FakeStore implements Store {
  readonly items = new Map<string, string>()
  full = false
  get length(): number { return this.items.size }
  key = (at: number) => [...this.items.keys()][at] ?? null
  getItem = (id: string) => this.items.get(id) ?? null
  removeItem = (id: string) => void this.items.delete(id)
  setItem = (id: string, text: string) => {
    if (this.full) throw new DOMException('full', 'QuotaExceededError')
    this.items.set(id, text)
  }
}

class Page {
  readonly sheet = new Sheet()
  readonly saver: Saver
  readonly unsent: Unsent
  readonly stop: () => void
  constructor(server: FakeServer, readonly store: FakeStore | null, readonly name: string) {
    this.saver = new Saver(this.sheet, server)
    this.unsent = new Unsent(this.sheet, store, 'person/amendment', name)
    this.stop = this.sheet.subscribe(() => this.unsent.keep())
    this.sheet.absorb([...server.changes.values()])
    this.sheet.add([{ key: KEY, subject: level('Na-I.3'), base: PUBLISHED, complete: false }])
  }
  row(key = KEY): SheetRow {
    const found = this.sheet.row(key)
    if (found === undefined) throw new Error(`no row ${key}`)
    return found
  }
  type(field: string, value: string, key = KEY): void {
    this.sheet.commit(field, new Map([[key, this.sheet.stateWith(this.row(key), { ...(this.row(key).wanted?.values ?? this.row(key).base ?? {}), [field]: value })]]))
  }
  /** The tab is closed: nothing that comes later is heard of. */
  close(): void {
    this.unsent.keep(Date.now())
    this.saver.farewell()
    this.stop()
    this.saver.end()
  }
}

let server: FakeServer
let store: FakeStore
const page = (name: string) => new Page(server, store, name)
const restore = (to: Page, alive: string[] = []) => to.unsent.restore(new Set(alive), async () => to.sheet.absorb(await server.list()))
const stored = (subject = 'Na-I.3') => [...server.changes.values()].find((change) => change.subject === subject)?.values

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'Date'] })
  server = new FakeServer()
  server.published.set('Na-I.3', PUBLISHED)
  store = new FakeStore()
  return () => void vi.useRealTimers()
})

/** A page whose save of `note: a` is under way, on the server but not answered, while `note: ab` is typed; what it sends as it closes never comes. */
async function closedWhileSaving(): Promise<void> {
  const one = page('one')
  one.type('energy_literal', '1')
  await one.saver.now()
  const answer = new Promise<never>(() => undefined)
  const replace = server.replace.bind(server)
  server.replace = async (...given) => {
    const change = await replace(...given)
    await answer
    return change
  }
  one.type('note', 'a')
  void one.saver.now()
  await vi.advanceTimersByTimeAsync(1)
  expect(one.row().save).toBe('saving')
  one.type('note', 'ab')
  one.close()
  server.replace = replace
  expect(server.farewells).toMatchObject([{ items: [{ change: 'id-Na-I.3', etag: '"1"', values: { note: 'ab' }, unanswered: { action: 'replace', values: { note: 'a', energy_literal: '1' } } }], remove: [] }])
}

describe('what is typed while a save is under way', () => {
  it('is there when the amendment is opened again, and is written upon what had arrived', async () => {
    await closedWhileSaving()
    expect(stored()).toMatchObject({ note: 'a' })
    const two = page('two')
    const brought = restore(two)
    await vi.advanceTimersByTimeAsync(5000)
    expect(await brought).toBe(1)
    expect(two.row()).toMatchObject({ save: 'waiting', wanted: { values: { note: 'ab' } } })
    await two.saver.now()
    expect(two.row().save).toBe('saved')
    expect(stored()).toMatchObject({ note: 'ab', energy_literal: '1' })
    expect(store.items.size).toBe(0)
  })
  it('never overwrites what a colleague wrote meanwhile: both versions wait for a choice', async () => {
    await closedWhileSaving()
    server.meanwhile('Na-I.3', { ...PUBLISHED, note: 'theirs' })
    const two = page('two')
    const brought = restore(two)
    await vi.advanceTimersByTimeAsync(5000)
    expect(await brought).toBe(1)
    await two.saver.now()
    expect(two.row()).toMatchObject({ save: 'conflict', theirs: { change: { values: { note: 'theirs' } } }, wanted: { values: { note: 'ab' } } })
    expect(stored()).toMatchObject({ note: 'theirs' })
    expect(store.items.size).toBe(1)
  })
})

describe('a page that closes while a save is under way', () => {
  /** Its first save is sent and never answered. */
  const begun = async (key: string | null): Promise<{ one: Page; key: string }> => {
    const one = page('one')
    const of = key ?? one.sheet.addNew(level(null))
    server.create = () => new Promise(() => undefined)
    one.type('note', 'a', of)
    void one.saver.now()
    await vi.advanceTimersByTimeAsync(1)
    expect(one.row(of).save).toBe('saving')
    return { one, key: of }
  }
  it('sends what was typed since, and says upon what: of a level of the table and of a new one', async () => {
    for (const { one, key } of [await begun(KEY), await begun(null)]) {
      server.farewells = []
      one.type('note', 'ab', key)
      one.close()
      expect(server.farewells).toMatchObject([{ items: [{ values: { note: 'ab' }, unanswered: { values: { note: 'a' } } }] }])
      expect(server.farewells[0]?.items[0]?.change).toBeUndefined()
    }
  })
  it('sends nothing twice, and does not ask the person where all goes along', async () => {
    const { one, key } = await begun(KEY)
    expect(one.saver.mustAsk(false)).toBe(false)
    one.close()
    expect(server.farewells).toEqual([])
    one.type('note', 'ab', key)
    expect(one.saver.mustAsk(false)).toBe(false)
  })
  it('keeps in the browser what wants the answer: to take out what is being written', async () => {
    const { one, key } = await begun(KEY)
    one.sheet.discard(key)
    expect([one.saver.mustAsk(true), one.saver.mustAsk(false)]).toEqual([false, true])
    one.close()
    expect(server.farewells).toEqual([])
    expect(store.items.size).toBe(1)
  })
  it('apart from what waits, so that neither holds the other up', async () => {
    const { one, key } = await begun(KEY)
    one.type('note', 'ab', key)
    one.type('term', '2S1/2', one.sheet.addNew(level(null)))
    one.close()
    expect(server.farewells.map(({ items }) => items.map((item) => item.unanswered !== undefined))).toEqual([[false], [true]])
  })
})

describe('text that the server does not hold', () => {
  it('is kept from the first letter on, and forgotten when it is saved', async () => {
    const one = page('one')
    one.type('note', 'a')
    expect(store.items.size).toBe(1)
    await one.saver.now()
    expect(store.items.size).toBe(0)
  })
  it('comes back after a crash, and after an edition with the values of that', async () => {
    const one = page('one')
    one.type('note', 'half-typ')
    one.stop()
    server.published.set('Na-I.3', { ...PUBLISHED, energy_literal: '16973.4' })
    const two = page('two')
    expect(await restore(two)).toBe(1)
    await two.saver.now()
    expect(stored()).toMatchObject({ note: 'half-typ', energy_literal: '16973.4' })
  })
  it('of a source goes upon what an edition says of it by now', async () => {
    const subject: Subject = { kind: 'source', species: null, level: null, source: 'made', massNumber: null }
    const row = (base: Record<string, unknown>) => ({ key: 'source:made', subject, base, complete: true })
    const one = page('one')
    one.sheet.add([row({ citation: 'Made', year: 1990 })])
    one.type('citation', 'Made anew', 'source:made')
    one.stop()
    const two = page('two')
    two.sheet.add([row({ citation: 'Made', year: 1991 })])
    expect(await restore(two)).toBe(1)
    expect(two.row('source:made').wanted?.values).toEqual({ citation: 'Made anew', year: 1991 })
  })
  it('is not brought back where a closing page sent it and it came', async () => {
    const one = page('one')
    const key = one.sheet.addNew(level(null))
    one.type('term', '2S1/2', key)
    one.close()
    const [sent] = server.farewells
    const two = page('two')
    const brought = restore(two)
    // the request of the page that is gone comes late
    await server.batch(sent?.items ?? [], sent?.remove ?? [], 'late')
    await vi.advanceTimersByTimeAsync(5000)
    expect(await brought).toBe(0)
    await two.saver.now()
    expect(server.changes.size).toBe(1)
    expect(store.items.size).toBe(0)
  })
  it('is brought back once, however often that is asked for', async () => {
    const one = page('one')
    const key = one.sheet.addNew(level(null))
    one.type('term', '2S1/2', key)
    one.stop()
    const two = page('two')
    expect(await Promise.all([restore(two), restore(two)])).toEqual([1, 0])
    await two.saver.now()
    expect(server.changes.size).toBe(1)
  })
  it('of a page that is open is left to that page', async () => {
    const one = page('one')
    one.type('note', 'a')
    const two = page('two')
    expect(await restore(two, ['one'])).toBe(0)
    expect(two.row().save).toBe('saved')
    expect(store.items.size).toBe(1)
  })
  it('stays kept where someone types in the row already', async () => {
    const one = page('one')
    one.type('note', 'a')
    one.stop()
    const two = page('two')
    two.type('note', 'b')
    expect(await restore(two)).toBe(0)
    expect(two.row().wanted?.values).toMatchObject({ note: 'b' })
    expect(store.items.size).toBe(2)
  })
})

describe('before a page closes', () => {
  it('it asks while something is refused, or is more than goes along, or cannot be kept', async () => {
    const one = page('one')
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(false)
    one.type('note', 'a')
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(false)
    store.full = true
    one.type('note', 'ab')
    expect(one.unsent.safe).toBe(false)
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(true)
    one.sheet.patch(KEY, {})
    expect(one.unsent.safe).toBe(false)
    store.full = false
    one.sheet.patch(KEY, {})
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(false)
    one.type('note', 'é'.repeat(40_000))
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(true)
    await one.saver.now()
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(false)
    server.fail = refusal(400)
    one.type('note', 'a')
    await one.saver.now()
    expect(one.saver.mustAsk(one.unsent.safe)).toBe(true)
  })
})

describe('an answer that was lost', () => {
  it('is no conflict with oneself', async () => {
    const one = page('one')
    one.type('note', 'a')
    await one.saver.now()
    const replace = server.replace.bind(server)
    server.replace = async (...given) => {
      await replace(...given)
      server.replace = replace
      throw refusal(0)
    }
    one.type('note', 'ab')
    await one.saver.now()
    expect(one.row().save).toBe('failed')
    await one.saver.retry()
    expect(one.row().save).toBe('saved')
    expect(stored()).toMatchObject({ note: 'ab' })
  })
})
