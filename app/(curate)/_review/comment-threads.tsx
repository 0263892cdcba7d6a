'use client'
import { useMutation, useQueryClient } from '@tanstack/react-query'
import { MessageSquarePlus } from 'lucide-react'
import { useId, useState, type FormEvent } from 'react'
import type { Comment, NewComment } from '@/openapi/schemas/amendment'
import { apiSend } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { ProblemView } from '../../_components/problem-view'
import { refreshAmendment } from '../_sheet/use-sheet'
import type { Thread } from './threads'

function CommentForm({ amendment, change, thread, label, onDone }: { amendment: string; change?: string; thread?: string; label: string; onDone: () => void }) {
  const client = useQueryClient()
  const id = useId()
  const [text, setText] = useState('')
  const send = useMutation({
    mutationFn: (given: NewComment) => apiSend<Comment>('POST', `/amendments/${amendment}/comments`, given),
    onSuccess: async () => {
      await refreshAmendment(client, amendment)
      setText('')
      onDone()
    },
  })
  const submit = (event: FormEvent) => {
    event.preventDefault()
    if (text.trim() !== '') send.mutate({ text: text.trim(), change, thread })
  }
  return (
    <form onSubmit={submit} className="no-print max-w-2xl space-y-2" aria-label={label}>
      <label htmlFor={id} className="label">{label}</label>
      <textarea id={id} rows={2} className="input" maxLength={10_000} value={text} onChange={(event) => setText(event.target.value)} autoFocus />
      {send.error ? <ProblemView error={send.error} heading="h3" /> : null}
      <div className="flex gap-2">
        <button type="submit" className="btn btn-small" disabled={send.isPending || text.trim() === ''}>{thread === undefined ? 'Comment' : 'Answer'}</button>
        <button type="button" className="btn btn-quiet btn-small" onClick={onDone}>Cancel</button>
      </div>
    </form>
  )
}

function One({ comment }: { comment: Comment }) {
  return (
    <div>
      <p className="note"><span className="font-medium text-ink">{comment.author.name}</span>, <time dateTime={comment.created_at}>{moment(comment.created_at)}</time></p>
      <p className="whitespace-pre-line [overflow-wrap:anywhere]">{comment.text}</p>
    </div>
  )
}

function ThreadView({ amendment, thread }: { amendment: string; thread: Thread }) {
  const client = useQueryClient()
  const [answering, setAnswering] = useState(false)
  const { first, answers, open } = thread
  const resolve = useMutation({
    mutationFn: (given: { resolved: boolean }) => apiSend<Comment>('PATCH', `/amendments/${amendment}/comments/${first.id}`, given, { 'if-match': first.etag }),
    // where somebody else was first, what they did is shown
    onSettled: () => refreshAmendment(client, amendment),
  })
  const body = (
    <div className="space-y-2">
      <One comment={first} />
      {answers.map((answer) => <div key={answer.id} className="pl-4"><One comment={answer} /></div>)}
    </div>
  )
  const short = first.text.length > 60 ? `${first.text.slice(0, 60)}…` : first.text
  return (
    <li className={`border-l-2 py-1 pl-3 text-sm ${open ? 'border-l-lamp' : 'border-l-rule'}`}>
      {open ? body : (
        <details>
          <summary className="note list-item! min-h-6 cursor-pointer">Resolved by {first.resolved_by?.name ?? 'someone'}: “{short}”</summary>
          <div className="mt-2">{body}</div>
        </details>
      )}
      {resolve.error ? <div className="mt-2"><ProblemView error={resolve.error} heading="h3" /></div> : null}
      {answering ? <div className="mt-2"><CommentForm amendment={amendment} change={first.change ?? undefined} thread={first.id} label={`Answer to ${first.author.name}`} onDone={() => setAnswering(false)} /></div> : (
        <div className="no-print mt-1.5 flex gap-2">
          <button type="button" className="btn btn-quiet btn-small -ml-2" onClick={() => setAnswering(true)}>Answer</button>
          <button type="button" className="btn btn-quiet btn-small" disabled={resolve.isPending} onClick={() => resolve.mutate({ resolved: open })}>{open ? 'Resolve' : 'Open again'}</button>
        </div>
      )}
    </li>
  )
}

/** Threads about one thing, and the way to begin another. */
export function Threads({ amendment, change, threads, about }: { amendment: string; change?: string; threads: readonly Thread[]; about: string }) {
  const [writing, setWriting] = useState(false)
  return (
    <div className="space-y-3">
      {threads.length > 0 ? <ul className="space-y-3" aria-label={`Comments on ${about}`}>{threads.map((thread) => <ThreadView key={thread.first.id} amendment={amendment} thread={thread} />)}</ul> : null}
      {writing ? <CommentForm amendment={amendment} change={change} label={`Comment on ${about}`} onDone={() => setWriting(false)} /> : (
        <button type="button" className="btn btn-quiet btn-small no-print -ml-2" aria-label={`Comment on ${about}`} onClick={() => setWriting(true)}><MessageSquarePlus size={14} aria-hidden="true" />Comment</button>
      )}
    </div>
  )
}
