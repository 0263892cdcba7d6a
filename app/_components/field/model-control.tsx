'use client'
import { useId } from 'react'
import { Choices } from '@/app/_components/plots/plot-frame'
import type { IsotopeChosen, ModelAsked, Nucleus } from './use-model'

const MODEL_CHOICES: { value: ModelAsked; label: string }[] = [
  { value: 'auto', label: 'Auto' },
  { value: 'linear', label: 'Linear' },
  { value: 'intermediate', label: 'Intermediate' },
]

interface ModelControlProps {
  model: ModelAsked
  onModel: (model: ModelAsked) => void
  /** Null where the level or line has no constants to show it with. */
  nucleus: (Nucleus & { onChange: (nucleus: Nucleus) => void; isotopes: readonly number[]; natural: boolean; element: string }) | null
  /** Null where the quadratic shift does not apply. */
  quadratic: { on: boolean; onChange: (on: boolean) => void } | null
}

/** What is computed: the model, and on request hyperfine structure of an isotope, and the quadratic shift. */
export function ModelControl({ model, onModel, nucleus, quadratic }: ModelControlProps) {
  const id = useId()
  const first = nucleus?.isotopes[0] ?? null
  // of several isotopes none is taken unless it is named
  const inForce: IsotopeChosen = nucleus?.isotope ?? (nucleus?.isotopes.length === 1 ? first : null)
  return (
    <div role="group" aria-label="What is computed" className="sheet mt-3 flex min-w-0 flex-wrap items-center gap-x-6 gap-y-2 px-4 py-2.5">
      {nucleus?.on ? <p className="text-xs text-muted">Model <span className="text-ink">hyperfine, within one J</span></p> : <Choices label="Model" value={model} choices={MODEL_CHOICES} onChange={onModel} />}
      {nucleus === null ? null : (
        <span className="flex flex-wrap items-center gap-x-3 gap-y-1">
          <label className="flex min-h-8 items-center gap-2 text-sm">
            <input type="checkbox" className="size-4 accent-(--lamp)" checked={nucleus.on} onChange={(event) => nucleus.onChange({ on: event.target.checked, isotope: event.target.checked ? (inForce ?? first) : null })} />
            Hyperfine structure
          </label>
          {nucleus.on ? (
            <>
              <label htmlFor={`${id}-isotope`} className="text-xs text-muted">of</label>
              <select id={`${id}-isotope`} aria-label="Isotope" className="input w-auto! min-h-8!" value={String(inForce ?? '')}
                onChange={(event) => event.target.value !== '' && nucleus.onChange({ on: true, isotope: event.target.value === 'natural' ? 'natural' : Number(event.target.value) })}>
                {inForce === null ? <option value="">choose</option> : null}
                {nucleus.isotopes.map((mass) => <option key={mass} value={mass}>{`${nucleus.element}-${mass}`}</option>)}
                {inForce !== null && inForce !== 'natural' && !nucleus.isotopes.includes(inForce) ? <option value={inForce}>{`${nucleus.element}-${inForce}`}</option> : null}
                {nucleus.natural || inForce === 'natural' ? <option value="natural">natural mixture</option> : null}
              </select>
            </>
          ) : null}
        </span>
      )}
      {quadratic === null || nucleus?.on ? null : (
        <label className="flex min-h-8 items-center gap-2 text-sm">
          <input type="checkbox" className="size-4 accent-(--lamp)" checked={quadratic.on} onChange={(event) => quadratic.onChange(event.target.checked)} />
          Quadratic shift
        </label>
      )}
    </div>
  )
}
