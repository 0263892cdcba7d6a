import { redirect } from 'next/navigation'
import type { Account } from '@/openapi/schemas/session'
import { serverGet } from '../../_components/data/server-get'
import { Notice } from '../../_components/notice'
import { PageHead } from '../../_components/page-head'

/** Whether the visitor may work on amendments. Strangers are asked to sign in, and come back. */
export async function mayCurate(path: string): Promise<boolean> {
  const me = await serverGet<Account>('/me')
  if (me === null) redirect(`/sign-in?next=${encodeURIComponent(path)}`)
  return me.data.role_in_force !== 'reader'
}

/** What a reader finds here. */
export function CuratorsOnly() {
  return (
    <div className="page">
      <PageHead title="Curate" />
      <Notice title="This is for curators">
        <p>You are signed in as a reader. An admin of this instance can give you the role of a curator; what is published you can read without it.</p>
      </Notice>
    </div>
  )
}
