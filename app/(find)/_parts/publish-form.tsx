'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useRouter } from 'next/navigation'
import { useId, useState, type FormEvent } from 'react'
import type { Edition, NextEdition, PublicationConflict } from '@/openapi/schemas/edition'
import { ApiError, apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { Conflicts } from './publication-conflicts'

const NOTES_MAX = 20_000

/** Plain http on a network address has no crypto.randomUUID. */
const freshKey = (): string => Array.from(crypto.getRandomValues(new Uint8Array(16)), (byte) => byte.toString(16).padStart(2, '0')).join('')

const refusedWith = (error: unknown): PublicationConflict[] | null =>
  error instanceof ApiError && error.problem.code === 'publication_conflict' && Array.isArray(error.problem.conflicts) ? (error.problem.conflicts as PublicationConflict[]) : null

/** Label and notes, and the step that cannot be taken back. What is published is what is shown: other versions are refused. */
export function PublishForm({ next, onLookAgain }: { next: NextEdition; onLookAgain: () => void }) {
  const [label, setLabel] = useState(next.label)
  const [notes, setNotes] = useState(next.notes)
  const [sure, setSure] = useState(false)
  // one key for this form: pressed twice, it publishes once
  const [key, setKey] = useState(() => freshKey())
  const ids = { label: useId(), notes: useId(), hint: useId() }
  const router = useRouter()
  const client = useQueryClient()
  const publish = useMutation({
    mutationFn: () => apiSend<Edition>('POST', '/editions', { label: label.trim(), notes: notes.trim(), amendments: next.amendments.map(({ id, version }) => ({ id, version })) }, { 'idempotency-key': key }),
    onSuccess: async ({ data }) => {
      await client.invalidateQueries()
      router.push(`/editions/${data.number}`)
    },
    onError: () => {
      setSure(false)
      setKey(freshKey())
    },
  })
  const blocked = next.conflicts.length > 0
  const conflicts = refusedWith(publish.error)
  const submit = (event: FormEvent) => {
    event.preventDefault()
    setSure(true)
  }
  return (
    <form onSubmit={submit} className="max-w-4xl space-y-4">
      <div>
        <label htmlFor={ids.label} className="label">Label</label>
        <input id={ids.label} className="input max-w-md" required maxLength={200} autoComplete="off" value={label} onChange={(event) => setLabel(event.target.value)} />
      </div>
      <div>
        <label htmlFor={ids.notes} className="label">Notes</label>
        <textarea id={ids.notes} className="input min-h-72 font-text leading-relaxed" maxLength={NOTES_MAX} rows={14} value={notes} aria-describedby={ids.hint} onChange={(event) => setNotes(event.target.value)} />
        <p id={ids.hint} className="note mt-1">Written from the changes; word them as you like. {notes === next.notes ? null : <button type="button" className="link" onClick={() => setNotes(next.notes)}>Take the suggestion again</button>}</p>
      </div>
      {conflicts ? <Conflicts conflicts={conflicts} /> : publish.error ? (
        <>
          <ProblemView error={publish.error} heading="h3" />
          <button type="button" className="btn" onClick={onLookAgain}>Look again</button>
        </>
      ) : null}
      {sure ? (
        <Notice tone="warn" role="alert" title={`Publish edition ${next.number}, “${label.trim()}”, with ${plural(next.counts.changes, 'change')}?`}>
          <p>A published edition never changes and is never taken back. Followers are told by mail.</p>
          <div className="flex flex-wrap gap-2 pt-1.5">
            <button type="button" className="btn btn-lamp" autoFocus disabled={publish.isPending} onClick={() => publish.mutate()}>{publish.isPending ? 'Checking and publishing' : 'Publish for good'}</button>
            <button type="button" className="btn" disabled={publish.isPending} onClick={() => setSure(false)}>Not yet</button>
          </div>
        </Notice>
      ) : <button type="submit" className="btn btn-lamp" disabled={blocked || label.trim() === ''}>Publish edition {next.number}</button>}
    </form>
  )
}
