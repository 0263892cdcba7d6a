'use client'
import { useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import type { Source } from '@/openapi/schemas/source'
import { apiQuery } from '../../_components/data/api'
import { Menu } from '../../_components/menu'
import { Part } from '../../_components/page-head'
import { FindingsList, Tally } from '../_parts/marks'
import { Differences, differencesOf } from '../_parts/values-text'
import { subjectName } from '../_sheet/change-state'
import { fieldWords } from '../_sheet/columns'
import { ConflictView } from '../_sheet/conflict-view'
import { findingsOf } from '../_sheet/row-order'
import type { SheetRow } from '../_sheet/sheet'
import { type SheetRoom, useSheetView } from '../_sheet/use-sheet'
import { AddOther } from './add-other'
import { KindForm } from './kind-form'
import { KINDS, OTHER_KINDS, type OtherKind } from './kind-fields'

function Entry({ row, room, canEdit, onOpen }: { row: SheetRow; room: SheetRoom; canEdit: boolean; onOpen: () => void }) {
  const findings = findingsOf(row)
  const name = subjectName(row.subject)
  return (
    <li className="border-b border-rule py-3">
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h4 className="font-mono text-sm">{name}</h4>
        <span className="note">{row.wanted === null ? 'as published, not changed yet' : row.base === null ? `new ${KINDS[row.subject.kind as OtherKind].word}` : 'corrected'}</span>
        {row.wanted !== null && row.server !== null ? <span className="text-sm"><Tally errors={findings.filter((one) => one.severity === 'error').length} warnings={findings.filter((one) => one.severity === 'warning').length} clear={null} /></span> : null}
        <span className="ml-auto flex gap-2">
          <button type="button" className="btn btn-small" onClick={onOpen} aria-label={`${canEdit ? 'Edit' : 'See'} ${name}`}>{canEdit ? 'Edit' : 'See'}</button>
          {canEdit && row.wanted !== null ? <button type="button" className="btn btn-quiet btn-small" aria-label={`Take out ${name}`} onClick={() => { room.sheet.discard(row.key); void room.saver.now() }}>Take out</button> : null}
        </span>
      </div>
      {row.wanted !== null && row.server !== null ? (
        <div className="mt-2 space-y-2">
          <Differences fields={differencesOf(row.server)} fresh={row.base === null} caption={`What changes in ${name}`} />
          {findings.length > 0 ? <FindingsList findings={findings} name={(finding) => (finding.field === null ? null : fieldWords(finding.field))} /> : null}
        </div>
      ) : null}
    </li>
  )
}

/** Sources, species, isotopes and hyperfine constants of the amendment. */
export function OtherPart({ amendment, room, canEdit }: { amendment: string; room: SheetRoom; canEdit: boolean }) {
  const { sheet, saver } = room
  const view = useSheetView(sheet)
  const { data: sources } = useQuery(apiQuery<Source[]>('/sources', { limit: 1000 }))
  const [adding, setAdding] = useState<OtherKind | null>(null)
  const [open, setOpen] = useState<string | null>(null)
  const [choosing, setChoosing] = useState<string | null>(null)
  const rows = view.order.flatMap((key) => view.rows.get(key) ?? []).filter((row) => row.subject.kind !== 'level')
  const opened = open === null ? undefined : view.rows.get(open)
  const chosen = choosing === null ? undefined : view.rows.get(choosing)
  return (
    <Part title="Sources and other values" aside={canEdit ? <Menu label="Add or correct" items={OTHER_KINDS.map((kind) => ({ label: KINDS[kind].many, onSelect: () => setAdding(kind) }))} /> : undefined}>
      {rows.length === 0 ? <p className="note">None in this amendment. A new level wants its source to be there: add it here, then name its key in the row.</p> : (
        <div className="space-y-5">
          {OTHER_KINDS.filter((kind) => rows.some((row) => row.subject.kind === kind)).map((kind) => (
            <section key={kind}>
              <h3 className="border-b border-rule pb-1">{KINDS[kind].many}</h3>
              <ul>{rows.filter((row) => row.subject.kind === kind).map((row) => <Entry key={row.key} row={row} room={room} canEdit={canEdit} onOpen={() => setOpen(row.key)} />)}</ul>
            </section>
          ))}
        </div>
      )}
      <datalist id="other-sources">{[...new Set([...rows.flatMap((row) => row.subject.source ?? []), ...(sources?.data ?? []).map((source) => source.key)])].map((key) => <option key={key} value={key} />)}</datalist>
      {adding !== null ? (
        <AddOther amendment={amendment} kind={adding} onClose={() => setAdding(null)} onReady={(subject, base) => {
          const key = sheet.addNew(subject)
          if (base !== null) sheet.patch(key, { base, complete: true })
          setAdding(null)
          setOpen(key)
        }} />
      ) : null}
      {opened && choosing === null ? <KindForm key={opened.key} row={opened} room={room} canEdit={canEdit} onClose={() => setOpen(null)} onConflict={() => setChoosing(opened.key)} /> : null}
      {chosen?.theirs ? <ConflictView row={chosen} onClose={() => setChoosing(null)} onResolve={(wanted) => { sheet.resolve(chosen.key, wanted); setChoosing(null); void saver.now() }} /> : null}
    </Part>
  )
}
