'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useId, useRef, useState, type FormEvent } from 'react'
import type { NewKey, NewKeyRequest } from '@/openapi/schemas/key'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from './faults'
import { Field } from './field'

const ROLES = ['reader', 'curator', 'admin'] as const
export type RoleName = (typeof ROLES)[number]
const ENDS = [
  { id: '30', label: 'in 30 days' }, { id: '90', label: 'in 90 days' }, { id: '365', label: 'in a year' }, { id: 'date', label: 'on a date' }, { id: 'never', label: 'never' },
] as const
const DAY_MS = 86_400_000
const FIELDS = ['/name', '/role', '/expires_at']

function endOf(choice: string, date: string): string | null {
  if (choice === 'never') return null
  if (choice === 'date') return date === '' ? null : new Date(`${date}T23:59:59Z`).toISOString()
  return new Date(Date.now() + Number(choice) * DAY_MS).toISOString()
}

/** Makes a key: a name, a role not above one's own, an end. */
export function KeyForm({ role, onMade }: { role: RoleName; onMade: (key: NewKey) => void }) {
  const client = useQueryClient()
  const form = useRef<HTMLFormElement>(null)
  const [ends, setEnds] = useState<string>('90')
  const ids = { role: useId(), ends: useId() }
  const allowed = ROLES.slice(0, ROLES.indexOf(role) + 1)
  const make = useMutation({
    mutationFn: (given: NewKeyRequest) => apiSend<NewKey>('POST', '/keys', given, { 'idempotency-key': crypto.randomUUID?.() ?? String(Math.random()).slice(2) }),
    onSuccess: async (answer) => {
      form.current?.reset()
      setEnds('90')
      onMade(answer.data)
      await client.invalidateQueries({ queryKey: ['api', '/keys'] })
    },
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    const chosen = allowed.find((one) => one === given.get('role')) ?? 'reader'
    make.mutate({ name: String(given.get('name') ?? ''), role: chosen, expires_at: endOf(ends, String(given.get('date') ?? '')) })
  }
  const problem = restOf(make.error, FIELDS)
  return (
    <form ref={form} method="post" onSubmit={submit} aria-label="Make a key">
      {problem ? <div className="mb-3"><Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice></div> : null}
      <div className="grid max-w-4xl items-start gap-x-4 gap-y-3 sm:grid-cols-[minmax(12rem,2fr)_1fr_1fr_auto]">
        <Field label="Name" name="name" required maxLength={200} placeholder="what it is for, e.g. fit notebook" autoComplete="off" error={faultOf(make.error, '/name')} />
        <div>
          <label className="label" htmlFor={ids.role}>Role</label>
          <select id={ids.role} name="role" className="input" defaultValue="reader">
            {allowed.map((one) => <option key={one} value={one}>{one}</option>)}
          </select>
        </div>
        <div>
          <label className="label" htmlFor={ids.ends}>Ends</label>
          <select id={ids.ends} className="input" value={ends} onChange={(event) => setEnds(event.target.value)}>
            {ENDS.map((end) => <option key={end.id} value={end.id}>{end.label}</option>)}
          </select>
          {ends === 'date' ? <input type="date" name="date" required aria-label="End date" className="input mt-2" /> : null}
          {faultOf(make.error, '/expires_at') ? <p className="mt-1 text-sm text-bad">{faultOf(make.error, '/expires_at')}</p> : null}
        </div>
        <button type="submit" className="btn btn-lamp sm:mt-6" disabled={make.isPending}>Make key</button>
      </div>
    </form>
  )
}
