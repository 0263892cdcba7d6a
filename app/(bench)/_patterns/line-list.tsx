'use client'
import { X } from 'lucide-react'
import Link from 'next/link'
import { memo, useState } from 'react'
import { problemOf } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { Terms } from '@/app/_components/line-columns'
import { linePage } from '@/app/_components/names'
import { significant } from '@/app/_components/number'
import { LineSign } from './line-mark'
import type { NumberedLine } from './overlay'
import type { PatternLine } from './use-lines'

interface LineListProps {
  lines: readonly PatternLine[]
  ready: readonly NumberedLine[]
  refused: readonly { index: number; error: Error }[]
  onRemove: (id: string) => void
  onWeight: (id: string, weight: number) => void
  onGo: (line: NumberedLine) => void
}

/** The lines of the picture: mark, name, weight, model in force, and what cannot be drawn. */
export const LineList = memo(function LineList({ lines, ready, refused, onRemove, onWeight, onGo }: LineListProps) {
  const { href } = useEdition()
  return (
    <ol aria-label="Lines in the picture" className="sheet divide-y divide-rule">
      {lines.map((line) => {
        const found = ready.find(({ index }) => index === line.index)
        const problem = line.error ? problemOf(line.error).detail : refused.find(({ index }) => index === line.index)?.error.message
        return (
          <li key={line.id} className="flex flex-wrap items-center gap-x-4 gap-y-1 px-3 py-1.5 text-sm">
            <LineSign line={line.index} />
            <span className="min-w-0 flex-1 basis-56">
              <Link className="link num inline-flex min-h-6 items-center" href={href(linePage(line.id))}>{line.name}{line.detail ? '\u202fnm' : ''}</Link>
              {line.detail ? <span className="ml-2.5"><Terms line={line.detail} /></span> : line.error ? null : <span className="skeleton ml-2 inline-block h-4 w-24 align-middle" role="status" aria-label={`Loading ${line.id}`} />}
              {problem === undefined ? null : <span className="mt-0.5 block text-bad" role="alert">{problem}</span>}
            </span>
            {found ? <span className="note num">{found.components.model === 'linear' ? 'linear' : 'intermediate'}, {significant(found.fwhmInvcm, 3)}&#8239;cm⁻¹ wide</span> : null}
            <WeightInput key={line.weight} name={line.name} value={line.weight} onChange={(weight) => onWeight(line.id, weight)} />
            <span className="flex gap-1">
              {found ? <button type="button" className="btn btn-small" onClick={() => onGo(found)} aria-label={`Show ${line.name} alone in the window`}>Go to</button> : null}
              <button type="button" className="btn btn-small px-1.5!" onClick={() => onRemove(line.id)} aria-label={`Remove ${line.name}`}><X size={14} aria-hidden="true" /></button>
            </span>
          </li>
        )
      })}
    </ol>
  )
})

function WeightInput({ name, value, onChange }: { name: string; value: number; onChange: (value: number) => void }) {
  const [draft, setDraft] = useState(String(value))
  const read = Number(draft.replace(',', '.'))
  const fine = draft.trim() !== '' && Number.isFinite(read) && read >= 0
  return (
    <label className="flex items-center gap-1.5 text-xs text-muted">
      weight
      <input className="input num w-16! min-h-7! py-0!" inputMode="decimal" value={draft} aria-label={`Weight of ${name}`} aria-invalid={!fine}
        onChange={(event) => setDraft(event.target.value)}
        onBlur={() => (fine ? read !== value && onChange(read) : setDraft(String(value)))}
        onKeyDown={(event) => { if (event.key === 'Enter' && fine) onChange(read) }} />
    </label>
  )
}
