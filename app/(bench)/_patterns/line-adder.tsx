'use client'
import { useQuery } from '@tanstack/react-query'
import { Plus, Search } from 'lucide-react'
import { useId, useState, type FormEvent } from 'react'
import type { Find } from '@/openapi/schemas/find'
import { apiQuery, problemOf } from '@/app/_components/data/api'
import { useEdition } from '@/app/_components/data/edition'
import { nm, Terms } from '@/app/_components/line-columns'
import { speciesText } from '@/app/_components/names'
import { plural } from '@/app/_components/number'

const SHOWN = 20

interface Adding {
  /** Ids in the picture already. */
  present: ReadonlySet<string>
  /** How many more it takes. */
  room: number
  onAdd: (ids: string[]) => void
}

/** Finds lines by nickname, wavelength, species or id, and puts them into the picture. */
export function LineAdder(adding: Adding) {
  const id = useId()
  const [text, setText] = useState('')
  const [q, setQ] = useState('')
  const submit = (event: FormEvent) => {
    event.preventDefault()
    setQ(text.trim())
  }
  return (
    <div>
      <form onSubmit={submit} role="search" aria-label="Add lines">
        <label htmlFor={id} className="label">Add lines</label>
        <div className="flex max-w-xl">
          <input id={id} type="search" className="input min-w-0 rounded-r-none border-r-0" value={text} onChange={(event) => setText(event.target.value)} placeholder="D1, Mg b, Fe I 630.25 nm, Na-I.1~Na-I.3" autoComplete="off" autoCapitalize="none" spellCheck={false} maxLength={200} />
          <button type="submit" className="btn rounded-l-none"><Search size={14} aria-hidden="true" /> Find</button>
        </div>
      </form>
      {q === '' ? null : <Results key={q} q={q} {...adding} onAsk={(next) => { setText(next); setQ(next) }} />}
    </div>
  )
}

function Results({ q, present, room, onAdd, onAsk }: Adding & { q: string; onAsk: (q: string) => void }) {
  const { param: edition } = useEdition()
  const { data, error } = useQuery(apiQuery<Find>('/find', { q, levels_limit: 0, lines_limit: SHOWN, edition }))
  if (error) return <p role="alert" className="mt-2 text-sm text-bad">{problemOf(error).detail}</p>
  if (!data) return <p role="status" className="note mt-2">Looking for lines</p>
  const { lines, lines_total, questions } = data.data
  const usable = lines.filter((line) => line.verdict.allowed && line.kind !== 'E2')
  const missing = usable.filter((line) => !present.has(line.id))
  return (
    <div className="mt-2 max-w-3xl">
      <div className="flex flex-wrap items-center justify-between gap-2">
        <p role="status" className="note">{lines_total === 0 ? 'No line was found. Try a nickname such as D2, or a species with a wavelength such as Fe I 630.25 nm.' : `${plural(lines_total, 'line')} found${lines_total > usable.length ? `, ${usable.length} shown` : ''}`}</p>
        {missing.length > 1 && room > 0 ? (
          <button type="button" className="btn btn-small" onClick={() => onAdd(missing.slice(0, room).map((line) => line.id))}>
            <Plus size={13} aria-hidden="true" /> Add {missing.length > room ? `the first ${room}` : `all ${missing.length}`}
          </button>
        ) : null}
      </div>
      {questions.map((question) => (
        <p key={question.text} className="mt-1 flex flex-wrap items-center gap-2 text-sm">
          {question.text}
          {question.options.map((option) => <button key={option.q} type="button" className="btn btn-small" onClick={() => onAsk(option.q)}>{option.label}</button>)}
        </p>
      ))}
      {usable.length > 0 ? (
        <ul className="mt-1.5 grid gap-x-6 sm:grid-cols-2">
          {usable.map((line) => (
            <li key={line.id} className="flex items-center justify-between gap-3 border-b border-rule py-1 text-sm">
              <span className="min-w-0"><span className="num">{speciesText(line.lower.species)} {nm(line.wavelength_conventional_nm)}</span> <Terms line={line} /></span>
              {present.has(line.id) ? <span className="note">shown</span> : (
                <button type="button" className="btn btn-small" disabled={room <= 0} onClick={() => onAdd([line.id])} aria-label={`Add ${speciesText(line.lower.species)} ${nm(line.wavelength_conventional_nm)}`}>
                  <Plus size={13} aria-hidden="true" /> Add
                </button>
              )}
            </li>
          ))}
        </ul>
      ) : null}
      {room <= 0 ? <p className="note mt-1">The picture is full; take a line away to add another.</p> : null}
    </div>
  )
}
