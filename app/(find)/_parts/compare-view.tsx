'use client'
import Link from 'next/link'
import { useQuery } from '@tanstack/react-query'
import { ArrowLeftRight } from 'lucide-react'
import { parseAsInteger, useQueryStates } from 'nuqs'
import { editionsQuery } from '../../_components/data/edition'
import { EmptyState } from '../../_components/empty-state'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { Comparison, EditionChoice } from './comparison'

/** Any two editions against each other; which ones stands in the address. */
export function CompareView() {
  const { data, error, isPending, refetch } = useQuery(editionsQuery())
  const [chosen, setChosen] = useQueryStates({ from: parseAsInteger, to: parseAsInteger }, { history: 'push' })
  const editions = [...(data?.data ?? [])].sort((a, b) => b.number - a.number)
  const latest = editions[0]?.number ?? 0
  const to = chosen.to ?? latest
  const from = chosen.from ?? Math.max(0, to - 1)
  return (
    <div className="page">
      <PageHead title="Compare editions" crumbs={<Link className="link" href="/editions">All editions</Link>}>
        <p>What one edition shows otherwise than another: levels, sources, species, isotopes and hyperfine constants, value by value.</p>
      </PageHead>
      {isPending ? <Skeleton label="Loading the editions" className="h-24 w-full" /> : error ? <ProblemView error={error} onRetry={() => void refetch()} /> : editions.length === 0 ? (
        <EmptyState title="Nothing has been published yet"><p>There is nothing to compare.</p></EmptyState>
      ) : (
        <>
          <div className="mb-6 flex flex-wrap items-end gap-x-4 gap-y-3 border-y border-rule-strong py-5">
            <EditionChoice label="From" value={from} editions={editions} empty onChange={(n) => void setChosen({ from: n, to })} />
            <button type="button" className="btn" disabled={from === 0} onClick={() => void setChosen({ from: to, to: from })} aria-label="Exchange the two editions" title="Exchange the two editions"><ArrowLeftRight size={16} aria-hidden="true" /></button>
            <EditionChoice label="To" value={to} editions={editions} onChange={(n) => void setChosen({ from, to: n })} />
          </div>
          {from === to ? <p className="note">These are one edition: choose another to compare it with.</p> : <Comparison from={from} to={to} />}
        </>
      )}
      <RequestPanel path={`/editions/${to}/changes`} query={{ since: from }} unpinned />
    </div>
  )
}
