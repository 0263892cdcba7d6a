import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { one, type PageQuery } from '../../_components/data/search-params'
import { serverGet } from '../../_components/data/server-get'
import { PageHead } from '../../_components/page-head'
import { SignInForm } from '../_parts/sign-in-form'

export const metadata: Metadata = { title: 'Sign in' }

/** Only a path of this site: anything else could send a person away after they signed in. */
const ownPath = (text: string | undefined): string => (text !== undefined && /^\/(?![/\\])/.test(text) ? text : '/account')

export default async function SignInPage({ searchParams }: { searchParams: Promise<PageQuery> }) {
  const next = ownPath(one(await searchParams, 'next'))
  if ((await serverGet('/me')) !== null) redirect(next)
  return (
    <div className="page">
      <PageHead title="Sign in">
        <p>Reading needs no account where the instance is open. Sign in to make API keys, or to work on the table.</p>
      </PageHead>
      <SignInForm next={next} />
    </div>
  )
}
