import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { redirect } from 'next/navigation'
import { prefetch } from '../../_components/data/prefetch'
import { serverGet } from '../../_components/data/server-get'
import { AccountView } from '../_parts/account-view'

export const metadata: Metadata = { title: 'Your account' }

export default async function AccountPage() {
  if ((await serverGet('/me')) === null) redirect('/sign-in?next=/account')
  const state = await prefetch([['/me'], ['/keys', { limit: 200 }]])
  return (
    <HydrationBoundary state={state}>
      <AccountView />
    </HydrationBoundary>
  )
}
