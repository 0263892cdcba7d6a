'use client'
import { memo, useCallback, useEffect, useMemo, useState } from 'react'
import { benchSentence } from '@/lib/atomic/profile-stokes'
import { fieldForUrl } from '@/lib/units/field'
import { AngleControl } from '@/app/_components/field/angle-control'
import { FieldControl } from '@/app/_components/field/field-control'
import { useAngle, useField } from '@/app/_components/field/use-field'
import { Notice } from '@/app/_components/notice'
import { fixed } from '@/app/_components/number'
import { PageHead, Part } from '@/app/_components/page-head'
import { RequestPanel } from '@/app/_components/request-panel'
import { Warnings } from '@/app/_components/warnings'
import { AxisChoice, WidthControl, WindowControl } from './controls'
import { CurveCopy } from './curve-copy'
import { Examples } from './examples'
import { LineAdder } from './line-adder'
import { LINES_MOST } from './line-ids'
import { LineList } from './line-list'
import { AXIS_UNIT, domainOf, type NumberedLine, windowAround } from './overlay'
import { OverlayPlot } from './overlay-plot'
import { OverlayTable } from './overlay-table'
import { namesOf } from './overlay-text'
import { type LineWanted, type ModelAsked, useLinesWanted, useView, useWidthAsked, type Width, type Window } from './state'
import { type PatternLine, useLines, useWeighed } from './use-lines'
import { type Frame, type Overlay, useCurve, useFrame, useOverlay } from './use-overlay'
import { verdictOf } from './verdict'

/** Even points of the curve, one to a pixel or so of a wide drawing. */
const CURVE_POINTS = 800

/** Several lines and species at one field, over one axis. */
export function PatternsView() {
  const { lines: wanted, notLines, setLines } = useLinesWanted()
  const lines = useLines(wanted)
  const add = (ids: string[]) => setLines([...wanted, ...ids.filter((id) => wanted.every((line) => line.id !== id)).map((id) => ({ id, weight: 1 }))].slice(0, LINES_MOST))
  return (
    <div className="page pb-16">
      <PageHead title="Patterns">Several lines at one field, over one axis: which components meet, and what an instrument makes of them.</PageHead>
      {notLines.length > 0 ? <div className="mb-4"><Notice tone="warn" title="Not everything in the address is a line"><p>{notLines.slice(0, 5).join(', ').slice(0, 200)}: a line is written like Na-I.1~Na-I.3.</p></Notice></div> : null}
      <LineAdder present={new Set(wanted.map(({ id }) => id))} room={LINES_MOST - wanted.length} onAdd={add} />
      {wanted.length === 0 ? <div className="mt-8"><Examples /></div> : <Bench wanted={wanted} lines={lines} setLines={setLines} />}
    </div>
  )
}

/** As long as this nothing has moved: the hand rests. */
const RESTS_MS = 180

/** A value as it was when it last stood still. */
function useSettled<T>(value: T): T {
  const [settled, setSettled] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), RESTS_MS)
    return () => clearTimeout(timer)
  }, [value])
  return settled
}

function Bench({ wanted, lines, setLines }: { wanted: readonly LineWanted[]; lines: readonly PatternLine[]; setLines: (lines: readonly LineWanted[]) => void }) {
  const { field, setField, problem: fieldProblem } = useField()
  const { thetaDeg, setThetaDeg, problem: angleProblem } = useAngle()
  const { width, setWidth } = useWidthAsked()
  const { model, setModel, axis, setAxis, window, setWindow } = useView()
  const { weighed, massesPending } = useWeighed(lines, width.temperatureK)
  const overlay = useOverlay(weighed, { fieldTesla: field.tesla, thetaDeg, model, width }, massesPending)
  const frame = useFrame(overlay.lines, axis, window)
  const curve = useCurve(overlay.lines, frame?.window ?? null, thetaDeg, CURVE_POINTS)
  // the drawing follows the slider; words and tables wait until it rests, for a table of many lines takes longer than a step of a drag may
  const settled = useSettled(overlay)
  const settledCurve = useSettled(curve)
  const verdict = useMemo(() => verdictOf(settled.lines, lines), [settled, lines])

  const remove = useCallback((id: string) => setLines(wanted.filter((line) => line.id !== id)), [wanted, setLines])
  const setWeight = useCallback((id: string, weight: number) => setLines(wanted.map((line) => (line.id === id ? { ...line, weight } : line))), [wanted, setLines])
  const go = useCallback((line: NumberedLine) => setWindow(windowAround(line)), [setWindow])
  const table = useMemo(() => <OverlayTable components={settled.components} lines={lines} fieldTesla={settled.lines[0]?.components.field_tesla ?? 0} thetaDeg={settled.lines[0]?.components.theta_deg ?? null} />, [settled, lines])
  const caption = `Stokes profile at ${field.tesla} T`
  const first = lines.find(({ detail }) => detail !== null)?.detail ?? null

  return (
    <>
      <div className="mt-4">
        <LineList lines={lines} ready={settled.lines} refused={settled.refused} onRemove={remove} onWeight={setWeight} onGo={go} />
      </div>
      <div className="mt-4 space-y-3">
        <FieldControl value={field} onChange={setField} problem={fieldProblem} model={verdict.model} tone={verdict.tone} verdict={verdict.sentence} limitTesla={verdict.limitTesla} />
        <AngleControl value={thetaDeg} onChange={setThetaDeg} problem={angleProblem} />
        <WidthControl width={width} onWidth={setWidth} model={model} onModel={setModel} wavenumber={first?.wavenumber_invcm ?? null} />
      </div>
      {frame === null ? null : (
        <>
          <div className="mt-7">
            <OverlayPlot overlay={overlay} lines={lines} frame={frame} curve={curve} fieldTesla={field.tesla} thetaDeg={thetaDeg} onWindow={setWindow} table={table} controls={<AxisChoice frame={frame} onAxis={setAxis} />} />
          </div>
          <div className="flex flex-wrap items-end justify-between gap-3">
            <WindowControl frame={frame} onWindow={setWindow} />
            {settledCurve ? <CurveCopy curve={settledCurve} caption={caption} /> : null}
          </div>
          <Words overlay={settled} lines={lines} thetaDeg={thetaDeg} />
          <Part title="Components" aside={`At ${field.tesla}\u202fT, adopted g values`}>{table}</Part>
          <Request wanted={wanted} frame={frame} field={fieldForUrl(field.tesla, field.unit)} thetaDeg={thetaDeg} model={model} width={width} />
        </>
      )}
    </>
  )
}

/** What blends, what is seen at the apparatus, and what the computation warns of. */
const Words = memo(function Words({ overlay, lines, thetaDeg }: { overlay: Overlay; lines: readonly PatternLine[]; thetaDeg: number | null }) {
  return (
    <>
      {overlay.blends.length > 0 ? (
        <div className="mt-4">
          <Notice title={`Lines blend in ${overlay.blends.length} ${overlay.blends.length === 1 ? 'stretch' : 'stretches'}: components of different lines are nearer than the width in force.`}>
            <ul>
              {overlay.blends.slice(0, 8).map((blend) => (
                <li key={blend.fromInvcm} className="num">{namesOf(lines, blend.lines)}: {fixed(blend.fromInvcm, 4)} to {fixed(blend.toInvcm, 4)}&#8239;cm⁻¹</li>
              ))}
            </ul>
            {overlay.blends.length > 8 ? <p>and {overlay.blends.length - 8} more, marked on the axis and in the table.</p> : null}
          </Notice>
        </div>
      ) : null}
      <p className="note mt-4 max-w-[60rem]">
        {benchSentence({ thetaDeg })} q = m<sub>upper</sub> − m<sub>lower</sub> is the same in absorption and emission. The curve is what the lines add in emission, optically thin; the integral of I over
        wavenumber is the weight of a line in the linear model. {thetaDeg === null ? '' : 'V > 0 turns counter-clockwise as the observer sees it (IAU 1974). '}Weights are yours: the table knows no line strengths.
      </p>
      <Warnings meta={{ warnings: overlay.warnings }} quiet />
    </>
  )
})

interface RequestProps {
  wanted: readonly LineWanted[]
  frame: Frame
  field: string
  thetaDeg: number | null
  model: ModelAsked
  width: Width
}

const REQUEST_POINTS = 2000

/** The window as a grid of the API, in the unit of the axis. */
function gridOf({ axis, window }: { axis: Frame['axis']; window: Window }) {
  const [start, stop] = domainOf(axis, window).map((value) => Number(value.toPrecision(12)))
  return { start, stop, count: REQUEST_POINTS, unit: AXIS_UNIT[axis] }
}

/** The call that gives the curve. */
const Request = memo(function Request({ wanted, frame, field, thetaDeg, model, width }: RequestProps) {
  const body = useMemo(
    () => ({
      lines: wanted.map(({ id, weight }) => ({ transition: id, ...(weight === 1 ? {} : { weight }) })),
      field,
      ...(model === 'auto' ? {} : { model }),
      ...(thetaDeg === null ? {} : { theta_deg: thetaDeg }),
      ...(width.temperatureK > 0 ? { temperature_k: width.temperatureK } : {}),
      ...(width.instrument === 'fwhm' ? { instrument_fwhm_invcm: width.value } : { resolving_power: width.value }),
      grid: gridOf(frame),
    }),
    [wanted, frame, field, thetaDeg, model, width],
  )
  return <RequestPanel path="/profiles" method="POST" body={body} />
})
