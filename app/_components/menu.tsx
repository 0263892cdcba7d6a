'use client'
import { ChevronDown } from 'lucide-react'
import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react'

export interface MenuItem { label: string; onSelect: () => void | Promise<void>; hint?: string }

/** A button that opens a short list of actions. Arrow keys move, Escape closes and gives the focus back. */
export function Menu({ label, items, className = 'btn btn-small' }: { label: string; items: readonly MenuItem[]; className?: string }) {
  const [open, setOpen] = useState(false)
  const id = useId()
  const root = useRef<HTMLDivElement>(null)
  const button = useRef<HTMLButtonElement>(null)
  const list = useRef<HTMLDivElement>(null)

  useEffect(() => {
    if (!open) return
    list.current?.querySelector<HTMLButtonElement>('button')?.focus()
    const outside = (event: PointerEvent) => { if (!root.current?.contains(event.target as Node)) setOpen(false) }
    document.addEventListener('pointerdown', outside)
    return () => document.removeEventListener('pointerdown', outside)
  }, [open])

  const close = () => { setOpen(false); button.current?.focus() }
  const keys = (event: KeyboardEvent) => {
    const buttons = [...(list.current?.querySelectorAll<HTMLButtonElement>('button') ?? [])]
    const here = buttons.indexOf(document.activeElement as HTMLButtonElement)
    const to = { ArrowDown: here + 1, ArrowUp: here - 1, Home: 0, End: buttons.length - 1 }[event.key]
    if (to !== undefined) { event.preventDefault(); buttons[(to + buttons.length) % buttons.length]?.focus() }
    else if (event.key === 'Escape') { event.preventDefault(); close() }
    else if (event.key === 'Tab') setOpen(false)
  }

  return (
    <div ref={root} className="relative inline-block">
      <button ref={button} type="button" className={className} aria-haspopup="menu" aria-expanded={open} aria-controls={open ? id : undefined} onClick={() => setOpen(!open)}>
        {label}
        <ChevronDown size={13} aria-hidden="true" />
      </button>
      {open ? (
        <div ref={list} id={id} role="menu" aria-label={label} onKeyDown={keys} className="absolute right-0 z-30 mt-1 min-w-44 border border-rule-strong bg-sheet py-1 shadow-[0_6px_20px_-8px_rgb(0_0_0/0.45)]">
          {items.map((item) => (
            <button key={item.label} type="button" role="menuitem" tabIndex={-1} className="flex min-h-8 w-full items-baseline justify-between gap-4 px-3 py-1 text-left text-sm hover:bg-lamp-wash focus-visible:bg-lamp-wash"
              onClick={() => { void item.onSelect(); close() }}>
              {item.label}
              {item.hint ? <span className="text-xs text-muted">{item.hint}</span> : null}
            </button>
          ))}
        </div>
      ) : null}
    </div>
  )
}
