'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { parseAsString, useQueryStates } from 'nuqs'
import { useMemo, useState, type FormEvent } from 'react'
import type { AuditEvent } from '@/openapi/schemas/audit'
import { Chip } from '../../_components/chip'
import { apiPages } from '../../_components/data/api'
import { EmptyState } from '../../_components/empty-state'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { Field } from '../_parts/field'
import { AuditTable } from './audit-table'

const FILTERS = { action: parseAsString, subject_kind: parseAsString, subject_id: parseAsString, actor: parseAsString, key: parseAsString, session: parseAsString, from: parseAsString, until: parseAsString }
type Name = keyof typeof FILTERS
const NAMES = Object.keys(FILTERS) as Name[]
const TYPED: readonly { name: Name; label: string; hint?: string; type?: 'date' }[] = [
  { name: 'action', label: 'Action', hint: 'key.create' }, { name: 'subject_kind', label: 'Kind of thing', hint: 'amendment' }, { name: 'subject_id', label: 'Thing', hint: 'Na-I.3' },
  { name: 'from', label: 'From', type: 'date' }, { name: 'until', label: 'Before', type: 'date' },
]
/** Chosen by their links in the table, since nobody types an identifier. */
const CHOSEN: readonly { name: Name; label: string }[] = [{ name: 'actor', label: 'person' }, { name: 'key', label: 'key' }, { name: 'session', label: 'session' }]

/** Everything that was changed, the newest first; the address holds the filters. */
export function AuditView() {
  const [filters, setFilters] = useQueryStates(FILTERS, { history: 'push' })
  const [round, setRound] = useState(0)
  const answer = useInfiniteQuery({ ...apiPages<AuditEvent>('/audit', { ...filters, limit: 50 }), staleTime: 0, placeholderData: (last) => last })
  const events = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  const set = (given: Partial<Record<Name, string | null>>) => {
    setRound(round + 1)
    void setFilters(given)
  }
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    set(Object.fromEntries(TYPED.map(({ name }) => [name, String(given.get(name) ?? '').trim() || null])))
  }
  const filtered = NAMES.some((name) => filters[name] !== null)
  return (
    <div className="page">
      <PageHead title="Audit"><p>Who did what, when, from which key or browser session. Rows are written with the change itself, and the database lets nobody alter or remove them.</p></PageHead>
      <form key={round} onSubmit={submit} aria-label="Filter the audit" className="mb-6 grid items-end gap-x-4 gap-y-3 sm:grid-cols-2 lg:grid-cols-[repeat(5,minmax(0,1fr))_auto]">
        {TYPED.map(({ name, label, hint, type }) => <Field key={name} label={label} name={name} type={type ?? 'text'} maxLength={200} placeholder={hint} autoComplete="off" defaultValue={filters[name] ?? ''} />)}
        <div className="flex gap-3">
          <button type="submit" className="btn btn-lamp">Filter</button>
          {filtered ? <button type="button" className="btn" onClick={() => set(Object.fromEntries(NAMES.map((name) => [name, null])))}>Show all</button> : null}
        </div>
      </form>
      {CHOSEN.some(({ name }) => filters[name] !== null) ? (
        <p className="mb-4 flex flex-wrap gap-2">
          {CHOSEN.map(({ name, label }) => (filters[name] === null ? null : <Chip key={name} kind={label} removeLabel={`Let the ${label} go`} onRemove={() => set({ [name]: null })}><code className="text-xs">{filters[name].slice(0, 8)}</code></Chip>))}
        </p>
      ) : null}
      {answer.isPending ? <TableSkeleton label="Loading the audit" /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} /> : events.length === 0 ? (
        <EmptyState title="Nothing was done that fits"><p>Let a filter go.</p></EmptyState>
      ) : <AuditTable events={events} onFilter={(name, value) => set({ [name]: value })} />}
      {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show older ones</button> : null}
    </div>
  )
}
