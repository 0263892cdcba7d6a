import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../_components/data/prefetch'
import type { PageQuery } from '../../_components/data/search-params'
import { lineQuery } from '../_parts/line-query'
import { LinesSearch } from '../_parts/lines-search'

export const metadata: Metadata = { title: 'Lines', description: 'Search the allowed lines of every species by window, kind and effective Landé factor.' }

export default async function LinesPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const query = lineQuery(await searchParams)
  const state = await prefetch([{ path: '/transitions', query, pages: true }])
  return (
    <HydrationBoundary state={state}>
      <LinesSearch />
    </HydrationBoundary>
  )
}
