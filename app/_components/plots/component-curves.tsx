'use client'
import { scaleLinear } from 'd3-scale'
import { memo, useId, useMemo, useState } from 'react'
import { GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import type { FieldMultiplet } from '@/lib/atomic/field-multiplet'
import type { TwoJ } from '@/lib/atomic/half'
import { multipletGrid } from '@/lib/atomic/intermediate-grid'
import { fieldIn, formatField, type FieldUnit } from '@/lib/units/field'
import { BottomAxis, LeftAxis } from './axis'
import { componentKey, componentText, type DrawnComponent, endsText, isDrawn, SHIFT_UNITS, shiftIn } from './component-text'
import { ComponentsTwin } from './components-twin'
import { fanFields } from './fan'
import { Choices, PlotFrame } from './plot-frame'
import { polarisationName, styleOf } from './polarisation'
import { niceCeil, ruler, spread, superscript } from './ruler'
import { rightEdge } from './sublevel-fan'
import { roving } from './use-roving'

export interface ComponentCurvesProps {
  multiplet: FieldMultiplet
  pair: { twoJLower: TwoJ; twoJUpper: TwoJ }
  components: readonly DrawnComponent[]
  fieldTesla: number
  fieldUnit: FieldUnit
  thetaDeg: number | null
  /** Where the linear law fails for positions. */
  limitTesla: number | null
  active: string | null
  onActive: (key: string | null) => void
  onField?: (tesla: number) => void
  name: string
}

const UNITS = [
  { value: 'lorentz', label: 'Lorentz' },
  { value: 'invcm', label: 'cm⁻¹' },
  { value: 'ghz', label: 'GHz' },
] as const
type Unit = (typeof UNITS)[number]['value']

interface Curve {
  key: string
  /** Shift at each field, cm^-1. */
  shifts: Float64Array
  /** cm^-1 per tesla at zero field: the linear law. */
  slope: number
}

/** Weaker than this share everywhere, a component is not drawn. */
const FAINTEST = 1e-3

/** The components of one line over fields, of its multiplet diagonalised at each. */
function curvesTo(multiplet: FieldMultiplet, pair: ComponentCurvesProps['pair'], edgeTesla: number): { fieldsTesla: Float64Array; curves: Curve[] } {
  const fieldsTesla = fanFields(edgeTesla)
  const { values, derivatives, strengths, components } = multipletGrid(multiplet, fieldsTesla, { quantity: 'shift', derivatives: true, strengths: true })
  const column = (array: Float64Array, at: number) => fieldsTesla.map((_, row) => array[row * components + at] ?? 0)
  const own = Array.from({ length: components }, (_, at) => at).filter((at) => multiplet.nominalTwoJLower[at] === pair.twoJLower && multiplet.nominalTwoJUpper[at] === pair.twoJUpper)
  const largest = strengths === null ? 0 : Math.max(...own.flatMap((at) => Array.from(column(strengths, at))))
  const curves = own
    .filter((at) => strengths === null || Math.max(...column(strengths, at)) > FAINTEST * largest)
    .map((at): Curve => ({ key: `${(multiplet.twoMLower[at] ?? 0) / 2}:${(multiplet.twoMUpper[at] ?? 0) / 2}`, shifts: column(values, at), slope: derivatives?.[at] ?? 0 }))
  return { fieldsTesla, curves }
}

/** In the unit shown; in Lorentz units the limit at zero field is the linear law. */
function shownAt(unit: Unit, curve: Curve, row: number, fieldTesla: number): number {
  const shift = curve.shifts[row] ?? 0
  if (unit === 'invcm') return shift
  if (unit === 'ghz') return shift * GHZ_PER_INVCM
  return fieldTesla === 0 ? curve.slope / MU_B_OVER_HC_INVCM_PER_T : shift / (MU_B_OVER_HC_INVCM_PER_T * fieldTesla)
}

/** Where each component of a line goes as the field grows: in Lorentz units an anomalous pattern bends into a triplet at -1, 0 and +1. */
export const ComponentCurves = memo(function ComponentCurves({ multiplet, pair, components, fieldTesla, fieldUnit, thetaDeg, limitTesla, active, onActive, onField, name }: ComponentCurvesProps) {
  const [unit, setUnit] = useState<Unit>('lorentz')
  const id = useId().replace(/[^\w-]/g, '')
  const edge = rightEdge('field', fieldTesla, limitTesla)
  const { twoJLower, twoJUpper } = pair
  const { fieldsTesla, curves } = useMemo(() => curvesTo(multiplet, { twoJLower, twoJUpper }, edge), [multiplet, twoJLower, twoJUpper, edge])
  const half = useMemo(() => niceCeil(1.06 * Math.max(1e-9, ...curves.flatMap((curve) => Array.from(fieldsTesla, (field, row) => Math.abs(shownAt(unit, curve, row, field)))))), [curves, fieldsTesla, unit])
  const byKey = useMemo(() => new Map(components.map((component) => [componentKey(component), component])), [components])
  const current = active === null ? undefined : byKey.get(active)
  const limited = limitTesla !== null && limitTesla < edge ? formatField(Number(limitTesla.toPrecision(3)), fieldUnit) : null
  const strongest = Math.max(1e-9, ...components.map((component) => component.strength ?? 0))

  return (
    <PlotFrame
      title="Components against field"
      name={`${name}-components`}
      description={`The shifts of ${curves.length} components from zero to ${formatField(edge, fieldUnit)}, the linear law dashed.${limited === null ? '' : ` From ${limited} on positions by the linear law are off by more than the tolerance.`} Arrow keys go through the components.`}
      height={(width) => (width < 560 ? 360 : 420)}
      controls={<Choices label="Shift in" value={unit} choices={UNITS} onChange={setUnit} />}
      reading={current && isDrawn(current) ? componentText(current, thetaDeg) : `${curves.length} components; the line marks ${formatField(fieldTesla, fieldUnit)}.`}
      note={`Dashed: the linear law. ${limited === null ? '' : `From ${limited} on it misplaces a component by more than the tolerance. `}Strokes are as wide as a component is strong at the field marked.`}
      table={<ComponentsTwin components={components} thetaDeg={thetaDeg} caption={`Components at ${fieldTesla} T`} units={['lorentz', 'invcm', 'ghz', 'pm']} />}
    >
      {(width, height) => {
        const narrow = width < 560
        const [left, right, top, bottom] = [narrow ? 46 : 70, width - (narrow ? 108 : 112), 30, height - 48]
        const x = scaleLinear().domain([0, edge]).range([left, right])
        const y = scaleLinear().domain([-half, half]).range([bottom - 6, top + 6])
        const xUnits = ruler([0, fieldIn(edge, fieldUnit)], right - left, narrow ? 62 : 90)
        const yUnits = ruler([-half, half], bottom - top - 12, 44)
        const drawn = curves.flatMap((curve) => {
          const component = byKey.get(curve.key)
          if (component === undefined) return []
          const points = Array.from(fieldsTesla, (field, row) => [x(field), y(shownAt(unit, curve, row, field))] as const)
          const linear = unit === 'lorentz' ? curve.slope / MU_B_OVER_HC_INVCM_PER_T : 0
          const end = unit === 'lorentz' ? linear : curve.slope * edge * (unit === 'ghz' ? GHZ_PER_INVCM : 1)
          return [{ curve, component, path: points.map(([px, py], i) => `${i === 0 ? 'M' : 'L'}${px.toFixed(2)},${py.toFixed(2)}`).join(''), end: points.at(-1)?.[1] ?? 0, dashed: `M${left},${y(linear)}L${right},${y(end)}` }]
        })
        const order = [...drawn].sort((a, b) => a.end - b.end)
        const labels = spread(drawn.map(({ end, component }, index) => end - component.m_lower * 1e-4 - index * 1e-6), 13, top, bottom)
        const mark = roving({ order: order.map(({ curve }) => curve.key), active, onActive, across: (key, up) => { const place = order.findIndex(({ curve }) => curve.key === key); return order[place + (up ? -1 : 1)]?.curve.key ?? null } })
        const cursor = x(fieldTesla)
        const limit = limitTesla !== null && limitTesla < edge ? x(limitTesla) : null
        return (
          <>
            <defs>
              <clipPath id={`${id}-sheet`}><rect x={left} y={top} width={right - left} height={bottom - top} /></clipPath>
            </defs>
            <g aria-hidden="true">
              {yUnits.ticks.map(({ value, rank }) => rank === 0 && <path key={value} d={`M${left},${y(value)}H${right}`} stroke="var(--rule)" strokeDasharray={value === 0 ? undefined : '1 4'} />)}
              {unit === 'lorentz' && [-1, 0, 1].map((value) => Math.abs(value) < half && <path key={value} d={`M${right - 9},${y(value)}h9`} stroke="var(--ink)" strokeWidth={2} />)}
              {narrow && yUnits.exponent !== 0 && <text x={4} y={14} fontSize={12} fill="var(--muted)">{`10${superscript(yUnits.exponent)}`}</text>}
              <text x={width - 6} y={16} textAnchor="end" fontSize={13} fontStyle="italic" fill="var(--muted)" fontFamily="'STIX Two Text Variable', serif">m lower → upper</text>
            </g>
            <LeftAxis ruler={yUnits} at={y} x={left} from={top} to={bottom} title={narrow ? undefined : SHIFT_UNITS[unit].axis} unit={unit === 'lorentz' ? undefined : SHIFT_UNITS[unit].unit} />
            <BottomAxis ruler={xUnits} at={(value) => x(value / fieldIn(1, fieldUnit))} y={bottom} from={left} to={right} title="Field" unit={fieldUnit} />
            {onField && (
              <rect data-screen-only x={left} y={top} width={right - left} height={bottom - top} fill="transparent" className="cursor-crosshair"
                onClick={(event) => {
                  const box = event.currentTarget.getBoundingClientRect()
                  onField(Number((((event.clientX - box.left) / box.width) * edge).toPrecision(3)))
                }}
              />
            )}
            <g aria-hidden="true" clipPath={`url(#${id}-sheet)`} fill="none" pointerEvents="none">
              {drawn.map(({ curve, dashed }) => <path key={curve.key} d={dashed} stroke="var(--muted)" strokeWidth={0.9} strokeDasharray="4 4" />)}
              {limit !== null && <path d={`M${limit},${top}V${bottom}`} stroke="var(--warn)" strokeWidth={1.5} strokeDasharray="2 3" />}
              <path d={`M${cursor},${top}V${bottom}`} stroke="var(--lamp)" strokeWidth={2} />
            </g>
            {limit !== null && right - limit > 90 && <text aria-hidden="true" x={limit + 6} y={bottom - 16} fontSize={12} fill="var(--warn)" stroke="var(--sheet)" strokeWidth={4} paintOrder="stroke">{narrow ? 'linear fails' : `linear fails from ${limited ?? ''}`}</text>}
            {drawn.map(({ curve, component, path, end }, index) => {
              const style = styleOf(component.q)
              const lit = curve.key === active
              const at = shiftIn(unit, component)
              return (
                <g key={curve.key} {...mark(curve.key)} role="img" aria-label={componentText(component, thetaDeg)} onPointerEnter={() => onActive(curve.key)} onPointerLeave={() => onActive(null)}>
                  <path d={path} stroke="transparent" strokeWidth={10} fill="none" data-screen-only />
                  {lit && <path d={path} stroke="var(--lamp)" strokeOpacity={0.45} strokeWidth={8} fill="none" data-screen-only />}
                  <path d={path} stroke={style.colour} strokeWidth={0.8 + 2.2 * Math.sqrt((component.strength ?? strongest) / strongest)} strokeDasharray={style.dash} strokeLinecap={style.cap} fill="none" />
                  <path d={`M${right},${end}L${right + 8},${labels[index] ?? end}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
                  <text x={right + 11} y={labels[index] ?? end} dy="0.34em" fontSize={12} fontWeight={lit ? 700 : 400} fill="var(--ink)">
                    <tspan fill={style.colour} fontWeight={600}>{polarisationName(component.q)}</tspan>
                    <tspan dx={4}>{endsText(component)}</tspan>
                  </text>
                  {at !== null && isDrawn(component) && <path d={style.mark} transform={`translate(${cursor} ${y(at)}) scale(0.85)`} fill={style.colour} stroke="var(--sheet)" strokeWidth={1} />}
                </g>
              )
            })}
          </>
        )
      }}
    </PlotFrame>
  )
})
