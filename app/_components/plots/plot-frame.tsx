'use client'
import { Download, Table2, ChartNoAxesColumn } from 'lucide-react'
import { useId, useRef, useState, type KeyboardEvent, type ReactNode } from 'react'
import { savePng, saveSvg } from './save'
import { useWidth } from './use-width'

export interface PlotFrameProps {
  title: ReactNode
  /** What the picture shows, in one or two sentences, for those who cannot see it. */
  description: string
  /** Stem of the names of saved files. */
  name: string
  /** The same numbers as a table, shown in place of the drawing. */
  table: ReactNode
  /** Choices that belong to the plot (its axis, its range), beside the title. */
  controls?: ReactNode
  /** What is under the pointer or the focus now; announced. */
  reading?: ReactNode
  note?: ReactNode
  height: number | ((width: number) => number)
  /** Draws inside an SVG of the given size. */
  children: (width: number, height: number) => ReactNode
  minWidth?: number
}

/** A figure with its drawing, its table twin one key (T) away, and saving as SVG and PNG. */
export function PlotFrame({ title, description, name, table, controls, reading, note, height, children, minWidth = 0 }: PlotFrameProps) {
  const [box, measured] = useWidth<HTMLDivElement>(720)
  const [asTable, setAsTable] = useState(false)
  const [failure, setFailure] = useState<string | null>(null)
  const drawing = useRef<SVGSVGElement>(null)
  const id = useId()
  const width = Math.max(measured, minWidth, 240)
  const tall = typeof height === 'function' ? height(width) : height

  const save = async (how: typeof saveSvg) => {
    if (!drawing.current) return
    try {
      setFailure(null)
      await how(drawing.current, name)
    } catch (error) {
      setFailure(`The picture was not saved. ${error instanceof Error ? error.message : ''}`)
    }
  }
  const onKeyDown = (event: KeyboardEvent) => {
    const typing = event.target instanceof HTMLInputElement || event.target instanceof HTMLSelectElement
    if (event.key.toLowerCase() === 't' && !typing && !event.ctrlKey && !event.metaKey && !event.altKey) setAsTable((now) => !now)
  }

  return (
    <figure className="m-0 min-w-0" onKeyDown={onKeyDown} aria-labelledby={`${id}-title`}>
      <div className="mb-2 flex flex-wrap items-center gap-x-4 gap-y-2">
        <h3 id={`${id}-title`} className="m-0 mr-auto font-text text-lg font-semibold text-ink">
          {title}
        </h3>
        {controls}
        <div role="group" aria-label="Show and save" className="flex divide-x divide-rule overflow-hidden rounded-sm border border-rule font-sans text-xs">
          <FrameButton pressed={asTable} onClick={() => setAsTable((now) => !now)} title="Key: T">
            {asTable ? <ChartNoAxesColumn size={13} aria-hidden="true" /> : <Table2 size={13} aria-hidden="true" />}
            {asTable ? 'Picture' : 'Table'}
          </FrameButton>
          <FrameButton onClick={() => void save(saveSvg)} disabled={asTable} title="Save the picture as SVG">
            <Download size={13} aria-hidden="true" /> SVG
          </FrameButton>
          <FrameButton onClick={() => void save(savePng)} disabled={asTable} title="Save the picture as PNG">
            <Download size={13} aria-hidden="true" /> PNG
          </FrameButton>
        </div>
      </div>
      <div ref={box} className="min-w-0 border border-rule bg-sheet" data-plot={name}>
        {asTable ? (
          <div className="max-h-[30rem] overflow-y-auto p-3">{table}</div>
        ) : (
          <div className={minWidth > measured ? 'overflow-x-auto' : 'overflow-hidden'}>
            <svg
              ref={drawing}
              viewBox={`0 0 ${width} ${tall}`}
              width={width}
              height={tall}
              role="group"
              aria-labelledby={`${id}-title`}
              aria-describedby={`${id}-description`}
              className={`block ${minWidth > measured ? '' : 'h-auto w-full'}`}
              fontFamily="'Inter Variable', Inter, system-ui, sans-serif"
            >
              {children(width, tall)}
            </svg>
          </div>
        )}
      </div>
      <p id={`${id}-description`} className="sr-only">
        {description} Press T for the same numbers as a table.
      </p>
      <figcaption className="mt-1.5 min-h-6 font-sans text-sm text-muted">
        {reading !== undefined && <output className="block tabular-nums">{reading}</output>}
        {note}
        {failure && <span role="alert" className="block text-bad">{failure}</span>}
      </figcaption>
    </figure>
  )
}

function FrameButton({ pressed, ...rest }: { pressed?: boolean; onClick: () => void; disabled?: boolean; title: string; children: ReactNode }) {
  return (
    <button
      type="button"
      aria-pressed={pressed}
      className="inline-flex min-h-7 items-center gap-1 bg-sheet px-2 text-muted hover:bg-well hover:text-ink disabled:opacity-40 aria-pressed:bg-lamp-wash aria-pressed:text-ink"
      {...rest}
    />
  )
}

export interface Choice<V extends string> {
  value: V
  label: string
}

/** A small row of exclusive choices, such as the unit of an axis. */
export function Choices<V extends string>({ label, value, choices, onChange }: { label: string; value: V; choices: readonly Choice<V>[]; onChange: (value: V) => void }) {
  const name = useId()
  return (
    <fieldset className="m-0 flex min-w-0 items-center gap-2 border-0 p-0 font-sans text-xs">
      <legend className="float-left mr-2 p-0 text-muted">{label}</legend>
      <div className="flex divide-x divide-rule overflow-hidden rounded-sm border border-rule">
        {choices.map((choice) => (
          <label
            key={choice.value}
            className="relative inline-flex min-h-7 cursor-pointer items-center bg-sheet px-2 text-muted hover:text-ink has-checked:bg-lamp-wash has-checked:text-ink has-focus-visible:outline-2 has-focus-visible:-outline-offset-2 has-focus-visible:outline-lamp"
          >
            <input
              type="radio"
              name={name}
              className="absolute inset-0 cursor-pointer opacity-0"
              checked={choice.value === value}
              onChange={() => onChange(choice.value)}
            />
            {choice.label}
          </label>
        ))}
      </div>
    </fieldset>
  )
}
