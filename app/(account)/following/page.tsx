import type { Metadata } from 'next'
import { AccountFrame } from '../_parts/account-frame'
import { FollowingView } from '../_notices/following-view'

export const metadata: Metadata = { title: 'Following' }

export default function FollowingPage() {
  return <AccountFrame here="/following"><FollowingView /></AccountFrame>
}
