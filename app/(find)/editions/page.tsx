import type { Metadata } from 'next'
import type { Account } from '@/openapi/schemas/session'
import { serverGet } from '../../_components/data/server-get'
import { EditionsList } from '../_parts/editions-list'

export const metadata: Metadata = { title: 'Editions', description: 'Frozen, numbered publications of the whole table.' }

// The list itself is already in the page: the header needs it everywhere.
export default async function EditionsPage() {
  const me = await serverGet<Account>('/me')
  return <EditionsList curator={me !== null && me.data.role_in_force !== 'reader'} />
}
