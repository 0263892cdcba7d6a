'use client'
import { memo, useMemo } from 'react'
import { DataTable, type Column } from '@/app/_components/data-table'
import { fixed, halves } from '@/app/_components/number'
import { PolarisationSign, polarisationName } from '@/app/_components/plots/polarisation'
import { signed } from '@/app/_components/plots/ruler'
import { LineSign } from './line-mark'
import type { OverlaidComponent } from './overlay'
import type { PatternLine } from './use-lines'

const numeric = (name: string, header: React.ReactNode, value: (row: OverlaidComponent) => number | null, print: (value: number) => string, only?: 'copy'): Column<OverlaidComponent> => ({
  name,
  header,
  align: 'right',
  value,
  sort: true,
  ...(only === undefined ? {} : { only }),
  cell: (row) => {
    const found = value(row)
    return found === null ? <span className="text-muted">does not apply</span> : <span title={String(found)}>{print(found)}</span>
  },
})

function columnsOf(lines: readonly PatternLine[], thetaDeg: number | null): Column<OverlaidComponent>[] {
  const name = (line: number) => lines[line]?.name.replace('\u00a0', ' ') ?? ''
  return [
    { name: 'line', header: 'Line', rowHeader: true, value: ({ line }) => name(line), sort: ({ line }) => line, cell: ({ line }) => <span className="inline-flex items-center gap-2"><LineSign line={line} /> {name(line)}</span> },
    { name: 'transition', header: 'Transition', value: ({ line }) => lines[line]?.id ?? null, only: 'copy' },
    { name: 'polarisation', header: 'Polarisation', value: ({ component }) => component.polarisation, sort: ({ component }) => component.q, cell: ({ component: { q } }) => <span className="inline-flex items-center gap-2"><PolarisationSign q={q} /> {polarisationName(q)}</span> },
    numeric('m_lower', <>m<sub>lower</sub></>, ({ component }) => component.m_lower, halves),
    numeric('m_upper', <>m<sub>upper</sub></>, ({ component }) => component.m_upper, halves),
    numeric('shift_invcm', <>Shift, cm<sup>−1</sup></>, ({ component }) => component.shift_invcm, (v) => signed(v, 6)),
    numeric('wavenumber_invcm', <>Wavenumber, cm<sup>−1</sup></>, ({ component }) => component.wavenumber_invcm, (v) => fixed(v, 4)),
    numeric('wavelength_air_nm', 'In air, nm', ({ component }) => component.wavelength_air_nm, (v) => fixed(v, 5)),
    numeric('wavelength_vac_nm', 'In vacuum, nm', ({ component }) => component.wavelength_vac_nm, (v) => fixed(v, 5)),
    numeric('strength', 'Strength', ({ component }) => component.strength, (v) => fixed(v, 5)),
    numeric('intensity', thetaDeg === null ? 'Intensity, mean' : `Intensity at ${thetaDeg}°`, ({ component }) => component.intensity, (v) => fixed(v, 5)),
    ...(thetaDeg === null ? [] : [numeric('stokes_v', 'Stokes V', ({ component }) => component.stokes_v, (v) => signed(v, 4))]),
    { name: 'blends_with', header: 'Blends with', value: ({ blends }) => blends.map((line) => lines[line]?.id ?? '').join(' '), sort: ({ blends }) => blends.length, cell: ({ blends }) => (blends.length === 0 ? <span className="text-muted">none</span> : <span className="inline-flex gap-2.5">{blends.map((line) => <LineSign key={line} line={line} />)}</span>) },
  ]
}

/** Every component of every line; copies carry full precision. */
export const OverlayTable = memo(function OverlayTable({ components, lines, fieldTesla, thetaDeg }: { components: readonly OverlaidComponent[]; lines: readonly PatternLine[]; fieldTesla: number; thetaDeg: number | null }) {
  const columns = useMemo(() => columnsOf(lines, thetaDeg), [lines, thetaDeg])
  const caption = `Components of all lines at ${fieldTesla} T`
  return <DataTable columns={columns} rows={components} rowKey={(row) => row.key} caption={caption} hideCaption summary={`${components.length} components; strengths and intensities of each line for itself, without its weight`} />
})
