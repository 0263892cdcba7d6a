import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import { prefetch } from '@/app/_components/data/prefetch'
import { editionParam, one, type PageQuery } from '@/app/_components/data/search-params'
import { BenchSkeleton } from '../_parts/bench-skeleton'
import { isTransitionId, LINES_MOST } from '../_patterns/line-ids'
import { PatternsView } from '../_patterns/patterns-view'

export const metadata: Metadata = { title: 'Patterns', description: 'Zeeman patterns and Stokes profiles of several lines at one field, over one axis.' }

export default async function PatternsPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const query = await searchParams
  const ids = [...new Set((one(query, 'lines') ?? '').split(',').filter(isTransitionId))].slice(0, LINES_MOST)
  const edition = editionParam(query)
  const state = await prefetch(ids.map((id) => [`/transitions/${id}`, { edition }] as const))
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<BenchSkeleton />}>
        <PatternsView />
      </Suspense>
    </HydrationBoundary>
  )
}
