import type { Metadata } from 'next'
import { Suspense } from 'react'
import { TableSkeleton } from '../../_components/skeleton'
import { AccountFrame } from '../_parts/account-frame'
import { AuditView } from '../_people/audit-view'

export const metadata: Metadata = { title: 'Audit' }

export default function AuditPage() {
  return (
    <AccountFrame here="/audit">
      <Suspense fallback={<div className="page pt-9"><TableSkeleton label="Loading the audit" /></div>}><AuditView /></Suspense>
    </AccountFrame>
  )
}
