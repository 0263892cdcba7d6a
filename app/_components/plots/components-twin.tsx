'use client'
import { printFixed } from '@/lib/units/print'
import type { Component } from '@/openapi/schemas/components'
import { DataTable, type Column } from '../data-table'
import { halves } from '../number'
import { componentKey, SHIFT_UNITS, shiftIn, type ShiftUnit } from './component-text'
import { PolarisationSign, polarisationName } from './polarisation'
import { signed } from './ruler'

const SHIFTS: ShiftUnit[] = ['lorentz', 'invcm', 'ghz', 'pm']

/** The numbers of a pattern as a table: what the drawing shows, for reading and copying. */
export function ComponentsTwin({ components, thetaDeg, caption }: { components: readonly Component[]; thetaDeg: number | null; caption: string }) {
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
    { name: 'm_lower', header: 'm lower', align: 'right', value: (c) => c.m_lower, cell: (c) => halves(c.m_lower) },
    { name: 'm_upper', header: 'm upper', align: 'right', value: (c) => c.m_upper, cell: (c) => halves(c.m_upper) },
    ...SHIFTS.map(
      (unit): Column<Component> => ({
        name: `shift_${unit}`,
        header: `Shift, ${SHIFT_UNITS[unit].unit}`,
        align: 'right',
        value: (c) => shiftIn(unit, c),
        cell: (c) => {
          const shift = shiftIn(unit, c)
          return shift === null ? 'not known' : signed(shift, 6)
        },
      }),
    ),
    { name: 'strength', header: 'Strength', align: 'right', value: (c) => c.strength, cell: (c) => (c.strength === null ? 'not known' : printFixed(c.strength, 4)) },
    ...(thetaDeg === null
      ? []
      : [{ name: 'intensity', header: `Intensity at ${thetaDeg}°`, align: 'right', value: (c: Component) => c.intensity, cell: (c: Component) => (c.intensity === null ? 'does not apply' : printFixed(c.intensity, 4)) } satisfies Column<Component>]),
  ]
  return <DataTable columns={columns} rows={components} rowKey={componentKey} caption={caption} hideCaption summary={caption} />
}
