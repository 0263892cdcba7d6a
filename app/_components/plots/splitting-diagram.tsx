'use client'
import { MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { formatHalfUnicode, type TwoJ } from '@/lib/atomic/half'
import type { Component } from '@/openapi/schemas/components'
import { componentKey, componentText, isDrawn } from './component-text'
import type { FanPoint } from './fan'
import { PlotFrame } from './plot-frame'
import { styleOf } from './polarisation'
import { niceCeil, spread } from './ruler'
import { configurationText, SvgTerm } from './svg-term'
import { SublevelsTwin } from './sublevels-twin'
import { shortConfiguration } from './term-columns'
import { roving } from './use-roving'

export interface SplitLevel {
  /** Canonical text, e.g. `3p`. */
  configuration: string
  /** ASCII term symbol, e.g. `2P*3/2`. */
  symbol: string
  twoJ: TwoJ
  /** Its sublevels at the field, keyed by twice m. */
  points: readonly FanPoint[]
}

export interface SplittingDiagramProps {
  lower: SplitLevel
  upper: SplitLevel
  components: readonly Component[]
  fieldTesla: number
  thetaDeg: number | null
  active: string | null
  onActive: (key: string | null) => void
  name: string
  title?: string
  /** The law that places the sublevels, in words. */
  law: string
}

interface Rung {
  twoM: TwoJ
  far: string | null
  y: number
  labelY: number
}

const GAP = 12.5

const nameOf = ({ configuration, symbol }: SplitLevel): string => `${configuration} ${symbol}`

const widest = ({ points }: SplitLevel): number => Math.max(0, ...points.map((point) => Math.abs(point.shiftInvcm)))

/** Two levels without the field and in it, sublevels named by m, an arrow for each component. Both splittings share one scale. */
export function SplittingDiagram({ lower, upper, components, fieldTesla, thetaDeg, active, onActive, name, title = 'Splitting', law }: SplittingDiagramProps) {
  const shown = components.filter(isDrawn)
  const current = shown.find((component) => componentKey(component) === active)
  const total = widest(lower) + widest(upper)
  const heads = { name: 'm', far: 'M_L, M_S' }
  const far = [...lower.points, ...upper.points].some((point) => point.far !== null)
  // The scale goes in steps: between two of them the sublevels open as the field grows.
  // A splitting that all but vanishes is not blown up: a fifth of a Lorentz unit is the least that fills the sheet.
  const full = niceCeil(Math.max(total * 1.02, 0.2 * MU_B_OVER_HC_INVCM_PER_T * fieldTesla))
  const rows = lower.twoJ + upper.twoJ + 2

  return (
    <PlotFrame
      title={title}
      name={`${name}-splitting`}
      description={`The levels ${nameOf(lower)} and ${nameOf(upper)} before and in a field of ${fieldTesla} T, with ${shown.length} arrows from lower to upper sublevels. Arrow keys go through the components.`}
      height={(width) => Math.max(width < 560 ? 400 : 440, rows * GAP + 190)}
      reading={current ? componentText(current, thetaDeg) : 'Arrows rise from the lower to the upper sublevel; q = m upper − m lower is the same in emission.'}
      table={<SublevelsTwin levels={[{ name: nameOf(upper), points: upper.points, heads }, { name: nameOf(lower), points: lower.points, heads }]} caption={`Sublevels at ${fieldTesla} T, ${law}`} />}
    >
      {(width, height) => {
        const narrow = width < 560
        const [top, bottom] = [46, height - 34]
        const middleGap = 84
        const room = bottom - top - middleGap
        // Each level gets its share of the height, never less than its m labels need.
        const before = { upper: brief(upper), lower: brief(lower) }
        const share = (mine: number, twoJ: TwoJ) => Math.max(total > 0 ? (room * mine) / total : room / 2, 76, (twoJ + 1) * GAP)
        const wish = { upper: share(widest(upper), upper.twoJ), lower: share(widest(lower), lower.twoJ) }
        const fit = room / (wish.upper + wish.lower)
        const pxPerInvcm = total > 0 ? (fit * room) / 2 / full : 0
        const upperHeight = wish.upper * fit
        const centres = { upper: top + upperHeight / 2, lower: bottom - (wish.lower * fit) / 2 }
        const [plain, leave, arrive, labels] = narrow ? [12, 64, 96, width - (far ? 90 : 44)] : [24, 132, 184, width - (far ? 116 : 64)]

        const rungs = ({ points }: SplitLevel, centre: number, low: number, high: number): Rung[] => {
          const ys = points.map((point) => centre - point.shiftInvcm * pxPerInvcm)
          // At small field the rungs lie on one another; ordering by m first keeps their labels in order.
          const order = points.map((point, i) => (ys[i] ?? 0) - Number(point.key) * 1e-6)
          const placed = spread(order, GAP, low, high)
          return points.map((point, i) => ({ twoM: Number(point.key), far: point.far, y: ys[i] ?? centre, labelY: placed[i] ?? centre }))
        }
        const ladder = { upper: rungs(upper, centres.upper, top - 8, top + upperHeight + 8), lower: rungs(lower, centres.lower, top + upperHeight + middleGap - 8, bottom + 8) }
        const at = (list: readonly Rung[], m: number, other: number) => list.find((r) => r.twoM === 2 * m)?.y ?? other
        const step = (labels - arrive - 20) / Math.max(1, shown.length + groupsOf(shown) - 1)
        const arrows = shown.map((component, index) => ({ component, x: arrive + 14 + step * (index + 0.5 + groupsBefore(shown, index)) }))
        const mark = roving({ order: arrows.map((a) => componentKey(a.component)), active, onActive })

        return (
          <>
            <text x={plain} y={20} fontSize={12} fill="var(--muted)" aria-hidden="true">no field</text>
            <text x={arrive} y={20} fontSize={12} fill="var(--muted)" aria-hidden="true">{fieldTesla === 0 ? 'no field' : 'in the field'}</text>
            <text x={labels + 8} y={20} fontSize={13} fill="var(--muted)" fontStyle="italic" aria-hidden="true" fontFamily="'STIX Two Text Variable', serif">m</text>
            {far && (
              <text x={width - 6} y={20} textAnchor="end" fontSize={13} fill="var(--muted)" fontStyle="italic" aria-hidden="true" fontFamily="'STIX Two Text Variable', serif">
                M<tspan dy={3.5} fontSize={10}>L</tspan><tspan dy={-3.5}>, M</tspan><tspan dy={3.5} fontSize={10}>S</tspan>
              </text>
            )}
            {(['upper', 'lower'] as const).map((end) => (
              <g key={end} aria-hidden="true">
                <path d={`M${plain},${centres[end]}H${leave}`} stroke="var(--ink)" strokeWidth={2} />
                <text x={plain} y={centres[end] - 11} fontSize={16} fill="var(--ink)" fontFamily="'STIX Two Text Variable', serif">
                  <SvgTerm symbol={(end === 'upper' ? upper : lower).symbol} before={narrow ? '' : before[end]} size={16} />
                </text>
                {!narrow && before[end] === '' && (
                  <text x={plain} y={centres[end] + 18} fontSize={12} fill="var(--muted)" fontFamily="'STIX Two Text Variable', serif">
                    {shortConfiguration((end === 'upper' ? upper : lower).configuration)}
                  </text>
                )}
                {ladder[end].map((rung) => {
                  const lit = current !== undefined && (end === 'upper' ? current.m_upper : current.m_lower) * 2 === rung.twoM
                  return (
                    <g key={rung.twoM}>
                      <path d={`M${leave},${centres[end]}L${arrive},${rung.y}`} stroke="var(--rule-strong)" strokeWidth={0.75} strokeDasharray="3 3" />
                      <path d={`M${arrive},${rung.y}H${labels - 14}`} stroke={lit ? 'var(--lamp)' : 'var(--ink)'} strokeWidth={lit ? 3 : 1.5} />
                      <path d={`M${labels - 14},${rung.y}L${labels + 4},${rung.labelY}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
                      <text x={labels + 8} y={rung.labelY} dy="0.34em" fontSize={12} fontWeight={lit ? 700 : 400} fill="var(--ink)">
                        {formatHalfUnicode(rung.twoM)}
                      </text>
                      {rung.far !== null && <text x={width - 6} y={rung.labelY} dy="0.34em" textAnchor="end" fontSize={12} fill="var(--muted)">{rung.far}</text>}
                    </g>
                  )
                })}
              </g>
            ))}
            {arrows.map(({ component, x }) => {
              const key = componentKey(component)
              return (
                <g key={key} {...mark(key)} role="img" aria-label={componentText(component, thetaDeg)} onPointerEnter={() => onActive(key)} onPointerLeave={() => onActive(null)}>
                  <Arrow component={component} x={x} from={at(ladder.lower, component.m_lower, centres.lower)} to={at(ladder.upper, component.m_upper, centres.upper)} active={key === active} reach={Math.max(6, step)} />
                </g>
              )
            })}
            {total > 0 && <ScaleBar x={plain} y={height - 14} full={full} pxPerInvcm={pxPerInvcm} />}
            {!narrow && (
              <text x={labels - 14} y={height - 10} textAnchor="end" fontSize={12} fill="var(--muted)" aria-hidden="true">
                the distance between the levels is not to scale
              </text>
            )}
          </>
        )
      }}
    </PlotFrame>
  )
}

/** The configuration where it is short enough to stand before the symbol; else it goes below the stroke. */
const brief = ({ configuration }: SplitLevel): string => (configuration.length <= 6 ? configurationText(configuration) : '')

/** How many polarisations there are among sorted components: each group of arrows is set a little apart. */
const groupsOf = (components: readonly Component[]): number => new Set(components.map((c) => c.q)).size
const groupsBefore = (components: readonly Component[], index: number): number => groupsOf(components.slice(0, index + 1)) - 1

function Arrow({ component, x, from, to, active, reach }: { component: Component; x: number; from: number; to: number; active: boolean; reach: number }) {
  const style = styleOf(component.q)
  const middle = (from + to) / 2
  return (
    <>
      <path d={`M${x},${from}V${to}`} stroke="transparent" strokeWidth={Math.max(reach, 8)} data-screen-only />
      {active && <path d={`M${x},${from}V${to}`} stroke="var(--lamp)" strokeOpacity={0.45} strokeWidth={9} data-screen-only />}
      <path d={`M${x},${from}V${to + 8}`} stroke={style.colour} strokeWidth={style.width * 0.8} strokeDasharray={style.dash} strokeLinecap={style.cap} />
      <path d={`M${x - 4.5},${to + 9.5}L${x},${to + 1}L${x + 4.5},${to + 9.5}Z`} fill={style.colour} />
      <path d={style.mark} transform={`translate(${x} ${middle}) scale(0.85)`} fill={style.colour} stroke="var(--sheet)" strokeWidth={1} />
    </>
  )
}

const roundLength = (size: number): number => {
  const power = 10 ** Math.floor(Math.log10(size))
  return power * (size >= 5 * power ? 5 : size >= 2 * power ? 2 : 1)
}

/** A bar of a round number of cm^-1 at the scale of both splittings. */
function ScaleBar({ x, y, full, pxPerInvcm }: { x: number; y: number; full: number; pxPerInvcm: number }) {
  const length = roundLength(full / 3)
  const px = length * pxPerInvcm
  return (
    <g aria-hidden="true">
      <path d={`M${x},${y - 4}v8M${x},${y}h${px}m0,-4v8`} stroke="var(--muted)" fill="none" />
      <text x={x + px + 8} y={y} dy="0.34em" fontSize={12} fill="var(--muted)">
        {`${Number(length.toPrecision(3))} cm⁻¹`}
      </text>
    </g>
  )
}
