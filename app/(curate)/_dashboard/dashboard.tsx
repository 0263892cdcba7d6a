'use client'
import { useQuery } from '@tanstack/react-query'
import Link from 'next/link'
import type { Amendment, Tasks } from '@/openapi/schemas/amendment'
import { apiQuery } from '../../_components/data/api'
import { day } from '../../_components/day'
import { plural } from '../../_components/number'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { Tally } from '../_parts/marks'
import { AmendmentList } from './amendment-list'
import { NewAmendmentForm } from './new-amendment'

const LISTS = [
  { name: 'to_review', title: 'To review', none: 'Nothing waits for your review.', tells: (row: Amendment) => (row.review ? `asked by ${row.review.asked_by.name}, ${day(row.review.asked_at)}` : `by ${row.author.name}`) },
  { name: 'returned', title: 'Returned to you', none: 'Nothing was returned to you.', tells: (row: Amendment) => (row.review?.closed_by ? `by ${row.review.closed_by.name}${row.review.closing_comment ? `: “${row.review.closing_comment}”` : ''}` : '') },
  { name: 'drafts', title: 'Your drafts', none: 'You have no draft.', tells: (row: Amendment) => `last edit ${day(row.updated_at)}` },
  { name: 'in_review', title: 'Yours, in review', none: 'None of yours waits for a colleague.', tells: (row: Amendment) => (row.review ? `since ${day(row.review.asked_at)}` : '') },
] as const

function TaskList({ rows, none, tells }: { rows: readonly Amendment[]; none: string; tells: (row: Amendment) => string }) {
  if (rows.length === 0) return <p className="note">{none}</p>
  return (
    <ul>
      {rows.map((row) => (
        <li key={row.id} className="border-b border-rule py-2">
          <Link className="link font-medium" href={`/curate/${row.id}`}>{row.title}</Link>
          <p className="note flex flex-wrap gap-x-4">
            <span>{plural(row.counts.changes, 'change')}</span>
            {row.counts.errors + row.counts.warnings > 0 ? <Tally changes errors={row.counts.errors} warnings={row.counts.warnings} /> : null}
            {row.counts.open_comments > 0 ? <span>{plural(row.counts.open_comments, 'open thread')}</span> : null}
            <span>{tells(row)}</span>
          </p>
        </li>
      ))}
    </ul>
  )
}

function TaskLists() {
  const { data, error, isPending, refetch } = useQuery({ ...apiQuery<Tasks>('/me/tasks'), staleTime: 0, refetchOnWindowFocus: true })
  if (isPending) return <Skeleton label="Loading what waits for you" className="h-48 w-full" />
  if (error) return <ProblemView error={error} onRetry={() => void refetch()} />
  const tasks = data.data
  return (
    <div className="grid gap-x-12 gap-y-8 md:grid-cols-2 [&>*]:min-w-0">
      {LISTS.map(({ name, title, none, tells }) => (
        <section key={name} aria-label={title} className="border-t border-rule-strong pt-2.5">
          <h2 className="mb-1.5 flex items-baseline gap-2.5 text-xl">{title} {tasks[name].length > 0 ? <span className="num text-base text-muted">{tasks[name].length}</span> : null}</h2>
          <TaskList rows={tasks[name]} none={none} tells={tells} />
        </section>
      ))}
      <section aria-label="Accepted, waiting for an edition" className="border-t border-rule-strong pt-2.5 md:col-span-2">
        <h2 className="mb-1.5 flex items-baseline gap-2.5 text-xl">Accepted, waiting for an edition {tasks.accepted.length > 0 ? <span className="num text-base text-muted">{tasks.accepted.length}</span> : null}</h2>
        <TaskList rows={tasks.accepted} none="Nothing waits to be published." tells={(row) => (row.review?.closed_by ? `accepted by ${row.review.closed_by.name}` : '')} />
        {tasks.accepted.length > 0 ? <p className="mt-3"><Link className="btn" href="/editions/next">See the next edition</Link></p> : null}
      </section>
      {tasks.complete ? null : <p className="note md:col-span-2">More amendments are open than are shown here: these were touched last. All of them stand below.</p>}
    </div>
  )
}

/** What waits for the curator who looks, and all amendments. */
export function Dashboard() {
  return (
    <div className="page">
      <PageHead title="Curate">
        <p>Correct and add levels in amendments. A colleague reviews each one, and an edition publishes those accepted.</p>
      </PageHead>
      <TaskLists />
      <Part title="New amendment"><NewAmendmentForm /></Part>
      <Part title="All amendments"><AmendmentList /></Part>
      <RequestPanel path="/me/tasks" unpinned />
    </div>
  )
}
