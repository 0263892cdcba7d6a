'use client'
import { useMutation } from '@tanstack/react-query'
import { useState, type FormEvent } from 'react'
import type { CheckedChange } from '@/openapi/schemas/change'
import { Field } from '../../(account)/_parts/field'
import { apiSend } from '../../_components/data/api'
import { ProblemView } from '../../_components/problem-view'
import { Dialog } from '../_parts/dialog'
import { type Subject, requestOf, type Values } from '../_sheet/change-state'
import { KINDS, nameFault, type OtherKind } from './kind-fields'

/** Names what is to be added or corrected; its published values are read, so that a correction begins with them. */
export function AddOther({ amendment, kind, onReady, onClose }: { amendment: string; kind: OtherKind; onReady: (subject: Subject, base: Values | null) => void; onClose: () => void }) {
  const [fault, setFault] = useState<string | null>(null)
  const look = useMutation({
    mutationFn: async (subject: Subject) => {
      const asked = requestOf(subject, { action: 'replace', values: {}, reason: null, successor: null, comment: null })
      const { data } = await apiSend<{ changes: CheckedChange[] }>('POST', `/amendments/${amendment}/changes/check`, { changes: [asked] })
      return { subject, base: (data.changes[0]?.before as Values | null | undefined) ?? null }
    },
    onSuccess: ({ subject, base }) => onReady(subject, base),
  })
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const form = new FormData(event.currentTarget)
    const given = (name: string): string => String(form.get(name) ?? '').trim()
    const named = { species: given('species'), level: given('level'), source: given('source'), mass: given('mass') }
    const found = nameFault(kind, named)
    setFault(found)
    if (found !== null) return
    look.mutate({
      kind, level: kind === 'hyperfine' ? named.level : null, source: kind === 'source' ? named.source : null, massNumber: named.mass === '' ? null : Number(named.mass),
      species: kind === 'hyperfine' ? (named.level.split('.')[0] ?? null) : kind === 'source' ? null : named.species,
    })
  }
  return (
    <Dialog title={`Add or correct a ${KINDS[kind].word}`} onClose={onClose}>
      <form onSubmit={submit} className="space-y-4" noValidate>
        {kind === 'source' ? <Field label="Key" name="source" maxLength={100} placeholder="kramida-2019-zn" autoComplete="off" list="other-sources" error={fault ?? undefined} hint="A key of the table is corrected, another one is new." /> : null}
        {kind === 'species' || kind === 'isotope' ? <Field label="Species" name="species" maxLength={20} placeholder="Na-I" autoComplete="off" error={fault ?? undefined} /> : null}
        {kind === 'hyperfine' ? <Field label="Level" name="level" maxLength={30} placeholder="Na-I.3" autoComplete="off" error={fault ?? undefined} /> : null}
        {kind === 'isotope' || kind === 'hyperfine' ? <Field label="Mass number" name="mass" maxLength={3} inputMode="numeric" placeholder="23" autoComplete="off" /> : null}
        {look.error ? <ProblemView error={look.error} heading="h3" /> : null}
        <div className="flex gap-2">
          <button type="submit" className="btn btn-lamp" disabled={look.isPending}>Go on</button>
          <button type="button" className="btn" onClick={onClose}>Cancel</button>
        </div>
      </form>
    </Dialog>
  )
}
