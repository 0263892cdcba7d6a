'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import Link from 'next/link'
import { parseAsStringLiteral, useQueryState } from 'nuqs'
import type { Amendment } from '@/openapi/schemas/amendment'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages } from '../../_components/data/api'
import { day } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { Choices } from '../../_components/plots/plot-frame'
import { isReturned } from '../_amendment/use-amendment'
import { StateMark, STATES, stateWord, Tally } from '../_parts/marks'

const SHOWN = ['all', ...STATES] as const

const COLUMNS: Column<Amendment>[] = [
  { name: 'title', header: 'Title', rowHeader: true, wrap: true, value: (row) => row.title, cell: (row) => <Link className="link" href={`/curate/${row.id}`}>{row.title}</Link> },
  { name: 'state', header: 'State', value: (row) => row.state, cell: (row) => <span className="inline-flex items-baseline gap-2"><StateMark state={row.state} returned={isReturned(row)} />{row.published_in === null ? null : <Link className="link" href={`/editions/${row.published_in}`}>edition {row.published_in}</Link>}</span> },
  { name: 'changes', header: 'Changes', align: 'right', value: (row) => row.counts.changes },
  { name: 'findings', header: 'Findings', value: (row) => row.counts.errors + row.counts.warnings, cell: (row) => (row.counts.changes === 0 ? null : <Tally changes errors={row.counts.errors} warnings={row.counts.warnings} clear="none" />) },
  { name: 'author', header: 'Begun by', value: (row) => row.author.name },
  { name: 'updated_at', header: 'Last edit', value: (row) => row.updated_at, cell: (row) => day(row.updated_at) },
]

/** Every amendment, by state. */
export function AmendmentList() {
  const [state, setState] = useQueryState('state', parseAsStringLiteral(SHOWN).withDefault('all'))
  const { data, error, isPending, refetch, hasNextPage, fetchNextPage, isFetchingNextPage } = useInfiniteQuery({ ...apiPages<Amendment>('/amendments', state === 'all' ? {} : { state }), staleTime: 0 })
  const rows = data?.pages.flatMap((page) => page.data) ?? []
  return (
    <div className="space-y-3">
      <div className="overflow-x-auto"><Choices label="State" value={state} choices={SHOWN.map((one) => ({ value: one, label: one === 'all' ? 'All' : stateWord(one) }))} onChange={(next) => void setState(next === 'all' ? null : next)} /></div>
      {isPending ? <TableSkeleton rows={5} columns={5} label="Loading the amendments" /> : error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : rows.length === 0 ? (
        <EmptyState title={state === 'all' ? 'No amendment yet' : 'No amendment in this state'}><p>{state === 'all' ? 'Begin one above: nothing is published before a colleague has accepted it and an admin makes an edition.' : 'Choose another state to see more.'}</p></EmptyState>
      ) : (
        <>
          <DataTable columns={COLUMNS} rows={rows} rowKey={(row) => row.id} caption="Amendments" hideCaption />
          {hasNextPage ? <button type="button" className="btn" disabled={isFetchingNextPage} onClick={() => void fetchNextPage()}>Show more</button> : null}
        </>
      )}
    </div>
  )
}
