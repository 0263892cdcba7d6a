'use client'
import { useMutation } from '@tanstack/react-query'
import { useRef, useState, type FormEvent } from 'react'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from './faults'
import { Field } from './field'

const FIELDS = ['/password', '/new_password']

/** A new password; other sessions of the account end. */
export function PasswordForm({ email }: { email: string }) {
  const form = useRef<HTMLFormElement>(null)
  const [differs, setDiffers] = useState(false)
  const change = useMutation({
    mutationFn: (given: { password: string; new_password: string }) => apiSend<null>('POST', '/password-changes', given),
    onSuccess: () => form.current?.reset(),
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    const [password, fresh, again] = ['password', 'new_password', 'again'].map((name) => String(given.get(name) ?? ''))
    setDiffers(fresh !== again)
    if (fresh === again) change.mutate({ password: password ?? '', new_password: fresh ?? '' })
  }
  const problem = restOf(change.error, FIELDS)
  return (
    <form ref={form} method="post" onSubmit={submit} className="max-w-sm space-y-4">
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
      {change.isSuccess ? <Notice tone="good" role="status" title="The password is changed"><p>Other sessions of this account have ended; keys go on working.</p></Notice> : null}
      <input type="email" name="username" autoComplete="username" value={email} readOnly hidden />
      <Field label="Present password" name="password" type="password" autoComplete="current-password" required maxLength={1000} error={faultOf(change.error, '/password')} />
      <Field label="New password" name="new_password" type="password" autoComplete="new-password" required maxLength={1000} hint="8 to 128 characters, and not a common one." error={faultOf(change.error, '/new_password')} />
      <Field label="New password again" name="again" type="password" autoComplete="new-password" required maxLength={1000} error={differs ? 'The two are not the same.' : undefined} />
      <button type="submit" className="btn" disabled={change.isPending}>Change password</button>
    </form>
  )
}
