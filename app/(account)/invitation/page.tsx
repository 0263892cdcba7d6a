import type { Metadata } from 'next'
import { one, type PageQuery } from '../../_components/data/search-params'
import { InvitationForm } from '../_parts/invitation-form'

// the address holds the token: it is told to no other site, and no search engine keeps it
export const metadata: Metadata = { title: 'Your invitation', referrer: 'same-origin', robots: { index: false } }

export default async function InvitationPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  return <InvitationForm token={one(await searchParams, 'token') ?? ''} />
}
