import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import { prefetch } from '@/app/_components/data/prefetch'
import { editionParam, one, segment, type PageQuery } from '@/app/_components/data/search-params'
import { LineView } from '../../_line/line-view'
import { BenchSkeleton } from '../../_parts/bench-skeleton'

interface Props {
  params: Promise<{ transition: string }>
  searchParams: Promise<PageQuery>
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const id = segment((await params).transition)
  return { title: `Line ${id.replace('~', ' – ')}` }
}

export default async function LinePage({ params, searchParams }: Props) {
  const id = segment((await params).transition)
  const query = await searchParams
  const state = await prefetch([[`/transitions/${id}`, { kind: one(query, 'kind'), edition: editionParam(query) }], ['/follows', { subject: id }]], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<BenchSkeleton />}>
        <LineView id={id} />
      </Suspense>
    </HydrationBoundary>
  )
}
