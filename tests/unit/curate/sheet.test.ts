import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Subject } from '@/app/(curate)/_sheet/change-state'
import { Saver } from '@/app/(curate)/_sheet/saver'
import { Sheet, type SheetRow } from '@/app/(curate)/_sheet/sheet'
import { FakeServer, madeChange, refusal } from './made'

const level = (id: string | null, species = 'Na-I'): Subject => ({ kind: 'level', species, level: id, source: null, massNumber: null })
const PUBLISHED = { configuration: '3p', term: '2P*3/2', energy_literal: '16973.36619', measured_g: [{ value: 1.3344, literal: '1.3344(4)', source: 'a' }] }
const KEY = 'level:Na-I.3'

let server: FakeServer
let sheet: Sheet
let saver: Saver
const row = (key = KEY): SheetRow => {
  const found = sheet.row(key)
  if (found === undefined) throw new Error(`no row ${key}`)
  return found
}
const type = (key: string, field: string, value: string) => sheet.commit(field, new Map([[key, sheet.stateWith(row(key), { ...(row(key).wanted?.values ?? row(key).base ?? {}), [field]: value })]]))

beforeEach(() => {
  server = new FakeServer()
  server.published.set('Na-I.3', PUBLISHED)
  sheet = new Sheet()
  saver = new Saver(sheet, server)
  sheet.add([{ key: KEY, subject: level('Na-I.3'), base: { ...PUBLISHED, measured_g: [{ value: 1.3344, source: 'a' }] }, complete: false }])
})

describe('typing into a published row', () => {
  it('reads all published values first, then replaces the whole row, so that nothing is lost', async () => {
    type(KEY, 'energy_literal', '16973.3700')
    expect(row().save).toBe('waiting')
    await saver.now()
    expect(server.calls).toEqual(['values Na-I.3', 'create'])
    expect(row().server?.values).toEqual({ ...PUBLISHED, energy_literal: '16973.3700' })
    expect(row().save).toBe('saved')
  })
  it('says which revision its values were read from, and only when it writes a change for the first time', async () => {
    server.revisions.set('Na-I.3', 4)
    type(KEY, 'energy_literal', '1')
    await saver.now()
    type(KEY, 'energy_literal', '12')
    await saver.now()
    expect(server.items.map((item) => item.base_revision)).toEqual([4, undefined])
  })
  it('reads the values again where an edition came between, and keeps what was typed', async () => {
    server.fail = refusal(409, { code: 'base_stale' })
    type(KEY, 'energy_literal', '1')
    await saver.now()
    expect(row()).toMatchObject({ save: 'failed', complete: false })
    server.published.set('Na-I.3', { ...PUBLISHED, note: 'of a colleague' })
    server.revisions.set('Na-I.3', 2)
    await saver.retry()
    expect(row().server?.values).toEqual({ ...PUBLISHED, energy_literal: '1', note: 'of a colleague' })
    expect(server.items.at(-1)?.base_revision).toBe(2)
  })
  it('brings a change up to date on demand, stating the revision in force', async () => {
    type(KEY, 'energy_literal', '1')
    await saver.now()
    const change = [...server.changes.values()][0]!
    server.revisions.set('Na-I.3', 2)
    sheet.absorb([{ ...change, current_revision: 2 }])
    await saver.rebase(KEY)
    expect(server.items.at(-1)).toMatchObject({ base_revision: 2, values: { energy_literal: '1' } })
    expect(row()).toMatchObject({ save: 'saved', server: { base_revision: 2 } })
  })
  it('takes the change out again where the published value is typed back', async () => {
    type(KEY, 'energy_literal', '1')
    await saver.now()
    type(KEY, 'energy_literal', '16973.36619')
    expect(row().wanted).toBeNull()
    await saver.now()
    expect(server.changes.size).toBe(0)
    expect(row()).toMatchObject({ server: null, save: 'saved', base: PUBLISHED })
  })
  it('keeps what is typed while it saves, and writes that next on the new tag', async () => {
    type(KEY, 'energy_literal', '1')
    const saving = saver.now()
    await Promise.resolve()
    type(KEY, 'energy_literal', '12')
    await saving
    expect(row().server?.values).toMatchObject({ energy_literal: '12' })
    expect(row()).toMatchObject({ save: 'saved' })
    expect(row().wanted?.values).toMatchObject({ energy_literal: '12' })
  })
})

describe('while someone types', () => {
  it('a moment after the last letter is soon enough, and a second after the first one at the latest', async () => {
    vi.useFakeTimers()
    try {
      const letter = async (wait: number) => {
        type(KEY, 'note', `${Date.now()}`)
        saver.later()
        await vi.advanceTimersByTimeAsync(wait)
      }
      await letter(500)
      await letter(400)
      expect(server.changes.size).toBe(0)
      await letter(150)
      expect(server.changes.size).toBe(1)
      const writes = server.calls.length
      await letter(599)
      expect(server.calls).toHaveLength(writes)
      await vi.advanceTimersByTimeAsync(2)
      expect(server.calls).toHaveLength(writes + 1)
    } finally {
      vi.useRealTimers()
    }
  })
})

describe('undo and redo', () => {
  it('write through: what is undone is taken out on the server too', async () => {
    type(KEY, 'energy_literal', '1')
    await saver.now()
    expect(sheet.undo()).toEqual([KEY])
    await saver.now()
    expect(server.changes.size).toBe(0)
    sheet.redo()
    await saver.now()
    expect([...server.changes.values()][0]?.values).toMatchObject({ energy_literal: '1' })
  })
  it('take a block as one step', () => {
    const second = sheet.addNew(level(null))
    sheet.commit('paste', new Map([[KEY, sheet.stateWith(row(), { term: 'a' })], [second, sheet.stateWith(row(second), { term: 'b' })]]))
    expect(sheet.view().canUndo).toBe('paste')
    sheet.undo()
    expect([row().wanted, row(second).wanted]).toEqual([null, null])
    expect(sheet.view().canUndo).toBeNull()
  })
  it('count letters that were saved on the way as one step, back to how it was before the cell was opened', () => {
    const before = new Map([[KEY, row().wanted]])
    sheet.set(new Map([[KEY, sheet.stateWith(row(), { ...PUBLISHED, note: 'a' })]]))
    sheet.commit('note', new Map([[KEY, sheet.stateWith(row(), { ...PUBLISHED, note: 'ab' })]]), before)
    sheet.undo()
    expect(row().wanted).toBeNull()
  })
  it('bring a new level back after it was taken out', async () => {
    const key = sheet.addNew(level(null))
    type(key, 'term', '2S1/2')
    await saver.now()
    expect(row(key).subject.level).toBe('Na-I.51')
    sheet.discard(key)
    await saver.now()
    expect(row(key)).toMatchObject({ gone: true, server: null, subject: { level: null } })
    sheet.undo()
    await saver.now()
    expect(row(key)).toMatchObject({ gone: false, subject: { level: 'Na-I.52' } })
  })
})

describe('several rows at once', () => {
  it('go in one request, and each keeps its place', async () => {
    const [one, two] = [sheet.addNew(level(null)), sheet.addNew(level(null))]
    sheet.commit('paste', new Map([one, two].map((key) => [key, sheet.stateWith(row(key), { term: key })])))
    await saver.now()
    expect(server.calls).toEqual(['batch 2+0'])
    expect(row(one).server?.values).toEqual({ term: one })
    expect(row(two).server?.values).toEqual({ term: two })
  })
  it('are told apart where one is refused, so that it does not hold the others back', async () => {
    const [one, two] = [sheet.addNew(level(null)), sheet.addNew(level(null))]
    for (const key of [one, two]) type(key, 'term', 'a')
    await saver.now()
    server.meanwhile(row(two).subject.level ?? '', { term: 'theirs' })
    sheet.commit('paste', new Map([one, two].map((key) => [key, sheet.stateWith(row(key), { term: 'b' })])))
    await saver.now()
    expect(row(one)).toMatchObject({ save: 'saved', server: { values: { term: 'b' } } })
    expect(row(two)).toMatchObject({ save: 'conflict', theirs: { change: { values: { term: 'theirs' } } }, wanted: { values: { term: 'b' } } })
  })
})

describe('when someone else was first', () => {
  it('both versions are kept until one is chosen, and mine goes upon theirs', async () => {
    type(KEY, 'note', 'a')
    await saver.now()
    server.meanwhile('Na-I.3', { note: 'theirs' })
    type(KEY, 'note', 'mine')
    await saver.now()
    expect(row().save).toBe('conflict')
    type(KEY, 'note', 'mine, and more')
    expect(row()).toMatchObject({ save: 'conflict', wanted: { values: { note: 'mine, and more' } } })
    sheet.resolve(KEY, row().wanted)
    await saver.now()
    expect(row()).toMatchObject({ save: 'saved', server: { values: { note: 'mine, and more' }, version: 3 } })
  })
  it('a change taken out by them can be made anew', async () => {
    type(KEY, 'note', 'a')
    await saver.now()
    server.changes.clear()
    type(KEY, 'note', 'mine')
    await saver.now()
    expect(row()).toMatchObject({ save: 'conflict', theirs: { change: null } })
    sheet.resolve(KEY, row().wanted)
    await saver.now()
    expect(server.changes.size).toBe(1)
  })
  it('a list read again does not touch what is being typed, and brings what is not', () => {
    sheet.absorb([madeChange({ subject: 'Na-I.3', values: { note: 'stored' }, before: PUBLISHED as never })])
    type(KEY, 'note', 'mine')
    sheet.absorb([madeChange({ subject: 'Na-I.3', values: { note: 'theirs' }, etag: '"2"' }), madeChange({ subject: 'Na-I.4', values: {} })])
    expect(row().wanted?.values).toMatchObject({ note: 'mine' })
    expect(sheet.view().order).toEqual([KEY, 'level:Na-I.4'])
    sheet.absorb([])
    expect(sheet.view().order).toEqual([KEY])
  })
})

describe('when the server does not answer', () => {
  it('the row is kept here, and the same request goes again with the same key', async () => {
    const key = sheet.addNew(level(null))
    type(key, 'term', 'a')
    server.fail = refusal(0)
    await saver.now()
    expect(row(key)).toMatchObject({ save: 'failed', problem: { status: 0 } })
    await saver.retry()
    saver.end()
    expect(row(key).save).toBe('saved')
    expect(server.keys).toEqual(['key-1', 'key-1'])
  })
  it('a refusal is not repeated by itself', async () => {
    const key = sheet.addNew(level(null))
    type(key, 'term', 'a')
    server.fail = refusal(400)
    await saver.now()
    await saver.now()
    expect(server.calls).toEqual(['create'])
    expect(row(key).save).toBe('failed')
  })
  it('a page that closes sends along what waits', () => {
    const key = sheet.addNew(level(null))
    type(key, 'term', 'half-typ')
    saver.farewell()
    expect(server.farewells).toEqual([{ items: [{ kind: 'level', action: 'create', species: 'Na-I', values: { term: 'half-typ' } }], remove: [] }])
  })
})
