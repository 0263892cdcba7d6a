'use client'
import { Check, Copy } from 'lucide-react'
import { useEffect, useRef, useState } from 'react'

export async function copyText(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text)
    return true
  } catch {
    // Plain http on a network address has no clipboard API; the old way still works there.
    const area = document.createElement('textarea')
    area.value = text
    area.setAttribute('readonly', '')
    area.className = 'sr-only'
    document.body.append(area)
    area.select()
    const done = document.execCommand('copy')
    area.remove()
    return done
  }
}

/** Copies text and says so. `text` may be a function, so that long text is made only when asked for. */
export function CopyButton({ text, label = 'Copy', className = 'btn btn-small', iconOnly = false }: {
  text: string | (() => string); label?: string; className?: string; iconOnly?: boolean
}) {
  const [state, setState] = useState<'idle' | 'done' | 'failed'>('idle')
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null)
  useEffect(() => () => { if (timer.current) clearTimeout(timer.current) }, [])
  const press = async () => {
    const done = await copyText(typeof text === 'function' ? text() : text)
    setState(done ? 'done' : 'failed')
    if (timer.current) clearTimeout(timer.current)
    timer.current = setTimeout(() => setState('idle'), 2000)
  }
  const word = state === 'done' ? 'Copied' : state === 'failed' ? 'Could not copy' : label
  return (
    <button type="button" className={className} onClick={() => void press()} aria-label={iconOnly ? word : undefined}>
      {state === 'done' ? <Check size={14} aria-hidden="true" /> : <Copy size={14} aria-hidden="true" />}
      {iconOnly ? null : <span aria-live="polite">{word}</span>}
    </button>
  )
}
