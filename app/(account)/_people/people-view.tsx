'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { useMemo, useState } from 'react'
import type { PersonAccount } from '@/openapi/schemas/people'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages } from '../../_components/data/api'
import { day, moment } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { Invitations } from './invitations'
import { PersonForm } from './person-form'

function columnsOf(edit: (person: PersonAccount) => void): Column<PersonAccount>[] {
  return [
    { name: 'name', header: 'Name', rowHeader: true, value: (row) => row.name, cell: (row) => <span className={row.active ? 'font-medium' : 'text-muted line-through'}>{row.name}</span> },
    { name: 'change', header: <span className="sr-only">Change</span>, only: 'screen', value: () => null, cell: (row) => <button type="button" className="btn btn-small" aria-label={`Change ${row.name}`} onClick={() => edit(row)}>Change</button> },
    { name: 'email', header: 'Email', value: (row) => row.email },
    { name: 'role', header: 'Role', value: (row) => row.role },
    { name: 'active', header: 'Account', value: (row) => (row.active ? 'open' : 'closed'), cell: (row) => <>{row.active ? 'open' : 'closed'}{row.signs_in ? null : <span className="text-muted">, keys only</span>}{row.demo ? <span className="text-muted">, demo</span> : null}</> },
    { name: 'keys_in_use', header: 'Keys in use', align: 'right', value: (row) => row.keys_in_use },
    { name: 'last_seen_at', header: 'Last seen', value: (row) => row.last_seen_at, cell: (row) => (row.last_seen_at ? moment(row.last_seen_at) : <span className="text-muted">not yet</span>) },
    { name: 'created_at', header: 'Since', value: (row) => row.created_at, cell: (row) => day(row.created_at) },
  ]
}

function People() {
  const [words, setWords] = useState('')
  const [editing, setEditing] = useState<PersonAccount | null>(null)
  const answer = useInfiniteQuery({ ...apiPages<PersonAccount>('/people', { q: words.trim() || undefined }), staleTime: 0, placeholderData: (last) => last })
  const people = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  const columns = useMemo(() => columnsOf(setEditing), [])
  return (
    <>
      <label className="label" htmlFor="people-search">Search by name or address</label>
      <input id="people-search" type="search" className="input mb-5 max-w-sm" value={words} maxLength={200} onChange={(event) => setWords(event.target.value)} autoComplete="off" />
      {editing ? <PersonForm key={editing.id} person={editing} onDone={() => setEditing(null)} /> : null}
      {answer.isPending ? <TableSkeleton label="Loading the people" rows={4} /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} heading="h3" /> : (
        <DataTable columns={columns} rows={people} rowKey={(row) => row.id} caption="People" hideCaption empty={<EmptyState title="Nobody of this name"><p>Search for less, or invite the person below.</p></EmptyState>} />
      )}
      {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show more people</button> : null}
    </>
  )
}

/** Everyone who has an account, and those who are invited. */
export function PeopleView() {
  return (
    <div className="page">
      <PageHead title="People"><p>Readers read and compute; curators also work on amendments and accept a colleague’s; admins also publish editions and manage people. A change is in force at once, in open browsers and in keys too.</p></PageHead>
      <Part title="Accounts"><People /></Part>
      <Part title="Invitations" id="invitations"><Invitations /></Part>
    </div>
  )
}
