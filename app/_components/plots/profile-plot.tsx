'use client'
import { scaleLinear } from 'd3-scale'
import { memo, useMemo, useState, type ReactNode } from 'react'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { DataTable, type Column } from '../data-table'
import { fixed } from '../number'
import { BottomAxis, LeftAxis } from './axis'
import { Choices, PlotFrame } from './plot-frame'
import { niceCeil, ruler, signed } from './ruler'

/** Stokes profiles of one line over distances from its centre. */
export interface LineProfile {
  /** cm^-1 from the centre of the line, rising. */
  shiftsInvcm: Float64Array
  /** Per cm^-1: the integral is the weight of the line. */
  intensity: Float64Array
  /** Null without a viewing angle. */
  stokesQ: Float64Array | null
  stokesV: Float64Array | null
}

interface ProfilePlotProps {
  profile: LineProfile
  centreInvcm: number
  fieldTesla: number
  thetaDeg: number | null
  name: string
  controls?: ReactNode
  note?: ReactNode
}

const UNITS = [
  { value: 'invcm', label: 'cm⁻¹' },
  { value: 'ghz', label: 'GHz' },
] as const
type Unit = (typeof UNITS)[number]['value']

interface Row {
  shift: number
  wavenumber: number
  i: number
  q: number | null
  v: number | null
}

/** Panels from the top: what they show, how it is stroked, and whether it has two signs. */
const PANELS = {
  I: { colour: 'var(--ink)', dash: undefined },
  Q: { colour: 'var(--pi)', dash: '7 3' },
  V: { colour: 'var(--sigma-plus)', dash: undefined },
} as const
type PanelName = keyof typeof PANELS

const rowsOf = ({ shiftsInvcm, intensity, stokesQ, stokesV }: LineProfile, centre: number): Row[] =>
  Array.from(shiftsInvcm, (shift, at) => ({ shift, wavenumber: centre + shift, i: intensity[at] ?? 0, q: stokesQ?.[at] ?? null, v: stokesV?.[at] ?? null }))

function columnsOf(polarised: boolean): Column<Row>[] {
  const size = (name: string, header: ReactNode, value: (row: Row) => number | null): Column<Row> => ({ name, header, align: 'right', value, cell: (row) => <span title={String(value(row))}>{signed(value(row) ?? 0, 5)}</span> })
  return [
    { name: 'shift_invcm', header: 'Shift, cm⁻¹', rowHeader: true, align: 'right', value: (row) => row.shift, cell: (row) => <span title={String(row.shift)}>{signed(row.shift, 6)}</span> },
    { name: 'wavenumber_invcm', header: 'Wavenumber, cm⁻¹', align: 'right', value: (row) => row.wavenumber, cell: (row) => fixed(row.wavenumber, 5) },
    size('stokes_i', 'Stokes I, cm', (row) => row.i),
    ...(polarised ? [size('stokes_q', 'Stokes Q, cm', (row) => row.q), size('stokes_v', 'Stokes V, cm', (row) => row.v)] : []),
  ]
}

/** Stokes I of a line seen with an instrument, and Q and V below it where a viewing angle is given; all on one scale of light. */
export const ProfilePlot = memo(function ProfilePlot({ profile, centreInvcm, fieldTesla, thetaDeg, name, controls, note }: ProfilePlotProps) {
  const [unit, setUnit] = useState<Unit>('invcm')
  const [at, setAt] = useState<number | null>(null)
  const rows = useMemo(() => rowsOf(profile, centreInvcm), [profile, centreInvcm])
  const { shiftsInvcm, intensity, stokesQ, stokesV } = profile
  const polarised = stokesQ !== null && stokesV !== null
  const factor = unit === 'ghz' ? GHZ_PER_INVCM : 1
  const peak = Math.max(...intensity)
  const here = at === null ? undefined : rows[at]
  const panels: { name: PanelName; values: Float64Array; signed: boolean }[] = [
    { name: 'I', values: intensity, signed: false },
    ...(polarised ? [{ name: 'V' as const, values: stokesV, signed: true }, { name: 'Q' as const, values: stokesQ, signed: true }] : []),
  ]

  return (
    <PlotFrame
      title="Profile"
      name={`${name}-profile`}
      description={`Stokes I${polarised ? ', V and Q' : ''} of the line at ${fieldTesla} T over distance from its centre, ${rows.length} points. ${polarised ? '' : 'Without an angle the light is not polarised, and V and Q are not drawn. '}`}
      height={(width) => (polarised ? (width < 560 ? 480 : 520) : 300) + (width < 560 ? 0 : 20)}
      controls={
        <>
          {controls}
          <Choices label="Axis" value={unit} choices={UNITS} onChange={setUnit} />
        </>
      }
      reading={here ? `${signed(here.shift * factor, 5)} ${unit === 'ghz' ? 'GHz' : 'cm⁻¹'} from the centre: I ${signed(here.i, 4)}${polarised ? `, V ${signed(here.v ?? 0, 4)}, Q ${signed(here.q ?? 0, 4)}` : ''} per cm⁻¹` : polarised ? `Seen at ${thetaDeg}° to the field, in emission.` : 'Averaged over angle: give an angle to see V and Q.'}
      note={note}
      table={<DataTable columns={columnsOf(polarised)} rows={rows} rowKey={(row) => String(row.shift)} caption={`Profile at ${fieldTesla} T`} hideCaption summary={`${rows.length} points; the integral of I over wavenumber is 1 for a whole line`} />}
    >
      {(width, height) => {
        const narrow = width < 560
        const [left, right, top, bottom] = [narrow ? 48 : 70, width - 14, 12, height - 50]
        const domain: [number, number] = [(shiftsInvcm[0] ?? 0) * factor, (shiftsInvcm.at(-1) ?? 1) * factor]
        const x = scaleLinear().domain(domain).range([left, right])
        const gap = 14
        const tall = polarised ? (bottom - top - 2 * gap) / 3.2 : bottom - top
        const heights = panels.map((panel) => (panel.signed ? tall : polarised ? tall * 1.2 : tall))
        const xs = Array.from(shiftsInvcm, (shift) => x(shift * factor).toFixed(2))
        const xRuler = ruler(domain, right - left, narrow ? 60 : 90)
        return (
          <>
            {panels.map((panel, index) => {
              const from = top + heights.slice(0, index).reduce((sum, one) => sum + one + gap, 0)
              const to = from + (heights[index] ?? 0)
              const largest = panel.signed ? Math.max(peak * 0.02, ...panel.values.map(Math.abs)) : peak
              const full = niceCeil((largest || 1) * 1.05)
              const y = scaleLinear().domain(panel.signed ? [-full, full] : [0, full]).range([to, from])
              const { colour, dash } = PANELS[panel.name]
              return (
                <g key={panel.name} aria-hidden="true">
                  {xRuler.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${x(value)},${from}V${to}`} stroke="var(--rule)" strokeDasharray={value === 0 ? undefined : '1 4'} />)}
                  <path d={`M${left},${y(0)}H${right}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
                  <LeftAxis ruler={ruler(panel.signed ? [-full, full] : [0, full], to - from, 34)} at={y} x={left} from={from} to={to} title={narrow ? undefined : panel.name} unit="per cm⁻¹" />
                  <path d={xs.map((px, i) => `${i === 0 ? 'M' : 'L'}${px},${y(panel.values[i] ?? 0).toFixed(2)}`).join('')} fill="none" stroke={colour} strokeWidth={1.75} strokeDasharray={dash} strokeLinejoin="round" />
                  <text x={left + 12} y={from + 18} fontSize={17} fontStyle="italic" fill={colour} stroke="var(--sheet)" strokeWidth={4} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif">{panel.name}</text>
                </g>
              )
            })}
            <BottomAxis ruler={xRuler} at={x} y={bottom} from={left} to={right} title="Shift from the centre" unit={unit === 'ghz' ? 'GHz' : 'cm⁻¹'} />
            {here && <path aria-hidden="true" data-screen-only d={`M${x(here.shift * factor)},${top}V${bottom}`} stroke="var(--lamp)" strokeWidth={1.5} pointerEvents="none" />}
            <rect data-screen-only x={left} y={top} width={right - left} height={bottom - top} fill="transparent"
              onPointerMove={(event) => {
                const box = event.currentTarget.getBoundingClientRect()
                const shift = (domain[0] + ((event.clientX - box.left) / box.width) * (domain[1] - domain[0])) / factor
                setAt(nearestTo(shiftsInvcm, shift))
              }}
              onPointerLeave={() => setAt(null)}
            />
          </>
        )
      }}
    </PlotFrame>
  )
})

function nearestTo(values: Float64Array, wanted: number): number {
  let [low, high] = [0, values.length - 1]
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if ((values[middle] ?? 0) > wanted) high = middle
    else low = middle
  }
  return Math.abs((values[low] ?? 0) - wanted) <= Math.abs((values[high] ?? 0) - wanted) ? low : high
}
