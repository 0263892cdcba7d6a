import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { Suspense } from 'react'
import type { Amendment } from '@/openapi/schemas/amendment'
import { prefetch } from '../../../_components/data/prefetch'
import { segment } from '../../../_components/data/search-params'
import { serverGet } from '../../../_components/data/server-get'
import { Skeleton } from '../../../_components/skeleton'
import { AmendmentView } from '../../_amendment/amendment-view'
import { CuratorsOnly, mayCurate } from '../../_parts/curators-only'

type Props = { params: Promise<{ id: string }> }
const pathOf = async (params: Props['params']): Promise<string> => `/amendments/${encodeURIComponent(segment((await params).id))}`

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const answer = await serverGet<Amendment>(await pathOf(params))
  return { title: answer === null ? 'Amendment' : answer.data.title }
}

export default async function AmendmentPage({ params }: Props) {
  const path = await pathOf(params)
  const id = segment((await params).id)
  if (!(await mayCurate(`/curate/${encodeURIComponent(id)}`))) return <CuratorsOnly />
  const state = await prefetch([[path], ['/me']], { subject: true })
  return (
    <HydrationBoundary state={state}>
      <Suspense fallback={<div className="page pt-9"><Skeleton label="Loading the amendment" className="h-10 max-w-xl" /></div>}>
        <AmendmentView id={id} />
      </Suspense>
    </HydrationBoundary>
  )
}
