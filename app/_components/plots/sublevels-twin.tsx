'use client'
import { GHZ_PER_INVCM } from '@/lib/atomic/constants'
import { DataTable, type Column } from '../data-table'
import type { Fan, FanPoint } from './fan'
import { signed } from './ruler'
import { Symbols } from './symbols'

interface Row extends FanPoint {
  level: string
}

interface SublevelsTwinProps {
  levels: readonly { name: string; points: readonly FanPoint[]; heads: Fan['heads'] }[]
  caption: string
  /** With nuclear spin: MHz first, and energies from the centre of gravity beside the shifts. */
  nuclear?: boolean
}

/** Sublevels of one or more levels as a table. */
export function SublevelsTwin({ levels, caption, nuclear = false }: SublevelsTwinProps) {
  const rows: Row[] = levels.flatMap(({ name, points }) => [...points].reverse().map((point) => ({ ...point, level: name })))
  const heads = levels[0]?.heads
  const far = rows.some((row) => row.far !== null)
  const scaled = (name: string, header: string, value: (row: Row) => number, digits: number): Column<Row> => ({ name, header, align: 'right', value, cell: (row) => <span title={String(value(row))}>{signed(value(row), digits)}</span> })
  const columns: Column<Row>[] = [
    ...(levels.length > 1 ? [{ name: 'level', header: 'Level', value: (row: Row) => row.level, rowHeader: true } satisfies Column<Row>] : []),
    { name: nuclear ? 'f_m_f' : 'm', header: <Symbols text={heads?.name ?? 'm'} />, align: 'right', value: (row) => row.name },
    ...(far ? [{ name: nuclear ? 'm_j_m_i' : 'm_l_m_s', header: <><Symbols text={heads?.far ?? ''} /> at high field</>, align: 'right', value: (row: Row) => row.far } satisfies Column<Row>] : []),
    ...(nuclear
      ? [scaled('energy_mhz', 'Energy, MHz', (row) => row.energyInvcm * GHZ_PER_INVCM * 1000, 9), scaled('shift_mhz', 'Shift from F, MHz', (row) => row.shiftInvcm * GHZ_PER_INVCM * 1000, 8), scaled('energy_invcm', 'Energy, cm⁻¹', (row) => row.energyInvcm, 7)]
      : [scaled('shift_invcm', 'Shift, cm⁻¹', (row) => row.shiftInvcm, 6), scaled('shift_ghz', 'Shift, GHz', (row) => row.shiftInvcm * GHZ_PER_INVCM, 6)]),
  ]
  return <DataTable columns={columns} rows={rows} rowKey={(row) => `${row.level} ${row.key}`} caption={caption} hideCaption summary={caption} />
}
