'use client'
import { Plus } from 'lucide-react'
import { EVIDENCE, cellText, measuredG, withMeasuredG } from './columns'
import { type SheetRow, shownValues } from './sheet'
import type { SheetRoom } from './use-sheet'

const MEMBERS = [
  { name: 'value', label: 'g' }, { name: 'unc', label: 'Uncertainty' }, { name: 'source', label: 'Source', list: 'sheet-sources' }, { name: 'evidence', label: 'Evidence', choices: EVIDENCE }, { name: 'note', label: 'Note' },
] as const

/** The second and further measured g_J of a level: the first is edited in the table. */
export function MeasuredList({ row, room: { sheet, saver }, canEdit }: { row: SheetRow; room: SheetRoom; canEdit: boolean }) {
  const values = shownValues(row)
  const list = measuredG(values)
  if (list.length < 2 && (!canEdit || list.length === 0)) return null
  const write = (next: Record<string, unknown>[], done: boolean) => {
    void saver.complete(row.key, row)
    const state = sheet.stateWith(row, done ? withMeasuredG(values, next) : { ...withMeasuredG(values, []), measured_g: next })
    if (done) sheet.commit(`measured g of ${row.subject.level ?? 'a new level'}`, new Map([[row.key, state]]))
    else sheet.set(new Map([[row.key, state]]))
    saver.later(done ? 0 : 600)
  }
  const set = (at: number, name: string, text: string) =>
    write(list.map((item, index) => (index === at ? { ...item, [name]: text === '' ? null : text, ...(name === 'value' ? { literal: text === '' ? null : text } : {}) } : item)), false)
  return (
    <section className="border-t border-rule pt-3">
      <h3 className="mb-2 text-base">Further measured g</h3>
      <ul className="space-y-3">
        {list.slice(1).map((item, index) => (
          <li key={index} className="grid grid-cols-2 gap-x-2 gap-y-1.5 border-l-2 border-rule pl-3">
            {MEMBERS.map((member) => {
              const text = cellText(member.name === 'value' ? (item.literal ?? item.value) : item[member.name])
              const common = { className: 'input min-h-8 py-0.5 text-sm', value: text, disabled: !canEdit }
              return (
                <label key={member.name} className={`min-w-0 ${member.name === 'note' ? 'col-span-2' : ''}`}>
                  <span className="label mb-0">{member.label}</span>
                  {'choices' in member ? (
                    <select {...common} onChange={(event) => set(index + 1, member.name, event.target.value)}>
                      <option value="">not said</option>
                      {member.choices.map((one) => <option key={one} value={one}>{one}</option>)}
                    </select>
                  ) : <input {...common} autoComplete="off" list={'list' in member ? member.list : undefined} onChange={(event) => set(index + 1, member.name, event.target.value)} />}
                </label>
              )
            })}
            {canEdit ? <button type="button" className="btn btn-quiet btn-small col-span-2 justify-self-start" onClick={() => write(list.filter((_, at) => at !== index + 1), true)}>Take this one out</button> : null}
          </li>
        ))}
      </ul>
      {canEdit && list.length > 0 ? <button type="button" className="btn btn-small mt-2" onClick={() => write([...list, {}], false)}><Plus size={13} aria-hidden="true" />Another measured g</button> : null}
    </section>
  )
}
