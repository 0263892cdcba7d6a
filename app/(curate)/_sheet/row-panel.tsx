'use client'
import { keepPreviousData, useQuery } from '@tanstack/react-query'
import Link from 'next/link'
import { useId } from 'react'
import type { AmendmentChangeDetail } from '@/openapi/schemas/change'
import { apiGet } from '../../_components/data/api'
import { levelPage } from '../../_components/names'
import { Notice } from '../../_components/notice'
import { ProblemView } from '../../_components/problem-view'
import { Skeleton } from '../../_components/skeleton'
import { ConsequencesView } from '../_parts/consequences'
import { FindingsList } from '../_parts/marks'
import { Differences, differencesOf } from '../_parts/values-text'
import { subjectName } from './change-state'
import { fieldWords } from './columns'
import { MeasuredList } from './measured-list'
import { findingsOf } from './row-order'
import { isRetired, type SheetRow } from './sheet'
import type { SheetRoom } from './use-sheet'

interface PanelProps {
  amendment: string
  room: SheetRoom
  row: SheetRow | undefined
  canEdit: boolean
  onRetire: (row: SheetRow) => void
  onConflict: (row: SheetRow) => void
}

/** What follows from the change as it is stored. */
function Consequences({ amendment, row }: { amendment: string; row: SheetRow }) {
  const { server } = row
  const path = `/amendments/${amendment}/changes/${server?.id ?? ''}`
  const { data, error, refetch } = useQuery({
    queryKey: ['change', path, server?.etag], queryFn: ({ signal }) => apiGet<AmendmentChangeDetail>(path, undefined, signal), enabled: server !== null, placeholderData: keepPreviousData, retry: false,
  })
  if (server === null) return <p className="note">Consequences are worked out once the row is saved.</p>
  if (error) return error && 'problem' in error && (error as { problem: { status: number } }).problem.status === 404 ? null : <ProblemView error={error} onRetry={() => void refetch()} heading="h3" />
  if (data === undefined || data.data.id !== server.id) return <Skeleton label="Working out the consequences" className="h-24 w-full" />
  const { consequences } = data.data
  return consequences === null ? <p className="note">No consequences can be worked out while the values cannot be read.</p> : <ConsequencesView narrow consequences={consequences} caption={`Lines that ${subjectName(row.subject)} moves`} />
}

function Section({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <section className="border-t border-rule pt-3">
      <h3 className="mb-2 text-base">{title}</h3>
      {children}
    </section>
  )
}

/** Everything about the row in focus: findings and what is said of them, values before and after, which lines move. */
export function RowPanel({ amendment, room, row, canEdit, onRetire, onConflict }: PanelProps) {
  const { sheet, saver } = room
  const id = useId()
  if (row === undefined) {
    return <aside aria-label="The row in focus" className="border border-rule bg-paper p-4"><p className="note">Choose a cell: what is found about its row, what changes and which lines move will stand here.</p></aside>
  }
  const findings = findingsOf(row)
  const { wanted, server } = row
  const name = subjectName(row.subject)
  const say = (text: string) => {
    if (wanted === null) return
    sheet.set(new Map([[row.key, { ...wanted, comment: text === '' ? null : text }]]))
    saver.later()
  }
  const published = row.base !== null && row.subject.level !== null
  return (
    <aside aria-label={`The row in focus, ${name}`} className="space-y-4 border border-rule bg-paper p-4 xl:sticky xl:top-2 xl:max-h-[calc(100dvh-1rem)] xl:overflow-y-auto">
      <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-2">
        <h2 className="text-xl">{published ? <Link className="link" href={levelPage(row.subject.level ?? '')}>{name}</Link> : name}</h2>
        <span className="note">{wanted === null ? (row.base === null ? 'empty row' : 'as published') : isRetired(row) ? 'retired here' : row.base === null ? 'new level' : 'changed'}</span>
      </div>
      {row.save === 'conflict' ? (
        <Notice tone="bad" title="Someone else wrote this row first"><p>Both versions are kept.</p><p><button type="button" className="btn btn-small mt-1" onClick={() => onConflict(row)}>Look at both versions</button></p></Notice>
      ) : null}
      {row.save === 'failed' && row.problem ? <Notice tone="bad" title={row.problem.title}><p>{row.problem.detail}</p><p>What you typed is kept here. <button type="button" className="link" onClick={() => void saver.retry()}>Try again</button></p></Notice> : null}
      {findings.length > 0 ? (
        <Section title="Findings">
          <FindingsList findings={findings} name={(finding) => (finding.field === null ? null : fieldWords(finding.field))} />
          {canEdit && row.save === 'saved' && findings.some((finding) => finding.code === 'base_stale') ? (
            <p className="mt-2"><button type="button" className="btn btn-small" onClick={() => void saver.rebase(row.key)}>It holds beside the values of today</button></p>
          ) : null}
        </Section>
      ) : null}
      {wanted !== null && (findings.some((finding) => finding.severity === 'warning') || wanted.comment !== null) ? (
        <div>
          <label className="label" htmlFor={id}>Comment on the warnings</label>
          <textarea id={id} className="input min-h-16" rows={2} maxLength={2000} readOnly={!canEdit} value={wanted.comment ?? ''} onChange={(event) => say(event.target.value)} onBlur={() => void saver.now()}
            placeholder="Why they are no ground to hold the change back" />
        </div>
      ) : null}
      {isRetired(row) && wanted !== null ? (
        <Section title="Retired">
          <p className="text-sm">{wanted.reason}</p>
          <p className="note">{wanted.successor ? <>Its place is taken by <code>{wanted.successor}</code>.</> : 'Nothing takes its place.'}</p>
        </Section>
      ) : null}
      {wanted !== null && server !== null && !isRetired(row) ? (
        <Section title={row.base === null ? 'Values' : 'Before and after'}>
          <Differences fields={differencesOf(server)} fresh={row.base === null} caption={`What changes in ${name}`} />
        </Section>
      ) : null}
      {wanted !== null ? <Section title="Consequences"><Consequences amendment={amendment} row={row} /></Section> : null}
      {isRetired(row) ? null : <MeasuredList row={row} room={room} canEdit={canEdit} />}
      {canEdit ? (
        <div className="flex flex-wrap gap-2 border-t border-rule pt-3">
          {wanted !== null ? <button type="button" className="btn btn-small" onClick={() => { sheet.discard(row.key); void saver.now() }}>{row.base === null ? 'Take this level out' : 'Take this change out'}</button> : null}
          {published && !isRetired(row) ? <button type="button" className="btn btn-small" onClick={() => onRetire(row)}>Retire this level…</button> : null}
        </div>
      ) : null}
    </aside>
  )
}
