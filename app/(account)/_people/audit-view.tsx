'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { parseAsString, useQueryStates } from 'nuqs'
import { useMemo, useState, type FormEvent } from 'react'
import type { AuditEvent } from '@/openapi/schemas/audit'
import { apiPages } from '../../_components/data/api'
import { EmptyState } from '../../_components/empty-state'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { Field } from '../_parts/field'
import { AuditTable } from './audit-table'

const FILTERS = { action: parseAsString, subject_kind: parseAsString, subject_id: parseAsString, actor: parseAsString, key: parseAsString, session: parseAsString, from: parseAsString, until: parseAsString }
type Name = keyof typeof FILTERS
const LABELS: Record<Name, string> = { action: 'Action', subject_kind: 'Kind of thing', subject_id: 'Thing', actor: 'Person (id)', key: 'Key (id)', session: 'Session (id)', from: 'From', until: 'Before' }
const HINTS: Partial<Record<Name, string>> = { action: 'key.create', subject_kind: 'amendment', subject_id: 'Na-I.3' }
const NAMES = Object.keys(FILTERS) as Name[]

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
    set(Object.fromEntries(NAMES.map((name) => [name, String(given.get(name) ?? '').trim() || null])))
  }
  const filtered = NAMES.some((name) => filters[name] !== null)
  return (
    <div className="page">
      <PageHead title="Audit"><p>Who did what, when, from which key or browser session. Rows are written with the change itself, and the database lets nobody alter or remove them.</p></PageHead>
      <form key={round} onSubmit={submit} aria-label="Filter the audit" className="mb-6 grid items-end gap-x-4 gap-y-3 sm:grid-cols-2 lg:grid-cols-4">
        {NAMES.map((name) => <Field key={name} label={LABELS[name]} name={name} type={name === 'from' || name === 'until' ? 'date' : 'text'} maxLength={200} placeholder={HINTS[name]} autoComplete="off" defaultValue={filters[name] ?? ''} />)}
        <div className="flex gap-3">
          <button type="submit" className="btn btn-lamp">Filter</button>
          {filtered ? <button type="button" className="btn" onClick={() => set(Object.fromEntries(NAMES.map((name) => [name, null])))}>Show all</button> : null}
        </div>
      </form>
      {answer.isPending ? <TableSkeleton label="Loading the audit" /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} /> : events.length === 0 ? (
        <EmptyState title="Nothing was done that fits"><p>Let a filter go.</p></EmptyState>
      ) : <AuditTable events={events} onFilter={(name, value) => set({ [name]: value })} />}
      {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show older ones</button> : null}
    </div>
  )
}
