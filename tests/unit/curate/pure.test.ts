import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canonical, type ChangeState, rebase } from '@/app/(curate)/_sheet/change-state'
import { blockText, clipboardBlock, parseBlock, plainText } from '@/app/(curate)/_sheet/clipboard'
import { columnById, columnOfField, COLUMNS, measuredG } from '@/app/(curate)/_sheet/columns'
import { clashes, merged, suggested } from '@/app/(curate)/_sheet/merge'
import { headings, type PasteTarget, planPaste, spread } from '@/app/(curate)/_sheet/paste'
import { at, blockOf, clamp, moved, tabbed } from '@/app/(curate)/_sheet/selection'
import { emptyHistory, record, redo, undo } from '@/app/(curate)/_sheet/undo'

const column = (id: string) => {
  const found = columnById(id)
  if (found === undefined) throw new Error(id)
  return found
}

describe('the block of cells in focus', () => {
  const extent = { rows: 20, columns: 5, page: 8 }
  it('moves within the table, and grows with Shift', () => {
    expect(moved(at(0, 0), { key: 'ArrowUp' }, extent)).toEqual(at(0, 0))
    expect(moved(at(3, 4), { key: 'ArrowRight' }, extent)).toEqual(at(3, 4))
    expect(moved(at(3, 2), { key: 'PageDown' }, extent)).toEqual(at(11, 2))
    expect(moved(at(3, 2), { key: 'End', ctrl: true }, extent)).toEqual(at(19, 4))
    const grown = moved(moved(at(3, 2), { key: 'ArrowDown', shift: true }, extent) ?? at(0, 0), { key: 'ArrowLeft', shift: true }, extent)
    expect(grown && blockOf(grown)).toEqual({ top: 3, bottom: 4, left: 1, right: 2 })
    expect(moved(at(0, 0), { key: 'x' }, extent)).toBeNull()
  })
  it('jumps to the end of a run, and over a gap to the next filled cell', () => {
    const filled = (row: number) => row < 4 || row === 9
    const down = (row: number) => moved(at(row, 0), { key: 'ArrowDown', ctrl: true }, extent, filled)?.head.row
    expect([down(0), down(3), down(5), down(9)]).toEqual([3, 9, 9, 19])
  })
  it('Tab goes on to the next row, and out of the table at either end', () => {
    expect(tabbed(at(0, 4), false, extent)).toEqual(at(1, 0))
    expect(tabbed(at(1, 0), true, extent)).toEqual(at(0, 4))
    expect(tabbed(at(19, 4), false, extent)).toBeNull()
    expect(tabbed(at(0, 0), true, extent)).toBeNull()
  })
  it('stays inside when rows go away', () => expect(clamp(at(18, 2), { rows: 3, columns: 5 })).toEqual(at(2, 2)))
})

describe('text of a block', () => {
  it('comes back as it was, whatever is in it', () => {
    const cell = fc.string({ unit: fc.constantFrom('a', '"', '\t', '\n', ' ', '1', 'é') })
    const block = fc.integer({ min: 1, max: 4 }).chain((width) => fc.array(fc.array(cell, { minLength: width, maxLength: width }), { minLength: 1, maxLength: 4 }))
    fc.assert(fc.property(block.filter((rows) => rows.some((row) => row.length > 1 || row[0] !== '')), (rows) => {
      // one empty last cell alone in its row is the line's own end
      fc.pre(!(rows.at(-1)?.length === 1 && rows.at(-1)?.[0] === ''))
      expect(parseBlock(blockText(rows))).toEqual(rows)
    }))
  })
  it('reads what spreadsheets write: line ends, a last empty line, quotes that are only text', () => {
    expect(parseBlock('a\tb\r\n"c ""d"""\t\r\n')).toEqual([['a', 'b'], ['c "d"', '']])
    expect(parseBlock('5"\t"x" y')).toEqual([['5"', '"x" y']])
    expect(parseBlock('')).toEqual([])
  })
  it('takes typeset minus signs and spaces out of numbers only', () => {
    expect(plainText('\u221216\u2009973.36')).toBe('-16973.36')
    expect(plainText(' 3d6.(5D) – 4s ')).toBe('3d6.(5D) – 4s')
    expect(plainText('1.3362(13)')).toBe('1.3362(13)')
  })
  it('prefers plain text with tabs to HTML', () => {
    expect(clipboardBlock({ getData: (type) => (type === 'text/plain' ? '1\t2' : '<table><tr><td>x') })).toEqual([['1', '2']])
  })
})

describe('columns', () => {
  it('give each cell back what was written into it, and leave the others alone', () => {
    for (const one of COLUMNS) {
      const text = Array.isArray(one.offers) ? String(one.offers[0]) : '1.5'
      const values = one.write({ configuration: '3p', note: 'kept' }, text)
      expect(one.read(values), one.id).toBe(text)
      for (const other of COLUMNS) if (other.id !== one.id) expect(other.read(values), `${one.id} ${other.id}`).toBe(other.read({ configuration: '3p', note: 'kept' }))
      expect(one.read(one.write(values, '')), one.id).toBe('')
    }
  })
  it('an energy typed anew takes its number from the digits', () => {
    expect(canonical(column('energy').write({ energy_literal: '1', energy_invcm: 1 }, '2.50'))).toBe(canonical({ energy_literal: '2.50' }))
  })
  it('the first measured g is edited, the others stay; emptied it goes', () => {
    const values = { measured_g: [{ value: 1.5, source: 'a' }, { value: 1.6, source: 'b' }] }
    expect(measuredG(column('g_unc').write(values, '0.1'))).toEqual([{ value: 1.5, source: 'a', unc: '0.1' }, { value: 1.6, source: 'b' }])
    expect(column('g').write({ g_j_measured: 1.5 }, '')).toEqual({ measured_g: null })
  })
  it('findings find their column', () => {
    expect(['energy_unc_invcm', 'measured_g.0.value', 'measured_g.0.unc', 'measured_g.1.unc', null, 'status'].map((field) => columnOfField(field)?.id)).toEqual(['energy_unc', 'g', 'g_unc', 'g', undefined, undefined])
  })
})

describe('pasting', () => {
  const target = (key: string | null, values = {}): PasteTarget => ({ key, subject: { kind: 'level', species: 'Na-I', level: key, source: null, massNumber: null }, name: key ?? 'new', values, locked: false })
  const shown = COLUMNS.filter((one) => !one.spare)
  it('fills a selected block with one value', () => {
    expect(spread([['x']], { top: 0, bottom: 1, left: 2, right: 3 })).toEqual([['x', 'x'], ['x', 'x']])
    expect(spread([['a', 'b']], { top: 0, bottom: 5, left: 0, right: 0 })).toEqual([['a', 'b']])
  })
  it('tells each cell that would change, before and after, and makes new levels below the last row', () => {
    const plan = planPaste([['3p', 'LS'], ['4s', 'LS']], shown, 0, [target('Na-I.3', { configuration: '3p' })], () => target(null))
    expect(plan).toMatchObject({ cells: 3, same: 1, left: [], headed: false })
    expect(plan.rows.map((row) => [row.target.key, row.cells.map((cell) => [cell.column.id, cell.before, cell.after])])).toEqual([
      ['Na-I.3', [['coupling', '', 'LS']]], [null, [['configuration', '', '4s'], ['coupling', '', 'LS']]],
    ])
  })
  it('goes by headings where the first row has them', () => {
    const plan = planPaste([['Term', 'energy_literal'], ['2S1/2', '0']], shown, 5, [target('a')], null)
    expect(plan.headed).toBe(true)
    expect(plan.rows[0]?.values).toEqual({ term: '2S1/2', energy_literal: '0', energy_invcm: null })
    expect(headings(['Term', 'nonsense'], shown)).toBeNull()
  })
  describe('numbers with a comma', () => {
    const energies = (texts: string[], told?: '.' | ',') => planPaste(texts.map((text) => [text]), shown, shown.findIndex((one) => one.id === 'energy'), texts.map((_, at) => target(`Na-I.${at}`)), null, told)
    const read = (plan: ReturnType<typeof energies>) => plan.rows.map(({ cells }) => [cells[0]?.after, cells[0]?.pasted])
    it('are read with a point where the block writes decimal commas, and say so', () => {
      const plan = energies(['16956,170', '16\u2009973,366(2)', '30266'])
      expect(plan).toMatchObject({ unclear: null, left: [], cells: 3 })
      expect(read(plan)).toEqual([['16956.170', '16956,170'], ['16973.366(2)', '16\u2009973,366(2)'], ['30266', null]])
      expect(plan.rows[0]?.values).toMatchObject({ energy_literal: '16956.170' })
      // one of a doubtful form is as the others are
      expect(read(energies(['16956,170', '16,956']))[1]).toEqual(['16.956', '16,956'])
    })
    it('are asked about where the comma may divide thousands, and read as told', () => {
      expect(energies(['16,956', '29,172'])).toMatchObject({ unclear: '16,956', rows: [], cells: 0 })
      expect(read(energies(['16,956'], ','))).toEqual([['16.956', '16,956']])
      expect(read(energies(['16,956'], '.'))).toEqual([['16956', null]])
    })
    it('are left out where the marks are mixed, with what to do', () => {
      const comma = energies(['16956,170', '16973,366', '30.266'])
      expect(read(comma)).toHaveLength(2)
      expect(comma.left[0]).toContain('left out (30.266)')
      expect(comma.left[0]).toContain('Write it with a decimal comma')
      expect(energies(['16956.170', '16973.366', '30,266', '29172,8']).left[0]).toContain('2 numbers have a comma')
    })
    it('in columns of text stay as they are', () => {
      const plan = planPaste([['16956,170', 'seen 1,5']], shown, shown.findIndex((one) => one.id === 'g_evidence'), [target('a')], null)
      expect(plan.rows[0]?.cells.map((one) => one.after)).toEqual(['16956,170', 'seen 1,5'])
    })
  })
  it('says what found no place', () => {
    const plan = planPaste([['a', 'b'], ['c', 'd'], ['e', 'f']], shown, shown.length - 1, [{ ...target('x'), locked: true }, target('y')], null)
    expect(plan.left).toHaveLength(3)
    expect(plan.cells).toBe(1)
  })
})

describe('steps that can be taken back', () => {
  const step = (label: string) => ({ label, changes: [{ key: 'a', before: 0, after: 1 }] })
  it('go back and forth in order; a new step ends what was undone', () => {
    let history = record(record(emptyHistory<number>(), step('one')), step('two'))
    const back = undo(history)
    expect(back?.step.label).toBe('two')
    history = back?.history ?? history
    expect(redo(history)?.step.label).toBe('two')
    expect(redo(record(history, step('three')))).toBeNull()
    expect(record(history, { label: 'nothing', changes: [] })).toBe(history)
    expect(undo(emptyHistory())).toBeNull()
  })
})

describe('two versions of one change', () => {
  const state = (values: Record<string, unknown>, rest: Partial<ChangeState> = {}): ChangeState => ({ action: 'replace', values, reason: null, successor: null, comment: null, ...rest })
  const [base, mine, theirs] = [state({ a: 1, b: 1, c: 1 }), state({ a: 2, b: 1, c: 3 }), state({ a: 4, b: 5, c: 3 }, { comment: 'why' })]
  it('are compared value by value', () => {
    const found = clashes(base, mine, theirs)
    expect(found.map((clash) => [clash.field, clash.differ, suggested(clash)])).toEqual([['comment', true, 'theirs'], ['a', true, 'mine'], ['b', true, 'theirs'], ['c', false, 'mine']])
  })
  it('are put together from the choices', () => {
    expect(merged(mine, theirs, { comment: 'theirs', a: 'mine', b: 'theirs' })).toEqual(state({ a: 2, b: 5, c: 3 }, { comment: 'why' }))
    expect(merged(mine, null, { action: 'mine' })).toBe(mine)
    expect(merged(mine, null, { action: 'theirs' })).toBeNull()
  })
})

describe('values typed upon an incomplete reading', () => {
  it('are carried over to the complete one, within lists too', () => {
    expect(rebase({ a: 2, g: [{ value: '7' }] }, { a: 1, g: [{ value: 1 }] }, { a: 1, extra: true, g: [{ value: 1, literal: '1.0' }] })).toEqual({ a: 2, extra: true, g: [{ value: '7', literal: '1.0' }] })
  })
})
