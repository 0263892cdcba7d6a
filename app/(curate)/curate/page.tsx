import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../_components/data/prefetch'
import { Dashboard } from '../_dashboard/dashboard'
import { CuratorsOnly, mayCurate } from '../_parts/curators-only'

export const metadata: Metadata = { title: 'Curate' }

export default async function CuratePage() {
  if (!(await mayCurate('/curate'))) return <CuratorsOnly />
  const state = await prefetch([['/me/tasks'], { path: '/amendments', pages: true }, ['/me']])
  return (
    <HydrationBoundary state={state}>
      <Dashboard />
    </HydrationBoundary>
  )
}
