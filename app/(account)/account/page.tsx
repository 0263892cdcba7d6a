import type { Metadata } from 'next'
import { HydrationBoundary } from '@tanstack/react-query'
import { prefetch } from '../../_components/data/prefetch'
import { AccountFrame } from '../_parts/account-frame'
import { AccountView } from '../_parts/account-view'

export const metadata: Metadata = { title: 'Your account' }

export default async function AccountPage() {
  const state = await prefetch([['/me'], ['/keys', { limit: 200 }]])
  return (
    <AccountFrame here="/account">
      <HydrationBoundary state={state}>
        <AccountView />
      </HydrationBoundary>
    </AccountFrame>
  )
}
