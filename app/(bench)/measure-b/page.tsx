import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import { prefetch } from '@/app/_components/data/prefetch'
import { editionParam, one, type PageQuery } from '@/app/_components/data/search-params'
import { TRANSITION_ID } from '@/openapi/schemas/common'
import { BenchSkeleton } from '../_parts/bench-skeleton'
import { MeasureView } from '../_measure/measure-view'

export const metadata: Metadata = { title: 'Measure B', description: 'A magnetic field from the measured positions of Zeeman components, with its uncertainty.' }

export default async function MeasurePage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const query = await searchParams
  const edition = editionParam(query)
  const lines = (one(query, 'lines') ?? '').split(',').filter((id) => TRANSITION_ID.test(id)).slice(0, 20)
  const state = await prefetch(lines.map((id) => [`/transitions/${id}`, { edition }] as const))
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<BenchSkeleton />}>
        <MeasureView />
      </Suspense>
    </HydrationBoundary>
  )
}
