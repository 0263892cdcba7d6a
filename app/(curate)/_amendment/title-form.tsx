'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useId, useState, type FormEvent } from 'react'
import type { AmendmentDetail } from '@/openapi/schemas/amendment'
import { ApiError, apiGet, apiSend } from '../../_components/data/api'
import { Notice } from '../../_components/notice'
import { ProblemView } from '../../_components/problem-view'
import { type SheetRoom, refreshAmendment } from '../_sheet/use-sheet'
import { amendmentPath } from './use-amendment'

/** Title and note of the amendment. Where someone else changed them meanwhile both are shown, and mine stays in the form. */
export function TitleForm({ amendment, room, onClose }: { amendment: AmendmentDetail; room: SheetRoom; onClose: () => void }) {
  const client = useQueryClient()
  const ids = { title: useId(), note: useId() }
  const [began, setBegan] = useState(amendment)
  const [title, setTitle] = useState(amendment.title)
  const [note, setNote] = useState(amendment.note)
  const save = useMutation({
    mutationFn: async () => {
      await room.saver.now()
      const { data: now } = await apiGet<AmendmentDetail>(amendmentPath(amendment.id))
      // a change of a row raises the version too; only another title or note is a conflict
      if (now.title !== began.title || now.note !== began.note) return { clash: now }
      await apiSend<AmendmentDetail>('PATCH', amendmentPath(amendment.id), { title, note }, { 'if-match': now.etag })
      return { clash: null }
    },
    onSuccess: async ({ clash }) => {
      if (clash !== null) return
      await refreshAmendment(client, amendment.id)
      onClose()
    },
  })
  const clash = save.data?.clash ?? null
  const raced = save.error instanceof ApiError && save.error.problem.status === 412
  const submit = (event: FormEvent) => {
    event.preventDefault()
    save.mutate()
  }
  return (
    <form onSubmit={submit} className="max-w-3xl space-y-3 pb-5" aria-label="Title and note">
      {clash ? (
        <Notice tone="warn" role="alert" title="Someone changed these meanwhile">
          <p>Theirs: <b className="font-medium">{clash.title}</b>{clash.note ? <>; {clash.note}</> : null}. Yours is below, not written yet.</p>
          <p className="flex flex-wrap gap-2 pt-1">
            <button type="button" className="btn btn-small" onClick={() => { setBegan(clash); save.reset() }}>Keep mine in the form</button>
            <button type="button" className="btn btn-small" onClick={() => { setBegan(clash); setTitle(clash.title); setNote(clash.note); save.reset() }}>Take theirs</button>
          </p>
        </Notice>
      ) : raced ? <Notice tone="warn" role="alert" title="It was edited at the same moment"><p>Nothing was written. Save again.</p></Notice> : save.error ? <ProblemView error={save.error} heading="h3" /> : null}
      <div>
        <label htmlFor={ids.title} className="label">Title</label>
        <input id={ids.title} className="input" required maxLength={200} value={title} onChange={(event) => setTitle(event.target.value)} autoFocus />
      </div>
      <div>
        <label htmlFor={ids.note} className="label">Note</label>
        <textarea id={ids.note} className="input" rows={3} maxLength={10_000} value={note} onChange={(event) => setNote(event.target.value)} />
      </div>
      <div className="flex gap-2">
        <button type="submit" className="btn btn-lamp" disabled={save.isPending || clash !== null || title.trim() === ''}>Save</button>
        <button type="button" className="btn" onClick={onClose}>Cancel</button>
      </div>
    </form>
  )
}
