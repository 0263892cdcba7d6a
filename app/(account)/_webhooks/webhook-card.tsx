'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useState } from 'react'
import type { Webhook, WebhookChanges, WebhookDelivery } from '@/openapi/schemas/notices'
import { apiSend } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { plural } from '../../_components/number'
import { Notice } from '../../_components/notice'
import { restOf } from '../_parts/faults'
import { Deliveries, outcomeText } from './deliveries'
import { EVENTS, WebhookForm } from './webhook-form'

/** One webhook: what it is told, how the last deliveries went, and what can be done with it. */
export function WebhookCard({ hook }: { hook: Webhook }) {
  const client = useQueryClient()
  const [open, setOpen] = useState<'nothing' | 'form' | 'log' | 'remove'>('nothing')
  const settled = { onSettled: () => client.invalidateQueries({ queryKey: ['api'], predicate: ({ queryKey }) => String(queryKey[1]).startsWith('/webhooks') }) }
  const change = useMutation({ mutationFn: (given: WebhookChanges) => apiSend<Webhook>('PATCH', `/webhooks/${hook.id}`, given, { 'if-match': hook.etag }), ...settled })
  const remove = useMutation({ mutationFn: () => apiSend<null>('DELETE', `/webhooks/${hook.id}`, undefined, { 'if-match': hook.etag }), ...settled })
  const test = useMutation({ mutationFn: () => apiSend<WebhookDelivery>('POST', `/webhooks/${hook.id}/test`), ...settled })
  const problem = restOf(change.error ?? remove.error ?? test.error, [])
  const toggle = (what: typeof open) => setOpen(open === what ? 'nothing' : what)
  const told = EVENTS.filter(({ name }) => hook.events.includes(name)).map(({ text }) => text).join('; ')
  return (
    <section aria-label={hook.name} className="sheet p-4">
      <div className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1">
        <h3>{hook.name}{hook.active ? null : <span className="ml-2 text-sm text-muted">switched off</span>}</h3>
        <p className="note">set up by {hook.owner.name}, {moment(hook.created_at)}</p>
      </div>
      <p className="mt-1"><code className="text-sm [overflow-wrap:anywhere]">{hook.url}</code></p>
      <p className="note mt-1">Told when {told}. {hook.last_delivered_at ? `Last received ${moment(hook.last_delivered_at)}.` : 'Nothing was received yet.'}{hook.waiting > 0 ? ` ${plural(hook.waiting, 'delivery', 'deliveries')} waiting.` : ''}</p>
      <div className="mt-3 flex flex-wrap gap-2">
        <button type="button" className="btn btn-small" aria-expanded={open === 'log'} onClick={() => toggle('log')}>Deliveries</button>
        <button type="button" className="btn btn-small" disabled={test.isPending} onClick={() => test.mutate()}>{test.isPending ? 'Sending' : 'Send a test'}</button>
        <button type="button" className="btn btn-small" aria-expanded={open === 'form'} onClick={() => toggle('form')}>Change</button>
        <button type="button" className="btn btn-small" disabled={change.isPending} onClick={() => change.mutate({ active: !hook.active })}>{hook.active ? 'Switch off' : 'Switch on'}</button>
        {open === 'remove' ? (
          <>
            <button type="button" autoFocus className="btn btn-small border-bad text-bad" disabled={remove.isPending} onClick={() => remove.mutate()}>Remove for good</button>
            <button type="button" className="btn btn-quiet btn-small" onClick={() => setOpen('nothing')}>Keep it</button>
          </>
        ) : <button type="button" className="btn btn-small" onClick={() => setOpen('remove')}>Remove</button>}
      </div>
      {problem ? <div className="mt-3"><Notice tone="bad" role="alert" title={problem.title}><p>{problem.detail}</p></Notice></div> : null}
      {test.data ? <div className="mt-3"><Notice tone={test.data.data.state === 'delivered' ? 'good' : 'warn'} role="status" title={`Test: ${outcomeText(test.data.data)}`} /></div> : null}
      {open === 'form' ? <div className="mt-4 border-t border-rule pt-4"><WebhookForm key={hook.etag} hook={hook} onDone={() => setOpen('nothing')} /></div> : null}
      {open === 'log' ? <div className="mt-4 border-t border-rule pt-4"><Deliveries hook={hook} /></div> : null}
    </section>
  )
}
