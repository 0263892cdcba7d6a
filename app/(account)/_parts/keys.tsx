'use client'
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query'
import { useState, useSyncExternalStore } from 'react'
import type { ApiKey, NewKey } from '@/openapi/schemas/key'
import { CopyButton } from '../../_components/copy-button'
import { DataTable, type Column } from '../../_components/data-table'
import { apiEtag, apiQuery, apiSend } from '../../_components/data/api'
import { day, moment } from '../../_components/day'
import { Notice } from '../../_components/notice'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { restOf } from './faults'
import { KeyForm, type RoleName } from './key-form'

const never = () => () => undefined
const useOrigin = (): string => useSyncExternalStore(never, () => window.location.origin, () => '')

/** The key in full, this once. */
function ShownOnce({ made, onDone }: { made: NewKey; onDone: () => void }) {
  const origin = useOrigin()
  if (made.key === null) return null
  const curl = `curl -sS '${origin}/api/v1/me' -H 'Authorization: Bearer ${made.key}'`
  return (
    <div role="status" className="mb-5 max-w-4xl border-2 border-lamp bg-sheet p-4">
      <p className="font-text text-xl">{made.name}: keep this key now</p>
      <p className="mt-1 text-muted">It is shown this once. Only its fingerprint is stored, so nobody can show it again.</p>
      <p className="mt-3 flex flex-wrap items-center gap-3">
        <code className="bg-well px-2.5 py-1.5 text-sm [overflow-wrap:anywhere]">{made.key}</code>
        <CopyButton text={made.key} label="Copy key" />
      </p>
      <pre className="mt-3 overflow-x-auto border border-rule bg-well p-2.5 text-xs" tabIndex={0}>{curl}</pre>
      <button type="button" className="btn mt-3" onClick={onDone}>I have kept it</button>
    </div>
  )
}

function Revoke({ row }: { row: ApiKey }) {
  const client = useQueryClient()
  const [asked, setAsked] = useState(false)
  const revoke = useMutation({
    mutationFn: async () => apiSend<null>('DELETE', `/keys/${row.id}`, undefined, { 'if-match': await apiEtag(`/keys/${row.id}`) }),
    onSettled: () => client.invalidateQueries({ queryKey: ['api', '/keys'] }),
  })
  if (row.state !== 'active') return <span className="text-muted">{row.state === 'revoked' && row.revoked_at ? `revoked ${day(row.revoked_at)}` : row.state}</span>
  const problem = restOf(revoke.error, [])
  if (!asked) return <button type="button" className="btn btn-small" aria-label={`Revoke ${row.name}`} onClick={() => setAsked(true)}>Revoke</button>
  return (
    <span className="inline-flex flex-wrap items-center gap-2">
      <button type="button" autoFocus className="btn btn-small border-bad text-bad" disabled={revoke.isPending} onClick={() => revoke.mutate()}>Revoke for good</button>
      <button type="button" className="btn btn-quiet btn-small" onClick={() => setAsked(false)}>Keep it</button>
      {problem ? <span role="alert" className="text-sm text-bad">{problem.detail}</span> : null}
    </span>
  )
}

/** Own keys (an admin's list holds everyone's): make, see when last used, revoke. */
export function Keys({ role, own }: { role: RoleName; own: string }) {
  const [made, setMade] = useState<NewKey | null>(null)
  const { data, error, isPending, refetch } = useQuery({ ...apiQuery<ApiKey[]>('/keys', { limit: 200 }), staleTime: 0 })
  const columns: Column<ApiKey>[] = [
    { name: 'name', header: 'Name', rowHeader: true, value: (row) => row.name, sort: true, cell: (row) => <span className={row.state === 'active' ? 'font-medium' : 'text-muted line-through'}>{row.name}</span> },
    { name: 'start', header: 'Begins with', value: (row) => row.start, cell: (row) => <code className="text-xs">{row.start}…</code> },
    { name: 'role', header: 'Role', value: (row) => row.role, sort: true },
    { name: 'last_used_at', header: 'Last used', value: (row) => row.last_used_at, sort: true, cell: (row) => (row.last_used_at ? moment(row.last_used_at) : <span className="text-muted">not yet</span>) },
    { name: 'created_at', header: 'Made', value: (row) => row.created_at, sort: true, cell: (row) => day(row.created_at) },
    { name: 'expires_at', header: 'Ends', value: (row) => row.expires_at, sort: true, cell: (row) => (row.expires_at ? day(row.expires_at) : <span className="text-muted">never</span>) },
    { name: 'state', header: 'State', value: (row) => row.state, cell: (row) => <Revoke row={row} /> },
  ]
  const others = data?.data.some((row) => row.owner.id !== own) ?? false
  if (others) columns.splice(1, 0, { name: 'owner', header: 'Owner', value: (row) => row.owner.name, sort: true })
  return (
    <>
      <p className="prose-text mb-4">A key lets a script read as you do, or less. Give each script its own, so that one can be revoked alone.</p>
      {made ? <ShownOnce made={made} onDone={() => setMade(null)} /> : null}
      <KeyForm role={role} onMade={setMade} />
      <div className="mt-6">
        {isPending ? <TableSkeleton label="Loading the keys" rows={2} /> : error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : data.data.length === 0 ? (
          <Notice title="No keys yet"><p>Name one above and make it; the key is then shown once.</p></Notice>
        ) : <DataTable columns={columns} rows={data.data} rowKey={(row) => row.id} caption="API keys" hideCaption />}
      </div>
    </>
  )
}
