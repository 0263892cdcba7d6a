import { describe, expect, it } from 'vitest'
import { amendedSnapshot, snapshotOf } from '@/lib/curation/amended'
import type { LevelRow } from '@/lib/curation/rows'
import { consequencesInSteps, consequencesOf } from '@/lib/prediction/consequences'
import { smallTable } from './table'

const table = smallTable()
const sodium = (id: string, changed: Partial<LevelRow>) => ({ kind: 'level' as const, subject: id, row: { ...table.levels.get(id)!.row, ...changed } })
const of = (...changes: ReturnType<typeof sodium>[]) => consequencesOf({ ...amendedSnapshot(table, changes), edition: 1, limit: 50 })

describe('consequences', () => {
  it('are none where nothing differs', () => {
    expect(of()).toEqual({ edition: 1, counts: { moved: 0, g_changed: 0, new: 0, gone: 0 }, lines: [], complete: true })
    expect(of(sodium('Na-I.3', { note: 'other', energyUncInvcm: 1 })).counts.moved).toBe(0)
  })

  it('tell the lines of a level that moves, with their names, shifts and wavelengths', () => {
    const { counts, lines } = of(sodium('Na-I.2', { energyInvcm: 16957.17 }))
    expect(counts).toEqual({ moved: 2, g_changed: 0, new: 0, gone: 0 })
    expect(lines.map((line) => [line.transition, line.effect, Number(line.shift_invcm?.toFixed(9))])).toEqual([['Na-I.1~Na-I.2', 'moved', 1], ['Na-I.2~Na-I.4', 'moved', -1]])
    const [d1] = lines
    expect(d1?.shift_pm).toBeCloseTo(-(589.7558 ** 2) * 1e-4, 0)
    expect(d1?.wavelength_before_nm).toBeCloseTo(589.592, 2)
    expect([d1?.medium_before, d1?.medium_after]).toEqual(['air', 'air'])
    // 4s - 3p is 1140 nm in air; far enough down it lies past 2000 nm, in vacuum
    const [far] = of(sodium('Na-I.4', { energyInvcm: 20000 })).lines.filter(({ transition }) => transition === 'Na-I.2~Na-I.4')
    expect([far?.medium_before, far?.medium_after]).toEqual(['air', 'vacuum'])
  })

  it('do not tell lines whose ends move together', () => {
    const all = ['Na-I.1', 'Na-I.2', 'Na-I.3', 'Na-I.4'].map((id) => sodium(id, { energyInvcm: table.levels.get(id)!.row.energyInvcm + 8 }))
    expect(of(...all).counts).toEqual({ moved: 0, g_changed: 0, new: 0, gone: 0 })
  })

  it('tell changed g_eff, lines gone and lines made', () => {
    const g = of(sodium('Na-I.3', { gChosen: 1.34, gChosenReason: 'x' }))
    expect(g.counts).toEqual({ moved: 0, g_changed: 2, new: 0, gone: 0 })
    expect(g.lines[0]?.g_eff_after).not.toBe(g.lines[0]?.g_eff_before)
    expect(of(sodium('Na-I.2', { status: 'retired', retiredReason: 'x' })).counts).toEqual({ moved: 0, g_changed: 0, new: 0, gone: 2 })
    const made = of({ ...sodium('Na-I.2', { configuration: '4p', energyInvcm: 30266.99 }), subject: 'Na-I.9' })
    expect(made.counts).toEqual({ moved: 0, g_changed: 0, new: 2, gone: 0 })
    expect(made.lines.map((line) => line.transition)).toEqual(['Na-I.4~Na-I.9', 'Na-I.1~Na-I.9'])
    expect(made.lines[1]).toMatchObject({ wavenumber_before_invcm: null, wavenumber_after_invcm: 30266.99, shift_invcm: null, shift_pm: null, medium_before: null, medium_after: 'air' })
  })

  it('are quick for a species of a thousand levels that all move, and tell the farthest', async () => {
    const big = smallTable()
    for (let i = 10; i < 1010; i += 1) big.levels.set(`Na-I.${i}`, { revision: 1, row: { ...table.levels.get(i % 2 === 0 ? 'Na-I.3' : 'Na-I.4')!.row, repeatIndex: i, energyInvcm: 20000 + 3 * i } })
    const changes = [...big.levels].filter(([id, { row }]) => id.startsWith('Na-I.') && row.status === 'active').map(([subject, { row }], at) => ({ kind: 'level' as const, subject, row: { ...row, energyInvcm: row.energyInvcm === 0 ? 0 : row.energyInvcm + at / 100 } }))
    const started = performance.now()
    const found = consequencesOf({ ...amendedSnapshot(big, changes), edition: 1, limit: 500 })
    expect(performance.now() - started).toBeLessThan(5000)
    expect(found.lines).toHaveLength(500)
    let turns = 0
    const timer = setInterval(() => (turns += 1), 1)
    expect(await consequencesInSteps({ ...amendedSnapshot(big, changes), edition: 1, limit: 500 })).toEqual(found)
    clearInterval(timer)
    expect(turns).toBeGreaterThan(1)
    expect(found.complete).toBe(false)
    expect(found.counts.moved).toBeGreaterThan(200_000)
    const shifts = found.lines.map((line) => Math.abs(line.shift_invcm ?? 0))
    expect([...shifts].sort((a, b) => b - a)).toEqual(shifts)
  })

  it('see the levels of a table as the catalogue does', () => {
    const snapshot = snapshotOf(table)
    expect(snapshot.size).toBe(10)
    expect(snapshot.retired('Na-I.5')).toMatchObject({ successor: 'Na-I.4' })
  })
})
