'use client'
import { useInfiniteQuery, useMutation, useQueryClient } from '@tanstack/react-query'
import { useId, useMemo, useRef, type FormEvent } from 'react'
import type { Invitation, NewInvitation } from '@/openapi/schemas/people'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages, apiSend } from '../../_components/data/api'
import { day } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { Notice } from '../../_components/notice'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { faultOf, restOf } from '../_parts/faults'
import { Field } from '../_parts/field'

const ROLES = ['reader', 'curator', 'admin'] as const
const FIELDS = ['/email', '/name', '/role']

function InviteForm() {
  const client = useQueryClient()
  const form = useRef<HTMLFormElement>(null)
  const role = useId()
  const invite = useMutation({
    mutationFn: (given: NewInvitation) => apiSend<Invitation>('POST', '/invitations', given),
    onSuccess: async () => {
      form.current?.reset()
      await client.invalidateQueries({ queryKey: ['api', '/invitations'] })
    },
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    invite.mutate({ email: String(given.get('email') ?? ''), name: String(given.get('name') ?? ''), role: ROLES.find((one) => one === given.get('role')) ?? 'reader' })
  }
  const problem = restOf(invite.error, FIELDS)
  return (
    <form ref={form} method="post" onSubmit={submit} aria-label="Invite a person">
      {problem ? <div className="mb-3"><Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice></div> : null}
      {invite.isSuccess ? <div className="mb-3"><Notice tone="good" role="status" title={`${invite.data.data.name} is invited`}><p>The link goes to {invite.data.data.email} and is good for seven days. It stands in the mail only.</p></Notice></div> : null}
      <div className="grid max-w-4xl items-start gap-x-4 gap-y-3 sm:grid-cols-[minmax(10rem,2fr)_minmax(10rem,2fr)_1fr_auto]">
        <Field label="Email" name="email" type="email" required maxLength={320} autoComplete="off" error={faultOf(invite.error, '/email')} />
        <Field label="Name" name="name" required maxLength={200} autoComplete="off" error={faultOf(invite.error, '/name')} />
        <div>
          <label className="label" htmlFor={role}>Role</label>
          <select id={role} name="role" className="input" defaultValue="reader">{ROLES.map((one) => <option key={one} value={one}>{one}</option>)}</select>
        </div>
        <button type="submit" className="btn btn-lamp sm:mt-6" disabled={invite.isPending}>Invite</button>
      </div>
    </form>
  )
}

function TakeBack({ row }: { row: Invitation }) {
  const client = useQueryClient()
  const revoke = useMutation({
    mutationFn: () => apiSend<null>('DELETE', `/invitations/${row.id}`, undefined, { 'if-match': row.etag }),
    onSettled: () => client.invalidateQueries({ queryKey: ['api', '/invitations'] }),
  })
  if (row.state === 'accepted') return <>accepted{row.accepted_at ? ` ${day(row.accepted_at)}` : ''}</>
  if (row.state !== 'open') return <span className="text-muted">{row.state === 'revoked' ? `taken back${row.revoked_at ? ` ${day(row.revoked_at)}` : ''}` : 'ran out'}</span>
  const problem = restOf(revoke.error, [])
  return (
    <span className="inline-flex flex-wrap items-center gap-2">
      open
      <button type="button" className="btn btn-small" aria-label={`Take the invitation to ${row.email} back`} disabled={revoke.isPending} onClick={() => revoke.mutate()}>Take back</button>
      {problem ? <span role="alert" className="text-sm text-bad">{problem.detail}</span> : null}
    </span>
  )
}

const COLUMNS: readonly Column<Invitation>[] = [
  { name: 'email', header: 'Email', rowHeader: true, value: (row) => row.email },
  { name: 'name', header: 'Name', value: (row) => row.name },
  { name: 'role', header: 'Role', value: (row) => row.role },
  { name: 'invited_by', header: 'Invited by', value: (row) => row.invited_by.name },
  { name: 'created_at', header: 'On', value: (row) => row.created_at, cell: (row) => day(row.created_at) },
  { name: 'expires_at', header: 'Good until', value: (row) => row.expires_at, cell: (row) => day(row.expires_at) },
  { name: 'state', header: 'State', value: (row) => row.state, cell: (row) => <TakeBack row={row} /> },
]

/** Invitations, the newest first, and a form to make one. */
export function Invitations() {
  const answer = useInfiniteQuery({ ...apiPages<Invitation>('/invitations'), staleTime: 0 })
  const rows = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  return (
    <>
      <InviteForm />
      <div className="mt-6">
        {answer.isPending ? <TableSkeleton label="Loading the invitations" rows={2} /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} heading="h3" /> : rows.length === 0 ? (
          <EmptyState title="Nobody is invited yet"><p>Give an address and a name above; the person chooses a password by the link of the mail.</p></EmptyState>
        ) : <DataTable columns={COLUMNS} rows={rows} rowKey={(row) => row.id} caption="Invitations" hideCaption />}
        {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show more invitations</button> : null}
      </div>
    </>
  )
}
