'use client'
import { useState, type FormEvent } from 'react'
import { Dialog } from '../_parts/dialog'
import { clipboardBlock, parseBlock } from './clipboard'

/** For those without Ctrl+V at hand: a box to paste a block into. */
export function PasteBox({ onPaste, onClose }: { onPaste: (cells: string[][]) => void; onClose: () => void }) {
  const [text, setText] = useState('')
  const submit = (event: FormEvent) => {
    event.preventDefault()
    const cells = parseBlock(text)
    if (cells.length > 0) onPaste(cells)
  }
  return (
    <Dialog title="Paste a block" onClose={onClose}>
      <form onSubmit={submit} className="space-y-3">
        <p className="note">Copied from a spreadsheet, or text with tabs between columns. It goes down and right from the cell in focus; a first row of our headings places the columns. A report comes before anything is written.</p>
        <label className="block">
          <span className="label">Block</span>
          <textarea className="input min-h-40 font-mono text-sm" value={text} onChange={(event) => setText(event.target.value)} spellCheck={false}
            onPaste={(event) => {
              const cells = clipboardBlock(event.clipboardData)
              if (text === '' && cells.length > 0 && (cells.length > 1 || (cells[0]?.length ?? 0) > 1)) { event.preventDefault(); onPaste(cells) }
            }} />
        </label>
        <div className="flex gap-2">
          <button type="submit" className="btn btn-lamp" disabled={text.trim() === ''}>Show what it would change</button>
          <button type="button" className="btn" onClick={onClose}>Cancel</button>
        </div>
      </form>
    </Dialog>
  )
}
