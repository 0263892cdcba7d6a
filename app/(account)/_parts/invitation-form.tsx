'use client'
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query'
import Link from 'next/link'
import { useRouter } from 'next/navigation'
import type { FormEvent } from 'react'
import type { InvitationOffer } from '@/openapi/schemas/people'
import type { SignedIn } from '@/openapi/schemas/session'
import { apiSend } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { Notice } from '../../_components/notice'
import { PageHead } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { Skeleton } from '../../_components/skeleton'
import { faultOf, restOf } from './faults'
import { Field } from './field'

const FIELDS = ['/name', '/password']

function AcceptForm({ token, offer }: { token: string; offer: InvitationOffer }) {
  const client = useQueryClient()
  const router = useRouter()
  const accept = useMutation({
    mutationFn: (given: { name: string; password: string }) => apiSend<SignedIn>('POST', '/invitations/accept', { token, ...given }),
    // Nothing that was read as a stranger stays behind.
    onSuccess: () => {
      client.clear()
      router.push('/account')
      router.refresh()
    },
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    accept.mutate({ name: String(given.get('name') ?? ''), password: String(given.get('password') ?? '') })
  }
  const problem = restOf(accept.error, FIELDS)
  return (
    <form method="post" onSubmit={submit} className="max-w-sm space-y-4 border-t border-rule-strong pt-5">
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
      <Field label="Email" name="email" type="email" autoComplete="username" value={offer.email} readOnly hint="You sign in with it." />
      <Field label="Your name" name="name" autoComplete="name" required maxLength={200} defaultValue={offer.name} hint="It stands beside what you write and review." error={faultOf(accept.error, '/name')} />
      <Field label="Password" name="password" type="password" autoComplete="new-password" required maxLength={1000} hint="8 to 128 characters, and not a common one." error={faultOf(accept.error, '/password')} />
      <button type="submit" className="btn btn-lamp w-full" disabled={accept.isPending || accept.isSuccess}>{accept.isPending || accept.isSuccess ? 'Making the account' : 'Make my account'}</button>
    </form>
  )
}

/** What the link of an invitation leads to. */
export function InvitationForm({ token }: { token: string }) {
  const { data, error, isPending } = useQuery({ queryKey: ['invitation', token], queryFn: () => apiSend<InvitationOffer>('POST', '/invitations/read', { token: token.slice(0, 200) || 'none' }), retry: false, staleTime: Infinity })
  if (error) {
    return (
      <div className="page pt-9">
        <ProblemView error={error} heading="h1" />
        <p className="prose-text mt-4">You have an account already? <Link className="link" href="/sign-in">Sign in</Link>.</p>
      </div>
    )
  }
  return (
    <div className="page">
      <PageHead title="Your invitation">
        {data ? <p>{data.data.invited_by} invites you to this table of atomic levels, with the role {data.data.role}. The link is good until {moment(data.data.expires_at)}.</p> : null}
      </PageHead>
      {isPending ? <Skeleton label="Reading the invitation" className="h-48 max-w-sm" /> : <AcceptForm token={token} offer={data.data} />}
    </div>
  )
}
