'use client'
import { memo, useId, useState, type KeyboardEvent, type ReactNode } from 'react'
import { fieldIn, FIELD_UNITS, formatField, parseField, type FieldUnit } from '@/lib/units/field'
import styles from './field-control.module.css'
import { fieldMarks, LAST_STOP, placeOf, stepped, stopOf, teslaAt, type FieldValue } from './field-scale'

export interface FieldControlProps {
  value: FieldValue
  onChange: (value: FieldValue) => void
  /** The model in force, in words. */
  model?: string
  /** Whether the model may be trusted at this field, in a plain sentence. */
  verdict?: ReactNode
  tone?: 'valid' | 'not_valid' | 'unknown'
  /** Field where the linear law passes its tolerance, marked on the scale. */
  limitTesla?: number | null
  /** What is wrong with the field that the address asked for. */
  problem?: string | null
}

const UNITS: FieldUnit[] = ['T', 'mT', 'G', 'kG']
const THUMB = 24

/** The number alone, as it stands in the box. */
const numberIn = ({ tesla, unit }: FieldValue): string => String(Number(fieldIn(tesla, unit).toPrecision(10)))

const TONE = { valid: 'border-good', not_valid: 'border-warn', unknown: 'border-rule-strong' } as const

/** The field: typed with any of its units, or moved along a log scale; the model in force and whether it may be trusted. */
export function FieldControl({ value, onChange, model = 'linear (weak field)', verdict, tone = 'unknown', limitTesla = null, problem = null }: FieldControlProps) {
  const id = useId()
  const [draft, setDraft] = useState<string | null>(null)
  const [finished, setFinished] = useState(false)
  const { tesla, unit } = value
  const reading = draft === null ? null : read(draft, unit)
  const complaint = reading && !reading.ok && finished ? reading.detail : draft === null ? problem : null

  const type = (text: string) => {
    setDraft(text)
    setFinished(false)
    const next = read(text, unit)
    if (next.ok) onChange({ tesla: next.tesla, unit: next.unit })
  }
  const finish = () => {
    if (reading === null || reading.ok) setDraft(null)
    setFinished(true)
  }
  const set = (next: number) => {
    setDraft(null)
    onChange({ tesla: next, unit })
  }
  const onKeyDown = (event: KeyboardEvent<HTMLInputElement>) => {
    if (event.key === 'Enter') finish()
    if (event.key === 'Escape') setDraft(null)
    if (event.key !== 'ArrowUp' && event.key !== 'ArrowDown') return
    event.preventDefault()
    set(Math.min(10_000, stepped(tesla, event.key === 'ArrowUp' ? 1 : -1, event.shiftKey)))
  }

  return (
    <section aria-label="Field" className="sheet grid gap-x-6 gap-y-3 p-4 md:grid-cols-[15rem_minmax(0,1fr)]">
      <div>
        <label htmlFor={`${id}-value`} className="label">Field, B</label>
        <div className="flex gap-2">
          <input
            id={`${id}-value`}
            className="input num min-w-0 flex-1 text-lg!"
            value={draft ?? numberIn(value)}
            onChange={(event) => type(event.target.value)}
            onBlur={finish}
            onKeyDown={onKeyDown}
            inputMode="decimal"
            autoComplete="off"
            spellCheck={false}
            aria-invalid={complaint !== null}
            aria-describedby={`${id}-help${complaint ? ` ${id}-complaint` : ''}`}
          />
          <select
            className="input w-auto! shrink-0"
            aria-label="Unit of the field"
            value={unit}
            onChange={(event) => {
              setDraft(null)
              onChange({ tesla, unit: event.target.value as FieldUnit })
            }}
          >
            {(UNITS.includes(unit) ? UNITS : [...UNITS, unit]).map((name) => (
              <option key={name} value={name} title={FIELD_UNITS[name].name}>{name}</option>
            ))}
          </select>
        </div>
        <p id={`${id}-help`} className="note mt-1">A unit may be typed too, such as 15kG. Arrow keys step.</p>
        {complaint && <p id={`${id}-complaint`} role="alert" className="mt-1 text-sm text-bad">{complaint}</p>}
      </div>
      <div className="min-w-0 self-start">
        <span className="label" id={`${id}-slider`}>On a log scale</span>
        <input
          type="range"
          className={styles.slider}
          min={0}
          max={LAST_STOP}
          step={1}
          value={stopOf(tesla)}
          onChange={(event) => set(teslaAt(Number(event.target.value)))}
          aria-labelledby={`${id}-slider`}
          aria-valuetext={formatField(tesla, unit)}
        />
        <Scale unit={unit} limitTesla={limitTesla} />
      </div>
      <p className={`num border-l-2 pl-3 text-sm md:col-span-2 ${TONE[tone]}`} aria-live="polite">
        <span className="text-muted">Model: </span>
        {model}
        {verdict ? <><span className="text-muted">{' · '}</span>{verdict}</> : null}
      </p>
    </section>
  )
}

/** Reads what was typed; a bare number is in the unit beside the box. */
function read(text: string, unit: FieldUnit) {
  const plain = text.trim().replace(/^(\d*),(\d+)/, '$1.$2')
  return parseField(/^[+\d.]+(?:e[+-]?\d+)?$/i.test(plain) ? `${plain}${unit}` : plain)
}

/** The ruled strip under the slider, its marks where the thumb's slit stands at that field. */
const Scale = memo(function Scale({ unit, limitTesla }: { unit: FieldUnit; limitTesla: number | null }) {
  const at = (tesla: number) => `calc(${THUMB / 2}px + (100% - ${THUMB}px) * ${placeOf(tesla).toFixed(5)})`
  return (
    <div aria-hidden="true" className="relative h-8 font-sans text-2xs text-muted">
      <span className="absolute top-0 h-2.5 w-px bg-rule-strong" style={{ left: `${THUMB / 2}px` }} />
      <span className="absolute top-3 -translate-x-1/2" style={{ left: `${THUMB / 2}px` }}>0</span>
      {fieldMarks(unit).map(({ tesla, label }, index) => (
        <span key={tesla}>
          <span className={`absolute top-0 w-px bg-rule-strong ${label === null ? 'h-1 opacity-70' : 'h-2.5'}`} style={{ left: at(tesla) }} />
          {label !== null && index > 0 && <span className="absolute top-3 -translate-x-1/2 whitespace-nowrap" style={{ left: at(tesla) }}>{label}</span>}
        </span>
      ))}
      {limitTesla !== null && limitTesla <= 100 && limitTesla >= 1e-5 && (
        <span className="absolute top-0 h-2.5 border-l-2 border-dashed border-warn" style={{ left: at(limitTesla), right: 0 }} title={`The linear law passes its tolerance at ${formatField(Number(limitTesla.toPrecision(3)), unit)}`}>
          <span className="block h-1.5 w-full bg-warn opacity-40" />
        </span>
      )}
    </div>
  )
})
