'use client'
import { useQuery } from '@tanstack/react-query'
import { Square } from 'lucide-react'
import { useQueryState } from 'nuqs'
import { useState } from 'react'
import type { Import, ImportColumn } from '@/openapi/schemas/import'
import { apiQuery } from '../../_components/data/api'
import { moment } from '../../_components/day'
import { Notice } from '../../_components/notice'
import { count } from '../../_components/number'
import { Part } from '../../_components/page-head'
import { ProblemView } from '../../_components/problem-view'
import type { SheetRoom } from '../_sheet/use-sheet'
import { FileDrop } from './file-drop'
import { ImportColumns } from './import-columns'
import { ImportReport } from './import-report'
import { AS_FOUND, bytesText, progressOf, type Reading, wantsMapping } from './mapping'
import { MappingForm } from './mapping-form'
import { type ImportControl, useImport } from './use-import'

function Progress({ control, sending }: { control: ImportControl; sending: boolean }) {
  const { now, stop } = control
  const share = now === null ? null : progressOf(now)
  const doing = now === null || sending ? 'Sending the file' : now.dry_run ? 'Reading and checking the rows' : 'Importing the rows'
  return (
    <div className="max-w-3xl space-y-2" role="group" aria-label="Progress">
      <p role="status" className="text-sm">{doing}{now === null || now.rows_total === 0 ? '' : `: ${count(now.rows_done)} of ${count(now.rows_total)}`}</p>
      <div role="progressbar" aria-label={doing} aria-valuemin={0} aria-valuemax={100} aria-valuenow={share === null ? undefined : Math.round(100 * share)} className="h-2.5 border border-rule-strong bg-well">
        {share === null ? <div className="skeleton h-full" /> : <div className="h-full bg-lamp transition-[width]" style={{ width: `${100 * share}%` }} />}
      </div>
      {now !== null ? <button type="button" className="btn btn-small" disabled={stop.isPending || stop.isSuccess} onClick={() => stop.mutate()}><Square size={12} aria-hidden="true" />{stop.isSuccess ? 'Stopping' : 'Stop'}</button> : null}
    </div>
  )
}

const TONE = { done: 'good', refused: 'warn', stopped: 'info', failed: 'bad', interrupted: 'bad', running: 'info' } as const
const TITLE: Record<Import['state'], (shown: Import) => string> = {
  done: ({ dry_run: dry, counts }) => (counts.new + counts.changed === 0 ? (dry ? 'This file would change nothing' : 'Nothing changed') : dry ? 'The file can be imported; nothing is written yet' : 'Imported'),
  refused: () => 'The file cannot be imported as it is; nothing was written',
  stopped: () => 'Stopped; nothing was written', failed: () => 'It failed; nothing was written', interrupted: () => 'The server stopped in the middle; nothing was written', running: () => '',
}

function Outcome({ shown, room }: { shown: Import; room: SheetRoom }) {
  const [, setPart] = useQueryState('part')
  const { saver } = room
  if (wantsMapping(shown)) {
    // unknown headers are named in the form below
    const others = shown.problems.filter(({ code }) => code !== 'column_unknown')
    return (
      <Notice tone="warn" role="status" title="Say what the columns are">
        <p>Not all headers of this file are ours. What they look like is chosen below: please check it. Nothing is written yet.</p>
        {others.length > 0 ? <ul className="list-disc space-y-1 pl-5">{others.slice(0, 20).map((problem, index) => <li key={index}>{problem.detail}</li>)}</ul> : null}
      </Notice>
    )
  }
  return (
    <Notice tone={TONE[shown.state]} role="status" title={TITLE[shown.state](shown)}>
      <p>{shown.summary}</p>
      {shown.problems.length > 0 ? <ul className="list-disc space-y-1 pl-5">{shown.problems.slice(0, 20).map((problem, index) => <li key={index}>{problem.detail}</li>)}</ul> : null}
      {shown.state === 'done' && !shown.dry_run && shown.counts.new + shown.counts.changed > 0 ? <p><button type="button" className="btn btn-small mt-1" onClick={() => { void saver.now(); void setPart(null) }}>See them in the table</button></p> : null}
    </Notice>
  )
}

function Earlier({ amendment }: { amendment: string }) {
  const { data } = useQuery({ ...apiQuery<Import[]>(`/amendments/${amendment}/imports`, { limit: 20 }), staleTime: 0 })
  if (data === undefined || data.data.length === 0) return null
  return (
    <Part title="Files read before">
      <ul className="max-w-4xl border-t border-rule text-sm">
        {data.data.map((one) => (
          <li key={one.id} className="flex flex-wrap items-baseline gap-x-5 gap-y-1 border-b border-rule py-2">
            <span className="font-medium [overflow-wrap:anywhere]">{one.file_name}</span>
            <span className="note">{moment(one.created_at)}, {one.author.name}, {bytesText(one.bytes)}</span>
            <span className="basis-full text-muted">{one.dry_run ? 'Only read. ' : ''}{one.summary}</span>
          </li>
        ))}
      </ul>
    </Part>
  )
}

/** A file into the amendment: read and reported row by row first, written only when that is asked for. */
export function ImportPart({ amendment, room, canEdit }: { amendment: string; room: SheetRoom; canEdit: boolean }) {
  const control = useImport(amendment, room)
  const { now, send, error, clear } = control
  const { data: columns } = useQuery(apiQuery<ImportColumn[]>('/import-columns', { limit: 1000 }))
  const [file, setFile] = useState<File | null>(null)
  const [reading, setReading] = useState<Reading>(AS_FOUND)
  const busy = send.isPending || now?.state === 'running'
  const read = (given: File, how: Reading, dryRun: boolean) => {
    setReading(how)
    send.mutate({ file: given, reading: how, dryRun })
  }
  const ready = now !== null && now.dry_run && now.state === 'done' && now.counts.new + now.counts.changed > 0
  const mapping = now !== null && now.dry_run && !busy && now.reading !== null && columns !== undefined && file !== null ? (
    <MappingForm key={now.id} found={now.reading} reading={reading} columns={columns.data} busy={busy} onRead={(how) => read(file, how, true)} />
  ) : null
  return (
    <div className="space-y-5">
      {canEdit && !busy ? <FileDrop disabled={busy} onFile={(chosen) => { setFile(chosen); clear(); read(chosen, AS_FOUND, true) }} /> : null}
      {file !== null ? <p className="flex flex-wrap items-baseline gap-x-3"><span className="font-medium [overflow-wrap:anywhere]">{file.name}</span><span className="note">{bytesText(file.size)}</span></p> : null}
      {busy ? <Progress control={control} sending={send.isPending} /> : null}
      {error ? <ProblemView error={error} onRetry={file === null ? undefined : () => read(file, reading, true)} heading="h3" /> : null}
      {now !== null && !busy ? <Outcome shown={now} room={room} /> : null}
      {mapping !== null && now !== null ? (
        wantsMapping(now) ? <section><h2 className="mb-3">What the columns are</h2>{mapping}</section> : (
          <details className="group border-y border-rule py-2">
            <summary className="min-h-8 list-none content-center"><span aria-hidden="true" className="mr-2 inline-block text-lamp-ink transition-transform group-open:rotate-90">▸</span>How the file was read: {now.reading?.columns.filter((column) => column.field !== null).length} of {now.reading?.columns.length} columns</summary>
            <div className="pt-3">{mapping}</div>
          </details>
        )
      ) : null}
      {now !== null && !busy && !wantsMapping(now) ? <ImportReport key={now.id} shown={now} /> : null}
      {ready && canEdit && !busy && file !== null ? (
        <div className="sticky bottom-0 z-10 flex flex-wrap items-center gap-4 border-t border-rule-strong bg-paper py-3">
          <button type="button" className="btn btn-lamp" onClick={() => read(file, reading, false)}>Import these {count(now.counts.new + now.counts.changed)} rows</button>
          <span className="note">{count(now.counts.new)} new, {count(now.counts.changed)} changed; all of them or none.</span>
        </div>
      ) : null}
      <Earlier amendment={amendment} />
      {columns ? <ImportColumns columns={columns.data} /> : null}
    </div>
  )
}
