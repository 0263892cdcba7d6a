import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import type { Account } from '@/openapi/schemas/session'
import { serverGet } from '../../../_components/data/server-get'
import { NextEditionView } from '../../_parts/next-edition'

export const metadata: Metadata = { title: 'Next edition', robots: { index: false } }

// Not fetched ahead: all that is accepted is checked together for it.
export default async function NextEditionPage() {
  const me = await serverGet<Account>('/me')
  if (me === null) redirect('/sign-in?next=%2Feditions%2Fnext')
  return <NextEditionView role={me.data.role_in_force} />
}
