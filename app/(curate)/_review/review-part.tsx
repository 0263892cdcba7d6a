'use client'
import { useQuery } from '@tanstack/react-query'
import { Printer } from 'lucide-react'
import { useEffect, useMemo, useState } from 'react'
import type { AmendmentDetail, Comment } from '@/openapi/schemas/amendment'
import type { AmendmentChange, Consequences } from '@/openapi/schemas/change'
import { apiQuery } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { EmptyState } from '../../_components/empty-state'
import { Notice } from '../../_components/notice'
import { count, plural } from '../../_components/number'
import { Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import { Skeleton, TableSkeleton } from '../../_components/skeleton'
import { Actions } from '../_amendment/actions'
import { ConsequencesView } from '../_parts/consequences'
import { type SheetRoom, useSheetView } from '../_sheet/use-sheet'
import { ChangeView } from './change-view'
import { Threads } from './comment-threads'
import { threadsAbout, threadsOf } from './threads'

const AT_ONCE = 50
const ORDER: Record<AmendmentChange['kind'], number> = { source: 0, species: 1, isotope: 2, level: 3, hyperfine: 4 }
const byName = new Intl.Collator('en', { numeric: true })

function ConsequencesPart({ amendment }: { amendment: AmendmentDetail }) {
  const { data, error, isPending, refetch } = useQuery({ ...apiQuery<Consequences>(`/amendments/${amendment.id}/consequences`), staleTime: 0 })
  return (
    <Part title="Consequences of all of it">
      {isPending ? <Skeleton label="Working out the consequences" className="h-32 w-full" /> : error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" />
        : <ConsequencesView consequences={data.data} caption="Lines that the amendment moves" />}
    </Part>
  )
}

const OUTCOME = { accepted: 'accepted', returned: 'returned', withdrawn: 'withdrawn', edited: 'made void by a later edit' } as const

function Reviews({ amendment }: { amendment: AmendmentDetail }) {
  if (amendment.reviews.length === 0) return null
  return (
    <Part title="Reviews">
      <ol className="max-w-3xl space-y-2 text-sm">
        {amendment.reviews.map((review) => (
          <li key={review.id} className="border-b border-rule pb-2">
            <p><span className="font-medium">{review.asked_by.name}</span> asked on {moment(review.asked_at)} for version {review.version}{review.comment ? <>: “{review.comment}”</> : '.'}</p>
            <p className="text-muted">
              {review.outcome === null ? 'Open.' : <>{review.outcome === 'edited' ? 'It was ' : ''}{OUTCOME[review.outcome]} by {review.closed_by?.name ?? 'someone'}{review.closed_at ? `, ${moment(review.closed_at)}` : ''}{review.closing_comment ? <>: “<span className="text-ink">{review.closing_comment}</span>”</> : '.'}</>}{review.voided ? ` ${review.voided.by.name} edited it afterwards, ${moment(review.voided.at)}: the acceptance no longer holds.` : ''}
            </p>
          </li>
        ))}
      </ol>
    </Part>
  )
}

/** All of the amendment as a reviewer reads it: each change, what follows from them together, and what people say. */
export function ReviewPart({ amendment, room, onDone }: { amendment: AmendmentDetail; room: SheetRoom; onDone: (text: string) => void }) {
  const { id } = amendment
  const { reload } = room
  const view = useSheetView(room.sheet)
  const [shown, setShown] = useState(AT_ONCE)
  // what colleagues wrote meanwhile belongs to what is reviewed
  useEffect(() => void reload(), [reload])
  const { data: comments, error } = useQuery({ ...apiQuery<Comment[]>(`/amendments/${id}/comments`, { limit: 1000 }), staleTime: 0, refetchOnWindowFocus: true })
  const threads = useMemo(() => threadsOf(comments?.data ?? []), [comments])
  const changes = useMemo(() => [...view.rows.values()].flatMap((row) => row.server ?? []).sort((a, b) => ORDER[a.kind] - ORDER[b.kind] || byName.compare(a.subject, b.subject)), [view.rows])
  const unsaved = [...view.rows.values()].filter((row) => row.save === 'failed' || row.save === 'conflict').length
  const known = new Set(changes.map((change) => change.id))
  if (room.loading) return <TableSkeleton rows={6} columns={3} label="Loading the changes" />
  if (room.error) return <ProblemView error={room.error} onRetry={() => void room.reload()} />
  if (changes.length === 0) return <EmptyState title="Nothing to review yet"><p>This amendment holds no change. They are made in the table or by an import.</p></EmptyState>
  return (
    <div>
      {unsaved > 0 ? <div className="mb-4"><Notice tone="warn" title={`${plural(unsaved, 'row')} of yours could not be saved`}><p>What is shown here is what the server holds. The table says what to do.</p></Notice></div> : null}
      <div className="mb-1 flex flex-wrap items-center justify-between gap-3">
        <h2>{plural(changes.length, 'change')}</h2>
        <button type="button" className="btn btn-small no-print" onClick={() => { setShown(changes.length); setTimeout(() => window.print(), 50) }}><Printer size={14} aria-hidden="true" />Print</button>
      </div>
      <ol className="border-t border-rule-strong">
        {changes.slice(0, shown).map((change) => <ChangeView key={change.id} amendment={id} change={change} threads={threadsAbout(threads, change.id)} />)}
      </ol>
      {changes.length > shown ? <p className="mt-3 flex flex-wrap items-center gap-3"><button type="button" className="btn" onClick={() => setShown(shown + AT_ONCE)}>Show {Math.min(AT_ONCE, changes.length - shown)} more</button><span className="note">{count(shown)} of {count(changes.length)} shown</span></p> : null}
      <ConsequencesPart amendment={amendment} />
      <Part title="Comments on the whole">
        {error ? <ProblemView error={error} heading="h3" /> : <Threads amendment={id} threads={threads.filter((thread) => thread.first.change === null || !known.has(thread.first.change))} about="the amendment" />}
      </Part>
      <Reviews amendment={amendment} />
      <div className="no-print"><Part title="Your decision"><Actions amendment={amendment} room={room} onDone={onDone} /></Part></div>
    </div>
  )
}
