'use client'
import { keepPreviousData, useQuery } from '@tanstack/react-query'
import { Plus, Search } from 'lucide-react'
import Link from 'next/link'
import { useDeferredValue, useId, useRef, useState, type KeyboardEvent } from 'react'
import type { Find } from '@/openapi/schemas/find'
import type { Transition } from '@/openapi/schemas/transition'
import { Chip } from '@/app/_components/chip'
import { apiQuery, problemOf } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { nm, Terms } from '@/app/_components/line-columns'
import { linePage, speciesText } from '@/app/_components/names'
import { MOST_LINES } from './state'
import type { ChosenLine } from './use-lines'

/** A line in one line: species, wavelength, terms. */
export function LineName({ line }: { line: Transition }) {
  return (
    <>
      {speciesText(line.lower.species)} <span className="num">{nm(line.wavelength_conventional_nm)}</span>&#8239;nm <Terms line={line} />
    </>
  )
}

const SHOWN = 8

function Results({ q, chosen, onAdd }: { q: string; chosen: ReadonlySet<string>; onAdd: (id: string) => void }) {
  const { param: edition } = useEdition()
  const { data, error, isFetching } = useQuery({ ...apiQuery<Find>('/find', { q, lines_limit: SHOWN, edition }), placeholderData: keepPreviousData })
  if (error) return <p role="alert" className="note mt-2 text-bad">{problemOf(error).detail}</p>
  if (!data) return <p role="status" className="note mt-2">Looking for lines…</p>
  const lines = data.data.lines.filter((line) => line.verdict.allowed).slice(0, SHOWN)
  const [question] = data.data.questions
  return (
    <div aria-busy={isFetching} className="mt-2">
      <p role="status" className="note">
        {lines.length > 0
          ? `${data.data.lines_total > lines.length ? `The first ${lines.length} of ${data.data.lines_total}` : lines.length} ${lines.length === 1 ? 'line' : 'lines'}; choose one or several.`
          : (question?.text ?? 'No line answers to that. Try a nickname (D2), an ion with a wavelength (Hg I 546.1 nm), or a line’s id.')}
      </p>
      <ul className="mt-1 divide-y divide-rule border-y border-rule bg-sheet empty:hidden">
        {lines.map((line) => (
          <li key={line.id}>
            <button type="button" disabled={chosen.has(line.id)} onClick={() => onAdd(line.id)}
              className="flex min-h-9 w-full items-center gap-2 px-2.5 py-1 text-left text-sm hover:bg-lamp-wash disabled:text-muted disabled:hover:bg-transparent">
              <Plus size={14} aria-hidden="true" className="shrink-0 text-lamp-ink" />
              <span className="min-w-0"><LineName line={line} /></span>
              {chosen.has(line.id) ? <span className="note ml-auto">chosen</span> : null}
            </button>
          </li>
        ))}
      </ul>
    </div>
  )
}

/** Chosen lines as chips, and a search that adds more. */
export function LineChooser({ lines, onChange }: { lines: readonly ChosenLine[]; onChange: (ids: string[]) => void }) {
  const id = useId()
  const { href } = useEdition()
  const box = useRef<HTMLInputElement>(null)
  const [text, setText] = useState('')
  const q = useDeferredValue(text.trim())
  const ids = lines.map((line) => line.id)
  const add = (line: string) => {
    onChange([...ids, line])
    setText('')
    // the list that held the focus goes away
    box.current?.focus()
  }
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === 'Escape') setText('')
  }
  return (
    <div>
      {lines.length > 0 ? (
        <ol className="mb-2.5 flex flex-wrap gap-2">
          {lines.map((line, i) => (
            <li key={line.id}>
              <Chip kind={lines.length > 1 ? String(i + 1) : undefined} onRemove={() => onChange(ids.filter((other) => other !== line.id))} removeLabel={`Take line ${line.id.replace('~', ' to ')} away`}>
                {line.detail ? <Link className="hover:text-lamp-ink" href={href(linePage(line.id))}><LineName line={line.detail} /></Link> : line.error ? <span className="text-bad">{problemOf(line.error).detail}</span> : line.id}
              </Chip>
            </li>
          ))}
        </ol>
      ) : null}
      {lines.length < MOST_LINES ? (
        <div onKeyDown={onKeyDown}>
          <label htmlFor={id} className="label">{lines.length === 0 ? 'Which line was measured?' : 'Another line of the same field'}</label>
          <div className="relative">
            <Search size={16} aria-hidden="true" className="pointer-events-none absolute top-1/2 left-2.5 -translate-y-1/2 text-muted" />
            <input ref={box} id={id} type="search" className="input pl-8!" value={text} onChange={(event) => setText(event.target.value)} autoComplete="off" autoCapitalize="none" spellCheck={false} maxLength={200} placeholder="D2, Hg I 546.1 nm, Na-I.1~Na-I.3" />
          </div>
          {q === '' ? null : <Results q={q} chosen={new Set(ids)} onAdd={add} />}
        </div>
      ) : null}
    </div>
  )
}
