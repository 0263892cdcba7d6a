'use client'
import type { Component } from '@/lib/atomic/components'
import { formatHalf, formatHalfUnicode } from '@/lib/atomic/half'
import { printFixed } from '@/lib/units/print'
import { DataTable, type Column } from '../data-table'
import { componentKey, SHIFT_UNITS, shiftIn, type ShiftUnit } from './component-text'
import { PolarisationSign, polarisationName } from './polarisation'
import { signed } from './ruler'

const SHIFTS: ShiftUnit[] = ['lorentz', 'invcm', 'ghz', 'pm']

/** The numbers of a pattern as a table: what the drawing shows, for reading and copying. */
export function ComponentsTwin({ components, centreInvcm, thetaDeg, caption }: { components: readonly Component[]; centreInvcm: number; thetaDeg: number | null; caption: string }) {
  const columns: Column<Component>[] = [
    {
      name: 'polarisation',
      header: 'Polarisation',
      value: (c) => c.polarisation,
      rowHeader: true,
      cell: (c) => (
        <span className="inline-flex items-center gap-2">
          <PolarisationSign q={c.q} />
          {polarisationName(c.q)}
        </span>
      ),
    },
    { name: 'm_lower', header: 'm lower', align: 'right', value: (c) => formatHalf(c.twoMLower), cell: (c) => formatHalfUnicode(c.twoMLower) },
    { name: 'm_upper', header: 'm upper', align: 'right', value: (c) => formatHalf(c.twoMUpper), cell: (c) => formatHalfUnicode(c.twoMUpper) },
    ...SHIFTS.map(
      (unit): Column<Component> => ({
        name: `shift_${unit}`,
        header: `Shift, ${SHIFT_UNITS[unit].unit}`,
        align: 'right',
        value: (c) => shiftIn(unit, c, centreInvcm),
        cell: (c) => signed(shiftIn(unit, c, centreInvcm), 6),
      }),
    ),
    { name: 'strength', header: 'Strength', align: 'right', value: (c) => c.strength, cell: (c) => printFixed(c.strength, 4) },
    ...(thetaDeg === null
      ? []
      : [{ name: 'intensity', header: `Intensity at ${thetaDeg}°`, align: 'right', value: (c: Component) => c.intensity, cell: (c: Component) => (c.intensity === null ? 'does not apply' : printFixed(c.intensity, 4)) } satisfies Column<Component>]),
  ]
  return <DataTable columns={columns} rows={components} rowKey={componentKey} caption={caption} hideCaption summary={caption} />
}
