'use client'
import { useState, type FormEvent } from 'react'
import { Field } from '../../(account)/_parts/field'
import { Dialog } from '../_parts/dialog'
import type { ChangeState } from './change-state'
import { subjectName } from './change-state'
import type { SheetRow } from './sheet'

const LEVEL = /^[A-Z][a-z]?-[IVXLC]+\.[1-9]\d{0,6}$/

/** A level is retired with a reason, and perhaps a level that takes its place. Its identifier stays known for ever. */
export function RetireDialog({ row, onRetire, onClose }: { row: SheetRow; onRetire: (state: ChangeState) => void; onClose: () => void }) {
  const [faults, setFaults] = useState<{ reason?: string; successor?: string }>({})
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const given = new FormData(event.currentTarget)
    const [reason = '', successor = ''] = ['reason', 'successor'].map((name) => String(given.get(name) ?? '').trim())
    const found = { reason: reason === '' ? 'Say why, for those who look for it later.' : undefined, successor: successor !== '' && !LEVEL.test(successor) ? 'A level, such as Na-I.3, or nothing.' : undefined }
    setFaults(found)
    if (found.reason === undefined && found.successor === undefined) onRetire({ action: 'retire', values: null, reason, successor: successor === '' ? null : successor, comment: row.wanted?.comment ?? null })
  }
  return (
    <Dialog title={`Retire ${subjectName(row.subject)}`} onClose={onClose}>
      <form onSubmit={submit} className="space-y-4" noValidate>
        <p className="note">From the edition that this goes into, the level is no longer listed and makes no lines. Earlier editions keep it.</p>
        <Field label="Reason" name="reason" maxLength={2000} defaultValue={row.wanted?.reason ?? ''} error={faults.reason} autoComplete="off" />
        <Field label="Level that takes its place, if any" name="successor" maxLength={40} defaultValue={row.wanted?.successor ?? ''} error={faults.successor} autoComplete="off" placeholder="Na-I.3" />
        <div className="flex flex-wrap gap-2">
          <button type="submit" className="btn btn-lamp">Retire</button>
          <button type="button" className="btn" onClick={onClose}>Cancel</button>
        </div>
      </form>
    </Dialog>
  )
}
