'use client'
import { defaultRangeExtractor, useVirtualizer } from '@tanstack/react-virtual'
import { useLayoutEffect, useRef, type ClipboardEvent, type KeyboardEvent, type MouseEvent, type PointerEvent } from 'react'
import { blockText, clipboardBlock } from './clipboard'
import { COUPLINGS, EVIDENCE } from './columns'
import { type GridColumn, offsets } from './grid-columns'
import { cellId, GridRow } from './grid-row'
import { at, blockOf } from './selection'
import type { SheetView } from './sheet'
import type { GridControl } from './use-grid'

const HEAD = 40
/** Room for the bar that scrolls sideways. */
const SCROLLBAR = 18
const isPrintable = (event: KeyboardEvent): boolean => event.key.length === 1 && !event.ctrlKey && !event.metaKey && !event.altKey

export interface GridProps {
  grid: GridControl
  view: SheetView
  keys: readonly string[]
  columns: readonly GridColumn[]
  canEdit: boolean
  showBefore: boolean
  sources: readonly string[]
  label: string
  onPaste: (cells: string[][]) => void
  onCopied: (cells: number) => void
}

const placeOf = (target: EventTarget | null): { row: number; column: number } | null => {
  const cell = target instanceof Element ? target.closest<HTMLElement>('[data-column]') : null
  return cell?.dataset.row === undefined ? null : { row: Number(cell.dataset.row), column: Number(cell.dataset.column) }
}

/** The table of levels: rows drawn as they come into sight, one cell in focus, everything by keyboard. */
export function Grid({ grid, view, keys, columns, canEdit, showBefore, sources, label, onPaste, onCopied }: GridProps) {
  const box = useRef<HTMLDivElement>(null)
  const dragging = useRef(false)
  const { selection, editing, focusCount } = grid
  const { head } = selection
  const block = blockOf(selection)
  const height = showBefore ? 52 : 34
  const edges = offsets(columns)
  const width = edges.at(-1) ?? 0
  // eslint-disable-next-line react-hooks/incompatible-library -- this component is drawn anew with every change of the sheet
  const rows = useVirtualizer({
    count: keys.length, getScrollElement: () => box.current, estimateSize: () => height, overscan: 6, paddingStart: HEAD, scrollPaddingStart: HEAD,
    // the row in focus is always there, so that the focus is never lost by scrolling
    rangeExtractor: (range) => [...new Set([...defaultRangeExtractor(range), ...(head.row < keys.length ? [head.row] : [])])].sort((a, b) => a - b),
  })
  useLayoutEffect(() => rows.measure(), [rows, height])

  useLayoutEffect(() => {
    if (focusCount === 0) return
    rows.scrollToIndex(head.row, { align: 'auto' })
    const scroller = box.current
    const [left = 0, right = 0, frozen = 0] = [edges[head.column], edges[head.column + 1], edges[1]]
    if (scroller !== null && head.column > 0) {
      if (left - frozen < scroller.scrollLeft) scroller.scrollLeft = left - frozen
      else if (right > scroller.scrollLeft + scroller.clientWidth) scroller.scrollLeft = right - scroller.clientWidth
    }
    document.getElementById(cellId(head.row, head.column))?.focus({ preventScroll: true })
    // only when the focus is asked for: the columns' edges and the rows' measures move without it
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [focusCount])

  const press = (event: KeyboardEvent) => {
    if (editing !== null) return
    const ctrl = event.ctrlKey || event.metaKey
    const { key, shiftKey: shift } = event
    const page = Math.max(1, Math.floor(((box.current?.clientHeight ?? 400) - HEAD) / height) - 1)
    const done = ((): boolean => {
      if (key === 'Tab') return !ctrl && grid.tab(shift)
      if (ctrl && key.toLowerCase() === 'z') { grid.step(shift ? 'redo' : 'undo'); return true }
      if (ctrl && key.toLowerCase() === 'y') { grid.step('redo'); return true }
      if (ctrl && key.toLowerCase() === 'a') { grid.all(); return true }
      if (grid.move({ key, shift, ctrl }, page)) return true
      if (key === 'Enter' || key === 'F2') { grid.begin(null); return true }
      if (key === 'Delete' || key === 'Backspace') { grid.clear(); return true }
      if (key === 'Escape') { grid.setSelection(at(head.row, head.column)); return true }
      if (isPrintable(event) && canEdit) { grid.begin(key); return true }
      return false
    })()
    if (done) event.preventDefault()
  }
  const down = (event: PointerEvent) => {
    const place = placeOf(event.target)
    if (place === null || event.pointerType !== 'mouse' || event.button !== 0) return
    event.preventDefault()
    if (editing !== null) grid.finish(true)
    grid.select(event.shiftKey ? { anchor: selection.anchor, head: place } : at(place.row, place.column))
    dragging.current = true
    const up = () => { dragging.current = false }
    window.addEventListener('pointerup', up, { once: true })
  }
  const drag = (event: PointerEvent) => {
    const place = placeOf(event.target)
    if (!dragging.current || place === null || (place.row === head.row && place.column === head.column)) return
    grid.select({ anchor: selection.anchor, head: place })
  }
  /** A finger chooses a cell, and a second time opens it. */
  const tap = (event: MouseEvent) => {
    const place = placeOf(event.target)
    const { pointerType } = event.nativeEvent as globalThis.PointerEvent
    if (place === null || pointerType === 'mouse' || editing !== null) return
    if (place.row === head.row && place.column === head.column) grid.begin(null)
    else grid.select(at(place.row, place.column))
  }
  const copy = (event: ClipboardEvent, cut: boolean) => {
    if (editing !== null || keys.length === 0) return
    event.preventDefault()
    const cells = grid.cells()
    event.clipboardData.setData('text/plain', blockText(cells))
    onCopied(cells.length * (cells[0]?.length ?? 0))
    if (cut) grid.clear()
  }
  const paste = (event: ClipboardEvent) => {
    if (editing !== null || !canEdit) return
    event.preventDefault()
    const cells = clipboardBlock(event.clipboardData)
    if (cells.length > 0) onPaste(cells)
  }

  return (
    <>
    <div ref={box} role="grid" aria-label={label} aria-rowcount={keys.length + 1} aria-colcount={columns.length} aria-multiselectable="true" aria-readonly={!canEdit || undefined}
      onKeyDown={press} onPointerDown={down} onPointerOver={drag} onClick={tap} onDoubleClick={(event) => { if (placeOf(event.target) !== null) grid.begin(null) }}
      onCopy={(event) => copy(event, false)} onCut={(event) => copy(event, canEdit)} onPaste={paste}
      style={{ height: HEAD + keys.length * height + SCROLLBAR }}
      className="relative max-h-[clamp(18rem,62dvh,46rem)] overflow-auto overscroll-contain border border-rule-strong bg-sheet text-sm select-none">
      <div role="rowgroup" className="sticky top-0 z-[4]" style={{ width, height: 0 }}>
        <div role="row" aria-rowindex={1} className="flex border-b border-rule-strong bg-well" style={{ width, height: HEAD }}>
          {columns.map((column, place) => (
            <div key={column.id} role="columnheader" aria-colindex={place + 1} title={column.hint} style={{ width: column.width }}
              className={`flex shrink-0 flex-col justify-center border-r border-rule px-2 text-xs leading-tight text-muted ${place === 0 ? 'sticky left-0 z-[5] border-r-rule-strong bg-well pl-6' : ''} ${column.value?.align === 'right' ? 'text-right' : ''} ${place === head.column ? 'font-medium text-ink' : ''}`}>
              <span className="truncate">{column.label}</span>
              {column.value?.unit ? <span className="truncate text-2xs">{column.value.unit}</span> : null}
            </div>
          ))}
        </div>
      </div>
      <div role="rowgroup" style={{ height: rows.getTotalSize(), width }}>
        {rows.getVirtualItems().map((item) => {
          const row = view.rows.get(keys[item.index] ?? '')
          if (row === undefined) return null
          const inBlock = item.index >= block.top && item.index <= block.bottom
          const isHead = item.index === head.row
          return (
            <div key={row.key} role="row" aria-rowindex={item.index + 2} className="absolute top-0 left-0 flex" style={{ width, height, transform: `translateY(${item.start}px)` }}>
              <GridRow row={row} index={item.index} columns={columns} from={inBlock ? block.left : -1} to={inBlock ? block.right : -2} head={isHead ? head.column : null}
                editing={editing?.key === row.key ? editing : null} grid={editing?.key === row.key ? grid : null} showBefore={showBefore} canEdit={canEdit} />
            </div>
          )
        })}
      </div>
    </div>
    <datalist id="sheet-sources">{sources.map((key) => <option key={key} value={key} />)}</datalist>
    <datalist id="sheet-coupling">{COUPLINGS.map((one) => <option key={one} value={one} />)}</datalist>
    {['energy_evidence', 'g_evidence'].map((id) => <datalist key={id} id={`sheet-${id}`}>{EVIDENCE.map((one) => <option key={one} value={one} />)}</datalist>)}
    <datalist id="sheet-line_checked"><option value="yes" /><option value="no" /></datalist>
    </>
  )
}
