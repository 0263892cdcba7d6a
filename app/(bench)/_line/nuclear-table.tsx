'use client'
import { memo, useMemo } from 'react'
import type { HyperfineComponent, HyperfineComponents } from '@/openapi/schemas/components'
import { DataTable, type Column } from '@/app/_components/data-table'
import { fixed, halves, significant } from '@/app/_components/number'
import { PolarisationSign, polarisationName } from '@/app/_components/plots/polarisation'
import { signed } from '@/app/_components/plots/ruler'
import { Symbols } from '@/app/_components/plots/symbols'
import { nuclearKey } from './nuclear-key'
import { numericColumn } from './numeric-column'

type Name = keyof HyperfineComponent & string

const numeric = numericColumn<HyperfineComponent>

const copied = (name: Name): Column<HyperfineComponent> => ({ ...numeric(name, name, String), only: 'copy' })

function columnsOf(answer: HyperfineComponents): Column<HyperfineComponent>[] {
  const angle = answer.theta_deg !== null
  return [
    {
      name: 'polarisation',
      header: 'Polarisation',
      rowHeader: true,
      value: (one) => one.polarisation,
      sort: (one) => one.q,
      cell: (one) => (
        <span className="inline-flex items-center gap-2">
          <PolarisationSign q={one.q} />
          {polarisationName(one.q)}
        </span>
      ),
    },
    ...(answer.isotopes.length > 1 ? [numeric('mass_number', 'Isotope', String)] : [copied('mass_number')]),
    numeric('f_lower', <>F<sub>lower</sub></>, halves, 'not one'),
    numeric('m_f_lower', <>m<sub>F</sub></>, halves),
    numeric('f_upper', <>F<sub>upper</sub></>, halves, 'not one'),
    numeric('m_f_upper', <>m<sub>F</sub></>, halves),
    ...(['m_j_lower', 'm_i_lower', 'm_j_upper', 'm_i_upper'] as const).map(copied),
    { name: 'far_lower', header: <>m<sub>J</sub>, m<sub>I</sub> lower</>, align: 'right', only: 'screen', value: (one) => `${one.m_j_lower},${one.m_i_lower}`, cell: (one) => `${halves(one.m_j_lower)}, ${halves(one.m_i_lower)}` },
    { name: 'far_upper', header: <>m<sub>J</sub>, m<sub>I</sub> upper</>, align: 'right', only: 'screen', value: (one) => `${one.m_j_upper},${one.m_i_upper}`, cell: (one) => `${halves(one.m_j_upper)}, ${halves(one.m_i_upper)}` },
    numeric('detuning_mhz', 'Detuning, MHz', (v) => signed(v, 8)),
    numeric('derivative_mhz_per_tesla', 'Slope, MHz/T', (v) => signed(v, 7)),
    numeric('shift_invcm', <>Shift, cm<sup>−1</sup></>, (v) => signed(v, 6)),
    numeric('wavenumber_invcm', <>Wavenumber, cm<sup>−1</sup></>, (v) => fixed(v, 5)),
    copied('wavelength_vac_nm'),
    copied('wavelength_air_nm'),
    copied('frequency_thz'),
    numeric('strength', 'Strength', (v) => fixed(v, 6)),
    copied('weight'),
    numeric('intensity', angle ? `Intensity at ${answer.theta_deg}°` : 'Intensity, mean', (v) => fixed(v, 6), 'not computed'),
    ...(angle ? [numeric('stokes_q', 'Stokes Q', (v) => signed(v, 4), 'not computed'), numeric('stokes_v', 'Stokes V', (v) => signed(v, 4), 'not computed')] : []),
    numeric('detuning_unc_mhz', 'Uncertainty, MHz', (v) => significant(v, 2)),
    copied('detuning_known_unc_mhz'),
  ]
}

/** Every hyperfine component with its place on each scale; copies carry full precision. */
export const NuclearTable = memo(function NuclearTable({ answer, active }: { answer: HyperfineComponents; active: string | null }) {
  const columns = useMemo(() => columnsOf(answer), [answer])
  const { isotopes } = answer
  return (
    <>
      <div className="max-h-[34rem] overflow-y-auto">
        <DataTable
          columns={columns}
          rows={answer.components}
          rowKey={nuclearKey}
          caption={`Hyperfine components of ${answer.transition} at ${answer.field_tesla} T`}
          hideCaption
          summary={<Symbols text={`${answer.components.length} components; F by continuity from zero field, m_J and m_I at high field`} />}
          rowClassName={(one) => (nuclearKey(one) === active ? 'bg-lamp-wash' : '')}
        />
      </div>
      <p className="note mt-2 max-w-[60rem]">
        {isotopes.map((one) => `Mass number ${one.mass_number}: I = ${one.nuclear_spin === null ? 'not known' : halves(one.nuclear_spin)}${isotopes.length > 1 ? `, ${significant(one.weight * 100, 4)} % of the pattern` : ''}.`).join(' ')}{' '}
        The uncertainty of a detuning is that of A, B, both g and μB; the field is taken as exact.
      </p>
    </>
  )
})
