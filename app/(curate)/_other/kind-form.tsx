'use client'
import { useId, useState } from 'react'
import { Notice } from '../../_components/notice'
import { Dialog } from '../_parts/dialog'
import { FindingsList } from '../_parts/marks'
import { type ChangeState, subjectName } from '../_sheet/change-state'
import { cellText, fieldWords } from '../_sheet/columns'
import { findingsOf } from '../_sheet/row-order'
import { isLocked } from '../_sheet/use-grid'
import { type SheetRow, shownValues } from '../_sheet/sheet'
import type { SheetRoom } from '../_sheet/use-sheet'
import { type KindField, KINDS, type OtherKind } from './kind-fields'

function Input({ field, row, room, canEdit }: { field: KindField; row: SheetRow; room: SheetRoom; canEdit: boolean }) {
  const { sheet, saver } = room
  const id = useId()
  const [opened, setOpened] = useState<{ state: ChangeState | null } | null>(null)
  const values = shownValues(row)
  const text = cellText(values[field.name])
  const before = row.base === null ? text : cellText(row.base[field.name])
  const errors = findingsOf(row).filter((finding) => finding.field === field.name)
  const type = (next: string) => {
    sheet.set(new Map([[row.key, sheet.stateWith(row, { ...values, [field.name]: next === '' ? null : next })]]))
    saver.later()
  }
  /** Leaving the field makes one step of all that was typed in it. */
  const leave = () => {
    if (opened === null) return
    const state = sheet.row(row.key)?.wanted ?? null
    sheet.commit(`${field.label} of ${subjectName(row.subject)}`, new Map([[row.key, state]]), new Map([[row.key, opened.state]]))
    setOpened(null)
    void saver.now()
  }
  const common = {
    id, className: 'input', value: text, disabled: !canEdit, 'aria-invalid': errors.some((finding) => finding.severity === 'error') || undefined, 'aria-describedby': `${id}-note`,
    onFocus: () => setOpened({ state: row.wanted }), onBlur: leave,
  }
  return (
    <div className={field.long ? 'sm:col-span-2' : ''}>
      <label htmlFor={id} className="label">{field.label}{field.unit ? `, ${field.unit}` : ''}</label>
      {field.choices ? (
        <select {...common} onChange={(event) => type(event.target.value)}>
          <option value="">not said</option>
          {field.choices.map((one) => <option key={one} value={one}>{one}</option>)}
        </select>
      ) : field.long ? <textarea {...common} rows={3} maxLength={2000} onChange={(event) => type(event.target.value)} />
        : <input {...common} maxLength={200} autoComplete="off" list={field.sources ? 'other-sources' : undefined} onChange={(event) => type(event.target.value)} />}
      <div id={`${id}-note`} className="mt-1 space-y-1">
        {text !== before ? <p className="note">was {before === '' ? 'empty' : before}</p> : field.hint && text === '' ? <p className="note">{field.hint}</p> : null}
        {errors.length > 0 ? <FindingsList findings={errors} /> : null}
      </div>
    </div>
  )
}

/** Values of a source, species, isotope or pair of hyperfine constants; kept on the server as they are typed. */
export function KindForm({ row, room, canEdit, onClose, onConflict }: { row: SheetRow; room: SheetRoom; canEdit: boolean; onClose: () => void; onConflict: () => void }) {
  const { sheet, saver } = room
  const id = useId()
  const { fields } = KINDS[row.subject.kind as OtherKind]
  const names = new Set(fields.map((field) => field.name))
  const findings = findingsOf(row)
  const rest = findings.filter((finding) => finding.field === null || !names.has(finding.field))
  const { wanted } = row
  return (
    <Dialog title={subjectName(row.subject)} onClose={onClose}>
      <div className="space-y-4">
        {row.save === 'conflict' ? <Notice tone="bad" title="Someone else wrote this first"><p><button type="button" className="btn btn-small" onClick={onConflict}>Look at both versions</button></p></Notice> : null}
        {row.save === 'failed' && row.problem ? <Notice tone="bad" title={row.problem.title}><p>{row.problem.detail} What you typed is kept here. <button type="button" className="link" onClick={() => void saver.retry()}>Try again</button></p></Notice> : null}
        <div className="grid gap-x-5 gap-y-3 sm:grid-cols-2">
          {fields.map((field) => <Input key={field.name} field={field} row={row} room={room} canEdit={canEdit && !isLocked(row)} />)}
        </div>
        {rest.length > 0 ? <FindingsList findings={rest} name={(finding) => (finding.field === null ? null : fieldWords(finding.field))} /> : null}
        {wanted !== null && (findings.some((finding) => finding.severity === 'warning') || wanted.comment !== null) ? (
          <div>
            <label htmlFor={id} className="label">Comment on the warnings</label>
            <textarea id={id} className="input" rows={2} maxLength={2000} disabled={!canEdit} value={wanted.comment ?? ''}
              onChange={(event) => { sheet.set(new Map([[row.key, { ...wanted, comment: event.target.value === '' ? null : event.target.value }]])); saver.later() }} />
          </div>
        ) : null}
        <div className="flex flex-wrap items-center gap-3">
          <button type="button" className="btn btn-lamp" onClick={() => { void saver.now(); onClose() }}>Done</button>
          <span className="note">{row.save === 'saved' ? 'Saved' : row.save === 'failed' || row.save === 'conflict' ? 'Kept here' : 'Saving'}</span>
        </div>
      </div>
    </Dialog>
  )
}
