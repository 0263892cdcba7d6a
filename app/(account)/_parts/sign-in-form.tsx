'use client'
import { useMutation } from '@tanstack/react-query'
import Link from 'next/link'
import type { FormEvent } from 'react'
import type { SignedIn } from '@/openapi/schemas/session'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from './faults'
import { Field } from './field'
import { useReady } from './use-ready'

const FIELDS = ['/email', '/password']

/** Sends the sign-in over the API. The form posts, so that a password never lands in an address, script or no script. */
export function SignInForm({ next }: { next: string }) {
  const ready = useReady()
  const signIn = useMutation({
    mutationFn: (given: { email: string; password: string }) => apiSend<SignedIn>('POST', '/session', given),
    // A whole new page: nothing that was read as a stranger stays behind.
    onSuccess: () => window.location.assign(next),
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    signIn.mutate({ email: String(given.get('email') ?? ''), password: String(given.get('password') ?? '') })
  }
  const problem = restOf(signIn.error, FIELDS)
  return (
    <form method="post" onSubmit={submit} className="max-w-sm space-y-4 border-t border-rule-strong pt-5">
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
      <Field label="Email" name="email" type="email" autoComplete="username" required maxLength={320} error={faultOf(signIn.error, '/email')} />
      <Field label="Password" name="password" type="password" autoComplete="current-password" required maxLength={1000} error={faultOf(signIn.error, '/password')} />
      <button type="submit" className="btn btn-lamp w-full" disabled={!ready || signIn.isPending || signIn.isSuccess}>{signIn.isPending || signIn.isSuccess ? 'Signing in' : 'Sign in'}</button>
      <p className="note"><Link className="link inline-flex min-h-6 items-center" href="/reset-password">Forgotten your password?</Link></p>
      <p className="note">An account comes with an invitation by an admin of this instance. On the demo, the accounts were printed when the server first started; <code>npm run demo-accounts</code> prints them again.</p>
    </form>
  )
}
