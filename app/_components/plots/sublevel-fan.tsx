'use client'
import { scaleLinear } from 'd3-scale'
import { line } from 'd3-shape'
import { useId, useState } from 'react'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { formatHalfUnicode, type TwoJ } from '@/lib/atomic/half'
import { linearSublevels } from '@/lib/atomic/sublevels'
import { fieldIn, formatField, type FieldUnit } from '@/lib/units/field'
import { BottomAxis, LeftAxis } from './axis'
import { Choices, PlotFrame } from './plot-frame'
import { niceCeil, ruler, signed, spread } from './ruler'
import { SublevelsTwin } from './sublevels-twin'
import { roving } from './use-roving'

export interface SublevelFanProps {
  twoJ: TwoJ
  g: number | null
  fieldTesla: number
  fieldUnit: FieldUnit
  /** Field where the linear law passes its tolerance; null where it never does or is unknown. */
  limitTesla: number | null
  tolerance: number
  /** Called when a place on the field's axis is chosen. */
  onField?: (tesla: number) => void
  name: string
  title?: string
}

const ENERGIES = [
  { value: 'invcm', label: 'cm⁻¹' },
  { value: 'ghz', label: 'GHz' },
] as const
type EnergyUnit = (typeof ENERGIES)[number]['value']

const RANGES = [
  { value: 'field', label: 'as needed' },
  { value: '0.1', label: '0.1 T' },
  { value: '1', label: '1 T' },
  { value: '10', label: '10 T' },
] as const
type Range = (typeof RANGES)[number]['value']

/** The field at the right edge: a quarter beyond the field in force, and the limit of the linear law when it is near. */
function rightEdge(range: Range, fieldTesla: number, limitTesla: number | null): number {
  if (range !== 'field') return Number(range)
  const wanted = niceCeil(Math.max(fieldTesla * 1.25, 1e-6))
  return limitTesla !== null && limitTesla > wanted && limitTesla < 3 * wanted ? niceCeil(limitTesla * 1.15) : fieldTesla === 0 ? 1 : wanted
}

/** Where the words about the limit fit: in the hatched part, else before it and clear of the cursor, else nowhere. */
function placeText(limit: number, right: number, cursor: number): { x: number; anchor: 'start' | 'end' } | null {
  if (right - Math.max(limit, cursor > limit ? cursor : limit) >= 150) return { x: Math.max(limit, cursor > limit ? cursor : limit) + 7, anchor: 'start' }
  return limit - (cursor < limit ? cursor : 0) >= 150 ? { x: limit - 7, anchor: 'end' } : null
}

/** Energies of the sublevels of one level against the field, by the linear law. */
export function SublevelFan({ twoJ, g, fieldTesla, fieldUnit, limitTesla, tolerance, onField, name, title = 'Sublevels against field' }: SublevelFanProps) {
  const [unit, setUnit] = useState<EnergyUnit>('invcm')
  const [range, setRange] = useState<Range>('field')
  const [active, setActive] = useState<string | null>(null)
  const hatch = useId().replace(/[^\w-]/g, '')
  const edge = rightEdge(range, fieldTesla, limitTesla)
  const factor = unit === 'ghz' ? GHZ_PER_INVCM : 1
  const here = linearSublevels({ twoJ, g, energyInvcm: 0, fieldTesla })
  const end = linearSublevels({ twoJ, g, energyInvcm: 0, fieldTesla: edge })
  const current = here.find((s) => String(s.twoM) === active)
  const half = niceCeil(Math.max(0, ...end.map((s) => Math.abs(s.shiftInvcm))) * factor * 1.04)

  return (
    <PlotFrame
      title={title}
      name={`${name}-sublevels`}
      description={`The ${twoJ + 1} sublevels from zero to ${formatField(edge, fieldUnit)}; the field in force is ${formatField(fieldTesla, fieldUnit)}. Arrow keys go through them.`}
      height={(width) => (width < 560 ? 340 : 400)}
      controls={
        <>
          <Choices label="Up to" value={range} choices={RANGES} onChange={setRange} />
          <Choices label="Shift in" value={unit} choices={ENERGIES} onChange={setUnit} />
        </>
      }
      reading={
        current
          ? `m = ${formatHalfUnicode(current.twoM)} at ${formatField(fieldTesla, fieldUnit)}: ${signed(current.shiftInvcm, 6)} cm⁻¹ (${signed(current.shiftGhz, 6)} GHz)`
          : `${twoJ + 1} sublevel${twoJ === 0 ? '' : 's'}; the line marks ${formatField(fieldTesla, fieldUnit)}.`
      }
      note={limitTesla !== null && limitTesla < edge ? `Hatched: from ${formatField(Number(limitTesla.toPrecision(3)), fieldUnit)} on the linear law is off by more than ${tolerance * 100} % of μB·B.` : undefined}
      table={<SublevelsTwin levels={[{ name: 'level', sublevels: here }]} caption={`Sublevels at ${formatField(fieldTesla, fieldUnit)}, linear law`} />}
    >
      {(width, height) => {
        const narrow = width < 560
        const [left, right, top, bottom] = [narrow ? 50 : 74, width - (narrow ? 48 : 64), 16, height - 48]
        const x = scaleLinear().domain([0, edge]).range([left, right])
        const y = scaleLinear().domain([-half, half]).range([bottom - 10, top + 10])
        const xUnits = ruler([0, fieldIn(edge, fieldUnit)], right - left, narrow ? 62 : 90)
        const yUnits = ruler([-half, half], bottom - top - 20, 44)
        const labels = spread(end.map((s) => y(s.shiftInvcm * factor) - s.twoM * 1e-6), 13, top, bottom)
        const path = line<{ b: number; e: number }>().x((p) => x(p.b)).y((p) => y(p.e))
        const mark = roving({ order: [...end].reverse().map((s) => String(s.twoM)), active, onActive: setActive, across: (key, up) => (Math.abs(Number(key) + (up ? 2 : -2)) <= twoJ ? String(Number(key) + (up ? 2 : -2)) : null) })
        const limit = limitTesla !== null && limitTesla < edge ? x(limitTesla) : null
        const limitText = limit === null ? null : placeText(limit, right, fieldTesla <= edge ? x(fieldTesla) : left)
        const cursor = fieldTesla <= edge ? x(fieldTesla) : null
        return (
          <>
            <defs>
              <pattern id={hatch} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
                <path d="M0,0V7" stroke="var(--warn)" strokeOpacity={0.28} strokeWidth={2} />
              </pattern>
            </defs>
            <g aria-hidden="true">
              {yUnits.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${left},${y(value)}H${right}`} stroke="var(--rule)" strokeDasharray={value === 0 ? undefined : '1 4'} />)}
              {limit !== null && (
                <>
                  <rect x={limit} y={top} width={right - limit} height={bottom - top} fill={`url(#${hatch})`} />
                  <path d={`M${limit},${top}V${bottom}`} stroke="var(--warn)" strokeWidth={1.5} strokeDasharray="2 3" />
                  {limitText && (
                    <text x={limitText.x} y={top + 14} textAnchor={limitText.anchor} fontSize={12} fill="var(--warn)" stroke="var(--sheet)" strokeWidth={4} paintOrder="stroke">
                      {`linear off by over ${tolerance * 100} %`}
                    </text>
                  )}
                </>
              )}
            </g>
            <LeftAxis ruler={yUnits} at={y} x={left} from={top} to={bottom} title={narrow ? undefined : 'Shift'} unit={unit === 'ghz' ? 'GHz' : 'cm⁻¹'} />
            <BottomAxis ruler={xUnits} at={(value) => x(value / fieldIn(1, fieldUnit))} y={bottom} from={left} to={right} title="Field" unit={fieldUnit} />
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
            {cursor !== null && (
              <g aria-hidden="true" pointerEvents="none">
                <path d={`M${cursor},${top}V${bottom}`} stroke="var(--lamp)" strokeWidth={2} />
                <path d={`M${cursor - 6},${top - 6}h12l-6,8Z`} fill="var(--lamp)" />
              </g>
            )}
            {[...end].reverse().map((s) => {
              const key = String(s.twoM)
              const lit = key === active
              const label = labels[end.indexOf(s)] ?? 0
              const at = here.find((other) => other.twoM === s.twoM)
              return (
                <g key={key} {...mark(key)} role="img" aria-label={`m = ${formatHalfUnicode(s.twoM)}, shift ${signed(at?.shiftInvcm ?? 0, 6)} cm⁻¹`} onPointerEnter={() => setActive(key)} onPointerLeave={() => setActive(null)}>
                  <path d={path([{ b: 0, e: 0 }, { b: edge, e: s.shiftInvcm * factor }]) ?? ''} stroke="transparent" strokeWidth={10} data-screen-only />
                  <path d={path([{ b: 0, e: 0 }, { b: edge, e: s.shiftInvcm * factor }]) ?? ''} stroke={lit ? 'var(--lamp)' : 'var(--ink)'} strokeWidth={lit ? 3 : 1.5} fill="none" />
                  <path d={`M${right},${y(s.shiftInvcm * factor)}L${right + 12},${label}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
                  <text x={right + 16} y={label} dy="0.34em" fontSize={12} fontWeight={lit ? 700 : 400} fill="var(--ink)">
                    {formatHalfUnicode(s.twoM)}
                  </text>
                  {cursor !== null && at && <circle cx={cursor} cy={y(at.shiftInvcm * factor)} r={lit ? 5 : 3.5} fill="var(--sheet)" stroke="var(--ink)" strokeWidth={1.5} />}
                </g>
              )
            })}
            <text x={right + 16} y={height - 26} fontSize={13} fontStyle="italic" fill="var(--muted)" fontFamily="'STIX Two Text Variable', serif" aria-hidden="true">m</text>
          </>
        )
      }}
    </PlotFrame>
  )
}
