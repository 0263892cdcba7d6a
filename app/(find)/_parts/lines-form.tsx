'use client'
import { useId, useState, type FormEvent, type ReactNode } from 'react'
import { carryWindow, isScale, SCALES, type Scale } from './line-query'

export interface LinesFields { scale: Scale; min: string; max: string; species: string; kind: string; rules: string; gMin: string; gMax: string }

function Field({ label, children, className = '' }: { label: string; children: (id: string) => ReactNode; className?: string }) {
  const id = useId()
  return (
    <div className={className}>
      <label htmlFor={id} className="label">{label}</label>
      {children(id)}
    </div>
  )
}

/** The window, and what else a line must be. Nothing is asked until the form is sent. */
export function LinesForm({ initial, species, onSubmit }: { initial: LinesFields; species: readonly string[]; onSubmit: (fields: LinesFields) => void }) {
  const [fields, setFields] = useState(initial)
  const list = useId()
  const set = (change: Partial<LinesFields>) => setFields((now) => ({ ...now, ...change }))
  const { unit } = SCALES[fields.scale]
  const submit = (event: FormEvent) => { event.preventDefault(); onSubmit(fields) }
  const number = (name: 'min' | 'max' | 'gMin' | 'gMax', label: string, hint: string) => (
    <Field label={label}>
      {(id) => <input id={id} className="input num" inputMode="decimal" autoComplete="off" value={fields[name]} placeholder={hint} onChange={(event) => set({ [name]: event.target.value })} />}
    </Field>
  )
  return (
    <form onSubmit={submit} aria-label="Search lines" className="grid grid-cols-2 items-end gap-x-4 gap-y-3 border-y border-rule-strong py-5 sm:grid-cols-4 lg:grid-cols-[minmax(11rem,1.4fr)_1fr_1fr_minmax(10rem,1.3fr)_minmax(9rem,1.1fr)_0.85fr_0.85fr_auto]">
      <Field label="Window in" className="col-span-2 lg:col-span-1">
        {(id) => (
          <select id={id} className="input" value={fields.scale} onChange={(event) => {
            const scale = event.target.value
            if (isScale(scale)) set({ scale, ...carryWindow(fields.scale, scale, fields) })
          }}>
            {(Object.keys(SCALES) as Scale[]).map((scale) => <option key={scale} value={scale}>{`${SCALES[scale].label}, ${SCALES[scale].unit}`}</option>)}
          </select>
        )}
      </Field>
      {number('min', `From, ${unit}`, 'open')}
      {number('max', `To, ${unit}`, 'open')}
      <Field label="Species" className="col-span-2 sm:col-span-2 lg:col-span-1">
        {(id) => (
          <>
            <input id={id} className="input" list={list} autoComplete="off" spellCheck={false} value={fields.species} placeholder="all; or Fe I, Na I" onChange={(event) => set({ species: event.target.value })} />
            <datalist id={list}>{species.map((name) => <option key={name} value={name.replace('-', ' ')} />)}</datalist>
          </>
        )}
      </Field>
      <Field label="Kind and rules" className="col-span-2 sm:col-span-2 lg:col-span-1">
        {(id) => (
          <select id={id} className="input" value={`${fields.kind} ${fields.rules}`} onChange={(event) => {
            const [kind = 'E1', rules = 'rigorous'] = event.target.value.split(' ')
            set({ kind, rules })
          }}>
            <option value="E1 rigorous">E1, rigorous rules</option>
            <option value="E1 ls">E1, LS rules</option>
            <option value="M1 rigorous">M1</option>
            <option value="E2 rigorous">E2</option>
          </select>
        )}
      </Field>
      {number('gMin', 'Effective g from', 'any')}
      {number('gMax', 'Effective g to', 'any')}
      <button type="submit" className="btn btn-lamp col-span-2 sm:col-span-4 lg:col-span-1">Show lines</button>
    </form>
  )
}
