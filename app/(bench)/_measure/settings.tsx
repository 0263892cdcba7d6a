'use client'
import { useId, type ReactNode } from 'react'
import { parseField } from '@/lib/units/field'
import { Choices } from '@/app/_components/plots/plot-frame'
import { readTyped, tidyNumber } from './pasted'
import { isWavelength, MEDIA, MODELS, type Quantity, UNIT_NAME, UNITS } from './state'
import type { Address, Change } from './use-measurement'

interface Props {
  address: Address
  change: Change
  lineCount: number
}

function Labelled({ label, children, id, hint }: { label: string; children: ReactNode; id: string; hint?: string }) {
  return (
    <div className="min-w-0">
      <label htmlFor={id} className="label">{label}</label>
      {children}
      {hint ? <p className="note mt-1" id={`${id}-hint`}>{hint}</p> : null}
    </div>
  )
}

function NumberInput({ id, value, onChange, unit, hinted = false }: { id: string; value: string; onChange: (text: string) => void; unit: string; hinted?: boolean }) {
  const wrong = value !== '' && readTyped(value) === null
  return (
    <span className="flex items-center gap-1.5">
      <input id={id} className="input num w-28!" inputMode="decimal" autoComplete="off" value={value} aria-invalid={wrong || undefined} aria-describedby={hinted ? `${id}-hint` : undefined} onChange={(event) => onChange(tidyNumber(event.target.value))} />
      <span className="note">{unit}</span>
    </span>
  )
}

const QUANTITY_NAME: Record<Quantity, string> = { positions: 'Positions', separations: 'Separations', ring_radii: 'Ring radii' }
const QUANTITY_HINT: Record<Quantity, string> = {
  positions: 'Places in the spectrum. The zero of each line is free, so only distances within a line count.',
  separations: 'Distances from any one place in the line, the same for all of it; the place itself counts as 0.',
  ring_radii: 'Radii of the rings of a plane etalon, in one order, in any unit of length.',
}
const MEDIUM_NAME = { conventional: 'air from 200 to 2000 nm', air: 'air', vacuum: 'vacuum' } as const
const MODEL_NAME = { auto: 'linear where it holds, else intermediate', linear: 'linear (weak field)', intermediate: 'intermediate (diagonalised)' } as const

/** What the numbers are: positions, separations or ring radii, and their unit. */
export function WhatWasMeasured({ address, change }: Pick<Props, 'address' | 'change'>) {
  const id = useId()
  const rings = address.quantity === 'ring_radii'
  return (
    <div className="space-y-2.5">
      <Choices label="Measured" value={address.quantity} choices={(['positions', 'separations', 'ring_radii'] as const).map((value) => ({ value, label: QUANTITY_NAME[value] }))} onChange={(quantity) => change({ quantity })} />
      <p className="note">{QUANTITY_HINT[address.quantity]}</p>
      <div className="flex flex-wrap gap-x-4 gap-y-2.5">
        {rings ? (
          <>
            <Labelled id={`${id}-range`} label="Free spectral range"><NumberInput id={`${id}-range`} value={address.range} onChange={(range) => change({ range })} unit="cm⁻¹" /></Labelled>
            <Labelled id={`${id}-step`} label="Step of radius² per order"><NumberInput id={`${id}-step`} value={address.step} onChange={(step) => change({ step })} unit="length²" /></Labelled>
            <Labelled id={`${id}-step-unc`} label="its ± one σ"><NumberInput id={`${id}-step-unc`} value={address.step_unc} onChange={(step_unc) => change({ step_unc })} unit="length²" /></Labelled>
          </>
        ) : (
          <>
            <Labelled id={`${id}-unit`} label="Unit">
              <select id={`${id}-unit`} className="input w-36!" value={address.unit} onChange={(event) => change({ unit: event.target.value as (typeof UNITS)[number] })}>
                {UNITS.map((unit) => <option key={unit} value={unit}>{UNIT_NAME[unit]}</option>)}
              </select>
            </Labelled>
            {isWavelength(address.unit) ? (
              <Labelled id={`${id}-medium`} label="Wavelengths in">
                <select id={`${id}-medium`} className="input w-52!" value={address.medium} onChange={(event) => change({ medium: event.target.value as (typeof MEDIA)[number] })}>
                  {MEDIA.map((medium) => <option key={medium} value={medium}>{MEDIUM_NAME[medium]}</option>)}
                </select>
              </Labelled>
            ) : null}
          </>
        )}
      </div>
    </div>
  )
}

function FieldInput({ id, value, onChange, label }: { id: string; value: string; onChange: (text: string) => void; label: string }) {
  const read = value === '' ? null : parseField(value)
  return (
    <Labelled id={id} label={label}>
      <input id={id} className="input num w-32!" autoComplete="off" spellCheck={false} value={value} aria-invalid={(read !== null && !read.ok) || undefined} aria-describedby={read && !read.ok ? `${id}-wrong` : undefined} placeholder="0.8 T" onChange={(event) => onChange(event.target.value.slice(0, 40))} />
      {read && !read.ok ? <p className="note mt-1 max-w-60 text-bad" id={`${id}-wrong`}>{read.detail}</p> : null}
    </Labelled>
  )
}

/** What is sought: the field, or g at a known field. */
export function WhatIsSought({ address, change }: Pick<Props, 'address' | 'change'>) {
  const id = useId()
  return (
    <div className="space-y-2.5">
      <Choices label="Sought" value={address.unknown} choices={[{ value: 'field', label: 'The field B' }, { value: 'g', label: 'g, with B known' }]} onChange={(unknown) => change({ unknown })} />
      {address.unknown === 'g' ? (
        <div className="flex flex-wrap gap-x-4 gap-y-2.5">
          <FieldInput id={`${id}-field`} label="Field" value={address.field} onChange={(field) => change({ field })} />
          <FieldInput id={`${id}-field-unc`} label="its ± one σ" value={address.field_unc} onChange={(field_unc) => change({ field_unc })} />
          <Labelled id={`${id}-free`} label="g of">
            <select id={`${id}-free`} className="input w-40!" value={address.free} onChange={(event) => change({ free: event.target.value as 'lower' | 'upper' | 'both' })}>
              <option value="upper">the upper level</option>
              <option value="lower">the lower level</option>
              <option value="both">both levels</option>
            </select>
          </Labelled>
        </div>
      ) : null}
    </div>
  )
}

/** Further choices, seldom needed: scale, shared zero, angle, model. */
export function MoreChoices({ address, change, lineCount }: Props) {
  const id = useId()
  const changed = address.scale !== 'exact' || address.shared || address.theta !== null || address.model !== 'auto'
  return (
    <details className="group" open={changed || undefined}>
      <summary className="inline-flex min-h-8 list-none items-center text-sm text-muted hover:text-ink">
        <span aria-hidden="true" className="mr-1.5 inline-block text-lamp-ink transition-transform group-open:rotate-90">▸</span>
        Scale, angle and model
      </summary>
      <div className="mt-2 space-y-3">
        <div className="flex flex-wrap items-end gap-x-4 gap-y-2.5">
          <Labelled id={`${id}-scale`} label="Scale of the measurement">
            <select id={`${id}-scale`} className="input w-44!" value={address.scale} onChange={(event) => change({ scale: event.target.value as 'exact' | 'uncertain' | 'free' })}>
              <option value="exact">exact</option>
              <option value="uncertain">known to</option>
              <option value="free">free, fitted</option>
            </select>
          </Labelled>
          {address.scale === 'uncertain' ? <Labelled id={`${id}-scale-unc`} label="± one σ, of 1"><NumberInput id={`${id}-scale-unc`} value={address.scale_unc} onChange={(scale_unc) => change({ scale_unc })} unit="" /></Labelled> : null}
          {lineCount > 1 ? (
            <label className="flex min-h-9 items-center gap-2 text-sm">
              <input type="checkbox" className="size-4 accent-(--lamp)" checked={address.shared} onChange={(event) => change({ shared: event.target.checked })} />
              The lines share one zero
            </label>
          ) : null}
        </div>
        {address.scale === 'free' && !address.shared ? <p className="note">A free scale needs lines that share a zero: within one line the field and the scale change the positions alike.</p> : null}
        <div className="flex flex-wrap gap-x-4 gap-y-2.5">
          <Labelled id={`${id}-theta`} label="Seen">
            <select id={`${id}-theta`} className="input w-52!" value={address.theta === 0 ? '0' : ''} onChange={(event) => change({ theta: event.target.value === '0' ? 0 : null })}>
              <option value="">across the field, or at any angle</option>
              <option value="0">along the field: no π</option>
            </select>
          </Labelled>
          {address.unknown === 'field' ? (
            <Labelled id={`${id}-model`} label="Model">
              <select id={`${id}-model`} className="input w-72!" value={address.model} onChange={(event) => change({ model: event.target.value as (typeof MODELS)[number] })}>
                {MODELS.map((model) => <option key={model} value={model}>{MODEL_NAME[model]}</option>)}
              </select>
            </Labelled>
          ) : null}
        </div>
      </div>
    </details>
  )
}

/** The head of the column of numbers. */
export const headerOf = ({ quantity, unit }: Pick<Address, 'quantity' | 'unit'>): string => (quantity === 'ring_radii' ? 'Radius' : `${quantity === 'positions' ? 'Position' : 'Separation'}, ${UNIT_NAME[unit]}`)
