'use client'
import { memo, useId, useMemo, useState, type ReactNode } from 'react'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { formatField, type FieldUnit } from '@/lib/units/field'
import type { Fan, FanPoint } from './fan'
import { FanSheet, type FanScale } from './fan-sheet'
import { Choices, PlotFrame } from './plot-frame'
import { niceCeil, signed } from './ruler'
import { SublevelsTwin } from './sublevels-twin'
import { Symbols } from './symbols'

export interface SublevelFanProps {
  /** The curves up to a field; made anew when the edge moves, not at every step of a drag. */
  fanTo: (edgeTesla: number) => Fan
  /** The sublevels at the field in force, by the keys of the curves. */
  here: readonly FanPoint[]
  fieldTesla: number
  fieldUnit: FieldUnit
  /** Field where the linear law passes its tolerance; null where it never does or is unknown. */
  limitTesla: number | null
  tolerance: number
  /** With nuclear spin: energies in MHz, and no limit of the linear law, which nothing here follows. */
  nuclear?: boolean
  /** Called when a place on the field's axis is chosen. */
  onField?: (tesla: number) => void
  name: string
  title?: string
  /** Further choices beside the title. */
  controls?: ReactNode
  /** Named in the table twin. */
  caption: string
}

const UNITS = { invcm: { label: 'cm⁻¹', per: 1 }, ghz: { label: 'GHz', per: GHZ_PER_INVCM }, mhz: { label: 'MHz', per: GHZ_PER_INVCM * 1000 } } as const
type EnergyUnit = keyof typeof UNITS
const ENERGIES = (Object.keys(UNITS) as EnergyUnit[]).map((value) => ({ value, label: UNITS[value].label }))

const RANGES = [
  { value: 'field', label: 'as needed' },
  { value: '0.1', label: '0.1 T' },
  { value: '1', label: '1 T' },
  { value: '10', label: '10 T' },
] as const
type Range = (typeof RANGES)[number]['value']

/** The field at the right edge: a quarter beyond the field in force, and the limit of the linear law when it is near. */
export function rightEdge(range: Range, fieldTesla: number, limitTesla: number | null): number {
  if (range !== 'field') return Number(range)
  const wanted = niceCeil(Math.max(fieldTesla * 1.25, 1e-6))
  return limitTesla !== null && limitTesla > wanted && limitTesla < 3 * wanted ? niceCeil(limitTesla * 1.15) : fieldTesla === 0 ? 1 : wanted
}

/** The energies that the sheet spans, in steps, so that the field moves the curves and not the ruler. */
function reach(fan: Fan): [number, number] {
  let [low, high] = [0, 0]
  for (const { values } of fan.curves) for (const value of values) [low, high] = [Math.min(low, value), Math.max(high, value)]
  const least = 0.06 * (high - low)
  return [-niceCeil(Math.max(-low * 1.04, least)), niceCeil(Math.max(high * 1.04, least))]
}

/** Room that one label takes, and how many are set before they would be a grey column. */
const LABEL_GAP = 13
const LABELS_MOST = 48

/** Energies of the sublevels of one level against the field: curves where they are diagonalised, the linear law dashed beside them. */
export const SublevelFan = memo(function SublevelFan({ fanTo, here, fieldTesla, fieldUnit, limitTesla, tolerance, nuclear = false, onField, name, title = 'Sublevels against field', controls, caption }: SublevelFanProps) {
  const [chosen, setUnit] = useState<EnergyUnit | null>(null)
  const [range, setRange] = useState<Range>('field')
  const [active, setActive] = useState<string | null>(null)
  const id = useId().replace(/[^\w-]/g, '')
  const unit = chosen ?? (nuclear ? 'mhz' : 'invcm')
  const limit = nuclear ? null : limitTesla
  const edge = rightEdge(range, fieldTesla, limit)
  const fan = useMemo(() => fanTo(edge), [fanTo, edge])
  const scale = useMemo((): FanScale => {
    const { per, label } = UNITS[unit]
    const [low, high] = reach(fan)
    return { quantity: nuclear ? 'Energy' : 'Shift', per, label, low: low * per, high: high * per }
  }, [fan, unit, nuclear])
  const current = here.find((point) => point.key === active)
  const labelled = fan.curves.length <= LABELS_MOST
  const dashed = fan.curves.some((curve) => curve.linear !== null)
  const notes = [
    limit !== null && limit < edge ? `Hatched: from ${formatField(Number(limit.toPrecision(3)), fieldUnit)} on the linear law is off by more than ${tolerance * 100} % of μB·B.` : null,
    dashed ? 'Dashed: the linear law.' : null,
    fan.neighbours.length > 0 && dashed ? 'Grey: the other J of the term, where they come into view.' : null,
    nuclear ? 'Energies from the centre of gravity of the level.' : null,
    labelled ? null : `${fan.curves.length} sublevels are too many to label here; point at one, or see the table.`,
  ].filter((note) => note !== null)

  return (
    <PlotFrame
      title={title}
      name={`${name}-sublevels`}
      description={`The ${fan.curves.length} sublevels from zero to ${formatField(edge, fieldUnit)}; the field in force is ${formatField(fieldTesla, fieldUnit)}. ${limit !== null && limit < edge ? `From ${formatField(Number(limit.toPrecision(3)), fieldUnit)} on the linear law fails.` : ''} Arrow keys go through them.`}
      height={(width) => Math.max(width < 560 ? 340 : 400, (labelled ? fan.curves.length : 0) * LABEL_GAP + 90)}
      controls={
        <>
          {controls}
          <Choices label="Up to" value={range} choices={RANGES} onChange={setRange} />
          <Choices label={nuclear ? 'Energy in' : 'Shift in'} value={unit} choices={ENERGIES} onChange={setUnit} />
        </>
      }
      reading={current ? <Reading point={current} heads={fan.heads} field={formatField(fieldTesla, fieldUnit)} nuclear={nuclear} /> : `${fan.curves.length} sublevel${fan.curves.length === 1 ? '' : 's'}; the line marks ${formatField(fieldTesla, fieldUnit)}.`}
      note={notes.length > 0 ? notes.join(' ') : undefined}
      table={<SublevelsTwin levels={[{ name: 'level', points: here, heads: fan.heads }]} caption={caption} nuclear={nuclear} />}
    >
      {(width, height) => <FanSheet {...{ width, height, id, fan, scale, edge, here, fieldTesla, fieldUnit, limitTesla: limit, tolerance, labelled, active, onActive: setActive, onField }} />}
    </PlotFrame>
  )
})

function Reading({ point, heads, field, nuclear }: { point: FanPoint; heads: Fan['heads']; field: string; nuclear: boolean }) {
  const mhz = point.energyInvcm * GHZ_PER_INVCM * 1000
  const size = nuclear ? `${signed(mhz, 8)} MHz (${signed(point.energyInvcm, 6)} cm⁻¹)` : `${signed(point.shiftInvcm, 6)} cm⁻¹ (${signed(point.shiftInvcm * GHZ_PER_INVCM, 6)} GHz)`
  return (
    <>
      <Symbols text={heads.name} /> = {point.name} at {field}: {size}
      {point.far === null || heads.far === null ? null : <>; at high field <Symbols text={heads.far} /> = {point.far}</>}
    </>
  )
}
