'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { useMemo } from 'react'
import type { OutboxMail } from '@/openapi/schemas/notices'
import { ApiError, apiPages } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { LinkedText } from './linked-text'

function Mail({ mail, open }: { mail: OutboxMail; open: boolean }) {
  return (
    <details className="sheet group" open={open}>
      <summary className="flex min-h-11 flex-wrap items-baseline justify-between gap-x-6 gap-y-0.5 px-4 py-2.5 hover:bg-lamp-wash">
        <span className="font-medium">{mail.subject}</span>
        <span className="note">{mail.to.join(', ')}, {moment(mail.at)}</span>
      </summary>
      <div className="border-t border-rule px-4 py-3">
        <dl className="facts note max-w-3xl"><dt>To</dt><dd>{mail.to.join(', ')}</dd><dt>From</dt><dd>{mail.from}</dd></dl>
        <pre className="mt-3 border-t border-rule pt-3 text-sm whitespace-pre-wrap [overflow-wrap:anywhere]"><LinkedText text={mail.text.trimEnd()} /></pre>
      </div>
    </details>
  )
}

/** Mail that would have been sent, where a local stand-in takes it. */
export function OutboxView() {
  const answer = useInfiniteQuery({ ...apiPages<OutboxMail>('/outbox', { limit: 50 }), staleTime: 0, refetchInterval: 5_000, retry: false })
  const mails = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  const elsewhere = answer.error instanceof ApiError && answer.error.problem.code === 'no_outbox'
  return (
    <div className="page">
      <PageHead title="Mail that would have been sent">
        <p>{elsewhere ? 'Mail goes to a real mail server here, so that there is nothing to look into.' : 'No mail server is set, so a local stand-in takes the mail and keeps the last five hundred, as files in .data/outbox. Set SMTP_URL to have mail sent. You see your own; an admin sees all.'}</p>
      </PageHead>
      {elsewhere ? null : answer.isPending ? <TableSkeleton label="Loading the mail" rows={3} columns={2} /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} /> : mails.length === 0 ? (
        <EmptyState title="No mail yet"><p>Mail comes of invitations, forgotten and changed passwords, reviews, and editions that change what you follow.</p></EmptyState>
      ) : <ul className="space-y-3">{mails.map((mail, index) => <li key={mail.id}><Mail mail={mail} open={index === 0} /></li>)}</ul>}
      {answer.hasNextPage ? <button type="button" className="btn mt-4" disabled={answer.isFetchingNextPage} onClick={() => void answer.fetchNextPage()}>Show older mail</button> : null}
    </div>
  )
}
