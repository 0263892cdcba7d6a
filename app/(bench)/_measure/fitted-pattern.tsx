'use client'
import { formatHalfUnicode } from '@/lib/atomic/half'
import { printSignificant } from '@/lib/units/print'
import type { DeterminedField } from '@/openapi/schemas/field-fits'
import { BottomAxis } from '@/app/_components/plots/axis'
import { PlotFrame } from '@/app/_components/plots/plot-frame'
import { polarisationName, styleOf } from '@/app/_components/plots/polarisation'
import { ruler, spread } from '@/app/_components/plots/ruler'
import { DataTable, type Column } from '@/app/_components/data-table'
import { halves } from '@/app/_components/number'

const SIDE = 22
const HALF = 52
const PER_LINE = 2 * HALF + 62

type Shown = DeterminedField['pattern'][number]

const COLUMNS: Column<Shown>[] = [
  { name: 'line', header: 'Line', align: 'right', value: (c) => c.line, cell: (c) => c.line + 1 },
  { name: 'q', header: 'Polarisation', value: (c) => c.q, cell: (c) => polarisationName(c.q) },
  { name: 'm_lower', header: 'm lower', align: 'right', value: (c) => c.m_lower, cell: (c) => halves(c.m_lower) },
  { name: 'm_upper', header: 'm upper', align: 'right', value: (c) => c.m_upper, cell: (c) => halves(c.m_upper) },
  { name: 'position_invcm', header: 'Fitted position, cm⁻¹', align: 'right', value: (c) => c.position_invcm, cell: (c) => c.position_invcm.toFixed(5) },
  { name: 'strength', header: 'Strength', align: 'right', value: (c) => c.strength, cell: (c) => printSignificant(c.strength, 4) },
]

/** The pattern at the fitted field, line by line about its zero, with the measured positions over it. */
export function FittedPattern({ answer, names }: { answer: DeterminedField; names: readonly string[] }) {
  const lines = answer.lines.map(({ line }) => {
    const zero = answer.zeros.find((one) => one.lines.includes(line))
    const pattern = answer.pattern.filter((c) => c.line === line)
    const measured = answer.residuals.filter((r) => r.line === line)
    // lines that share a zero stand apart by the table, so each is drawn about the middle of its own pattern
    const own = pattern.map((c) => c.position_invcm)
    const centre = zero && zero.lines.length === 1 ? zero.position_invcm : (Math.min(...own) + Math.max(...own)) / 2
    return { line, pattern, measured, centre }
  }).filter(({ measured, pattern }) => measured.length > 0 && pattern.length > 0)
  const reach = 1.12 * Math.max(...lines.flatMap(({ pattern, measured, centre }) => [...pattern.map((c) => Math.abs(c.position_invcm - centre)), ...measured.map((r) => Math.abs(r.position_invcm - centre))]), 1e-9)
  return (
    <PlotFrame
      title="Fitted pattern and measured positions"
      name="field-fit-pattern"
      description={`Components at the fitted field with heights for strength, π above and σ below the axis, and ${answer.residuals.length} measured positions as arrows with their numbers.`}
      table={<DataTable columns={COLUMNS} rows={answer.pattern} rowKey={(c) => `${c.line} ${c.m_lower} ${c.m_upper}`} caption="Components at the fitted field" hideCaption />}
      height={lines.length * PER_LINE + 22}
      note="Bars: the fitted components, π above, σ below. Numbered ticks: what was measured."
    >
      {(width) => {
        const [left, right] = [SIDE, width - SIDE]
        const x = (value: number) => left + ((value + reach) / (2 * reach)) * (right - left)
        const scale = ruler([-reach, reach], right - left, 70)
        return lines.map(({ line, pattern, measured, centre }, i) => {
          const top = i * PER_LINE + (lines.length > 1 ? 20 : 14)
          const axis = top + HALF + 6
          const bottom = axis + HALF + 6
          const tallest = Math.max(...pattern.map((c) => c.strength))
          const labels = spread(measured.map((r) => x(r.position_invcm - centre)), 15, left, right)
          return (
            <g key={line}>
              {lines.length > 1 ? <text x={left} y={top - 6} fontSize={12} fill="var(--muted)">{names[line] ?? `line ${line + 1}`}</text> : null}
              <path d={`M${left},${axis}H${right}`} stroke="var(--rule-strong)" />
              {measured.map((r, n) => {
                const at = x(r.position_invcm - centre)
                return (
                  <g key={r.measurement}>
                    <path d={`M${at},${axis + HALF}V${axis - HALF + 6}L${labels[n] ?? at},${axis - HALF}`} stroke="var(--lamp)" strokeWidth={1} strokeDasharray="2 3" fill="none" />
                    <text x={labels[n] ?? at} y={axis - HALF - 3} textAnchor="middle" fontSize={11} fontWeight={600} fill="var(--lamp-ink)">{r.measurement + 1}</text>
                  </g>
                )
              })}
              {pattern.map((c) => {
                const style = styleOf(c.q)
                const at = x(c.position_invcm - centre)
                const end = axis + (c.q === 0 ? -1 : 1) * Math.max(3, (HALF - 8) * (c.strength / tallest))
                return (
                  <g key={`${c.m_lower} ${c.m_upper}`}>
                    <title>{`${polarisationName(c.q)} ${formatHalfUnicode(2 * c.m_lower)} → ${formatHalfUnicode(2 * c.m_upper)}, strength ${printSignificant(c.strength, 3)}`}</title>
                    <path d={`M${at},${axis}V${end}`} stroke={style.colour} strokeWidth={style.width} strokeDasharray={style.dash} strokeLinecap={style.cap} />
                    <path d={style.mark} transform={`translate(${at} ${end}) scale(0.8)`} fill={style.colour} stroke="var(--sheet)" />
                  </g>
                )
              })}
              <BottomAxis ruler={scale} at={x} y={bottom} from={left} to={right} {...(i === lines.length - 1 ? { title: 'Distance from the fitted zero', unit: 'cm⁻¹' } : {})} />
            </g>
          )
        })
      }}
    </PlotFrame>
  )
}
