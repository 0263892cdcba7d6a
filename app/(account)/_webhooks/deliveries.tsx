'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import type { Webhook, WebhookDelivery } from '@/openapi/schemas/notices'
import { DataTable, type Column } from '../../_components/data-table'
import { apiPages } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'

/** What came of a delivery so far, in words. */
export function outcomeText(delivery: WebhookDelivery): string {
  if (delivery.state === 'delivered') return `received (${delivery.response_status ?? ''})`
  if (delivery.state === 'failed') return `given up: ${delivery.last_error ?? 'no answer'}`
  return delivery.last_error === null ? 'not sent yet' : `${delivery.last_error}; again ${delivery.next_attempt_at ? moment(delivery.next_attempt_at) : 'later'}`
}

const COLUMNS: readonly Column<WebhookDelivery>[] = [
  { name: 'created_at', header: 'At', rowHeader: true, value: (row) => row.created_at, cell: (row) => moment(row.created_at) },
  { name: 'event', header: 'Event', value: (row) => row.event, cell: (row) => <code className="text-xs">{row.event}</code> },
  { name: 'state', header: 'Outcome', value: outcomeText, wrap: true },
  { name: 'attempts', header: 'Attempts', align: 'right', value: (row) => row.attempts },
  { name: 'id', header: 'Delivery', value: (row) => row.id, cell: (row) => <code className="text-xs">{row.id}</code> },
]

/** The log of one webhook, the newest first. */
export function Deliveries({ hook }: { hook: Webhook }) {
  const answer = useInfiniteQuery({ ...apiPages<WebhookDelivery>(`/webhooks/${hook.id}/deliveries`, { limit: 20 }), staleTime: 0 })
  const rows = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  if (answer.isPending) return <TableSkeleton label="Loading the deliveries" rows={2} />
  if (answer.error) return <ProblemView error={answer.error} onRetry={() => void answer.refetch()} heading="h3" />
  if (rows.length === 0) return <p className="note">Nothing was sent yet.</p>
  return (
    <>
      <DataTable columns={COLUMNS} rows={rows} rowKey={(row) => row.id} caption={`Deliveries to ${hook.name}`} hideCaption />
      {answer.hasNextPage ? <button type="button" className="btn btn-small mt-3" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show older ones</button> : null}
    </>
  )
}
