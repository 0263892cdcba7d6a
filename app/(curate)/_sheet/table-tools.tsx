'use client'
import { ClipboardPaste, Plus, Redo2, Undo2 } from 'lucide-react'
import { Menu } from '../../_components/menu'
import { speciesText } from '../../_components/names'
import { COLUMNS } from './columns'
import type { RowFilter } from './row-order'
import type { SheetView } from './sheet'
import { useSpeciesNames } from './species-picker'
import type { GridControl } from './use-grid'

interface ToolsProps {
  canEdit: boolean
  view: SheetView
  grid: GridControl
  filter: RowFilter
  onFilter: (filter: RowFilter) => void
  newSpecies: string | null
  onAdd: (species: string) => void
  onPaste: () => void
  spare: ReadonlySet<string>
  onSpare: (spare: ReadonlySet<string>) => void
  showBefore: boolean
  onShowBefore: (show: boolean) => void
}

function Toggle({ pressed, onPress, children }: { pressed: boolean; onPress: () => void; children: React.ReactNode }) {
  return <button type="button" aria-pressed={pressed} onClick={onPress} className="btn btn-small aria-pressed:border-lamp aria-pressed:bg-lamp-wash">{children}</button>
}

/** What can be done to the table, and which of it is shown. */
export function TableTools({ canEdit, view, grid, filter, onFilter, newSpecies, onAdd, onPaste, spare, onSpare, showBefore, onShowBefore }: ToolsProps) {
  const species = useSpeciesNames()
  const toggled = (id: string) => {
    const next = new Set(spare)
    if (!next.delete(id)) next.add(id)
    return next
  }
  return (
    <div className="flex flex-wrap items-center gap-2">
      {canEdit ? (
        <div role="group" aria-label="Edit" className="flex flex-wrap gap-2">
          {newSpecies !== null ? <button type="button" className="btn btn-small" onClick={() => onAdd(newSpecies)}><Plus size={14} aria-hidden="true" />New level of {speciesText(newSpecies)}</button> : null}
          {newSpecies === null ? <Menu label="New level" items={species.map((one) => ({ label: speciesText(one.id), hint: one.name, onSelect: () => onAdd(one.id) }))} /> : null}
          <button type="button" className="btn btn-small" disabled={view.canUndo === null} title={view.canUndo === null ? 'Nothing to undo' : `Undo ${view.canUndo} (Ctrl+Z)`} onClick={() => grid.step('undo')}><Undo2 size={14} aria-hidden="true" />Undo</button>
          <button type="button" className="btn btn-small" disabled={view.canRedo === null} title={view.canRedo === null ? 'Nothing to do again' : `Do ${view.canRedo} again (Ctrl+Shift+Z)`} onClick={() => grid.step('redo')}><Redo2 size={14} aria-hidden="true" />Redo</button>
          <button type="button" className="btn btn-small" onClick={onPaste}><ClipboardPaste size={14} aria-hidden="true" />Paste a block</button>
        </div>
      ) : null}
      <div role="group" aria-label="Show" className="flex flex-wrap gap-2 sm:ml-auto">
        <input type="search" aria-label="Filter rows" placeholder="Filter rows" value={filter.words} onChange={(event) => onFilter({ ...filter, words: event.target.value })} className="input min-h-7 w-40 py-0 text-sm" />
        <Toggle pressed={filter.changed} onPress={() => onFilter({ ...filter, changed: !filter.changed })}>Changed</Toggle>
        <Toggle pressed={filter.findings} onPress={() => onFilter({ ...filter, findings: !filter.findings })}>With findings</Toggle>
        <Toggle pressed={showBefore} onPress={() => onShowBefore(!showBefore)}>Values before</Toggle>
        <Menu label="Columns" items={COLUMNS.filter((column) => column.spare).map((column) => ({ label: column.label, hint: spare.has(column.id) ? 'shown' : 'hidden', onSelect: () => onSpare(toggled(column.id)) }))} />
      </div>
    </div>
  )
}
