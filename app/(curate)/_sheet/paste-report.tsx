'use client'
import { useQuery } from '@tanstack/react-query'
import type { Decimal } from '@/lib/curation/import/decimal'
import type { CheckedChange } from '@/openapi/schemas/change'
import { apiSend } from '../../_components/data/api'
import { plural } from '../../_components/number'
import { ProblemView } from '../../_components/problem-view'
import { Skeleton } from '../../_components/skeleton'
import { Dialog } from '../_parts/dialog'
import { FindingsList, Mark, Tally } from '../_parts/marks'
import type { ChangeState } from './change-state'
import { checkItem, countFindings, findingsByColumn, type PastedRow, type PastePlan } from './paste'

export interface PasteProposal {
  id: number; plan: PastePlan; states: (ChangeState | null)[]; servers: ({ id: string; etag: string } | null)[]
  /** The same block read anew, its decimal mark told. */
  again: (decimal: Decimal) => void
}

const AT_ONCE = 500
const SHOWN = 300

/** Asks what each row would be, had it been written. Rows that go back to what is published need no check. */
async function check(amendment: string, { plan, states, servers }: PasteProposal): Promise<(CheckedChange | null)[]> {
  const asked = plan.rows.flatMap((row, index) => { const state = states[index]; return state ? [{ index, item: checkItem(row.target.subject, state, servers[index] ?? null) }] : [] })
  const found: (CheckedChange | null)[] = plan.rows.map(() => null)
  for (let from = 0; from < asked.length; from += AT_ONCE) {
    const part = asked.slice(from, from + AT_ONCE)
    const { data } = await apiSend<{ changes: CheckedChange[] }>('POST', `/amendments/${amendment}/changes/check`, { changes: part.map(({ item }) => item) })
    part.forEach(({ index }, place) => { found[index] = data.changes[place] ?? null })
  }
  return found
}

function Lines({ row, checked }: { row: PastedRow; checked: CheckedChange | null }) {
  const findings = findingsByColumn(checked?.findings ?? [])
  const told = new Set(row.cells.map((cell) => cell.column.id))
  const rest = [...findings].flatMap(([id, found]) => (told.has(id) ? [] : found))
  const height = row.cells.length + (rest.length > 0 ? 1 : 0)
  const head = <th scope="rowgroup" rowSpan={height} className="align-top"><code className="text-xs">{row.target.name}</code></th>
  return (
    <tbody className="border-b border-rule [&_td]:align-top">
      {row.cells.map((cell, index) => (
        <tr key={cell.column.id} className="border-b-0!">
          {index === 0 ? head : null}
          <td className="text-muted">{cell.column.label}</td>
          <td className="whitespace-normal! text-muted [overflow-wrap:anywhere]">{cell.before === '' ? 'empty' : <del className="no-underline">{cell.before}</del>}</td>
          <td className="whitespace-normal! [overflow-wrap:anywhere]">{cell.after === '' ? <span className="text-muted">empty</span> : <ins className="no-underline">{cell.after}</ins>}{cell.pasted === null ? null : <span className="block w-36 text-xs whitespace-normal text-muted">pasted as {cell.pasted}, the comma read as a decimal point</span>}</td>
          <td className="min-w-56 whitespace-normal!">{findings.has(cell.column.id) ? <FindingsList findings={findings.get(cell.column.id) ?? []} /> : null}</td>
        </tr>
      ))}
      {rest.length > 0 ? <tr className="border-b-0!"><td className="text-muted">The row</td><td /><td /><td className="min-w-56 whitespace-normal!"><FindingsList findings={rest} /></td></tr> : null}
    </tbody>
  )
}

/** Asks for what the block does not tell: nothing is read before. */
function Unclear({ number, onTell, onClose }: { number: string; onTell: (decimal: Decimal) => void; onClose: () => void }) {
  return (
    <Dialog title="What the commas of this block mean" onClose={onClose}>
      <div className="space-y-3">
        <p>The only numbers with a comma are like {number}: it could be the decimal mark or divide thousands. Say which it is; nothing is written yet.</p>
        <div className="flex flex-wrap gap-2">
          <button type="button" className="btn" onClick={() => onTell(',')}>Decimal mark: {number.replace(',', '.')}</button>
          <button type="button" className="btn" onClick={() => onTell('.')}>Thousands: {number.replace(',', '')}</button>
          <button type="button" className="btn btn-quiet" onClick={onClose}>Cancel</button>
        </div>
      </div>
    </Dialog>
  )
}

/** What pasting would do, cell by cell. Nothing is written before it is asked for here. */
export function PasteReport({ amendment, proposal, onWrite, onClose }: { amendment: string; proposal: PasteProposal; onWrite: () => void; onClose: () => void }) {
  const { plan } = proposal
  const { data, error, isPending, refetch } = useQuery({ queryKey: ['paste', amendment, proposal.id], queryFn: () => check(amendment, proposal), enabled: plan.rows.length > 0, gcTime: 0, retry: false })
  const checked = (data ?? []).filter((one) => one !== null)
  const commas = plan.rows.reduce((sum, row) => sum + row.cells.filter((cell) => cell.pasted !== null).length, 0)
  const [errors, warnings] = [countFindings(checked, 'error'), countFindings(checked, 'warning')]
  if (plan.unclear !== null) return <Unclear number={plan.unclear} onTell={proposal.again} onClose={onClose} />
  return (
    <Dialog title="Before this block is written" onClose={onClose} wide>
      <div className="space-y-3">
        <p>
          {plan.cells === 0 ? 'Nothing in this block differs from what is in the table.' : `${plural(plan.cells, 'cell')} in ${plural(plan.rows.length, 'row')} would change.`}
          {plan.same > 0 && plan.cells > 0 ? ` ${plural(plan.same, 'cell')} ${plan.same === 1 ? 'is' : 'are'} the same already.` : ''}
          {plan.headed ? ' The first row was read as headings.' : ''}
          {commas > 0 ? ` The block writes decimal commas: ${plural(commas, 'number')} ${commas === 1 ? 'is' : 'are'} read with a decimal point.` : ''} Nothing is written yet.
        </p>
        {plan.left.length > 0 ? <ul className="space-y-1 text-sm">{plan.left.map((text) => <li key={text} className="flex gap-2"><span className="mt-0.5"><Mark severity="warning" /></span>{text}</li>)}</ul> : null}
        {plan.rows.length === 0 ? null : error ? <ProblemView error={error} onRetry={() => void refetch()} heading="h3" /> : isPending ? <Skeleton label="Checking the block" className="h-28 w-full" /> : (
          <>
            <p role="status"><Tally errors={errors} warnings={warnings} clear="nothing was found wrong" /></p>
            <div className="max-h-[50dvh] overflow-auto border-y border-rule" tabIndex={0} role="region" aria-label="Cells that would change">
              <table className="ruled w-full">
                <caption className="sr-only">Cells that would change</caption>
                <thead><tr><th scope="col">Row</th><th scope="col">Column</th><th scope="col">Before</th><th scope="col">After</th><th scope="col">Findings</th></tr></thead>
                {plan.rows.slice(0, SHOWN).map((row, index) => <Lines key={index} row={row} checked={data[index] ?? null} />)}
              </table>
            </div>
            {plan.rows.length > SHOWN ? <p className="note">The first {SHOWN} of {plan.rows.length} rows are listed; the counts tell of all.</p> : null}
          </>
        )}
        {errors > 0 ? <p className="note">Rows with errors may be written all the same: they are kept as they are, and block submission until they are put right.</p> : null}
        <div className="flex flex-wrap gap-2">
          {plan.cells > 0 ? <button type="button" className="btn btn-lamp" disabled={isPending} onClick={onWrite}>{plan.cells === 1 ? 'Write this cell' : `Write these ${plan.cells} cells`}</button> : null}
          <button type="button" className="btn" onClick={onClose}>{plan.cells > 0 ? 'Cancel' : 'Close'}</button>
        </div>
      </div>
    </Dialog>
  )
}
