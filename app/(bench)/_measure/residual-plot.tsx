'use client'
import { printSignificant } from '@/lib/units/print'
import type { FitResidual } from '@/openapi/schemas/field-fits'
import { LeftAxis } from '@/app/_components/plots/axis'
import { PlotFrame } from '@/app/_components/plots/plot-frame'
import { styleOf } from '@/app/_components/plots/polarisation'
import { niceCeil, ruler } from '@/app/_components/plots/ruler'
import { readingText } from './positions-grid'

const MARGIN = { top: 14, right: 14, bottom: 34, left: 62 }
const GAP = 30
const BAND = 84
/** Residuals smaller than this are rounding: the axis does not blow them up. */
const LEAST_REACH = 1e-5

/** The unit that residuals are shown in: how many of it one cm^-1 is, line by line, below zero where it runs the other way. */
export interface ResidualUnit {
  name: string
  perInvcm: readonly number[]
}

export const residualIn = (unit: ResidualUnit, row: Pick<FitResidual, 'line'>, invcm: number): number => invcm * (unit.perInvcm[row.line] ?? 1)

interface Props {
  residuals: readonly FitResidual[]
  /** One standard deviation taken where none is stated, cm^-1. */
  scatter: number | null
  unit: ResidualUnit
  table: React.ReactNode
  withInfluence: boolean
}

/** Measured minus fitted with one standard deviation, and below it how far each point moves the field. */
export function ResidualPlot({ residuals, scatter, unit, table, withInfluence }: Props) {
  const rows = residuals.map((row) => ({ row, y: residualIn(unit, row, row.residual_invcm), bar: Math.abs(residualIn(unit, row, row.position_unc_invcm ?? scatter ?? 0)) }))
  const reach = niceCeil(1.08 * Math.max(...rows.map(({ y, bar }) => Math.abs(y) + bar), LEAST_REACH))
  const pull = niceCeil(1.05 * Math.max(...residuals.map((row) => Math.abs(row.influence ?? 0)), 0.1))
  const worst = residuals.reduce((a, b) => (Math.abs(b.standardised ?? 0) > Math.abs(a.standardised ?? 0) ? b : a), residuals[0] as FitResidual)
  return (
    <PlotFrame
      title="Residuals"
      name="field-fit-residuals"
      description={`Measured minus fitted position of ${residuals.length} measurements, in ${unit.name}, with one standard deviation as bars${withInfluence ? ', and the influence of each on the field' : ''}. The largest standardised residual is ${printSignificant(worst.standardised ?? 0, 2)}, of measurement ${worst.measurement + 1}.`}
      table={table}
      height={withInfluence ? 330 : 250}
      note={withInfluence ? 'Bars: one standard deviation. Below: the change of B by each point, in standard deviations of B; open circle: without it nothing is determined.' : 'Bars: one standard deviation.'}
    >
      {(width, height) => {
        const [left, right] = [MARGIN.left, width - MARGIN.right]
        const bottom = height - MARGIN.bottom
        const lower = withInfluence ? bottom - BAND : bottom
        const upper = withInfluence ? lower - GAP : bottom
        const x = (i: number) => left + ((i + 0.5) / rows.length) * (right - left)
        const y = (value: number) => MARGIN.top + ((reach - value) / (2 * reach)) * (upper - MARGIN.top)
        const p = (value: number) => lower + ((pull - value) / (2 * pull)) * (bottom - lower)
        const every = Math.max(1, Math.ceil(rows.length / Math.floor((right - left) / 26)))
        return (
          <>
            <LeftAxis ruler={ruler([-reach, reach], upper - MARGIN.top, 40)} at={y} x={left} from={MARGIN.top} to={upper} title="Residual" unit={unit.name} />
            <path d={`M${left},${y(0)}H${right}`} stroke="var(--rule-strong)" />
            {withInfluence ? (
              <>
                <LeftAxis ruler={ruler([-pull, pull], bottom - lower, 34)} at={p} x={left} from={lower} to={bottom} title="Influence" unit="σ" />
                <path d={`M${left},${p(0)}H${right}`} stroke="var(--rule-strong)" />
              </>
            ) : null}
            {rows.map(({ row, y: value, bar }, i) => {
              const style = styleOf(row.components[0]?.q ?? 0)
              const at = x(i)
              return (
                <g key={row.measurement}>
                  <title>{`Measurement ${row.measurement + 1}: ${readingText(row.components)}, residual ${printSignificant(value, 3)} ${unit.name}${row.standardised === null ? '' : `, ${printSignificant(row.standardised, 2)} of its deviation`}`}</title>
                  <path d={`M${at},${y(value - bar)}V${y(value + bar)}M${at - 4},${y(value - bar)}h8M${at - 4},${y(value + bar)}h8`} stroke={style.colour} strokeWidth={1.25} fill="none" />
                  <path d={style.mark} transform={`translate(${at} ${y(value)})`} fill={style.colour} stroke="var(--sheet)" />
                  {withInfluence ? (
                    row.influence === null ? <circle cx={at} cy={p(0)} r={3.5} fill="var(--sheet)" stroke="var(--muted)" /> : <path d={`M${at},${p(0)}V${p(row.influence)}`} stroke="var(--ink)" strokeWidth={5} />
                  ) : null}
                  {i % every === 0 ? <text x={at} y={bottom + 15} textAnchor="middle" fontSize={11.5} fill="var(--ink)">{row.measurement + 1}</text> : null}
                </g>
              )
            })}
            <text x={(left + right) / 2} y={height - 4} textAnchor="middle" fontSize={12} fill="var(--muted)">Measurement</text>
          </>
        )
      }}
    </PlotFrame>
  )
}
