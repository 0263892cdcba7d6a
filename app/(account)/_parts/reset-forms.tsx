'use client'
import { useMutation } from '@tanstack/react-query'
import Link from 'next/link'
import { useState, type FormEvent } from 'react'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from './faults'
import { Field } from './field'
import { useReady } from './use-ready'

/** Asks for the mail. What is said afterwards is the same whether or not there is an account. */
export function ResetAskForm() {
  const ready = useReady()
  const ask = useMutation({ mutationFn: (email: string) => apiSend<null>('POST', '/password-resets', { email }) })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    ask.mutate(String(new FormData(event.currentTarget).get('email') ?? ''))
  }
  const problem = restOf(ask.error, ['/email'])
  return (
    <form method="post" onSubmit={submit} className="max-w-sm space-y-4 border-t border-rule-strong pt-5">
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
      {ask.isSuccess ? (
        <Notice tone="good" role="status" title="Look into your mail">
          <p>If the address has an account here, a link is on its way. Nothing comes? Look at the spelling, and into the folder for unwanted mail.</p>
        </Notice>
      ) : null}
      <Field label="Email" name="email" type="email" autoComplete="username" required maxLength={320} error={faultOf(ask.error, '/email')} />
      <button type="submit" className="btn btn-lamp w-full" disabled={!ready || ask.isPending}>{ask.isPending ? 'Asking' : 'Send me a link'}</button>
      <p className="note"><Link className="link" href="/sign-in">Back to signing in</Link></p>
    </form>
  )
}

const FIELDS = ['/new_password']

/** Sets the password by the token of the mail. */
export function ResetUseForm({ token }: { token: string }) {
  const ready = useReady()
  const [differs, setDiffers] = useState(false)
  const set = useMutation({ mutationFn: (new_password: string) => apiSend<null>('POST', '/password-resets/use', { token, new_password }) })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    const [fresh, again] = ['new_password', 'again'].map((name) => String(given.get(name) ?? ''))
    setDiffers(fresh !== again)
    if (fresh !== undefined && fresh === again) set.mutate(fresh)
  }
  if (set.isSuccess) {
    return (
      <div className="max-w-md space-y-4">
        <Notice tone="good" role="status" title="The new password is set"><p>Every session of the account has ended.</p></Notice>
        <Link className="btn btn-lamp" href="/sign-in">Sign in</Link>
      </div>
    )
  }
  const problem = restOf(set.error, FIELDS)
  return (
    <form method="post" onSubmit={submit} className="max-w-sm space-y-4 border-t border-rule-strong pt-5">
      {problem ? (
        <Notice tone="bad" role="alert" title={problem.title}>
          <p>{problem.detail}</p>
          {problem.code === 'reset_unusable' ? <p><Link className="link" href="/reset-password">Ask for another link</Link></p> : null}
        </Notice>
      ) : null}
      <Field label="New password" name="new_password" type="password" autoComplete="new-password" required maxLength={1000} hint="8 to 128 characters, and not a common one." error={faultOf(set.error, '/new_password')} />
      <Field label="New password again" name="again" type="password" autoComplete="new-password" required maxLength={1000} error={differs ? 'The two are not the same.' : undefined} />
      <button type="submit" className="btn btn-lamp w-full" disabled={!ready || set.isPending}>{set.isPending ? 'Setting it' : 'Set the password'}</button>
    </form>
  )
}
