import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../_components/data/prefetch'
import { editionParam, type PageQuery } from '../../_components/data/search-params'
import { SourcesList } from '../_parts/sources'

export const metadata: Metadata = { title: 'Sources' }

export default async function SourcesPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const state = await prefetch([['/sources', { edition: editionParam(await searchParams), limit: 1000 }]])
  return (
    <HydrationBoundary state={state}>
      <SourcesList />
    </HydrationBoundary>
  )
}
