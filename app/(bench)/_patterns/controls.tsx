'use client'
import { ArrowLeft, ArrowRight, ZoomIn, ZoomOut } from 'lucide-react'
import { memo, useId, useState } from 'react'
import { Choices } from '@/app/_components/plots/plot-frame'
import { AXIS_UNIT, domainOf, steppedWindow, windowOf, type WindowStep } from './overlay'
import { type Axis, MODELS, type ModelAsked, RESOLVING_BY_DEFAULT, type Width, type Window } from './state'
import type { Frame } from './use-overlay'

interface NumberBoxProps {
  label: string
  value: string
  unit?: string
  width?: string
  /** Null where the text is no value that can stand here; the words say what is wanted. */
  read: (text: string) => number | null
  wanted: string
  onChange: (value: number) => void
}

/** A number that is taken when it is finished. */
function NumberBox({ label, value, unit, width = 'w-32!', read, wanted, onChange }: NumberBoxProps) {
  const id = useId()
  const [draft, setDraft] = useState<string | null>(null)
  const [refused, setRefused] = useState(false)
  const finish = () => {
    if (draft === null) return
    const next = read(draft.trim().replace(',', '.'))
    setRefused(next === null)
    if (next === null) return
    setDraft(null)
    if (draft.trim() !== value) onChange(next)
  }
  return (
    <span className="inline-flex flex-col">
      <label htmlFor={id} className="label">{label}</label>
      <span className="flex items-center gap-1.5 text-sm text-muted">
        <input id={id} className={`input num ${width}`} inputMode="decimal" autoComplete="off" value={draft ?? value} aria-invalid={refused} aria-describedby={refused ? `${id}-wanted` : undefined}
          onChange={(event) => { setDraft(event.target.value); setRefused(false) }} onBlur={finish}
          onKeyDown={(event) => { if (event.key === 'Enter') finish(); if (event.key === 'Escape') { setDraft(null); setRefused(false) } }} />
        {unit}
      </span>
      {refused ? <span id={`${id}-wanted`} role="alert" className="mt-0.5 max-w-52 text-xs text-bad">{wanted}</span> : null}
    </span>
  )
}

const above = (low: number, high: number) => (text: string): number | null => {
  const value = Number(text)
  return text !== '' && value > low && value <= high ? value : null
}
const MODEL_CHOICES = MODELS.map((value) => ({ value, label: { auto: 'Auto', linear: 'Linear', intermediate: 'Intermediate' }[value] }))
const INSTRUMENTS = [{ value: 'resolving', label: 'Resolving power' }, { value: 'fwhm', label: 'Width, cm⁻¹' }] as const

/** What makes lines wide, and the model. */
export const WidthControl = memo(function WidthControl({ width, onWidth, model, onModel, wavenumber }: { width: Width; onWidth: (width: Width) => void; model: ModelAsked; onModel: (model: ModelAsked) => void; wavenumber: number | null }) {
  const turn = (instrument: Width['instrument']) => {
    if (instrument === width.instrument) return
    // the width stays what it is at the first line
    const value = wavenumber === null ? (instrument === 'fwhm' ? 0.1 : RESOLVING_BY_DEFAULT) : Number((wavenumber / width.value).toPrecision(3))
    onWidth({ ...width, instrument, value })
  }
  return (
    <div className="sheet flex flex-wrap items-start gap-x-6 gap-y-3 px-4 py-3">
      <div className="pt-6"><Choices label="Instrument" value={width.instrument} choices={INSTRUMENTS} onChange={turn} /></div>
      <NumberBox key={width.instrument} label={width.instrument === 'resolving' ? 'Resolving power' : 'Full width at half maximum'} unit={width.instrument === 'resolving' ? '' : 'cm⁻¹'} value={String(width.value)} read={above(0, 1e12)} wanted="Give a number above 0." onChange={(value) => onWidth({ ...width, value })} />
      <NumberBox label="Temperature of the atoms" unit="K" width="w-24!" value={width.temperatureK === 0 ? '' : String(width.temperatureK)} read={(text) => (text === '' ? 0 : Number(text) >= 0 && Number(text) <= 1e9 ? Number(text) : null)} wanted="Give kelvin from 0 up, or nothing." onChange={(temperatureK) => onWidth({ ...width, temperatureK })} />
      <div className="pt-6"><Choices label="Model" value={model} choices={MODEL_CHOICES} onChange={onModel} /></div>
    </div>
  )
})

const AXIS_CHOICES = { air: 'nm, air', vacuum: 'nm, vacuum', wavenumber: 'cm⁻¹' } as const

export const AxisChoice = memo(function AxisChoice({ frame, onAxis }: { frame: Frame; onAxis: (axis: Axis) => void }) {
  const axes = (Object.keys(AXIS_CHOICES) as Axis[]).filter((axis) => axis !== 'air' || frame.airPossible)
  return <Choices label="Axis" value={frame.axis} choices={axes.map((value) => ({ value, label: AXIS_CHOICES[value] }))} onChange={onAxis} />
})

const BUTTONS: readonly { step: WindowStep; label: string; icon: typeof ZoomIn }[] = [
  { step: 'left', label: 'Move the window left', icon: ArrowLeft },
  { step: 'right', label: 'Move the window right', icon: ArrowRight },
  { step: 'closer', label: 'Look closer', icon: ZoomIn },
  { step: 'wider', label: 'Look wider', icon: ZoomOut },
]

/** The window by numbers and by steps; what dragging across the picture does with the pointer. */
export const WindowControl = memo(function WindowControl({ frame, onWindow }: { frame: Frame; onWindow: (window: Window | null) => void }) {
  const { axis, window, narrowed } = frame
  const [from, to] = domainOf(axis, window)
  const decimals = Math.min(9, Math.max(0, 3 - Math.floor(Math.log10(to - from))))
  const wanted = `Give a ${axis === 'wavenumber' ? 'wavenumber' : 'wavelength'} ${AXIS_UNIT[axis] === 'air_nm' ? 'from 200 nm up ' : ''}inside the other end.`
  const lowest = axis === 'air' ? 199.936 : 0
  const unit = axis === 'wavenumber' ? 'cm⁻¹' : 'nm'
  return (
    <div className="mt-3 flex flex-wrap items-end gap-x-4 gap-y-2" role="group" aria-label="Window of the axis">
      <NumberBox key={`from ${axis}`} label="Window from" unit={unit} value={from.toFixed(decimals)} read={(text) => (Number(text) > lowest && Number(text) < to ? Number(text) : null)} wanted={wanted} onChange={(value) => onWindow(windowOf(axis, value, to))} />
      <NumberBox key={`to ${axis}`} label="to" unit={unit} value={to.toFixed(decimals)} read={(text) => (Number(text) > from && Number.isFinite(Number(text)) ? Number(text) : null)} wanted={wanted} onChange={(value) => onWindow(windowOf(axis, from, value))} />
      <div className="flex flex-wrap gap-1.5">
        {BUTTONS.map(({ step, label, icon: Icon }) => (
          <button key={step} type="button" className="btn px-2.5!" aria-label={label} title={label} onClick={() => onWindow(steppedWindow(axis, window, step))}><Icon size={15} aria-hidden="true" /></button>
        ))}
        <button type="button" className="btn" disabled={!narrowed} onClick={() => onWindow(null)}>Show all lines</button>
      </div>
    </div>
  )
})
