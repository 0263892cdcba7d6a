'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { useId, useState, type FormEvent } from 'react'
import type { AmendmentDetail } from '@/openapi/schemas/amendment'
import { ApiError, apiGet, apiSend, problemOf } from '../../_components/data/api'
import { plural } from '../../_components/number'
import { Notice } from '../../_components/notice'
import { ProblemView } from '../../_components/problem-view'
import { Dialog } from '../_parts/dialog'
import type { SheetRoom } from '../_sheet/use-sheet'
import { refreshAmendment } from '../_sheet/use-sheet'
import { amendmentPath } from './use-amendment'

type Act = 'submit' | 'accept' | 'return' | 'withdraw'
const ACTS: Record<Act, { label: string; title: string; tells: string; comment: string; done: string }> = {
  submit: { label: 'Ask for review', title: 'Ask a colleague for review', tells: 'Colleagues who may accept it are told. Any later edit makes it a draft again.', comment: 'What the reviewer should know', done: 'Asked for review.' },
  accept: { label: 'Accept', title: 'Accept this amendment', tells: 'It then waits for the next edition. Acceptance holds for the version that you see here; a later edit makes it void.', comment: 'Comment, if any', done: 'Accepted.' },
  return: { label: 'Return', title: 'Return this amendment to its authors', tells: 'It becomes a draft again, with your comment.', comment: 'What is to be put right', done: 'Returned to its authors.' },
  withdraw: { label: 'Withdraw', title: 'Withdraw this amendment', tells: 'That ends it: it stays to be read, and cannot be taken up again.', comment: 'Why, if you like', done: 'Withdrawn.' },
}
/** What can come next in each state; other acts are not shown at all. */
const SHOWN: Record<AmendmentDetail['state'], readonly Act[]> = {
  draft: ['submit', 'withdraw'], in_review: ['accept', 'return', 'withdraw'], accepted: ['return', 'withdraw'], published: [], withdrawn: [],
}

function ActDialog({ act, amendment, room, onClose, onDone }: { act: Act; amendment: AmendmentDetail; room: SheetRoom; onClose: () => void; onDone: (text: string) => void }) {
  const client = useQueryClient()
  const id = useId()
  const [missing, setMissing] = useState(false)
  const [seen, setSeen] = useState(amendment)
  const words = ACTS[act]
  const wants = act === 'return' || (act === 'submit' && seen.counts.uncommented > 0)
  const send = useMutation({
    mutationFn: async (comment: string) => {
      let current = seen
      if (act === 'submit') {
        // one's own last letters first: they are part of what is asked about
        await room.saver.now()
        current = (await apiGet<AmendmentDetail>(amendmentPath(amendment.id))).data
      }
      return apiSend<AmendmentDetail>('POST', `${amendmentPath(amendment.id)}/${act}`, comment === '' ? {} : { comment }, { 'if-match': current.etag })
    },
    onSuccess: async () => {
      await refreshAmendment(client, amendment.id)
      onDone(words.done)
    },
  })
  const stale = send.error instanceof ApiError && send.error.problem.status === 412
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const comment = String(new FormData(event.currentTarget).get('comment') ?? '').trim()
    setMissing(wants && comment === '')
    if (!(wants && comment === '')) send.mutate(comment)
  }
  const readAgain = async () => {
    await room.reload()
    setSeen((await apiGet<AmendmentDetail>(amendmentPath(amendment.id))).data)
    await refreshAmendment(client, amendment.id)
    send.reset()
  }
  return (
    <Dialog title={words.title} onClose={onClose}>
      <form onSubmit={submit} className="space-y-4" noValidate>
        <p className="note">{words.tells}</p>
        {act === 'submit' && seen.counts.uncommented > 0 ? <Notice tone="warn" title={`${plural(seen.counts.uncommented, 'change')} with warnings and no comment`}><p>Say here why they are no ground to hold the amendment back.</p></Notice> : null}
        {stale ? (
          <Notice tone="warn" role="alert" title="It was edited meanwhile">
            <p>What you saw is not what it holds now. Nothing was done.</p>
            <p><button type="button" className="btn btn-small mt-1" onClick={() => void readAgain()}>Read it again</button></p>
          </Notice>
        ) : send.error ? <ProblemView problem={problemOf(send.error)} heading="h3" /> : null}
        <div>
          <label htmlFor={id} className="label">{words.comment}</label>
          <textarea id={id} name="comment" rows={4} maxLength={10_000} className="input" aria-invalid={missing || undefined} aria-describedby={missing ? `${id}-missing` : undefined} />
          {missing ? <p id={`${id}-missing`} className="mt-1 text-sm text-bad">{act === 'return' ? 'Say what is to be put right.' : 'The warnings want a comment.'}</p> : null}
        </div>
        <div className="flex gap-2">
          <button type="submit" className="btn btn-lamp" disabled={send.isPending || stale}>{words.label}</button>
          <button type="button" className="btn" onClick={onClose}>Cancel</button>
        </div>
      </form>
    </Dialog>
  )
}

/** What may be done with the amendment now. An act that may not says why beside it. */
export function Actions({ amendment, room, onDone }: { amendment: AmendmentDetail; room: SheetRoom; onDone: (text: string) => void }) {
  const [act, setAct] = useState<Act | null>(null)
  const id = useId()
  const acts = SHOWN[amendment.state]
  const refused = acts.filter((one) => !amendment.possible[one].allowed && amendment.possible[one].reason !== null)
  if (acts.length === 0) return null
  return (
    <div className="no-print min-w-0">
      <div role="group" aria-label="What to do with it" className="flex flex-wrap gap-2">
        {acts.map((one, index) => {
          const { allowed } = amendment.possible[one]
          return <button key={one} type="button" disabled={!allowed} aria-describedby={allowed ? undefined : `${id}-${one}`} className={`btn ${index === 0 && allowed ? 'btn-lamp' : ''}`} onClick={() => setAct(one)}>{ACTS[one].label}</button>
        })}
      </div>
      {refused.length > 0 ? (
        <ul className="note mt-1.5 max-w-md">
          {refused.map((one) => <li key={one} id={`${id}-${one}`}><span className="font-medium">{ACTS[one].label}</span> is not possible: {amendment.possible[one].reason}</li>)}
        </ul>
      ) : null}
      {act !== null ? <ActDialog act={act} amendment={amendment} room={room} onClose={() => setAct(null)} onDone={(text) => { setAct(null); onDone(text) }} /> : null}
    </div>
  )
}
