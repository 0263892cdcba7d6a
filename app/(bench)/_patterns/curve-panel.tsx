'use client'
import type { ScaleLinear } from 'd3-scale'
import { memo } from 'react'
import { valueIn } from '@/lib/prediction/profiles-grid'
import { LeftAxis } from '@/app/_components/plots/axis'
import { niceCeil, ruler } from '@/app/_components/plots/ruler'
import { AXIS_UNIT } from './overlay'
import type { Axis } from './state'
import type { Curve } from './use-overlay'

interface CurvePanelProps {
  curve: Curve
  axis: Axis
  x: ScaleLinear<number, number>
  left: number
  right: number
  top: number
  height: number
  narrow: boolean
}

/** The Stokes profile of all lines together: I, and V where there is an angle, each over its own zero. */
export const CurvePanel = memo(function CurvePanel({ curve, axis, x, left, right, top, height, narrow }: CurvePanelProps) {
  const { wavenumberInvcm, profiles } = curve
  const places = Array.from(wavenumberInvcm, (wavenumber) => valueIn(AXIS_UNIT[axis], wavenumber)).map((value) => (value === null ? null : x(value)))
  const largest = profiles.intensity.reduce((most, value) => Math.max(most, value), 0)
  const full = niceCeil(1.05 * largest)
  const path = (values: Float64Array, at: (value: number) => number): string => {
    let text = ''
    places.forEach((place, i) => {
      if (place !== null) text += `${text === '' ? 'M' : 'L'}${place.toFixed(1)},${at(values[i] ?? 0).toFixed(1)}`
    })
    return text
  }
  const gap = 8
  const ofI = (value: number) => top + height - gap - (value / full) * (height - 2 * gap)
  const zeroOfV = top + height + height / 2
  const ofV = (value: number) => zeroOfV - (value / full) * (height / 2 - gap)
  const rulerOfI = ruler([0, full], height - 2 * gap, 34)
  return (
    <g aria-hidden="true">
      <path d={`M${left},${ofI(0)}H${right}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
      <path d={path(profiles.intensity, ofI)} fill="none" stroke="var(--ink)" strokeWidth={1.6} strokeLinejoin="round" />
      <LeftAxis ruler={rulerOfI} at={ofI} x={left} from={ofI(full)} to={ofI(0)} />
      <text x={right - 4} y={top + 16} textAnchor="end" fontSize={13} fontStyle="italic" fill="var(--ink)" stroke="var(--sheet)" strokeWidth={5} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif">I</text>
      {!narrow && <text transform={`translate(14 ${top + height / 2}) rotate(-90)`} textAnchor="middle" fontSize={12.5} fill="var(--muted)">Stokes I</text>}
      {profiles.stokesV && (
        <>
          <path d={`M${left},${zeroOfV}H${right}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
          <path d={path(profiles.stokesV, ofV)} fill="none" stroke="var(--lamp-ink)" strokeWidth={1.6} strokeDasharray="6 2" strokeLinejoin="round" />
          <LeftAxis ruler={ruler([-full, full], height - 2 * gap, 34)} at={ofV} x={left} from={ofV(full)} to={ofV(-full)} />
          <text x={right - 4} y={top + height + 16} textAnchor="end" fontSize={13} fontStyle="italic" fill="var(--lamp-ink)" stroke="var(--sheet)" strokeWidth={5} paintOrder="stroke" fontFamily="'STIX Two Text Variable', serif">V</text>
          {!narrow && <text transform={`translate(14 ${zeroOfV}) rotate(-90)`} textAnchor="middle" fontSize={12.5} fill="var(--muted)">Stokes V</text>}
        </>
      )}
    </g>
  )
})
