'use client'
import { useCallback, useMemo, useRef, useState } from 'react'
import type { ChangeState } from './change-state'
import { readCell, type GridColumn } from './grid-columns'
import type { Saver } from './saver'
import { at, blockOf, clamp, type Press, moved, type Selection, sizeOf, tabbed } from './selection'
import { isRetired, type Sheet, type SheetRow, shownValues } from './sheet'

/** The cell being edited. `typed`: begun by typing, so arrow keys write it and go on; else they move within the text. */
export interface Editing { key: string; column: string; text: string; typed: boolean }

export interface GridInput { sheet: Sheet; saver: Saver; keys: readonly string[]; columns: readonly GridColumn[]; canEdit: boolean; say: (text: string) => void }

export const isLocked = (row: SheetRow): boolean => isRetired(row) || row.save === 'conflict'

/** Selection and editing of the table, and everything that writes into it. */
export function useGrid({ sheet, saver, keys, columns, canEdit, say }: GridInput) {
  const [wantedSelection, setSelection] = useState<Selection>(at(0, 1))
  const [editing, setEditing] = useState<Editing | null>(null)
  /** How the row was when its cell was opened. */
  const opened = useRef<ChangeState | null>(null)
  const [focusCount, setFocusCount] = useState(0)
  const selection = useMemo(() => clamp(wantedSelection, { rows: Math.max(1, keys.length), columns: columns.length }), [wantedSelection, keys.length, columns.length])
  const headKey = keys[selection.head.row]

  /** Asks for the focus to be put on the cell in focus. */
  const focus = useCallback(() => setFocusCount((count) => count + 1), [])
  const select = useCallback((next: Selection) => { setSelection(next); focus() }, [focus])

  const begin = (text: string | null) => {
    const [row, column] = [headKey === undefined ? undefined : sheet.row(headKey), columns[selection.head.column]]
    if (row === undefined || column === undefined || !canEdit) return
    if (column.value === null) return say('The identifier is given by the table and cannot be edited.')
    if (isLocked(row)) return say(row.save === 'conflict' ? 'Two versions of this row wait for a choice before it can be edited.' : 'This level is retired here. Take the change out to edit it.')
    opened.current = row.wanted
    void saver.complete(row.key, row)
    setEditing({ key: row.key, column: column.id, text: text ?? readCell(row, column), typed: text !== null })
    if (text !== null) type(row.key, column, text)
  }
  const stateFor = (key: string, column: GridColumn | undefined, text: string): ChangeState | null | undefined => {
    const row = sheet.row(key)
    if (row === undefined || column?.value == null) return undefined
    return sheet.stateWith(row, column.value.write(shownValues(row), text))
  }
  /** Kept on the server as it is typed, a moment after the last letter. */
  const type = (key: string, column: GridColumn | undefined, text: string) => {
    const state = stateFor(key, column, text)
    if (state === undefined) return
    sheet.set(new Map([[key, state]]))
    saver.later()
  }
  const change = (text: string) => {
    if (editing === null) return
    setEditing({ ...editing, text })
    type(editing.key, columns.find((column) => column.id === editing.column), text)
  }
  const finish = (keep: boolean) => {
    if (editing === null) return
    const { key, column: id, text } = editing
    const column = columns.find((candidate) => candidate.id === id)
    setEditing(null)
    const before = opened.current
    sheet.set(new Map([[key, before]]))
    const row = sheet.row(key)
    const state = keep && row !== undefined && readCell(row, column) !== text ? stateFor(key, column, text) : before
    if (state !== undefined) sheet.commit(`${column?.label ?? 'value'} of ${readCell(row, columns[0])}`, new Map([[key, state]]))
    void saver.now()
  }

  /** Writes cells of several rows as one step. */
  const write = (label: string, states: ReadonlyMap<string, ChangeState | null>) => {
    sheet.commit(label, states)
    void saver.now()
  }
  const clear = () => {
    if (!canEdit) return
    const block = blockOf(selection)
    const states = new Map<string, ChangeState | null>()
    for (let line = block.top; line <= block.bottom; line++) {
      const row = sheet.row(keys[line] ?? '')
      if (row === undefined || isLocked(row)) continue
      let values = shownValues(row)
      for (const column of columns.slice(block.left, block.right + 1)) if (column.value !== null && column.value.read(values) !== '') values = column.value.write(values, '')
      if (values !== shownValues(row)) states.set(row.key, sheet.stateWith(row, values))
    }
    if (states.size > 0) write(sizeOf(block) === 1 ? 'clearing a cell' : 'clearing a block', states)
  }
  const step = (way: 'undo' | 'redo') => {
    const label = way === 'undo' ? sheet.view().canUndo : sheet.view().canRedo
    const touched = sheet[way]()
    void saver.now()
    say(label === null ? `Nothing to ${way}.` : `${way === 'undo' ? 'Undone' : 'Done again'}: ${label}.`)
    const line = keys.indexOf(touched[0] ?? '')
    if (line >= 0) select(at(line, selection.head.column))
  }

  const cells = (): string[][] => {
    const block = blockOf(selection)
    return keys.slice(block.top, block.bottom + 1).map((key) => columns.slice(block.left, block.right + 1).map((column) => readCell(sheet.row(key), column)))
  }
  const extent = (page: number) => ({ rows: keys.length, columns: columns.length, page })
  const filled = (row: number, column: number): boolean => readCell(sheet.row(keys[row] ?? ''), columns[column]) !== ''
  const move = (press: Press, page = 10): boolean => {
    const next = moved(selection, press, extent(page), filled)
    if (next !== null) select(next)
    return next !== null
  }
  const tab = (backwards: boolean): boolean => {
    const next = tabbed(selection, backwards, extent(1))
    if (next !== null) select(next)
    return next !== null
  }
  const all = () => setSelection({ anchor: { row: 0, column: 0 }, head: { row: keys.length - 1, column: columns.length - 1 } })

  return { selection, headKey, editing, focusCount, focus, select, setSelection, begin, change, finish, write, clear, step, cells, move, tab, all }
}
export type GridControl = ReturnType<typeof useGrid>
