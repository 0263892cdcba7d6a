'use client'
import { scaleLinear } from 'd3-scale'
import { useMemo } from 'react'
import { formatHalfUnicode } from '@/lib/atomic/half'
import { fieldIn, formatField, type FieldUnit } from '@/lib/units/field'
import { BottomAxis, LeftAxis } from './axis'
import type { Fan, FanPoint } from './fan'
import { ruler, signed, spread, superscript } from './ruler'
import { roving } from './use-roving'

export interface FanScale {
  quantity: 'Shift' | 'Energy'
  /** Of the unit shown in one cm^-1. */
  per: number
  label: string
  low: number
  high: number
}

interface FanSheetProps {
  width: number
  height: number
  /** Stem of names inside the drawing. */
  id: string
  fan: Fan
  scale: FanScale
  edge: number
  here: readonly FanPoint[]
  fieldTesla: number
  fieldUnit: FieldUnit
  limitTesla: number | null
  tolerance: number
  labelled: boolean
  active: string | null
  onActive: (key: string | null) => void
  onField?: (tesla: number) => void
}

/** Where the words about the limit fit: in the hatched part, else before it and clear of the cursor, else nowhere. */
function placeText(limit: number, left: number, right: number, cursor: number): { x: number; anchor: 'start' | 'end' } | null {
  const room = 178
  if (right - Math.max(limit, cursor > limit ? cursor : limit) >= room) return { x: Math.max(limit, cursor > limit ? cursor : limit) + 7, anchor: 'start' }
  if (cursor > limit && cursor - limit >= room) return { x: limit + 7, anchor: 'start' }
  return limit - Math.max(left, cursor < limit ? cursor : left) >= room ? { x: limit - 7, anchor: 'end' } : null
}

/** What the names at the right edge need, from their lengths: the longest of either kind with the lines that lead to them. */
function roomFor({ curves, heads }: Fan): number {
  const longest = (texts: readonly (string | null)[]) => Math.max(...texts.map((text) => text?.length ?? 0))
  const names = Math.max(longest(curves.map((curve) => curve.name)), heads.name.length - 1) * NAME_PX
  const fars = heads.far === null ? 0 : Math.max(longest(curves.map((curve) => curve.far)), heads.far.length - 1) * FAR_PX + 12
  return 30 + names + fars
}
const NAME_PX = 6.6
const FAR_PX = 6.2

const pathOf = (xs: readonly number[], ys: readonly number[]): string => xs.map((x, i) => `${i === 0 ? 'M' : 'L'}${x.toFixed(2)},${(ys[i] ?? 0).toFixed(2)}`).join('')

/** The drawing of a fan: curves with their names at the right edge, the field in force, and where the linear law fails. */
export function FanSheet({ width, height, id, fan, scale, edge, here, fieldTesla, fieldUnit, limitTesla, tolerance, labelled, active, onActive, onField }: FanSheetProps) {
  const narrow = width < 560
  const far = labelled && fan.heads.far !== null
  const margin = labelled ? roomFor(fan) : 24
  const [left, right, top, bottom] = [narrow ? 52 : 78, width - margin, labelled ? 30 : 16, height - 48]
  const x = scaleLinear().domain([0, edge]).range([left, right])
  const y = scaleLinear().domain([scale.low, scale.high]).range([bottom - 8, top + 8])
  const { lines, neighbours, labels } = useMemo(() => drawn(fan, scale, { left, right, top, bottom, edge }), [fan, scale, left, right, top, bottom, edge])
  const xUnits = ruler([0, fieldIn(edge, fieldUnit)], right - left, narrow ? 62 : 90)
  const yUnits = ruler([scale.low, scale.high], bottom - top - 16, 44)
  const order = [...fan.curves].sort((a, b) => (b.values.at(-1) ?? 0) - (a.values.at(-1) ?? 0)).map((curve) => curve.key)
  const mark = roving({ order, active, onActive, across: (key, up) => order[order.indexOf(key) + (up ? -1 : 1)] ?? null })
  const limit = limitTesla !== null && limitTesla < edge ? x(limitTesla) : null
  const cursor = fieldTesla <= edge ? x(fieldTesla) : null
  const limitText = limit === null ? null : placeText(limit, left, right, cursor ?? left)
  return (
    <>
      <defs>
        <pattern id={`${id}-hatch`} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <path d="M0,0V7" stroke="var(--warn)" strokeOpacity={0.28} strokeWidth={2} />
        </pattern>
        <clipPath id={`${id}-sheet`}>
          <rect x={left} y={top} width={right - left} height={bottom - top} />
        </clipPath>
      </defs>
      <g aria-hidden="true">
        {yUnits.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${left},${y(value)}H${right}`} stroke="var(--rule)" strokeDasharray={value === 0 ? undefined : '1 4'} />)}
        {limit !== null && <rect x={limit} y={top} width={right - limit} height={bottom - top} fill={`url(#${id}-hatch)`} />}
      </g>
      <LeftAxis ruler={yUnits} at={y} x={left} from={top} to={bottom} title={narrow ? undefined : scale.quantity} unit={scale.label} />
      <BottomAxis ruler={xUnits} at={(value) => x(value / fieldIn(1, fieldUnit))} y={bottom} from={left} to={right} title="Field" unit={fieldUnit} />
      {narrow && <text x={4} y={14} fontSize={12} fill="var(--muted)" aria-hidden="true">{`${yUnits.exponent === 0 ? '' : `10${superscript(yUnits.exponent)} `}${scale.label}`}</text>}
      {onField && (
        <rect
          data-screen-only
          x={left}
          y={top}
          width={right - left}
          height={bottom - top}
          fill="transparent"
          className="cursor-crosshair"
          onClick={(event) => {
            const box = event.currentTarget.getBoundingClientRect()
            onField(Number((((event.clientX - box.left) / box.width) * edge).toPrecision(3)))
          }}
        />
      )}
      <g aria-hidden="true" clipPath={`url(#${id}-sheet)`} fill="none" pointerEvents="none">
        {neighbours.map(({ key, path }) => <path key={key} d={path} stroke="var(--rule-strong)" strokeWidth={1} />)}
        {neighbours.map(({ key, name, start }) => name !== null && start > top + 8 && start < bottom - 2 && Math.abs(start - y(0)) > 16 && (
          <text key={`${key} name`} x={left + 6} y={start - 4} fontSize={12} fill="var(--muted)" stroke="var(--sheet)" strokeWidth={3} paintOrder="stroke">{name}</text>
        ))}
        {lines.map(({ key, linear }) => linear !== null && <path key={key} d={linear} stroke="var(--muted)" strokeWidth={1} strokeDasharray="4 4" />)}
      </g>
      {limit !== null && (
        <g aria-hidden="true" pointerEvents="none">
          <path d={`M${limit},${top}V${bottom}`} stroke="var(--warn)" strokeWidth={1.5} strokeDasharray="2 3" />
          {limitText && (
            <text x={limitText.x} y={bottom - 16} textAnchor={limitText.anchor} fontSize={12} fill="var(--warn)" stroke="var(--sheet)" strokeWidth={4} paintOrder="stroke">
              {`linear off by over ${tolerance * 100} % from ${formatField(Number((limitTesla ?? 0).toPrecision(3)), fieldUnit)}`}
            </text>
          )}
        </g>
      )}
      {cursor !== null && (
        <g aria-hidden="true" pointerEvents="none">
          <path d={`M${cursor},${top}V${bottom}`} stroke="var(--lamp)" strokeWidth={2} />
          <path d={`M${cursor - 6},${top - 6}h12l-6,8Z`} fill="var(--lamp)" />
        </g>
      )}
      {labelled && (
        <g aria-hidden="true" fontSize={13} fontStyle="italic" fill="var(--muted)" fontFamily="'STIX Two Text Variable', serif">
          <text x={right + 14} y={14}><Subscripted text={fan.heads.name} /></text>
          {far && <text x={width - 6} y={14} textAnchor="end"><Subscripted text={fan.heads.far ?? ''} /></text>}
        </g>
      )}
      {fan.curves.map((curve, index) => {
        const { key } = curve
        const lit = key === active
        const at = here.find((point) => point.key === key)
        const label = labels[index] ?? 0
        return (
          <g key={key} {...mark(key)} role="img" aria-label={`${fan.heads.name} = ${curve.name}${curve.far === null ? '' : `, at high field ${fan.heads.far ?? ''} = ${curve.far}`}, ${signed((at?.energyInvcm ?? 0) * scale.per, 6)} ${scale.label}`} onPointerEnter={() => onActive(key)} onPointerLeave={() => onActive(null)}>
            <path d={lines[index]?.path} stroke="transparent" strokeWidth={10} fill="none" data-screen-only />
            <path d={lines[index]?.path} stroke={lit ? 'var(--lamp)' : 'var(--ink)'} strokeWidth={lit ? 3 : 1.5} fill="none" />
            {labelled && (
              <>
                <path d={`M${right},${lines[index]?.end ?? 0}L${right + 10},${label}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
                <text x={right + 14} y={label} dy="0.34em" fontSize={12} fontWeight={lit ? 700 : 400} fill="var(--ink)">{curve.name}</text>
                {far && <text x={width - 6} y={label} dy="0.34em" textAnchor="end" fontSize={12} fontWeight={lit ? 700 : 400} fill="var(--muted)">{curve.far}</text>}
              </>
            )}
            {cursor !== null && at && <circle cx={cursor} cy={y(at.energyInvcm * scale.per)} r={lit ? 5 : here.length > 24 ? 2.5 : 3.5} fill="var(--sheet)" stroke="var(--ink)" strokeWidth={1.5} />}
          </g>
        )
      })}
    </>
  )
}

interface Box {
  left: number
  right: number
  top: number
  bottom: number
  edge: number
}

/** The paths of a fan in a box; they do not depend on the field in force. */
function drawn(fan: Fan, { per, low, high }: FanScale, { left, right, top, bottom, edge }: Box) {
  const x = scaleLinear().domain([0, edge]).range([left, right])
  const y = scaleLinear().domain([low, high]).range([bottom - 8, top + 8])
  const xs = Array.from(fan.fieldsTesla, (field) => x(field))
  const ysOf = (values: Float64Array): number[] => Array.from(values, (value) => y(value * per))
  const lines = fan.curves.map(({ key, values, linear }) => {
    const ys = ysOf(values)
    const start = y((values[0] ?? 0) * per)
    return { key, path: pathOf(xs, ys), end: ys.at(-1) ?? start, linear: linear === null ? null : `M${left},${start}L${right},${y(linear * edge * per)}` }
  })
  const named = new Set<number>()
  const neighbours = fan.neighbours
    .map(({ key, twoJ, values }) => ({ key, twoJ, ys: ysOf(values) }))
    .filter(({ ys }) => ys.some((value) => value > top && value < bottom))
    .map(({ key, twoJ, ys }) => {
      const first = !named.has(twoJ)
      named.add(twoJ)
      return { key, path: pathOf(xs, ys), start: ys[0] ?? 0, name: first ? `J = ${formatHalfUnicode(twoJ)}` : null }
    })
  // ties at the edge keep the order of the curves, which is by m upwards
  const labels = spread(lines.map((line, index) => line.end - index * 1e-6), 13, top, bottom)
  return { lines, neighbours, labels }
}

/** `M_L, M_S` with its letters after an underscore lowered. */
function Subscripted({ text }: { text: string }) {
  return text.split(/(_[A-Z])/).map((piece, index) =>
    piece.startsWith('_') ? <tspan key={index} dy={3.5} fontSize={10}>{piece.slice(1)}</tspan> : <tspan key={index} dy={index > 0 ? -3.5 : 0}>{piece}</tspan>,
  )
}
