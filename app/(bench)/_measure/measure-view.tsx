'use client'
import { useMemo } from 'react'
import { EmptyState } from '@/app/_components/empty-state'
import { Notice } from '@/app/_components/notice'
import { PageHead } from '@/app/_components/page-head'
import { RequestPanel } from '@/app/_components/request-panel'
import { LineChooser } from './line-chooser'
import { EXAMPLE } from './example'
import { PositionsGrid } from './positions-grid'
import { PrintHead } from './print-head'
import { Result } from './result'
import { headerOf, MoreChoices, WhatIsSought, WhatWasMeasured } from './settings'
import { fitBody, writeRows } from './state'
import { useFit } from './use-fit'
import { useLines } from './use-lines'
import { useMeasurement } from './use-measurement'
import sheet from './measure.module.css'

/** From measured positions to the field: the measurement on the left, what follows from it on the right. */
export function MeasureView() {
  const { address, measured, change, setRows, show, fill } = useMeasurement()
  const lines = useLines(measured.lines)
  const { body, places, unread } = useMemo(() => fitBody(measured), [measured])
  const fit = useFit(body)
  const answer = fit.answer?.data
  const read = useMemo(() => new Map(answer?.status === 'determined' ? answer.residuals.map((row) => [places[row.measurement] ?? row.measurement, row]) : []), [answer, places])
  const chooseLines = (ids: string[]) => {
    // rows of a line that is gone are gone with it, and the others keep theirs
    const rows = measured.rows.flatMap((row) => {
      const line = ids.indexOf(measured.lines[row.line] ?? '')
      return line < 0 ? (measured.lines.length === 0 ? [row] : []) : [{ ...row, line }]
    })
    change({ lines: ids, p: writeRows(rows) })
  }
  const example = () => fill(EXAMPLE)

  return (
    <div className={`page pb-16 ${sheet.page}`}>
      <div className="no-print">
        <PageHead title="Measure B" aside={lines.length === 0 ? null : <button type="button" className="btn" onClick={example}>Show an example</button>}>
          The field from the measured positions of Zeeman components: one field for all lines, a free zero for each.
        </PageHead>
      </div>
      <PrintHead lines={lines} meta={fit.answer?.meta} address={address} />
      {address.invented ? (
        <div className="no-print mb-5">
          <Notice tone="warn" title="An example with invented data.">
            <p>These positions were made up for this page: sodium D2 at 0.8&#8239;T with noise. Nobody measured them.</p>
          </Notice>
        </div>
      ) : null}
      <div className="grid gap-x-10 gap-y-8 lg:grid-cols-[minmax(0,27rem)_minmax(0,1fr)] xl:grid-cols-[minmax(0,31rem)_minmax(0,1fr)] print:block">
        <section aria-label="The measurement" className="no-print min-w-0 space-y-5">
          <LineChooser lines={lines} onChange={chooseLines} />
          <WhatWasMeasured address={address} change={change} />
          <WhatIsSought address={address} change={change} />
          <PositionsGrid rows={measured.rows} onChange={setRows} lines={lines} header={headerOf(address)} byHand={address.unknown === 'g'} read={read} disabled={false} />
          {unread.length > 0 ? <p className="note text-warn">{unread.length === 1 ? `Row ${(unread[0] ?? 0) + 1} holds no number yet and is` : `Rows ${unread.map((place) => place + 1).join(', ')} hold no number yet and are`} left out.</p> : null}
          <MoreChoices address={address} change={change} lineCount={lines.length} />
        </section>
        <section aria-label="The result" className="min-w-0">
          {body === null ? (
            <EmptyState title={lines.length === 0 ? 'Choose a line to begin' : measured.unknown === 'g' && measured.field === '' ? 'Give the field' : 'Type or paste the measured positions'}>
              <p>
                {lines.length === 0
                  ? 'Search for the line that was measured; several lines of one field can be taken together.'
                  : 'The field follows as soon as there are enough of them: two components of one line that move differently.'}
              </p>
              {lines.length === 0 ? <p className="no-print mt-4"><button type="button" className="btn btn-lamp" onClick={example}>Show an example</button></p> : null}
            </EmptyState>
          ) : (
            <Result fit={fit} address={address} lines={lines} rows={measured.rows} places={places} onUnit={show} onRows={setRows} />
          )}
        </section>
      </div>
      {body === null ? null : <RequestPanel path="/field-fits" method="POST" body={body} />}
    </div>
  )
}
