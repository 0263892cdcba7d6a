'use client'
import { useEffect, useRef, type KeyboardEvent } from 'react'
import type { GridColumn } from './grid-columns'
import type { Editing, GridControl } from './use-grid'

const ARROWS: Record<string, true> = { ArrowUp: true, ArrowDown: true, ArrowLeft: true, ArrowRight: true }

/** The cell while it is edited. Enter writes it and goes down, Tab to the right; Escape leaves it as it was. */
export function CellInput({ editing, column, name, list, grid }: { editing: Editing; column: GridColumn; name: string; list?: string; grid: GridControl }) {
  const input = useRef<HTMLInputElement>(null)
  const ended = useRef(false)
  useEffect(() => {
    const box = input.current
    if (box === null) return
    box.focus({ preventScroll: true })
    box.setSelectionRange(box.value.length, box.value.length)
  }, [])
  const end = (keep: boolean, then?: () => void) => {
    ended.current = true
    grid.finish(keep)
    if (then) then()
    else grid.focus()
  }
  const keys = (event: KeyboardEvent) => {
    event.stopPropagation()
    if (event.nativeEvent.isComposing) return
    const { key } = event
    if (key === 'Escape') { event.preventDefault(); end(false) }
    else if (key === 'Enter') { event.preventDefault(); end(true, () => { grid.move({ key: event.shiftKey ? 'ArrowUp' : 'ArrowDown' }) }) }
    else if (key === 'Tab') end(true, () => { if (grid.tab(event.shiftKey)) event.preventDefault() })
    else if (editing.typed && ARROWS[key] && !event.shiftKey && !(list !== undefined && key.length > 7 && key !== 'ArrowRight')) {
      event.preventDefault()
      end(true, () => { grid.move({ key }) })
    }
  }
  return (
    <input
      ref={input} value={editing.text} list={list} aria-label={`${column.label} of ${name}`} autoComplete="off" autoCapitalize="none" spellCheck={false} maxLength={2000}
      onChange={(event) => grid.change(event.target.value)} onKeyDown={keys} onBlur={() => { if (!ended.current) grid.finish(true) }}
      // what is pasted here goes into this text, not over the block
      onPaste={(event) => event.stopPropagation()} onCopy={(event) => event.stopPropagation()} onCut={(event) => event.stopPropagation()}
      onPointerDown={(event) => event.stopPropagation()} onDoubleClick={(event) => event.stopPropagation()}
      className={`absolute inset-0 z-10 w-full bg-sheet px-2 text-ink outline-2 -outline-offset-2 outline-lamp outline-solid ${column.value?.align === 'right' ? 'text-right' : ''}`}
    />
  )
}
