'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useEffect, useId, useRef, useState, type FormEvent } from 'react'
import type { PersonAccount, PersonChanges } from '@/openapi/schemas/people'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from '../_parts/faults'
import { Field } from '../_parts/field'

const ROLES = ['reader', 'curator', 'admin'] as const

/** One account changed: name, role, closed or open. The tag of the row that was shown goes along, so that nobody's change is lost. */
export function PersonForm({ person, onDone }: { person: PersonAccount; onDone: () => void }) {
  const client = useQueryClient()
  const [asked, setAsked] = useState(false)
  const role = useId()
  const panel = useRef<HTMLElement>(null)
  useEffect(() => panel.current?.querySelector('input')?.focus(), [])
  const change = useMutation({
    mutationFn: (given: PersonChanges) => apiSend<PersonAccount>('PATCH', `/people/${person.id}`, given, { 'if-match': person.etag }),
    onSuccess: onDone,
    onSettled: () => client.invalidateQueries({ queryKey: ['api', '/people'] }),
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    change.mutate({ name: String(given.get('name') ?? ''), role: ROLES.find((one) => one === given.get('role')) ?? person.role })
  }
  const problem = restOf(change.error, ['/name'])
  return (
    <section ref={panel} aria-label={`Change ${person.name}`} className="mb-6 max-w-4xl border-2 border-lamp bg-sheet p-4">
      <p className="font-text text-xl">{person.name}</p>
      <p className="note mb-3">{person.email}</p>
      {problem ? (
        <div className="mb-3">
          <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p>{problem.status === 412 ? <p>Close this and open it again from the table, which shows what is there now.</p> : null}</Notice>
        </div>
      ) : null}
      <form method="post" onSubmit={submit} className="grid items-start gap-x-4 gap-y-3 sm:grid-cols-[minmax(12rem,2fr)_1fr_auto_auto]">
        <Field label="Name" name="name" required maxLength={200} defaultValue={person.name} autoComplete="off" error={faultOf(change.error, '/name')} />
        <div>
          <label className="label" htmlFor={role}>Role</label>
          <select id={role} name="role" className="input" defaultValue={person.role}>{ROLES.map((one) => <option key={one} value={one}>{one}</option>)}</select>
        </div>
        <button type="submit" className="btn btn-lamp sm:mt-6" disabled={change.isPending}>Save</button>
        <button type="button" className="btn sm:mt-6" onClick={onDone}>Cancel</button>
      </form>
      <div className="mt-4 flex flex-wrap items-center gap-3 border-t border-rule pt-3 text-sm">
        {!person.active ? (
          <>
            <span>The account is closed.</span>
            <button type="button" className="btn btn-small" disabled={change.isPending} onClick={() => change.mutate({ active: true })}>Open it again</button>
          </>
        ) : asked ? (
          <>
            <span>Sessions end and {person.keys_in_use === 0 ? 'no key is in use' : `${person.keys_in_use} ${person.keys_in_use === 1 ? 'key is' : 'keys are'} revoked for good`}. What the person did keeps their name.</span>
            <button type="button" autoFocus className="btn btn-small border-bad text-bad" disabled={change.isPending} onClick={() => change.mutate({ active: false })}>Close the account</button>
            <button type="button" className="btn btn-quiet btn-small" onClick={() => setAsked(false)}>Leave it open</button>
          </>
        ) : <button type="button" className="btn btn-small" onClick={() => setAsked(true)}>Close this account</button>}
      </div>
    </section>
  )
}
