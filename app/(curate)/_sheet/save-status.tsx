'use client'
import { CloudAlert, CloudCheck, CloudUpload, GitCompareArrows } from 'lucide-react'
import { plural } from '../../_components/number'
import type { Saver } from './saver'
import type { SheetView } from './sheet'

/** Whether the server holds what is shown; where not, what is safe and what to do. */
export function SaveStatus({ view, saver, onConflict }: { view: SheetView; saver: Saver; onConflict: () => void }) {
  const count = { waiting: 0, saving: 0, failed: 0, conflict: 0, saved: 0 }
  for (const row of view.rows.values()) count[row.save] += 1
  const busy = count.waiting + count.saving
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-1 text-sm" data-saved={busy + count.failed + count.conflict === 0}>
      {busy > 0 ? <span className="inline-flex items-center gap-1.5 text-muted"><CloudUpload size={15} aria-hidden="true" />Saving</span> : count.failed + count.conflict === 0 ? <span className="inline-flex items-center gap-1.5 text-good"><CloudCheck size={15} aria-hidden="true" />Saved</span> : null}
      <span role="status" className="contents">
        {count.failed > 0 ? (
          <span className="inline-flex flex-wrap items-center gap-1.5 text-bad">
            <CloudAlert size={15} aria-hidden="true" />Could not save {plural(count.failed, 'row')}, kept here
            <button type="button" className="btn btn-small" onClick={() => void saver.retry()}>Try now</button>
          </span>
        ) : null}
        {count.conflict > 0 ? (
          <span className="inline-flex flex-wrap items-center gap-1.5 text-bad">
            <GitCompareArrows size={15} aria-hidden="true" />{count.conflict === 1 ? 'One row was written by someone else first' : `${count.conflict} rows were written by someone else first`}
            <button type="button" className="btn btn-small" onClick={onConflict}>Look at both versions</button>
          </span>
        ) : null}
      </span>
    </div>
  )
}
