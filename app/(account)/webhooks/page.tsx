import type { Metadata } from 'next'
import { AccountFrame } from '../_parts/account-frame'
import { WebhooksView } from '../_webhooks/webhooks-view'

export const metadata: Metadata = { title: 'Webhooks' }

export default function WebhooksPage() {
  return <AccountFrame here="/webhooks"><WebhooksView /></AccountFrame>
}
