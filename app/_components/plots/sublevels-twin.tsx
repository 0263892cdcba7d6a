'use client'
import { formatHalf, formatHalfUnicode } from '@/lib/atomic/half'
import type { Sublevel } from '@/lib/atomic/sublevels'
import { DataTable, type Column } from '../data-table'
import { signed } from './ruler'

interface Row extends Sublevel {
  level: string
}

/** Sublevels of one or more levels as a table. */
export function SublevelsTwin({ levels, caption }: { levels: readonly { name: string; sublevels: readonly Sublevel[] }[]; caption: string }) {
  const rows: Row[] = levels.flatMap(({ name, sublevels }) => [...sublevels].reverse().map((s) => ({ ...s, level: name })))
  const columns: Column<Row>[] = [
    ...(levels.length > 1 ? [{ name: 'level', header: 'Level', value: (r: Row) => r.level, rowHeader: true } satisfies Column<Row>] : []),
    { name: 'm', header: 'm', align: 'right', value: (r) => formatHalf(r.twoM), cell: (r) => formatHalfUnicode(r.twoM) },
    { name: 'shift_invcm', header: 'Shift, cm⁻¹', align: 'right', value: (r) => r.shiftInvcm, cell: (r) => signed(r.shiftInvcm, 6) },
    { name: 'shift_ghz', header: 'Shift, GHz', align: 'right', value: (r) => r.shiftGhz, cell: (r) => signed(r.shiftGhz, 6) },
  ]
  return <DataTable columns={columns} rows={rows} rowKey={(r) => `${r.level} ${r.twoM}`} caption={caption} hideCaption summary={caption} />
}
