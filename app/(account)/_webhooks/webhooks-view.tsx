'use client'
import { useInfiniteQuery } from '@tanstack/react-query'
import { useMemo, useState } from 'react'
import type { NewWebhookAnswer, Webhook } from '@/openapi/schemas/notices'
import { CopyButton } from '../../_components/copy-button'
import { apiPages } from '../../_components/data/api'
import { EmptyState } from '../../_components/empty-state'
import { PageHead, Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { TableSkeleton } from '../../_components/skeleton'
import { WebhookCard } from './webhook-card'
import { WebhookForm } from './webhook-form'

/** The secret in full, this once. */
function ShownOnce({ made, onDone }: { made: NewWebhookAnswer; onDone: () => void }) {
  if (made.secret === null) return null
  return (
    <div role="status" className="mb-5 max-w-4xl border-2 border-lamp bg-sheet p-4">
      <p className="font-text text-xl">{made.name}: keep this secret now</p>
      <p className="mt-1 text-muted">It signs what is sent, and is shown this once. The other side needs it to tell our requests from anybody else’s.</p>
      <p className="mt-3 flex flex-wrap items-center gap-3">
        <code className="bg-well px-2.5 py-1.5 text-sm [overflow-wrap:anywhere]">{made.secret}</code>
        <CopyButton text={made.secret} label="Copy secret" />
      </p>
      <button type="button" className="btn mt-3" onClick={onDone}>I have kept it</button>
    </div>
  )
}

function Signing() {
  return (
    <div className="prose-text space-y-2">
      <p>Each event is a POST of JSON with <code>id</code>, <code>event</code>, <code>at</code> and <code>data</code>. To check where it comes from, take the field <code>Lodeterm-Timestamp</code>, a full stop and the body as it came; the HMAC-SHA256 of that under the secret, in hexadecimal, stands after <code>v1=</code> in <code>Lodeterm-Signature</code>. Refuse a time that is more than five minutes off.</p>
      <p>Any answer of 200 to 299 within ten seconds counts as received. Otherwise it is tried again after 1, 5, 15 and 60 minutes, 4 and 12 hours and a day; <code>Lodeterm-Delivery</code> stays the same, so that nothing need be done twice. Redirects are not followed.</p>
    </div>
  )
}

/** Addresses that are told of events. */
export function WebhooksView() {
  const [made, setMade] = useState<NewWebhookAnswer | null>(null)
  const answer = useInfiniteQuery({ ...apiPages<Webhook>('/webhooks'), staleTime: 0 })
  const hooks = useMemo(() => answer.data?.pages.flatMap((page) => page.data) ?? [], [answer.data])
  return (
    <div className="page">
      <PageHead title="Webhooks"><p>A webhook tells another program, by a signed request, that a review was asked or given, or that an edition is published: to start a refit, or to write into a chat.</p></PageHead>
      <Part title="Set one up">
        {made ? <ShownOnce made={made} onDone={() => setMade(null)} /> : null}
        <WebhookForm onMade={setMade} />
      </Part>
      <Part title="In use">
        {answer.isPending ? <TableSkeleton label="Loading the webhooks" rows={2} /> : answer.error ? <ProblemView error={answer.error} onRetry={() => void answer.refetch()} heading="h3" /> : hooks.length === 0 ? (
          <EmptyState title="No webhooks yet"><p>Give a name, an address and the events above.</p></EmptyState>
        ) : <ul className="space-y-4">{hooks.map((hook) => <li key={hook.id}><WebhookCard hook={hook} /></li>)}</ul>}
      </Part>
      <Part title="How to check a signature"><Signing /></Part>
    </div>
  )
}
