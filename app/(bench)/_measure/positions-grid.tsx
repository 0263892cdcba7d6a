'use client'
import { X } from 'lucide-react'
import { useId, useRef, useState, type ClipboardEvent, type KeyboardEvent } from 'react'
import { formatHalfUnicode } from '@/lib/atomic/half'
import type { FitResidual } from '@/openapi/schemas/field-fits'
import { PolarisationSign, polarisationName } from '@/app/_components/plots/polarisation'
import { isBlock, readBlock, readTyped, tidyNumber } from './pasted'
import { emptyRow, isEmpty, MOST_ROWS, type Row } from './state'
import type { ChosenLine } from './use-lines'

interface Props {
  rows: readonly Row[]
  onChange: (rows: Row[]) => void
  lines: readonly ChosenLine[]
  /** What the numbers are: `Position, nm`. */
  header: string
  /** g is sought: every component has to be named. */
  byHand: boolean
  /** Fitted reading by place, where there is one. */
  read: ReadonlyMap<number, FitResidual>
  disabled: boolean
}

const LEAST_ROWS = 3

/** `σ+ −1/2 → 1/2`, or how many components of which q. */
export function readingText(components: FitResidual['components']): string {
  const [only] = components
  if (!only) return 'nothing'
  if (components.length === 1) return `${polarisationName(only.q)} ${formatHalfUnicode(2 * only.m_lower)} → ${formatHalfUnicode(2 * only.m_upper)}`
  return `${components.length} of ${[...new Set(components.map((c) => polarisationName(c.q)))].join(', ')}`
}

function AssignmentSelect({ row, line, onChange, byHand, label, disabled }: { row: Row; line: ChosenLine | undefined; onChange: (assigned: string) => void; byHand: boolean; label: string; disabled: boolean }) {
  const components = line?.components ?? []
  const qs = [...new Set(components.map((c) => c.q))]
  return (
    <select className="input min-h-8! py-0! pl-2! text-sm!" aria-label={label} value={row.assigned} onChange={(event) => onChange(event.target.value)} disabled={disabled}>
      <option value="">{byHand ? 'choose' : 'found by the fit'}</option>
      {byHand ? null : (
        <>
          <optgroup label="Polarisation known">
            {qs.map((q) => <option key={q} value={`q${q}`}>any {polarisationName(q)}</option>)}
            {qs.includes(1) && qs.includes(-1) ? <option value="qs">σ, either sense</option> : null}
          </optgroup>
          <optgroup label="Unresolved group">
            {qs.map((q) => <option key={q} value={`g${q}`}>all {polarisationName(q)}</option>)}
          </optgroup>
        </>
      )}
      {qs.map((q) => (
        <optgroup key={q} label={`${polarisationName(q)}, m lower → m upper`}>
          {components.filter((c) => c.q === q).map((c) => (
            <option key={`${c.twoMLower}.${c.twoMUpper}`} value={`c${c.twoMLower}.${c.twoMUpper}`}>{`${polarisationName(q)} ${formatHalfUnicode(c.twoMLower)} → ${formatHalfUnicode(c.twoMUpper)}`}</option>
          ))}
        </optgroup>
      ))}
    </select>
  )
}

/** A small sheet for the measured numbers: type, or paste a column or two from a spreadsheet; Enter and the arrows move down and up. */
export function PositionsGrid({ rows, onChange, lines, header, byHand, read, disabled }: Props) {
  const id = useId()
  const table = useRef<HTMLTableElement>(null)
  const [said, setSaid] = useState('')
  const last = rows.findLastIndex((row) => !isEmpty(row) || row.assigned !== '')
  const shown = Array.from({ length: Math.min(MOST_ROWS, Math.max(LEAST_ROWS, last + 2)) }, (_, i) => rows[i] ?? emptyRow(rows[last]?.line ?? 0))
  const several = lines.length > 1

  const set = (place: number, next: Partial<Row>) => onChange(shown.map((row, i) => (i === place ? { ...row, ...next } : row)))
  const paste = (place: number, column: 'value' | 'unc') => (event: ClipboardEvent<HTMLInputElement>) => {
    const text = event.clipboardData.getData('text')
    if (!isBlock(text) && !/[(±]/.test(text)) return
    event.preventDefault()
    const block = readBlock(text)
    const next = [...shown]
    block.rows.slice(0, MOST_ROWS - place).forEach((given, i) => {
      const before = next[place + i] ?? emptyRow(shown[place]?.line ?? 0)
      next[place + i] = column === 'value' ? { ...before, value: given.value, unc: given.unc === '' ? before.unc : given.unc } : { ...before, unc: given.value }
    })
    onChange(next)
    setSaid(`${block.rows.length} ${block.rows.length === 1 ? 'row' : 'rows'} pasted${block.leftOut > 0 ? `; ${block.leftOut} without a number left out` : ''}.`)
  }
  const move = (place: number, column: string) => (event: KeyboardEvent<HTMLInputElement>) => {
    const down = event.key === 'Enter' || event.key === 'ArrowDown'
    if (!down && event.key !== 'ArrowUp') return
    event.preventDefault()
    table.current?.querySelector<HTMLInputElement>(`[data-cell="${column} ${place + (down ? 1 : -1)}"]`)?.focus()
  }
  const numberCell = (row: Row, place: number, column: 'value' | 'unc', name: string, width: string) => {
    const wrong = row[column] !== '' && readTyped(row[column]) === null
    return (
      <input className={`input num min-h-8! py-0! px-2! text-sm! ${width}`} aria-label={`${name} ${place + 1}`} inputMode="decimal" autoComplete="off" spellCheck={false} disabled={disabled}
        data-cell={`${column} ${place}`} value={row[column]} aria-invalid={wrong || undefined} title={wrong ? 'No number yet: it is left out' : undefined}
        onChange={(event) => set(place, { [column]: tidyNumber(event.target.value) })} onPaste={paste(place, column)} onKeyDown={move(place, column)} />
    )
  }
  return (
    <div className="no-print">
      <div className="scroll-x" tabIndex={0} role="region" aria-label="Measured values, scrolls sideways">
        <table className="w-full border-collapse text-sm" ref={table} aria-describedby={`${id}-how`}>
          <caption className="sr-only">Measured values</caption>
          <thead>
            <tr className="text-left align-bottom text-xs text-muted [&>th]:pb-1 [&>th]:font-medium">
              <th scope="col" className="w-6"><span className="sr-only">Number</span></th>
              {several ? <th scope="col">Line</th> : null}
              <th scope="col">{header}</th>
              <th scope="col">± one σ</th>
              <th scope="col">Component</th>
              <th scope="col"><span className="sr-only">Take away</span></th>
            </tr>
          </thead>
          <tbody>
            {shown.map((row, place) => {
              const residual = row.assigned === '' || row.assigned.startsWith('q') ? read.get(place) : undefined
              return (
                <tr key={place} className="align-top [&>td]:pr-1.5 [&>td]:pb-1.5">
                  <th scope="row" className="num pt-1.5 pr-1.5 text-right text-xs font-normal text-muted">{place + 1}</th>
                  {several ? (
                    <td>
                      <select className="input min-h-8! w-14! py-0! pl-2! text-sm!" aria-label={`Line of ${place + 1}`} value={row.line} disabled={disabled} onChange={(event) => set(place, { line: Number(event.target.value), assigned: row.assigned.startsWith('c') ? '' : row.assigned })}>
                        {lines.map((line, i) => <option key={line.id} value={i}>{i + 1}</option>)}
                      </select>
                    </td>
                  ) : null}
                  <td>{numberCell(row, place, 'value', header, 'w-27! sm:w-32!')}</td>
                  <td>{numberCell(row, place, 'unc', 'Uncertainty', 'w-17! sm:w-20!')}</td>
                  <td className="min-w-36">
                    <AssignmentSelect row={row} line={lines[row.line]} byHand={byHand} label={`Component of ${place + 1}`} disabled={disabled} onChange={(assigned) => set(place, { assigned })} />
                    {residual ? (
                      <span className="note mt-0.5 flex items-center gap-1.5 text-2xs">
                        <PolarisationSign q={residual.components[0]?.q ?? 0} size={16} />read as {readingText(residual.components)}
                      </span>
                    ) : null}
                  </td>
                  <td>
                    {isEmpty(row) && row.assigned === '' ? null : (
                      <button type="button" className="btn btn-quiet btn-small min-h-8 min-w-8 px-1!" aria-label={`Take measurement ${place + 1} away`} onClick={() => onChange(shown.filter((_, i) => i !== place))}>
                        <X size={14} aria-hidden="true" />
                      </button>
                    )}
                  </td>
                </tr>
              )
            })}
          </tbody>
        </table>
      </div>
      <p className="note mt-1" id={`${id}-how`}>
        A column, or two with uncertainties, can be pasted from a spreadsheet into a cell; decimal commas and 589.1234(5) are understood. Give every uncertainty, or none.
      </p>
      <p role="status" className="note">{said}</p>
    </div>
  )
}
