import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../../_components/data/prefetch'
import { EditionView } from '../../_parts/edition-view'

type Props = { params: Promise<{ n: string }> }

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Edition ${(await params).n}` }
}

export default async function EditionPage({ params }: Props) {
  const { n } = await params
  const state = await prefetch([[`/editions/${encodeURIComponent(n)}`]], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <EditionView n={n} />
    </HydrationBoundary>
  )
}
