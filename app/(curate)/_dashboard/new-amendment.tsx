'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useRouter } from 'next/navigation'
import { useId, useState, type FormEvent } from 'react'
import type { Amendment, NewAmendment } from '@/openapi/schemas/amendment'
import { apiSend } from '../../_components/data/api'
import { ProblemView } from '../../_components/problem-view'

/** Begins an amendment and opens it. */
export function NewAmendmentForm() {
  const router = useRouter()
  const client = useQueryClient()
  const ids = { title: useId(), note: useId() }
  // one key for one filled-in form: sent twice, it makes one amendment
  const [key, setKey] = useState('')
  const make = useMutation({
    mutationFn: (given: NewAmendment) => {
      const once = key === '' ? (crypto.randomUUID?.() ?? `${Date.now()}${Math.random()}`.replace('.', '')) : key
      setKey(once)
      return apiSend<Amendment>('POST', '/amendments', given, { 'idempotency-key': once })
    },
    onSuccess: async ({ data }) => {
      await client.invalidateQueries({ predicate: ({ queryKey: [, path] }) => path === '/me/tasks' || path === '/amendments' })
      router.push(`/curate/${data.id}`)
    },
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const form = new FormData(event.currentTarget)
    make.mutate({ title: String(form.get('title') ?? '').trim(), note: String(form.get('note') ?? '') })
  }
  return (
    <form onSubmit={submit} onChange={() => setKey('')} aria-label="New amendment" className="max-w-2xl space-y-3">
      {make.error ? <ProblemView error={make.error} heading="h3" /> : null}
      <div>
        <label htmlFor={ids.title} className="label">Title</label>
        <input id={ids.title} name="title" className="input" required maxLength={200} placeholder="Energies of Zn I from the 2019 comb work" autoComplete="off" />
      </div>
      <div>
        <label htmlFor={ids.note} className="label">Note for colleagues, if any</label>
        <textarea id={ids.note} name="note" className="input" rows={2} maxLength={10_000} />
      </div>
      <button type="submit" className="btn btn-lamp" disabled={make.isPending || make.isSuccess}>Begin</button>
    </form>
  )
}
