import type { Metadata } from 'next'
import { one, type PageQuery } from '../../_components/data/search-params'
import { PageHead } from '../../_components/page-head'
import { ResetAskForm, ResetUseForm } from '../_parts/reset-forms'

// the address may hold a token: it is told to no other site, and no search engine keeps it
export const metadata: Metadata = { title: 'Set a new password', referrer: 'same-origin', robots: { index: false } }

export default async function ResetPasswordPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const token = one(await searchParams, 'token')
  return (
    <div className="page">
      <PageHead title="Set a new password">
        <p>{token === undefined ? 'Give the address of your account. If it has one here, a mail with a link is on its way; the link is good for an hour, and once.' : 'Every browser that is signed in to your account will have to sign in again. API keys go on working.'}</p>
      </PageHead>
      {token === undefined ? <ResetAskForm /> : <ResetUseForm token={token} />}
    </div>
  )
}
