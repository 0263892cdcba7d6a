'use client'
import { memo } from 'react'
import type { Sublevel } from '@/openapi/schemas/level'
import { DataTable, type Column } from '@/app/_components/data-table'
import { fixed, halves } from '@/app/_components/number'
import { signed } from '@/app/_components/plots/ruler'
import { Symbols } from '@/app/_components/plots/symbols'

function numeric(name: keyof Sublevel & string, header: React.ReactNode, print: (value: number) => string): Column<Sublevel> {
  const value = (row: Sublevel): number | null => {
    const found = row[name]
    return typeof found === 'number' ? found : null
  }
  return {
    name, header, align: 'right', value, sort: true,
    cell: (row) => {
      const found = value(row)
      return found === null ? <span className="text-muted">not known</span> : <span title={String(found)}>{print(found)}</span>
    },
  }
}

const far: Column<Sublevel>[] = [
  { name: 'm_l', header: <>M<sub>L</sub></>, align: 'right', value: (row) => row.m_l, cell: (row) => (row.m_l === null ? '' : halves(row.m_l)) },
  { name: 'm_s', header: <>M<sub>S</sub></>, align: 'right', value: (row) => row.m_s, cell: (row) => (row.m_s === null ? '' : halves(row.m_s)) },
]

const columnsOf = (model: 'linear' | 'intermediate', quadratic: boolean): Column<Sublevel>[] => [
  { name: 'm', header: 'm', align: 'right', rowHeader: true, value: (row) => row.m, sort: true, cell: (row) => halves(row.m) },
  ...(model === 'intermediate' ? far : []),
  numeric('shift_invcm', <>Shift, cm<sup>−1</sup></>, (v) => signed(v, 6)),
  numeric('shift_ghz', 'Shift, GHz', (v) => signed(v, 6)),
  numeric('energy_invcm', <>Energy, cm<sup>−1</sup></>, (v) => fixed(v, 5)),
  numeric('derivative_invcm_per_tesla', <>Slope, cm<sup>−1</sup>/T</>, (v) => signed(v, 6)),
  ...(quadratic ? [numeric('diamagnetic_shift_invcm', <>Of it quadratic, cm<sup>−1</sup></>, (v) => signed(v, 4))] : []),
]

/** The sublevels as numbers; copies carry full precision. */
export const SublevelTable = memo(function SublevelTable({ level, fieldTesla, rows, model, quadratic }: { level: string; fieldTesla: number; rows: readonly Sublevel[]; model: 'linear' | 'intermediate'; quadratic: boolean }) {
  return (
    <div className="mt-4">
      <DataTable columns={columnsOf(model, quadratic)} rows={rows} rowKey={(row) => String(row.m)} caption={`Sublevels of ${level} at ${fieldTesla} T`} hideCaption
        summary={model === 'intermediate' ? <Symbols text="M_L and M_S are what a sublevel tends to at high field" /> : `${rows.length} sublevel${rows.length === 1 ? '' : 's'}, linear law`} />
    </div>
  )
})
