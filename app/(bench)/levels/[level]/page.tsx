import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import { prefetch } from '@/app/_components/data/prefetch'
import { editionParam, type PageQuery } from '@/app/_components/data/search-params'
import { LevelView } from '../../_level/level-view'
import { BenchSkeleton } from '../../_parts/bench-skeleton'

interface Props {
  params: Promise<{ level: string }>
  searchParams: Promise<PageQuery>
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Level ${decodeURIComponent((await params).level)}` }
}

export default async function LevelPage({ params, searchParams }: Props) {
  const id = decodeURIComponent((await params).level)
  const edition = editionParam(await searchParams)
  const state = await prefetch([[`/levels/${id}`, { edition }], [`/levels/${id}/g-factor`, { edition }]])
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<BenchSkeleton />}>
        <LevelView id={id} />
      </Suspense>
    </HydrationBoundary>
  )
}
