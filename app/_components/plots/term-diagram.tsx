'use client'
import { scaleLinear } from 'd3-scale'
import type { Route } from 'next'
import Link from 'next/link'
import { useState } from 'react'
import { printFixed } from '@/lib/units/print'
import type { Level } from '@/openapi/schemas/level'
import { Configuration } from '../configuration'
import { DataTable, type Column } from '../data-table'
import { halves } from '../number'
import { TermSymbol } from '../term-symbol'
import { LeftAxis } from './axis'
import { PlotFrame } from './plot-frame'
import { ruler, spread } from './ruler'
import { SvgTerm } from './svg-term'
import { energySegments, shortConfiguration, termColumns, type TermColumn } from './term-columns'
import { roving } from './use-roving'

export interface TermDiagramProps {
  levels: readonly Level[]
  ionisationInvcm: number | null
  hrefFor: (level: Level) => string
  /** Id of a level to single out. */
  selected?: string | null
  name: string
  title?: string
}

/** Columns share the width, up to this much each. */
const COLUMN = 250
const STROKE = 30
const BREAK = 26
const SERIF = "'STIX Two Text Variable', serif"

const twin: Column<Level>[] = [
  { name: 'energy_invcm', header: 'Energy, cm⁻¹', align: 'right', value: (l) => l.energy_invcm, cell: (l) => printFixed(l.energy_invcm, 3, { grouped: true }), sort: true },
  { name: 'term', header: 'Term', value: (l) => l.term.symbol, cell: (l) => <TermSymbol term={l.term} /> },
  { name: 'configuration', header: 'Configuration', value: (l) => l.configuration, cell: (l) => <Configuration text={l.configuration} /> },
  { name: 'parity', header: 'Parity', value: (l) => l.term.parity },
]

/** The level scheme of a species: a column for each term, levels as strokes at their energy, the ionisation limit dashed. */
export function TermDiagram({ levels, ionisationInvcm, hrefFor, selected = null, name, title = 'Term diagram' }: TermDiagramProps) {
  const [active, setActive] = useState<string | null>(null)
  const columns = termColumns(levels)
  const segments = energySegments(levels.map((l) => l.energy_invcm), ionisationInvcm)
  const current = levels.find((level) => level.id === active)
  const crowd = Math.max(...columns.map((c) => c.levels.length), 1)
  const table: Column<Level>[] = [
    { name: 'level', header: 'Level', value: (l) => l.id, rowHeader: true, cell: (l) => <Link className="link" prefetch={false} href={hrefFor(l) as Route}>{l.id}</Link> },
    ...twin,
  ]
  const limit = ionisationInvcm === null ? 'The ionisation limit is not known.' : `Ionisation limit ${printFixed(ionisationInvcm, 2, { grouped: true })} cm⁻¹.`

  return (
    <PlotFrame
      title={title}
      name={`${name}-terms`}
      minWidth={96 + columns.length * 84}
      height={Math.max(500, crowd * 14 + 150)}
      description={`${levels.length} levels in ${columns.length} columns by term. ${limit} Arrow keys go through the levels, Enter opens one.`}
      reading={current ? <Reading level={current} /> : `${levels.length} levels in ${columns.length} terms. Point at a level to name it; click or press Enter to open it.`}
      table={<DataTable columns={table} rows={levels} rowKey={(l) => l.id} caption="Levels" hideCaption summary={limit} initialSort={{ name: 'energy_invcm', descending: false }} />}
    >
      {(width, height) => {
        const [left, right, top, bottom] = [76, width - 8, 58, height - 18]
        const scale = brokenScale(segments, top + (ionisationInvcm === null ? 6 : 20), bottom - 8)
        const step = Math.min(COLUMN, (right - left - 14) / Math.max(1, columns.length))
        const order = columns.flatMap((c) => c.levels.map((l) => l.id))
        const mark = roving({ order, active, onActive: setActive, across: (id, up) => neighbour(columns, id, up) })
        return (
          <>
            <Parities columns={columns} left={left + 12} step={step} />
            {scale.map(({ at, from, to, energies }, index) => (
              <LeftAxis key={index} ruler={ruler(energies, from - to, 46)} at={at} x={left} from={to} to={from} title={index === scale.length - 1 ? 'Energy' : undefined} unit="cm⁻¹" titleX={13} />
            ))}
            {scale.length > 1 && <Break x={left} right={right} y={(scale[0]?.to ?? 0) - BREAK / 2} />}
            {ionisationInvcm !== null && <IonisationLimit y={scale[scale.length - 1]?.at(ionisationInvcm) ?? top} left={left} right={right} invcm={ionisationInvcm} />}
            {columns.map((column, index) => {
              const x = left + 12 + index * step
              const ys = column.levels.map((l) => place(scale, l.energy_invcm))
              const labels = spread(ys, 14, top + 24, bottom - 6)
              return (
                <g key={`${column.parity} ${column.head}`}>
                  <text x={x} y={46} fontSize={16} fill="var(--ink)" fontFamily={SERIF} aria-hidden="true"><SvgTerm symbol={column.head} size={16} /></text>
                  {column.levels.map((level, i) => (
                    <Link key={level.id} href={hrefFor(level) as Route} prefetch={false} {...(mark(level.id) as object)} aria-label={`${level.id}, ${level.configuration}, ${level.term.symbol}, ${level.energy_invcm} cm⁻¹`} aria-current={level.id === selected ? 'true' : undefined} onPointerEnter={() => setActive(level.id)} onPointerLeave={() => setActive(null)}>
                      <Rung level={level} x={x} y={ys[i] ?? 0} labelY={labels[i] ?? 0} room={step} lit={level.id === active} selected={level.id === selected} />
                    </Link>
                  ))}
                </g>
              )
            })}
          </>
        )
      }}
    </PlotFrame>
  )
}

interface ScaleSegment {
  energies: [number, number]
  from: number
  to: number
  at: (energy: number) => number
}

/** One linear scale for each stretch of energy, lowest first, with room for the break between them. */
function brokenScale(segments: { from: number; to: number }[], top: number, bottom: number): ScaleSegment[] {
  const [first, second] = segments
  if (!first) return []
  const make = (s: { from: number; to: number }, from: number, to: number): ScaleSegment => ({ energies: [s.from, s.to], from, to, at: scaleLinear().domain([s.from, s.to]).range([from, to]) })
  if (!second) return [make(first, bottom, top)]
  const low = bottom - Math.max(34, (bottom - top) * 0.07)
  return [make(first, bottom, low), make(second, low - BREAK, top)]
}

const place = (scale: readonly ScaleSegment[], energy: number): number => (scale.find((s) => energy <= s.energies[1]) ?? scale[scale.length - 1])?.at(energy) ?? 0

/** Left and right go along the reading order; up and down stay in the column. */
function neighbour(columns: readonly TermColumn[], id: string, up: boolean): string | null {
  const column = columns.find((c) => c.levels.some((l) => l.id === id))
  const index = column?.levels.findIndex((l) => l.id === id) ?? -1
  return column?.levels[index + (up ? 1 : -1)]?.id ?? null
}

function Rung({ level, x, y, labelY, room, lit, selected }: { level: Level; x: number; y: number; labelY: number; room: number; lit: boolean; selected: boolean }) {
  const strong = lit || selected
  return (
    <g className="cursor-pointer">
      <rect x={x - 4} y={Math.min(y, labelY) - 7} width={room - 6} height={Math.abs(y - labelY) + 14} fill="transparent" data-screen-only pointerEvents={Math.abs(y - labelY) > 14 ? 'none' : undefined} />
      <rect x={x + STROKE + 8} y={labelY - 7} width={room - STROKE - 16} height={14} fill="transparent" data-screen-only />
      <path d={`M${x},${y}h${STROKE}`} stroke={strong ? 'var(--lamp)' : 'var(--ink)'} strokeWidth={strong ? 4 : 2} />
      <path d={`M${x + STROKE},${y}L${x + STROKE + 8},${labelY}`} stroke="var(--rule-strong)" strokeWidth={0.75} />
      <text x={x + STROKE + 11} y={labelY} dy="0.34em" fontSize={12} fontWeight={strong ? 700 : 400} fill="var(--ink)" fontFamily={SERIF}>
        {level.term.label && <tspan fontStyle="italic">{`${level.term.label} `}</tspan>}
        {shortConfiguration(level.configuration)}
        <tspan dx={5} fill="var(--muted)" fontSize={11}>{halves(level.term.j)}</tspan>
      </text>
    </g>
  )
}

function Parities({ columns, left, step }: { columns: readonly TermColumn[]; left: number; step: number }) {
  const even = columns.filter((c) => c.parity === 'even').length
  const groups = [
    { name: 'even parity', from: 0, count: even },
    { name: 'odd parity', from: even, count: columns.length - even },
  ].filter((group) => group.count > 0)
  return (
    <g aria-hidden="true">
      {groups.map(({ name, from, count }) => (
        <g key={name}>
          <text x={left + from * step} y={16} fontSize={12} fill="var(--muted)">{count * step > 70 ? name : name.split(' ')[0]}</text>
          <path d={`M${left + from * step},24h${count * step - 14}`} stroke="var(--rule-strong)" />
        </g>
      ))}
    </g>
  )
}

/** The limit, and a hatched edge for the continuum above it. */
function IonisationLimit({ y, left, right, invcm }: { y: number; left: number; right: number; invcm: number }) {
  return (
    <g aria-hidden="true">
      <path d={`M${left},${y}H${right}`} stroke="var(--lamp)" strokeWidth={1.5} strokeDasharray="9 5" />
      <text x={right - 2} y={y - 5} textAnchor="end" fontSize={12} fill="var(--lamp-ink)">
        {`ionisation limit ${printFixed(invcm, 2, { grouped: true })} cm⁻¹`}
      </text>
    </g>
  )
}

/** A tear across the sheet where an empty stretch of energy is left out. */
function Break({ x, right, y }: { x: number; right: number; y: number }) {
  const teeth = Array.from({ length: Math.ceil((right - x) / 10) + 1 }, (_, i) => `${x + i * 10},${y + (i % 2 === 0 ? -3 : 3)}`)
  return (
    <g aria-hidden="true">
      <path d={`M${teeth.join('L')}`} stroke="var(--rule-strong)" fill="none" strokeWidth={0.75} />
      <text x={x - 6} y={y} dy="0.34em" textAnchor="end" fontSize={12} fill="var(--muted)">left out</text>
    </g>
  )
}

function Reading({ level }: { level: Level }) {
  return (
    <>
      <b className="font-medium text-ink">{level.id}</b> <Configuration text={level.configuration} /> <TermSymbol term={level.term} />, {printFixed(level.energy_invcm, 3, { grouped: true })} cm⁻¹
    </>
  )
}
