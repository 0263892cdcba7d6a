'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import { editionsQuery } from '../../_components/data/edition'
import { EmptyState } from '../../_components/empty-state'
import { count } from '../../_components/number'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { day } from '../../_components/day'

/** Every edition, the newest first. Those who may see the next one are led to it. */
export function EditionsList({ curator }: { curator: boolean }) {
  const { data, error, isPending, refetch } = useQuery(editionsQuery())
  const editions = [...(data?.data ?? [])].sort((a, b) => b.number - a.number)
  return (
    <div className="page">
      <PageHead title="Editions" aside={
        <div className="flex flex-wrap gap-2">
          {editions.length > 1 ? <Link className="btn" href="/editions/compare">Compare two</Link> : null}
          {curator ? <Link className="btn" href="/editions/next">Next edition</Link> : null}
        </div>
      }>
        <p>An edition is a frozen, numbered publication of the whole table. A request that names its edition gives the same stored values for ever; one that names none reads the latest.</p>
      </PageHead>
      {isPending ? <Skeleton label="Loading the editions" className="h-32 w-full" /> : error ? <ProblemView error={error} onRetry={() => void refetch()} /> : editions.length === 0 ? (
        <EmptyState title="Nothing has been published yet"><p>The table has no edition: ask whoever runs it to load the first one.</p></EmptyState>
      ) : (
        <ol className="border-t border-rule-strong">
          {editions.map((edition, index) => (
            <li key={edition.number} className="border-b border-rule">
              <Link href={`/editions/${edition.number}`} className="group grid gap-x-8 gap-y-1 py-5 hover:bg-lamp-wash sm:grid-cols-[5.5rem_minmax(0,1fr)_auto] sm:px-2">
                <span className="num font-text text-[2.75rem] leading-none text-lamp-ink">{edition.number}</span>
                <span className="min-w-0">
                  <span className="font-text text-xl group-hover:underline">{edition.label}</span>
                  {index === 0 ? <span className="ml-3 text-xs text-good">latest</span> : null}
                  <span className="mt-1 line-clamp-2 max-w-[40rem] text-muted">{edition.notes}</span>
                </span>
                <span className="note sm:text-right">
                  {day(edition.published_at)}
                  <br />
                  <span className="num">{count(edition.counts.levels)} levels of {count(edition.counts.species)} species</span>
                </span>
              </Link>
            </li>
          ))}
        </ol>
      )}
      <RequestPanel path="/editions" unpinned />
    </div>
  )
}
