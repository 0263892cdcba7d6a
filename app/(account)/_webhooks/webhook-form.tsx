'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useRef, type FormEvent } from 'react'
import type { NewWebhook, NewWebhookAnswer, Webhook, WebhookEvent } from '@/openapi/schemas/notices'
import { apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { faultOf, restOf } from '../_parts/faults'
import { Field } from '../_parts/field'

export const EVENTS: readonly { name: WebhookEvent; text: string }[] = [
  { name: 'edition.published', text: 'an edition is published' },
  { name: 'review.asked', text: 'a review is asked' },
  { name: 'review.accepted', text: 'an amendment is accepted' },
  { name: 'review.returned', text: 'an amendment is returned' },
]
const FIELDS = ['/name', '/url', '/events']

/** Makes a webhook, or changes one. */
export function WebhookForm({ hook, onMade, onDone }: { hook?: Webhook; onMade?: (made: NewWebhookAnswer) => void; onDone?: () => void }) {
  const client = useQueryClient()
  const form = useRef<HTMLFormElement>(null)
  const save = useMutation({
    mutationFn: async (given: NewWebhook): Promise<NewWebhookAnswer | null> => {
      if (hook !== undefined) {
        await apiSend<Webhook>('PATCH', `/webhooks/${hook.id}`, given, { 'if-match': hook.etag })
        return null
      }
      return (await apiSend<NewWebhookAnswer>('POST', '/webhooks', given)).data
    },
    onSuccess: (made) => {
      if (made !== null) {
        form.current?.reset()
        onMade?.(made)
      }
      onDone?.()
    },
    onSettled: () => client.invalidateQueries({ queryKey: ['api', '/webhooks'] }),
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    save.mutate({ name: String(given.get('name') ?? ''), url: String(given.get('url') ?? ''), events: EVENTS.map(({ name }) => name).filter((name) => given.getAll('events').includes(name)) })
  }
  const problem = restOf(save.error, FIELDS)
  const fault = faultOf(save.error, '/events')
  return (
    <form ref={form} method="post" onSubmit={submit} aria-label={hook === undefined ? 'Set up a webhook' : `Change ${hook.name}`} className="max-w-4xl space-y-3">
      {problem ? <Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice> : null}
      <div className="grid items-start gap-x-4 gap-y-3 sm:grid-cols-[1fr_2fr]">
        <Field label="Name" name="name" required maxLength={200} placeholder="what it is for" autoComplete="off" defaultValue={hook?.name} error={faultOf(save.error, '/name')} />
        <Field label="Address" name="url" type="url" required maxLength={2000} placeholder="https://" autoComplete="off" defaultValue={hook?.url} error={faultOf(save.error, '/url')} />
      </div>
      <fieldset>
        <legend className="label">Tell it when</legend>
        <div className="flex flex-wrap gap-x-6 gap-y-1">
          {EVENTS.map(({ name, text }) => (
            <label key={name} className="inline-flex min-h-8 items-center gap-2">
              <input type="checkbox" name="events" value={name} defaultChecked={hook === undefined ? name === 'edition.published' : hook.events.includes(name)} className="size-4 accent-[var(--lamp)]" />
              {text}
            </label>
          ))}
        </div>
        {fault ? <p className="mt-1 text-sm text-bad">Choose at least one.</p> : null}
      </fieldset>
      <div className="flex gap-3">
        <button type="submit" className="btn btn-lamp" disabled={save.isPending}>{hook === undefined ? 'Set it up' : 'Save'}</button>
        {onDone ? <button type="button" className="btn" onClick={onDone}>Cancel</button> : null}
      </div>
    </form>
  )
}
