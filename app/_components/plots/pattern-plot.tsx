'use client'
import { scaleLinear } from 'd3-scale'
import { useState, type PointerEvent } from 'react'
import { BottomAxis, LeftAxis } from './axis'
import { ComponentsTwin } from './components-twin'
import { componentKey, componentText, type DrawnComponent, endsText, heightOf, isDrawn, SHIFT_UNITS, shiftIn, type ShiftUnit } from './component-text'
import { Choices, PlotFrame } from './plot-frame'
import { polarisationName, styleOf } from './polarisation'
import { niceCeil, ruler } from './ruler'
import { stacks, type Standing } from './stacks'
import { roving } from './use-roving'

export interface PatternPlotProps {
  components: readonly DrawnComponent[]
  /** What the wavelengths are in. */
  medium: 'air' | 'vacuum'
  fieldTesla: number
  /** Heights are intensities at this angle; strengths where it is null. */
  thetaDeg: number | null
  /** The component under the pointer or the focus, shared with the other drawings of the line. */
  active: string | null
  onActive: (key: string | null) => void
  name: string
  title?: string
  /** Of the axis, the first being shown until another is chosen. */
  units?: readonly ShiftUnit[]
  /** Beside the drawing's words. */
  note?: string
}

const UNITS: readonly ShiftUnit[] = ['lorentz', 'invcm', 'ghz', 'pm']
/** More components than this are drawn slim. */
const CROWDED = 40
const HEADING = { top: 34, bottom: 62 }

/** Half-width of the axis: room for every component, in steps, so that the field moves the lines and not the ruler. */
function reach(unit: ShiftUnit, shifts: readonly number[]): number {
  const largest = Math.max(0, ...shifts.map(Math.abs))
  return unit === 'lorentz' ? Math.max(0.5, niceCeil(largest * 1.08)) : niceCeil(largest * 1.08)
}

/** The Zeeman pattern of a line: π stands above the axis, σ hangs below, height for strength. */
export function PatternPlot({ components, medium, fieldTesla, thetaDeg, active, onActive, name, title = 'Pattern', units = UNITS, note }: PatternPlotProps) {
  const [chosen, setUnit] = useState<ShiftUnit | null>(null)
  const unit = chosen !== null && units.includes(chosen) ? chosen : (units[0] ?? 'invcm')
  const shown = components.filter(isDrawn)
  const shifts = shown.map((component) => shiftIn(unit, component) ?? 0)
  const half = reach(unit, shifts)
  const current = shown.find((component) => componentKey(component) === active)
  const quantity = thetaDeg === null ? 'Strength' : 'Intensity'
  const crowded = shown.length > CROWDED
  const counts = [0, 1, -1].map((q) => `${shown.filter((c) => Math.sign(c.q) === q).length} ${styleOf(q).name}`).join(', ')
  const together = fieldTesla === 0 && unit !== 'lorentz' && shifts.every((shift) => shift === 0)

  return (
    <PlotFrame
      title={title}
      name={`${name}-pattern`}
      description={`Pattern of ${shown.length} components (${counts}): π above the axis, σ below, height for ${quantity.toLowerCase()}. Arrow keys go through the components.`}
      height={(width) => (width < 560 ? 330 : 380)}
      controls={<Choices label="Axis" value={unit} choices={units.map((value) => ({ value, label: SHIFT_UNITS[value].label }))} onChange={setUnit} />}
      reading={current ? componentText(current, thetaDeg) : together ? 'At zero field all components lie on the line.' : `${shown.length} components: ${counts}. Point at one, or tab to it.`}
      table={<ComponentsTwin components={components} thetaDeg={thetaDeg} caption={`Components at ${fieldTesla} T`} units={units} />}
      note={note}
    >
      {(width, height) => {
        const narrow = width < 560
        const [left, right, top, bottom] = [narrow ? 40 : 58, width - 14, HEADING.top, height - HEADING.bottom]
        const middle = (top + bottom) / 2
        const x = scaleLinear().domain([-half, half]).range([left + 12, right - 12])
        // Without an angle every q sums to 1; a single stick is at most 1. With one the largest factor is 1/2.
        const above = stand(shown.filter((c) => c.q === 0))
        const below = stand(shown.filter((c) => c.q !== 0))
        const tallest = Math.max(0, ...[...above, ...below].map((s) => s.to))
        const full = (thetaDeg === null ? tallest : Math.max(tallest, 0.5 * strongest())) * 1.1 || 1
        const y = scaleLinear().domain([0, full]).range([0, (bottom - top) / 2 - 20])
        const order = [...above, ...below].sort((a, b) => a.x - b.x || b.component.q - a.component.q).map((s) => s.id)
        const across = (key: string, upwards: boolean) => {
          const from = [...above, ...below].find((s) => s.id === key)
          const side = upwards ? above : below
          if (!from || side.includes(from)) return null
          return [...side].sort((a, b) => Math.abs(a.x - from.x) - Math.abs(b.x - from.x))[0]?.id ?? null
        }
        const mark = roving({ order, active, onActive, across })
        const xRuler = ruler([-half, half], right - left - 24, narrow ? 58 : 84)
        const yRuler = ruler([0, full], (bottom - top) / 2 - 20, 40)

        function stand(items: DrawnComponent[]) {
          return stacks(items.map((component) => ({ component, id: componentKey(component), x: x(shiftIn(unit, component) ?? 0), height: heightOf(component, thetaDeg) })))
        }
        function strongest() {
          const plain = (items: DrawnComponent[]) => stacks(items.map((c) => ({ component: c, id: '', x: x(shiftIn(unit, c) ?? 0), height: heightOf(c, null) })))
          return Math.max(0, ...[...plain(shown.filter((c) => c.q === 0)), ...plain(shown.filter((c) => c.q !== 0))].map((s) => s.to))
        }
        const nearest = (event: PointerEvent<SVGRectElement>, side: Standing<DrawnComponent>[]) => {
          const box = event.currentTarget.getBoundingClientRect()
          const at = left + ((event.clientX - box.left) / box.width) * (right - left)
          const away = ((event.clientY - box.top) / box.height) * ((bottom - top) / 2)
          const up = side === above ? (bottom - top) / 2 - away : away
          const column = [...side].sort((a, b) => Math.abs(a.x - at) - Math.abs(b.x - at))[0]
          if (!column || Math.abs(column.x - at) > 40) return onActive(null)
          const within = side.filter((s) => s.x === column.x)
          onActive((within.find((s) => y(s.to) >= up) ?? within[within.length - 1] ?? column).id)
        }
        const sticks = (side: Standing<DrawnComponent>[], direction: 1 | -1) =>
          side.map((standing) => <Stick key={standing.id} {...standing} middle={middle} y={y} direction={direction} slim={crowded} thetaDeg={thetaDeg} active={active === standing.id} mark={mark(standing.id)} />)

        return (
          <>
            <Key x={left} shown={shown} narrow={narrow} />
            <g aria-hidden="true">
              {xRuler.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${x(value)},${top}V${bottom}`} stroke="var(--rule)" strokeDasharray={value === 0 ? undefined : '1 4'} />)}
              <path d={`M${left},${middle}H${right}`} stroke="var(--ink)" strokeWidth={1.25} />
              {xRuler.ticks.map(({ value, rank }) => rank < 2 && <path key={value} d={`M${x(value)},${middle - (rank === 0 ? 4 : 2.5)}v${rank === 0 ? 8 : 5}`} stroke="var(--ink)" strokeWidth={0.75} />)}
              {!narrow && (
                <>
                  <text x={right - 4} y={top + 14} textAnchor="end" fontSize={15} fill="var(--muted)" stroke="var(--sheet)" strokeWidth={6} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif">π</text>
                  <text x={right - 4} y={bottom - 16} textAnchor="end" fontSize={15} fill="var(--muted)" stroke="var(--sheet)" strokeWidth={6} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif">σ</text>
                </>
              )}
            </g>
            <LeftAxis ruler={{ ...yRuler, ticks: yRuler.ticks }} at={(v) => middle - y(v)} x={left} from={top} to={middle} />
            <LeftAxis ruler={{ ...yRuler, ticks: yRuler.ticks.filter((t) => t.value > 0) }} at={(v) => middle + y(v)} x={left} from={middle} to={bottom} />
            {!narrow && (
              <text aria-hidden="true" transform={`translate(16 ${middle}) rotate(-90)`} textAnchor="middle" fontSize={12.5} fill="var(--muted)">
                {quantity}
              </text>
            )}
            <BottomAxis ruler={xRuler} at={x} y={bottom} from={left} to={right} title={unit === 'pm' ? `Shift in wavelength in ${medium}` : SHIFT_UNITS[unit].axis} unit={unit === 'lorentz' ? undefined : SHIFT_UNITS[unit].unit} />
            <Ends unit={unit} left={left} right={right} y={height - 9} narrow={narrow} />
            <rect data-screen-only x={left} y={top} width={right - left} height={middle - top} fill="transparent" onPointerMove={(e) => nearest(e, above)} onPointerLeave={() => onActive(null)} />
            <rect data-screen-only x={left} y={middle} width={right - left} height={bottom - middle} fill="transparent" onPointerMove={(e) => nearest(e, below)} onPointerLeave={() => onActive(null)} />
            <g pointerEvents="none">
              {sticks(above, 1)}
              {sticks(below, -1)}
            </g>
          </>
        )
      }}
    </PlotFrame>
  )
}

interface StickProps extends Standing<DrawnComponent> {
  middle: number
  y: (height: number) => number
  direction: 1 | -1
  /** Among many: a thinner stroke and a smaller mark. */
  slim: boolean
  thetaDeg: number | null
  active: boolean
  mark: object
}

function Stick({ component, x, from, to, middle, y, direction, slim, thetaDeg, active, mark }: StickProps) {
  const style = styleOf(component.q)
  const [start, end] = [middle - direction * y(from), middle - direction * y(to)]
  const label = componentText(component, thetaDeg)
  return (
    <g {...mark} role="img" aria-label={label}>
      {active && <path d={`M${x},${start}V${end}`} stroke="var(--lamp)" strokeOpacity={0.45} strokeWidth={11} strokeLinecap="round" data-screen-only />}
      <path d={`M${x},${start}V${end}`} stroke={style.colour} strokeWidth={style.width * (slim ? 0.6 : 1)} strokeDasharray={style.dash} strokeLinecap={style.cap} />
      <path d={style.mark} transform={`translate(${x} ${end})${slim ? ' scale(0.55)' : ''}`} fill={style.colour} stroke="var(--sheet)" strokeWidth={1} />
      {active && (
        <text x={x} y={end - direction * 11} dy={direction === 1 ? 0 : '0.7em'} textAnchor="middle" fontSize={12} fontWeight={600} fill="var(--ink)" stroke="var(--sheet)" strokeWidth={4} paintOrder="stroke" data-screen-only>
          {endsText(component)}
        </text>
      )}
    </g>
  )
}

/** The key: each polarisation with its stroke, its mark and how many components it has. */
function Key({ x, shown, narrow }: { x: number; shown: readonly DrawnComponent[]; narrow: boolean }) {
  const groups = [...new Set([0, 1, -1, ...shown.map((c) => c.q)])].filter((q) => shown.some((c) => c.q === q))
  const step = groups.length > 3 ? (narrow ? 64 : 100) : narrow ? 92 : 110
  return (
    <g aria-hidden="true">
      {groups.map((q, index) => {
        const style = styleOf(q)
        return (
          <g key={q} transform={`translate(${x + index * step} 17)`}>
            <path d="M0,0H30" stroke={style.colour} strokeWidth={style.width} strokeDasharray={style.dash} strokeLinecap={style.cap} />
            <path d={style.mark} transform="translate(15 0)" fill={style.colour} stroke="var(--sheet)" strokeWidth={1} />
            <text x={37} dy="0.34em" fontSize={13} fill="var(--ink)">
              {polarisationName(q)}
              <tspan fill="var(--muted)" dx={5} fontSize={12}>{shown.filter((c) => c.q === q).length}</tspan>
            </text>
          </g>
        )
      })}
    </g>
  )
}

/** Which way is blue: the wavelength axis runs the other way from the wavenumber's. */
function Ends({ unit, left, right, y, narrow }: { unit: ShiftUnit; left: number; right: number; y: number; narrow: boolean }) {
  const [first, last] = unit === 'pm' ? ['to the blue', 'to the red'] : ['to the red', 'to the blue']
  return (
    <g aria-hidden="true" fontSize={12} fill="var(--muted)">
      <text x={narrow ? left - 26 : left} y={y}>{`← ${first}`}</text>
      <text x={right} y={y} textAnchor="end">{`${last} →`}</text>
    </g>
  )
}
