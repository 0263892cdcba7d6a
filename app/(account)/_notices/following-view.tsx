'use client'
import { useInfiniteQuery, useMutation, useQueryClient } from '@tanstack/react-query'
import Link from 'next/link'
import { useMemo } from 'react'
import type { Follow } from '@/openapi/schemas/notices'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages, apiSend } from '../../_components/data/api'
import { day } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { levelPage, linePage, speciesPage } from '../../_components/names'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { restOf } from '../_parts/faults'

const PAGE = { species: speciesPage, level: levelPage, line: linePage }

function Stop({ row }: { row: Follow }) {
  const client = useQueryClient()
  const stop = useMutation({
    mutationFn: () => apiSend<null>('DELETE', `/follows/${row.id}`, undefined, { 'if-match': row.etag }),
    onSettled: () => client.invalidateQueries({ queryKey: ['api', '/follows'] }),
  })
  const problem = restOf(stop.error, [])
  return (
    <>
      <button type="button" className="btn btn-small" aria-label={`Stop following ${row.subject}`} disabled={stop.isPending} onClick={() => stop.mutate()}>Stop</button>
      {problem ? <span role="alert" className="ml-2 text-sm text-bad">{problem.detail}</span> : null}
    </>
  )
}

const COLUMNS: readonly Column<Follow>[] = [
  { name: 'subject', header: 'What', rowHeader: true, sort: true, value: (row) => row.subject, cell: (row) => <Link className="link" href={PAGE[row.kind](row.subject)}>{row.subject}</Link> },
  { name: 'kind', header: 'Kind', sort: true, value: (row) => row.kind },
  { name: 'retired', header: 'In the latest edition', value: (row) => (row.retired ? 'retired' : 'in force'), cell: (row) => (row.retired ? <span className="text-warn">retired</span> : 'in force') },
  { name: 'created_at', header: 'Since', sort: true, value: (row) => row.created_at, cell: (row) => day(row.created_at) },
  { name: 'stop', header: <span className="sr-only">Stop</span>, only: 'screen', value: () => null, cell: (row) => <Stop row={row} /> },
]

/** What the signed-in person follows. */
export function FollowingView() {
  const answer = useInfiniteQuery({ ...apiPages<Follow>('/follows', { limit: 500 }), staleTime: 0 })
  const rows = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  return (
    <div className="page">
      <PageHead title="Following"><p>When an edition changes a value of one of these, a mail tells you the old value, the new one, and where lines go. One mail an edition, whatever you follow.</p></PageHead>
      {answer.isPending ? <TableSkeleton label="Loading what you follow" rows={3} columns={4} /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} /> : rows.length === 0 ? (
        <EmptyState title="You follow nothing yet"><p>Open a species, a level or a line, and press Follow at its head. <Link href="/">Find something</Link>.</p></EmptyState>
      ) : <DataTable columns={COLUMNS} rows={rows} rowKey={(row) => row.id} caption="What you follow" hideCaption />}
      {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show more</button> : null}
    </div>
  )
}
