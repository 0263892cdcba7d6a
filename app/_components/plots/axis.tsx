import { superscript, type Ruler } from './ruler'

const LENGTHS = [10, 7, 4.5] as const

interface AxisProps {
  ruler: Ruler
  at: (value: number) => number
  title?: string
  /** With the exponent of the ruler written behind, as `cm⁻¹ × 10⁻⁵` would. */
  unit?: string
}

const titled = (title: string, unit: string | undefined, exponent: number) =>
  [title, unit ? `, ${exponent === 0 ? '' : `10${superscript(exponent)} `}${unit}` : ''].join('')

/** A ruler along the bottom: ticks rise into the sheet from the edge at `y`, labels below. */
export function BottomAxis({ ruler, at, y, from, to, title, unit }: AxisProps & { y: number; from: number; to: number }) {
  return (
    <g aria-hidden="true">
      <path d={`M${from},${y}H${to}`} stroke="var(--rule-strong)" fill="none" />
      {ruler.ticks.map(({ value, rank }) => (
        <path key={value} d={`M${at(value)},${y}v${-LENGTHS[rank]}`} stroke={rank === 0 ? 'var(--ink)' : 'var(--muted)'} strokeWidth={rank === 0 ? 1 : 0.75} />
      ))}
      {ruler.ticks.map(
        ({ value, label }) =>
          label !== null && (
            <text key={value} x={at(value)} y={y + 16} textAnchor="middle" fontSize={12} fill="var(--ink)" style={{ fontVariantNumeric: 'tabular-nums' }}>
              {label}
            </text>
          ),
      )}
      {title && (
        <text x={(from + to) / 2} y={y + 36} textAnchor="middle" fontSize={12.5} fill="var(--muted)">
          {titled(title, unit, ruler.exponent)}
        </text>
      )}
    </g>
  )
}

/** A ruler along the left: ticks point into the sheet from the edge at `x`, labels to its left, title set along it. */
export function LeftAxis({ ruler, at, x, from, to, title, unit, titleX = 14 }: AxisProps & { x: number; from: number; to: number; titleX?: number }) {
  const middle = (from + to) / 2
  return (
    <g aria-hidden="true">
      <path d={`M${x},${from}V${to}`} stroke="var(--rule-strong)" fill="none" />
      {ruler.ticks.map(({ value, rank }) => (
        <path key={value} d={`M${x},${at(value)}h${LENGTHS[rank] * 0.8}`} stroke={rank === 0 ? 'var(--ink)' : 'var(--muted)'} strokeWidth={rank === 0 ? 1 : 0.75} />
      ))}
      {ruler.ticks.map(
        ({ value, label }) =>
          label !== null && (
            <text key={value} x={x - 5} y={at(value)} dy="0.34em" textAnchor="end" fontSize={12} fill="var(--ink)" style={{ fontVariantNumeric: 'tabular-nums' }}>
              {label}
            </text>
          ),
      )}
      {title && (
        <text transform={`translate(${titleX} ${middle}) rotate(-90)`} textAnchor="middle" fontSize={12.5} fill="var(--muted)">
          {titled(title, unit, ruler.exponent)}
        </text>
      )}
    </g>
  )
}
