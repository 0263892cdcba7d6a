import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../_components/data/prefetch'
import { editionParam, one, type PageQuery } from '../_components/data/search-params'
import { FindResults } from './_parts/find-results'
import { FindStart } from './_parts/find-start'
import { Plate } from './_parts/plate'

export async function generateMetadata({ searchParams }: { searchParams: Promise<PageQuery> }): Promise<Metadata> {
  const q = one(await searchParams, 'q')
  return { title: q ? `${q} · Find` : { absolute: 'Lodeterm: find a level or a line' } }
}

export default async function FindPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const query = await searchParams
  const q = one(query, 'q')?.trim() ?? ''
  const edition = editionParam(query)
  if (q === '') {
    const state = await prefetch([['/species', { edition, limit: 1000 }]])
    return (
      <HydrationBoundary state={state}>
        <FindStart plate={<Plate edition={edition} />} />
      </HydrationBoundary>
    )
  }
  const state = await prefetch([['/find', { q, edition }]])
  return (
    <HydrationBoundary state={state}>
      <FindResults key={q} q={q} />
    </HydrationBoundary>
  )
}
