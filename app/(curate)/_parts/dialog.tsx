'use client'
import { X } from 'lucide-react'
import { useEffect, useId, useRef, type ReactNode } from 'react'

/** A window over the page. The browser keeps the focus inside, Escape closes it, and the focus goes back where it was. */
export function Dialog({ title, onClose, children, wide = false }: { title: ReactNode; onClose: () => void; children: ReactNode; wide?: boolean }) {
  const box = useRef<HTMLDialogElement>(null)
  const id = useId()
  useEffect(() => {
    const dialog = box.current
    if (dialog === null || dialog.open) return
    const before = document.activeElement
    dialog.showModal()
    // the first thing to fill in; where there is none, the title, so that it is read first
    const start = dialog.querySelector<HTMLElement>('[data-dialog-body] :is(input, textarea, select):not([type=radio])') ?? dialog.querySelector<HTMLElement>('h2')
    start?.focus({ preventScroll: true })
    return () => {
      dialog.close()
      if (before instanceof HTMLElement && before.isConnected) before.focus({ preventScroll: true })
    }
  }, [])
  return (
    <dialog ref={box} aria-labelledby={id} onCancel={(event) => { event.preventDefault(); onClose() }}
      // keys pressed in here are not for the table underneath
      onKeyDown={(event) => event.stopPropagation()}
      className={`m-auto max-h-[min(92dvh,56rem)] ${wide ? 'w-[min(100vw-1.5rem,72rem)]' : 'w-[min(100vw-1.5rem,38rem)]'} overflow-y-auto border border-rule-strong bg-paper p-0 text-ink shadow-[0_18px_60px_-18px_rgb(0_0_0/0.55)] backdrop:bg-plate/55`}>
      <div className="flex items-start justify-between gap-4 border-b border-rule-strong px-4 pt-3.5 pb-2.5 sm:px-5">
        <h2 id={id} tabIndex={-1} className="text-xl outline-none">{title}</h2>
        <button type="button" onClick={onClose} aria-label="Close" className="btn btn-quiet btn-small -mr-2 min-h-8 min-w-8 px-1.5"><X size={17} aria-hidden="true" /></button>
      </div>
      <div data-dialog-body className="px-4 py-4 sm:px-5">{children}</div>
    </dialog>
  )
}
