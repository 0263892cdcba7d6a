'use client'
import { PencilLine } from 'lucide-react'
import Link from 'next/link'
import { parseAsStringLiteral, useQueryState } from 'nuqs'
import { useState } from 'react'
import type { AmendmentDetail } from '@/openapi/schemas/amendment'
import { moment } from '../../_components/day'
import { Notice } from '../../_components/notice'
import { plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { RequestPanel } from '../../_components/request-panel'
import { Skeleton } from '../../_components/skeleton'
import { ImportPart } from '../_import/import-part'
import { OtherPart } from '../_other/other-part'
import { StateMark, Tally } from '../_parts/marks'
import { ReviewPart } from '../_review/review-part'
import { TablePart } from '../_sheet/table-part'
import { type SheetRoom, useSheet } from '../_sheet/use-sheet'
import { Actions } from './actions'
import { TitleForm } from './title-form'
import { amendmentPath, isReturned, useAmendment } from './use-amendment'

const PARTS = ['table', 'review', 'import'] as const
const PART_NAMES = { table: 'Table', review: 'Review', import: 'Import' } as const
const PART_REQUESTS = { table: '/changes', review: '/consequences', import: '/imports' } as const

/** Who did what last, in a sentence. */
function reviewText({ review, published_in: edition }: AmendmentDetail): string | null {
  if (edition !== null) return `Published in edition ${edition}.`
  if (review === null) return null
  if (review.outcome === null) return `${review.asked_by.name} asked for review on ${moment(review.asked_at)}.`
  if (review.voided !== null) return `${review.voided.by.name} edited it on ${moment(review.voided.at)}, after ${review.closed_by?.name ?? 'someone'} had accepted it, so it is a draft again.`
  const who = review.closed_by?.name ?? 'Someone'
  const when = review.closed_at ? ` on ${moment(review.closed_at)}` : ''
  const did = { accepted: 'accepted it', returned: 'returned it', withdrawn: 'withdrew it', edited: 'edited it after it was sent to review, so it is a draft again' }[review.outcome]
  return `${who} ${did}${when}.`
}

function Head({ amendment, room, onDone }: { amendment: AmendmentDetail; room: SheetRoom; onDone: (text: string) => void }) {
  const [editing, setEditing] = useState(false)
  const { counts, possible } = amendment
  const others = amendment.authors.filter((person) => person.id !== amendment.author.id)
  const told = reviewText(amendment)
  const comment = amendment.review?.closing_comment ?? (amendment.review?.outcome === null ? amendment.review.comment : '')
  return (
    <div className="page pt-7 sm:pt-9">
      <p className="note no-print mb-2"><Link className="link inline-flex min-h-6 items-center" href="/curate">Curate</Link></p>
      {editing ? <TitleForm amendment={amendment} room={room} onClose={() => setEditing(false)} /> : (
        <div className="flex flex-wrap items-start justify-between gap-x-10 gap-y-4 pb-4">
          <div className="min-w-0 max-w-3xl">
            <h1 className="text-[clamp(1.6rem,1.2rem+1.4vw,2.25rem)]">{amendment.title}
              {possible.edit.allowed ? <button type="button" className="btn btn-quiet btn-small no-print ml-2 min-h-8 min-w-8 align-middle" onClick={() => setEditing(true)} aria-label="Edit title and note"><PencilLine size={16} aria-hidden="true" /></button> : null}
            </h1>
            {amendment.note ? <p className="prose-text mt-2 whitespace-pre-line text-muted">{amendment.note}</p> : null}
          </div>
          <Actions amendment={amendment} room={room} onDone={onDone} />
        </div>
      )}
      <div className="flex flex-wrap items-center gap-x-6 gap-y-1.5 border-t border-rule-strong pt-2.5 text-sm">
        <StateMark state={amendment.state} returned={isReturned(amendment)} />
        <span>{plural(counts.changes, 'change')}</span>
        {counts.changes > 0 ? <Tally changes errors={counts.errors} warnings={counts.warnings} /> : null}
        <span className="text-muted">by {amendment.author.name}{others.length > 0 ? ` with ${others.map((person) => person.name).join(', ')}` : ''}</span>
      </div>
      {told ? <p className="note mt-1.5">{told}{comment ? <> “<span className="text-ink">{comment}</span>”</> : null}</p> : null}
    </div>
  )
}

/** An amendment: what it changes, what is said of it, and what may be done with it. */
export function AmendmentView({ id }: { id: string }) {
  const { data, error, isPending, refetch } = useAmendment(id)
  if (error && data === undefined) return <div className="page pt-9"><ProblemView error={error} onRetry={() => void refetch()} heading="h1" /></div>
  if (isPending || data === undefined) return <div className="page space-y-4 pt-9"><Skeleton label="Loading the amendment" className="h-10 max-w-xl" /><Skeleton label="Loading its changes" className="h-80 w-full" /></div>
  return <Loaded amendment={data.data} />
}

function Loaded({ amendment }: { amendment: AmendmentDetail }) {
  const { id, possible, state } = amendment
  const room = useSheet(id)
  const [part, setPart] = useQueryState('part', parseAsStringLiteral(PARTS).withDefault('table').withOptions({ history: 'push' }))
  const [unlocked, setUnlocked] = useState<string | null>(null)
  const [done, setDone] = useState('')
  // an amendment under review is not made a draft again by a slip of the hand
  const held = state === 'in_review' || state === 'accepted'
  const canEdit = possible.edit.allowed && (!held || unlocked === state)
  return (
    <>
      <Head amendment={amendment} room={room} onDone={(text) => { setDone(text); setUnlocked(null); void room.reload() }} />
      <div className="page">
        <div role="status" className={done === '' ? '' : 'pt-4'}>{done === '' ? null : <Notice tone="good" title={done} />}</div>
        <nav aria-label="Parts of the amendment" className="no-print mt-4 border-b border-rule-strong">
          <ul className="flex gap-1">
            {PARTS.map((one) => (
              <li key={one}>
                <a href={one === 'table' ? `/curate/${id}` : `/curate/${id}?part=${one}`} aria-current={part === one ? 'page' : undefined}
                  onClick={(event) => { if (event.metaKey || event.ctrlKey) return; event.preventDefault(); void room.saver.now(); void setPart(one === 'table' ? null : one) }}
                  className={`inline-flex min-h-9 items-center gap-1.5 border-b-2 px-3 ${part === one ? 'border-lamp font-medium text-ink' : 'border-transparent text-muted hover:border-rule-strong hover:text-ink'}`}>
                  {PART_NAMES[one]}
                  {one === 'review' && amendment.counts.open_comments > 0 ? <span className="num text-xs text-muted">{amendment.counts.open_comments}<span className="sr-only"> open threads</span></span> : null}
                </a>
              </li>
            ))}
          </ul>
        </nav>
        {part !== 'review' && !possible.edit.allowed ? <div className="pt-4"><Notice title="Read only"><p>{possible.edit.reason ?? 'It cannot be edited any more.'}</p></Notice></div> : null}
        {part !== 'review' && possible.edit.allowed && held && !canEdit ? (
          <div className="pt-4">
            <Notice title={state === 'in_review' ? 'This amendment is in review' : 'This amendment is accepted'}>
              <p>Any edit makes it a draft again, and it must be reviewed anew.</p>
              <p><button type="button" className="btn btn-small mt-1" onClick={() => setUnlocked(state)}>Edit it all the same</button></p>
            </Notice>
          </div>
        ) : null}
      </div>
      <div className={part === 'table' ? 'mx-(--gutter) pt-4' : 'page pt-4'}>
        {part === 'table' ? <TablePart amendment={id} room={room} canEdit={canEdit} /> : null}
        {part === 'review' ? <ReviewPart amendment={amendment} room={room} onDone={setDone} /> : null}
        {part === 'import' ? <ImportPart amendment={id} room={room} canEdit={canEdit} /> : null}
      </div>
      <div className="page">
        {part === 'table' ? <OtherPart amendment={id} room={room} canEdit={canEdit} /> : null}
        <RequestPanel path={`${amendmentPath(id)}${PART_REQUESTS[part]}`} unpinned />
      </div>
    </>
  )
}
