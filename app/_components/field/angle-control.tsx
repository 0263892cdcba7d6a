'use client'
import { useId, useState } from 'react'
import { readAngle } from './use-field'

export interface AngleControlProps {
  /** Null: averaged over angle. */
  value: number | null
  onChange: (thetaDeg: number | null) => void
  problem?: string | null
}

const PRESETS: { label: string; hint: string; value: number | null }[] = [
  { label: 'Averaged over angle', hint: 'no direction is singled out', value: null },
  { label: 'Longitudinal, 0°', hint: 'along the field: σ only', value: 0 },
  { label: 'Transverse, 90°', hint: 'across the field: π and σ', value: 90 },
]

/** The angle between the field and the line of sight: none, the two classic ones, or any. */
export function AngleControl({ value, onChange, problem = null }: AngleControlProps) {
  const id = useId()
  const [draft, setDraft] = useState<string | null>(null)
  const reading = draft === null || draft.trim() === '' ? null : readAngle(draft)
  const complaint = reading && !reading.ok ? reading.detail : draft === null ? problem : null
  return (
    <fieldset className="sheet m-0 flex min-w-0 flex-wrap items-center gap-x-4 gap-y-2 px-4 py-3">
      <legend className="float-left mr-2 p-0 text-xs font-medium text-muted">Angle θ between field and line of sight</legend>
      <div className="flex flex-wrap gap-1.5">
        {PRESETS.map((preset) => (
          <button
            key={preset.label}
            type="button"
            title={preset.hint}
            aria-pressed={value === preset.value}
            onClick={() => {
              setDraft(null)
              onChange(preset.value)
            }}
            className="btn btn-small aria-pressed:border-lamp aria-pressed:bg-lamp-wash"
          >
            {preset.label}
          </button>
        ))}
      </div>
      <label className="flex items-center gap-2 text-sm text-muted" htmlFor={`${id}-angle`}>
        or
        <input
          id={`${id}-angle`}
          className="input num w-20! min-h-8!"
          inputMode="decimal"
          aria-label="Angle in degrees"
          placeholder="any"
          autoComplete="off"
          value={draft ?? (value === null ? '' : String(value))}
          aria-invalid={complaint !== null}
          aria-describedby={complaint ? `${id}-complaint` : undefined}
          onChange={(event) => {
            setDraft(event.target.value)
            const next = readAngle(event.target.value)
            if (next.ok) onChange(next.degrees)
          }}
          onBlur={() => {
            if (reading === null || reading.ok) setDraft(null)
          }}
        />
        degrees
      </label>
      {complaint && <p id={`${id}-complaint`} role="alert" className="w-full text-sm text-bad">{complaint}</p>}
    </fieldset>
  )
}
