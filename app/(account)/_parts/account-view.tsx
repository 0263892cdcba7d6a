'use client'
import { useMutation } from '@tanstack/react-query'
import { apiSend } from '../../_components/data/api'
import { useMe } from '../../_components/data/me'
import { Notice } from '../../_components/notice'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { Skeleton } from '../../_components/skeleton'
import { day } from '../../_components/day'
import { restOf } from './faults'
import { Keys } from './keys'
import { PasswordForm } from './password-form'

const ROLE: Record<string, string> = {
  reader: 'Reader: reads the table and computes.',
  curator: 'Curator: also works on amendments and accepts a colleague’s.',
  admin: 'Admin: also publishes editions and manages people and keys.',
}

function SignOut() {
  const signOut = useMutation({
    mutationFn: () => apiSend<null>('DELETE', '/session'),
    // A whole new page, which asks a stranger to sign in: nothing that was read as this person stays behind.
    onSuccess: () => window.location.reload(),
  })
  const problem = restOf(signOut.error, [])
  return (
    <div className="space-y-2">
      <button type="button" className="btn" disabled={signOut.isPending} onClick={() => signOut.mutate()}>Sign out</button>
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
    </div>
  )
}

/** The signed-in person's own account. */
export function AccountView() {
  const { me, nobody, error, isPending, refetch } = useMe()
  if (error) return <div className="page pt-9"><ProblemView error={error} onRetry={() => void refetch()} heading="h1" /></div>
  return (
    <div className="page">
      <PageHead title={me?.name ?? 'Your account'} aside={me ? <SignOut /> : undefined} />
      {isPending ? <Skeleton label="Loading your account" className="h-24 max-w-xl" /> : me === null || nobody ? (
        <Notice tone="warn" title="Your session has ended"><p><a className="link" href="/sign-in?next=/account">Sign in again</a>; nothing was lost.</p></Notice>
      ) : (
        <>
          <dl className="facts max-w-2xl">
            <dt>Email</dt><dd>{me.email}</dd>
            <dt>Role</dt><dd>{ROLE[me.role] ?? me.role}</dd>
            <dt>Since</dt><dd>{day(me.created_at)}{me.demo ? ' (an invented account of the demo)' : ''}</dd>
          </dl>
          <Part title="API keys"><Keys role={me.role} own={me.id} /></Part>
          <Part title="Change your password"><PasswordForm email={me.email} /></Part>
        </>
      )}
    </div>
  )
}
