import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import { prefetch } from '@/app/_components/data/prefetch'
import { editionParam, segment, type PageQuery } from '@/app/_components/data/search-params'
import { LevelView } from '../../_level/level-view'
import { BenchSkeleton } from '../../_parts/bench-skeleton'

interface Props {
  params: Promise<{ level: string }>
  searchParams: Promise<PageQuery>
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Level ${segment((await params).level)}` }
}

export default async function LevelPage({ params, searchParams }: Props) {
  const id = segment((await params).level)
  const edition = editionParam(await searchParams)
  const state = await prefetch([[`/levels/${encodeURIComponent(id)}`, { edition }], [`/levels/${encodeURIComponent(id)}/g-factor`, { edition }], ['/follows', { subject: id }]], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<BenchSkeleton />}>
        <LevelView id={id} />
      </Suspense>
    </HydrationBoundary>
  )
}
