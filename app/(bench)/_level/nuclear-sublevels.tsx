'use client'
import { useDeferredValue, useMemo } from 'react'
import type { Isotope } from '@/openapi/schemas/species'
import type { HyperfineSublevel, LevelDetail } from '@/openapi/schemas/level'
import { DataTable, type Column } from '@/app/_components/data-table'
import type { FieldValue } from '@/app/_components/field/field-scale'
import { Notice } from '@/app/_components/notice'
import { fixed, halves } from '@/app/_components/number'
import { useNuclearFan } from '@/app/_components/plots/nuclear-fan'
import { signed } from '@/app/_components/plots/ruler'
import { Symbols } from '@/app/_components/plots/symbols'
import { SublevelFan } from '@/app/_components/plots/sublevel-fan'
import { Skeleton } from '@/app/_components/skeleton'
import { useResting } from '@/app/_components/use-resting'
import { Warnings } from '@/app/_components/warnings'

const number = (name: keyof HyperfineSublevel & string, header: React.ReactNode, print: (value: number) => string): Column<HyperfineSublevel> => ({
  name, header, align: 'right', sort: true,
  value: (row) => (typeof row[name] === 'number' ? row[name] : null),
  cell: (row) => (typeof row[name] === 'number' ? <span title={String(row[name])}>{print(row[name])}</span> : <span className="text-muted">not one</span>),
})

const columns: Column<HyperfineSublevel>[] = [
  { ...number('f', 'F', halves), rowHeader: true },
  number('m_f', <>m<sub>F</sub></>, halves),
  number('m_j', <>m<sub>J</sub></>, halves),
  number('m_i', <>m<sub>I</sub></>, halves),
  number('energy_mhz', 'Energy, MHz', (v) => signed(v, 10)),
  number('shift_mhz', 'Shift from F, MHz', (v) => signed(v, 9)),
  number('derivative_mhz_per_tesla', 'Slope, MHz/T', (v) => signed(v, 8)),
  number('energy_invcm', <>Energy, cm<sup>−1</sup></>, (v) => fixed(v, 7)),
]

interface Props {
  level: LevelDetail
  /** Null while they are being read. */
  isotopes: readonly Isotope[] | null
  isotope: number | null
  field: FieldValue
  onField: (tesla: number) => void
}

/** The sublevels F, m_F of one isotope: curves over the field, and numbers at the field in force. */
export function NuclearSublevels({ level, isotopes, isotope, field, onField }: Props) {
  const found = useMemo(() => (isotopes === null ? null : { level, constants: level.hyperfine_constants, isotopes }), [level, isotopes])
  // a drag does not wait for diagonalisation
  const tesla = useDeferredValue(field.tesla)
  const { sublevels, here, fanTo, problem } = useNuclearFan(found, isotope, tesla)
  // the table waits for the end of the drag
  const rested = useResting(sublevels)
  const restedTesla = useResting(tesla)
  if (problem !== null) return <Notice tone="warn" title="No hyperfine sublevels can be computed."><p>{problem}</p></Notice>
  if (sublevels === null) return <Skeleton label="Reading the isotopes" className="h-96" />
  const { massNumber, twoI } = sublevels.isotope
  return (
    <>
      <SublevelFan nuclear fanTo={fanTo} here={here} fieldTesla={tesla} fieldUnit={field.unit} limitTesla={null} tolerance={0.01} onField={onField} name={`${level.id}-${massNumber}-hyperfine`} title={`Sublevels of mass number ${massNumber}, I = ${halves(twoI / 2)}`} caption={`Hyperfine sublevels at ${tesla} T`} />
      <Warnings meta={{ warnings: sublevels.warnings }} quiet />
      <div className="mt-4">
        <DataTable columns={columns} rows={(rested ?? sublevels).rows} rowKey={(row) => `${row.m_j} ${row.m_i}`} caption={`Hyperfine sublevels of ${level.id} at ${restedTesla} T`} hideCaption summary={<Symbols text={`At ${restedTesla} T, which is ${Number((restedTesla * 1e4).toPrecision(10))} G; energies from the centre of gravity of the level; m_J and m_I at high field`} />} />
      </div>
    </>
  )
}
