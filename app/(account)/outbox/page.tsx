import type { Metadata } from 'next'
import { AccountFrame } from '../_parts/account-frame'
import { OutboxView } from '../_notices/outbox-view'

export const metadata: Metadata = { title: 'Outbox' }

export default function OutboxPage() {
  return <AccountFrame here="/outbox"><OutboxView /></AccountFrame>
}
