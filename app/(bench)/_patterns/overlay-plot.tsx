'use client'
import { scaleLinear, type ScaleLinear } from 'd3-scale'
import { memo, useMemo, useState, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react'
import { BottomAxis, LeftAxis } from '@/app/_components/plots/axis'
import { PlotFrame } from '@/app/_components/plots/plot-frame'
import { styleOf } from '@/app/_components/plots/polarisation'
import { ruler, spread } from '@/app/_components/plots/ruler'
import { stacks, type Standing } from '@/app/_components/plots/stacks'
import { CurvePanel } from './curve-panel'
import { lineMark } from './line-mark'
import { domainOf, isShown, type OverlaidComponent, windowOf } from './overlay'
import { overlaidText } from './overlay-text'
import type { Window } from './state'
import { type Curve, type Frame, type Overlay } from './use-overlay'
import type { PatternLine } from './use-lines'

export interface OverlayPlotProps {
  overlay: Overlay
  lines: readonly PatternLine[]
  frame: Frame
  curve: Curve | null
  fieldTesla: number
  thetaDeg: number | null
  onWindow: (window: Window) => void
  table: ReactNode
  controls: ReactNode
}

export const AXIS_TITLES = { air: 'Wavelength in air', vacuum: 'Wavelength in vacuum', wavenumber: 'Wavenumber' } as const
export const AXIS_UNITS = { air: 'nm', vacuum: 'nm', wavenumber: 'cm⁻¹' } as const

type Stick = Standing<OverlaidComponent>
/** Nearer than this to the pointer a component is meant, px. */
const NEAR = 24
/** Farther than this the pointer drags a window, px. */
const DRAGGED = 5

const placeOn = (axis: Frame['axis'], { component }: OverlaidComponent): number | null =>
  axis === 'wavenumber' ? component.wavenumber_invcm : axis === 'air' ? component.wavelength_air_nm : component.wavelength_vac_nm

/** Several lines over one axis: π above, σ below, each line with a mark of its own, and the profile of all under them. */
export function OverlayPlot({ overlay, lines, frame, curve, fieldTesla, thetaDeg, onWindow, table, controls }: OverlayPlotProps) {
  const [active, setActive] = useState<string | null>(null)
  const { axis, window } = frame
  const domain = useMemo(() => domainOf(axis, window), [axis, window])
  const shown = useMemo(
    () =>
      overlay.components.filter((one) => {
        const place = placeOn(axis, one)
        return isShown(one) && place !== null && place >= domain[0] && place <= domain[1]
      }),
    [overlay, axis, domain],
  )
  const current = shown.find(({ key }) => key === active)
  const inside = new Set(shown.map(({ line }) => line))
  const names = lines.filter(({ index }) => inside.has(index)).map(({ index, name }) => `${index + 1} ${name}`)
  const blends = overlay.blends.filter(({ fromInvcm, toInvcm }) => toInvcm >= window.fromInvcm && fromInvcm <= window.toInvcm).length
  const quantity = thetaDeg === null ? 'strength' : 'intensity'
  const withV = curve?.profiles.stokesV != null
  const summary = `${shown.length} components of ${inside.size} ${inside.size === 1 ? 'line' : 'lines'}${blends > 0 ? `, ${blends} ${blends === 1 ? 'stretch' : 'stretches'} where lines blend` : ''}. Point at one, or tab to the picture and use the arrow keys; drag across to look closer.`
  return (
    <PlotFrame
      title="Patterns"
      name="patterns"
      description={`Components of ${names.join(', ') || 'no line'} at ${fieldTesla} T over ${AXIS_TITLES[axis].toLowerCase()}: π above the axis, σ below, height for ${quantity}; under them the Stokes profile of all lines together.`}
      height={(width) => (width < 560 ? 400 : 460) + (withV ? 110 : 0)}
      controls={controls}
      reading={current ? overlaidText(current, lines, axis, thetaDeg) : shown.length === 0 ? 'No component of these lines lies in the window.' : summary}
      table={table}
    >
      {(width, height) => <Drawing {...{ width, height, shown, overlay, lines, frame, domain, curve, withV, quantity, active, setActive, onWindow }} />}
    </PlotFrame>
  )
}

interface DrawingProps {
  width: number
  height: number
  shown: OverlaidComponent[]
  overlay: Overlay
  lines: readonly PatternLine[]
  frame: Frame
  domain: readonly [number, number]
  curve: Curve | null
  withV: boolean
  quantity: string
  active: string | null
  setActive: (key: string | null) => void
  onWindow: (window: Window) => void
}

const CURVE_HEIGHT = 110

const Drawing = memo(function Drawing({ width, height, shown, overlay, lines, frame, domain, curve, withV, quantity, active, setActive, onWindow }: DrawingProps) {
  const { axis } = frame
  const narrow = width < 560
  const [left, right, top] = [narrow ? 44 : 62, width - 14, narrow ? 58 : 66]
  const bottom = height - 62
  const curves = CURVE_HEIGHT * (withV ? 2 : 1)
  const floor = bottom - curves - 14
  const middle = (top + floor) / 2
  const x = useMemo(() => scaleLinear().domain(domain).range([left + 8, right - 8]), [domain, left, right])
  const { above, below, full } = useMemo(() => {
    const stand = (items: OverlaidComponent[]) => stacks(items.map((one) => ({ component: one, id: one.key, x: x(placeOn(axis, one) ?? 0), height: one.height })))
    const [up, down] = [stand(shown.filter(({ component }) => component.q === 0)), stand(shown.filter(({ component }) => component.q !== 0))]
    return { above: up, below: down, full: 1.12 * [...up, ...down].reduce((most, { to }) => Math.max(most, to), 0) || 1 }
  }, [shown, x, axis])
  const y = useMemo(() => scaleLinear().domain([0, full]).range([0, (floor - top) / 2 - 8]), [full, floor, top])
  const sticks = useMemo(() => [...above, ...below].sort((a, b) => a.x - b.x || a.component.component.q - b.component.component.q), [above, below])
  const xRuler = ruler(domain, right - left - 16, narrow ? 86 : 110)
  const yRuler = ruler([0, full], (floor - top) / 2 - 8, 40)
  const current = sticks.find(({ id }) => id === active)
  return (
    <>
      <Key x={left} shown={shown} />
      <LineHeads lines={lines} overlay={overlay} axis={axis} x={x} left={left} right={right} top={top} floor={floor} narrow={narrow} />
      <g aria-hidden="true">
        {xRuler.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${x(value)},${top}V${bottom}`} stroke="var(--rule)" strokeDasharray="1 4" />)}
        <Blended overlay={overlay} frame={frame} x={x} middle={middle} left={left} right={right} />
        <path d={`M${left},${middle}H${right}`} stroke="var(--ink)" strokeWidth={1.25} />
        {!narrow && (
          <g fontSize={15} fill="var(--muted)" stroke="var(--sheet)" strokeWidth={6} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif" textAnchor="end">
            <text x={right - 4} y={middle - 14}>π</text>
            <text x={right - 4} y={middle + 22}>σ</text>
          </g>
        )}
      </g>
      <LeftAxis ruler={yRuler} at={(v) => middle - y(v)} x={left} from={top} to={middle} />
      <LeftAxis ruler={{ ...yRuler, ticks: yRuler.ticks.filter((t) => t.value > 0) }} at={(v) => middle + y(v)} x={left} from={middle} to={floor} />
      {!narrow && <text aria-hidden="true" transform={`translate(14 ${middle}) rotate(-90)`} textAnchor="middle" fontSize={12.5} fill="var(--muted)">{quantity === 'strength' ? 'Strength' : 'Intensity'}</text>}
      <Sticks sticks={above} y={y} middle={middle} up />
      <Sticks sticks={below} y={y} middle={middle} />
      {current && <Active stick={current} y={y} middle={middle} up={above.includes(current)} />}
      {curve && <CurvePanel curve={curve} axis={axis} x={x} left={left} right={right} top={floor + 14} height={CURVE_HEIGHT} narrow={narrow} />}
      <BottomAxis ruler={xRuler} at={x} y={bottom} from={left} to={right} title={AXIS_TITLES[axis]} unit={AXIS_UNITS[axis]} />
      <g aria-hidden="true" fontSize={12} fill="var(--muted)">
        <text x={narrow ? left - 26 : left} y={height - 9}>{axis === 'wavenumber' ? '← to the red' : '← to the blue'}</text>
        <text x={right} y={height - 9} textAnchor="end">{axis === 'wavenumber' ? 'to the blue →' : 'to the red →'}</text>
      </g>
      <Hand sticks={sticks} above={above} x={x} left={left} right={right} top={top} bottom={bottom} middle={middle} active={active} setActive={setActive} onWindow={(from, to) => onWindow(windowOf(axis, from, to))} />
    </>
  )
})

/** The sticks of one side: one path for each line and polarisation, so that many cost little. */
const Sticks = memo(function Sticks({ sticks, y, middle, up = false }: { sticks: readonly Stick[]; y: ScaleLinear<number, number>; middle: number; up?: boolean }) {
  const direction = up ? -1 : 1
  const groups = new Map<string, { q: number; line: number; path: string; marks: string }>()
  for (const { component: { component, line }, x, from, to } of sticks) {
    const q = Math.sign(component.q)
    const key = `${line} ${q}`
    const group = groups.get(key) ?? { q, line, path: '', marks: '' }
    const end = middle + direction * y(to)
    group.path += `M${x.toFixed(2)},${(middle + direction * y(from)).toFixed(2)}V${end.toFixed(2)}`
    group.marks += lineMark(line, x, end, 4)
    groups.set(key, group)
  }
  return (
    <g aria-hidden="true">
      {[...groups].map(([key, { q, path }]) => {
        const style = styleOf(q)
        return <path key={key} d={path} stroke={style.colour} strokeWidth={style.width} strokeDasharray={style.dash} strokeLinecap={style.cap} fill="none" />
      })}
      {[...groups].map(([key, { q, marks }]) => <path key={key} d={marks} fill={styleOf(q).colour} stroke="var(--sheet)" strokeWidth={0.75} />)}
    </g>
  )
})

function Active({ stick, y, middle, up }: { stick: Stick; y: ScaleLinear<number, number>; middle: number; up: boolean }) {
  const direction = up ? -1 : 1
  const [start, end] = [middle + direction * y(stick.from), middle + direction * y(stick.to)]
  return (
    <g data-screen-only aria-hidden="true">
      <path d={`M${stick.x},${start}V${end}`} stroke="var(--lamp)" strokeOpacity={0.5} strokeWidth={11} strokeLinecap="round" />
      <path d={lineMark(stick.component.line, stick.x, end, 6)} fill="var(--ink)" stroke="var(--sheet)" strokeWidth={1} />
    </g>
  )
}

/** Stretches where lines blend, as hatched bands on the axis between π and σ. */
function Blended({ overlay, frame, x, middle, left, right }: { overlay: Overlay; frame: Frame; x: ScaleLinear<number, number>; middle: number; left: number; right: number }) {
  return overlay.blends.map((blend) => {
    const [from, to] = domainOf(frame.axis, blend).map((value) => Math.min(right, Math.max(left, x(value)))) as [number, number]
    if (to <= left || from >= right) return null
    const [start, end] = to - from < 8 ? [(from + to) / 2 - 4, (from + to) / 2 + 4] : [from, to]
    return (
      <g key={`${blend.fromInvcm}`}>
        <path d={`M${start},${middle - 9}H${end}V${middle + 9}H${start}Z`} fill="var(--lamp)" fillOpacity={0.28} />
        <path d={`M${start},${middle - 11}V${middle + 11}M${end},${middle - 11}V${middle + 11}`} stroke="var(--lamp-ink)" strokeWidth={1.5} />
      </g>
    )
  })
}

/** The number and name of each line over its centre, moved apart where they would meet. */
function LineHeads({ lines, overlay, axis, x, left, right, top, floor, narrow }: { lines: readonly PatternLine[]; overlay: Overlay; axis: Frame['axis']; x: ScaleLinear<number, number>; left: number; right: number; top: number; floor: number; narrow: boolean }) {
  const [from, to] = x.domain() as [number, number]
  const heads = overlay.lines.flatMap(({ index, components: { centre } }) => {
    const place = axis === 'wavenumber' ? centre.wavenumber_invcm : axis === 'air' ? centre.wavelength_air_nm : centre.wavelength_vac_nm
    return place === null || place < from || place > to ? [] : [{ index, x: x(place), name: lines[index]?.name ?? '' }]
  })
  const room = (right - left) / Math.max(1, heads.length)
  const named = !narrow && room >= 124
  const places = spread(heads.map((head) => head.x), named ? 124 : 26, left + (named ? 60 : 10), right - (named ? 60 : 10))
  return (
    <g aria-hidden="true" fontSize={12.5}>
      {heads.map((head, i) => {
        const at = places[i] ?? head.x
        return (
          <g key={head.index}>
            <path d={`M${at},${top - 16}L${head.x},${top - 4}V${floor}`} stroke="var(--rule-strong)" strokeWidth={0.75} strokeDasharray="2 3" fill="none" />
            <path d={lineMark(head.index, at - (named ? 52 : 7), top - 25, 4.2)} fill="var(--ink)" />
            <text x={at - (named ? 43 : 0)} y={top - 21} fill="var(--ink)">
              <tspan fontWeight={600}>{head.index + 1}</tspan>
              {named ? <tspan dx={5}>{head.name}</tspan> : null}
            </text>
          </g>
        )
      })}
    </g>
  )
}

/** The key of polarisations; what a line's mark is stands over the line and in the list. */
function Key({ x, shown }: { x: number; shown: readonly OverlaidComponent[] }) {
  const counts = [0, 1, -1].map((q) => ({ q, count: shown.filter(({ component }) => Math.sign(component.q) === q).length })).filter(({ count }) => count > 0)
  return (
    <g aria-hidden="true">
      {counts.map(({ q, count }, index) => {
        const style = styleOf(q)
        return (
          <g key={q} transform={`translate(${x + index * 92} 15)`}>
            <path d="M0,0H26" stroke={style.colour} strokeWidth={style.width} strokeDasharray={style.dash} strokeLinecap={style.cap} />
            <text x={33} dy="0.34em" fontSize={13} fill="var(--ink)">
              {style.name}
              <tspan fill="var(--muted)" dx={5} fontSize={12}>{count}</tspan>
            </text>
          </g>
        )
      })}
    </g>
  )
}

interface HandProps {
  sticks: readonly Stick[]
  above: readonly Stick[]
  x: ScaleLinear<number, number>
  left: number
  right: number
  top: number
  bottom: number
  middle: number
  active: string | null
  setActive: (key: string | null) => void
  onWindow: (from: number, to: number) => void
}

/** What takes the pointer and the keyboard: names the nearest component, and drags a window. */
function Hand({ sticks, above, x, left, right, top, bottom, middle, active, setActive, onWindow }: HandProps) {
  const [drag, setDrag] = useState<{ from: number; to: number } | null>(null)
  const at = (event: PointerEvent<SVGRectElement>) => {
    const box = event.currentTarget.getBoundingClientRect()
    return { x: left + ((event.clientX - box.left) / box.width) * (right - left), y: top + ((event.clientY - box.top) / box.height) * (bottom - top) }
  }
  const name = ({ x: px, y: py }: { x: number; y: number }) => {
    const side = py < middle ? sticks.filter((stick) => above.includes(stick)) : sticks.filter((stick) => !above.includes(stick))
    const nearest = side.reduce<Stick | null>((best, stick) => (best === null || Math.abs(stick.x - px) < Math.abs(best.x - px) ? stick : best), null)
    setActive(nearest !== null && Math.abs(nearest.x - px) <= NEAR ? nearest.id : null)
  }
  const end = () => {
    if (drag !== null && Math.abs(drag.to - drag.from) > DRAGGED) onWindow(x.invert(Math.min(drag.from, drag.to)), x.invert(Math.max(drag.from, drag.to)))
    setDrag(null)
  }
  const onKeyDown = (event: KeyboardEvent) => {
    const place = sticks.findIndex(({ id }) => id === active)
    const next = { ArrowRight: place + 1, ArrowLeft: place < 0 ? sticks.length - 1 : place - 1, Home: 0, End: sticks.length - 1 }[event.key]
    if (event.key === 'Escape') setActive(null)
    if (next === undefined) return
    event.preventDefault()
    const target = sticks[Math.min(sticks.length - 1, Math.max(0, next))]
    if (target) setActive(target.id)
  }
  const clamp = (value: number) => Math.min(right, Math.max(left, value))
  return (
    <g data-screen-only>
      {drag !== null && <path d={`M${clamp(drag.from)},${top}H${clamp(drag.to)}V${bottom}H${clamp(drag.from)}Z`} fill="var(--lamp)" fillOpacity={0.16} stroke="var(--lamp)" />}
      <rect
        x={left}
        y={top}
        width={right - left}
        height={bottom - top}
        fill="transparent"
        tabIndex={0}
        role="group"
        aria-label="Components in order along the axis; left and right arrow keys go through them"
        style={{ touchAction: 'pan-y', cursor: 'crosshair' }}
        onKeyDown={onKeyDown}
        onBlur={() => setActive(null)}
        onPointerDown={(event) => {
          if (event.button !== 0) return
          event.currentTarget.setPointerCapture(event.pointerId)
          const from = at(event).x
          setDrag({ from, to: from })
        }}
        onPointerMove={(event) => {
          const place = at(event)
          if (drag === null) name(place)
          else setDrag({ from: drag.from, to: clamp(place.x) })
        }}
        onPointerUp={end}
        onPointerCancel={() => setDrag(null)}
        onPointerLeave={() => drag === null && setActive(null)}
      />
    </g>
  )
}

