import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../../_components/data/prefetch'
import { editionParam, segment, type PageQuery } from '../../../_components/data/search-params'
import { SourceView } from '../../_parts/source-view'

type Props = { params: Promise<{ key: string }>; searchParams: Promise<PageQuery> }

export const metadata: Metadata = { title: 'Source' }

export default async function SourcePage({ params, searchParams }: Props) {
  const key = segment((await params).key)
  const edition = editionParam(await searchParams)
  const state = await prefetch([[`/sources/${encodeURIComponent(key)}`, { edition }], ['/levels', { source: key, limit: 200, edition }]], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <SourceView source={key} />
    </HydrationBoundary>
  )
}
