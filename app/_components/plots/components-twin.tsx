'use client'
import { printFixed } from '@/lib/units/print'
import { DataTable, type Column } from '../data-table'
import { halves } from '../number'
import { componentKey, type DrawnComponent, endsText, SHIFT_UNITS, shiftIn, type ShiftUnit } from './component-text'
import { PolarisationSign, polarisationName } from './polarisation'
import { signed } from './ruler'

/** The numbers of a pattern as a table: what the drawing shows, for reading and copying. */
export function ComponentsTwin({ components, thetaDeg, caption, units }: { components: readonly DrawnComponent[]; thetaDeg: number | null; caption: string; units: readonly ShiftUnit[] }) {
  const columns: Column<DrawnComponent>[] = [
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
    ...(components.some((c) => c.ends !== undefined)
      ? [{ name: 'sublevels', header: 'Lower → upper', value: (c: DrawnComponent) => endsText(c) } satisfies Column<DrawnComponent>]
      : [
          { name: 'm_lower', header: 'm lower', align: 'right', value: (c: DrawnComponent) => c.m_lower, cell: (c: DrawnComponent) => halves(c.m_lower) } satisfies Column<DrawnComponent>,
          { name: 'm_upper', header: 'm upper', align: 'right', value: (c: DrawnComponent) => c.m_upper, cell: (c: DrawnComponent) => halves(c.m_upper) } satisfies Column<DrawnComponent>,
        ]),
    ...units.map(
      (unit): Column<DrawnComponent> => ({
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
      : [{ name: 'intensity', header: `Intensity at ${thetaDeg}°`, align: 'right', value: (c: DrawnComponent) => c.intensity, cell: (c: DrawnComponent) => (c.intensity === null ? 'does not apply' : printFixed(c.intensity, 4)) } satisfies Column<DrawnComponent>]),
  ]
  return <DataTable columns={columns} rows={components} rowKey={componentKey} caption={caption} hideCaption summary={caption} />
}
