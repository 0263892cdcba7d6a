'use client'
import type { Component, Components } from '@/openapi/schemas/components'
import { DataTable, type Column } from '@/app/_components/data-table'
import { fixed, halves, significant } from '@/app/_components/number'
import { componentKey } from '@/app/_components/plots/component-text'
import { PolarisationSign, polarisationName } from '@/app/_components/plots/polarisation'
import { signed } from '@/app/_components/plots/ruler'
import { Symbols } from '@/app/_components/plots/symbols'
import { RULE_NAMES } from '../_parts/rule-words'
import { numericColumn } from './numeric-column'

type Name = keyof Component & string

const absent = (text: string) => <span className="text-muted">{text}</span>

const numeric = numericColumn<Component>

/** The pair that a sublevel tends to at high field: what it is called, and where the two numbers stand. */
const far = (name: string, header: React.ReactNode, mL: 'm_l_lower' | 'm_l_upper', mS: 'm_s_lower' | 'm_s_upper'): Column<Component> => ({
  name,
  header,
  align: 'right',
  value: (c) => (c[mL] === null || c[mS] === null ? null : `${c[mL]},${c[mS]}`),
  cell: (c) => (c[mL] === null || c[mS] === null ? absent('not named') : `${halves(c[mL])}, ${halves(c[mS])}`),
})

const farColumns: Column<Component>[] = [
  far('m_l_m_s_lower', <>M<sub>L</sub>, M<sub>S</sub> lower</>, 'm_l_lower', 'm_s_lower'),
  far('m_l_m_s_upper', <>M<sub>L</sub>, M<sub>S</sub> upper</>, 'm_l_upper', 'm_s_upper'),
]

function columnsOf(answer: Components, medium: 'air' | 'vacuum'): Column<Component>[] {
  const angle = answer.theta_deg !== null
  const wavelength =
    medium === 'air' ? numeric('wavelength_air_nm', 'In air, nm', (v) => fixed(v, 5), 'does not apply') : numeric('wavelength_vac_nm', 'In vacuum, nm', (v) => fixed(v, 5))
  const copied: Name[] = medium === 'air' ? ['wavelength_vac_nm', 'frequency_thz'] : ['wavelength_air_nm', 'frequency_thz']
  return [
    {
      name: 'polarisation',
      header: 'Polarisation',
      rowHeader: true,
      value: (c) => c.polarisation,
      sort: (c) => c.q,
      cell: (c) => (
        <span className="inline-flex items-center gap-2">
          <PolarisationSign q={c.q} />
          {polarisationName(c.q)}
        </span>
      ),
    },
    numeric('m_lower', <>m<sub>lower</sub></>, halves),
    numeric('m_upper', <>m<sub>upper</sub></>, halves),
    { ...numeric('q', 'q', (v) => signed(v, 1)), only: 'copy' },
    ...(answer.model === 'intermediate' ? farColumns : []),
    numeric('shift_lorentz', 'Shift, L', (v) => signed(v, 6), 'does not apply'),
    numeric('shift_invcm', <>Shift, cm<sup>−1</sup></>, (v) => signed(v, 6)),
    numeric('shift_ghz', 'Shift, GHz', (v) => signed(v, 6)),
    numeric('shift_pm', 'Shift, pm', (v) => signed(v, 5)),
    numeric('derivative_invcm_per_tesla', <>Slope, cm<sup>−1</sup>/T</>, (v) => signed(v, 6)),
    numeric('wavenumber_invcm', <>Wavenumber, cm<sup>−1</sup></>, (v) => fixed(v, 4)),
    wavelength,
    ...copied.map((name): Column<Component> => ({ ...numeric(name, name, String), only: 'copy' })),
    {
      ...numeric('strength', 'Strength', (v) => fixed(v, 5)),
      cell: (c) => (c.vanishes_by === null ? (c.strength === null ? absent('not known') : <span title={String(c.strength)}>{fixed(c.strength, 5)}</span>) : <span title={RULE_NAMES[c.vanishes_by]}>0, {RULE_NAMES[c.vanishes_by]}</span>),
    },
    numeric('intensity', angle ? `Intensity at ${answer.theta_deg}°` : 'Intensity, mean', (v) => fixed(v, 5), 'not computed'),
    ...(angle ? [numeric('stokes_q', 'Stokes Q', (v) => signed(v, 4), 'not computed'), numeric('stokes_v', 'Stokes V', (v) => signed(v, 4), 'not computed')] : []),
    { ...numeric('wavenumber_unc_invcm', 'Uncertainty', String), only: 'copy' },
    { ...numeric('wavenumber_known_unc_invcm', 'Known part', String), only: 'copy' },
  ]
}

/** Every component with its place on each scale; copies carry full precision. */
export function ComponentsTable({ answer, medium, active }: { answer: Components; medium: 'air' | 'vacuum'; active: string | null }) {
  const first = answer.components[0]
  return (
    <>
      <DataTable
        columns={columnsOf(answer, medium)}
        rows={answer.components}
        rowKey={componentKey}
        caption={`Components of ${answer.transition} at ${answer.field_tesla} T`}
        hideCaption
        summary={<Symbols text={`${answer.components.length} components; wavelengths in ${medium}; L is the Lorentz unit, μB·B/hc${answer.model === 'intermediate' ? '; M_L, M_S: what a sublevel tends to at high field' : ''}`} />}
        rowClassName={(component) => (componentKey(component) === active ? 'bg-lamp-wash' : '')}
      />
      {first ? <Budget components={answer.components} /> : null}
    </>
  )
}

const PARTS: Record<string, string> = { energy_lower: 'energy of the lower level', energy_upper: 'energy of the upper level', g_lower: 'g of the lower level', g_upper: 'g of the upper level', field: 'the field' }
const partName = (part: string): string => PARTS[part] ?? part.replace(/_/g, ' ')

/** What is known of the uncertainty of the positions, part by part, the worst component speaking for all. */
function Budget({ components }: { components: readonly Component[] }) {
  const worst = components.reduce((a, b) => (b.wavenumber_known_unc_invcm > a.wavenumber_known_unc_invcm ? b : a))
  const unknown = [...new Set(components.flatMap((c) => c.budget.filter((part) => part.status === 'unknown').map((part) => partName(part.part))))]
  const known = [...new Set(components.flatMap((c) => c.budget.filter((part) => part.status === 'known').map((part) => partName(part.part))))]
  const total = components.every((c) => c.wavenumber_unc_invcm !== null)
  return (
    <p className="note mt-2 max-w-[60rem]">
      {total
        ? `Positions are uncertain by at most ${significant(worst.wavenumber_known_unc_invcm, 2)} cm⁻¹ (one standard deviation).`
        : `The uncertainty of the positions is not known: nothing is stated for ${unknown.join(', ')}.${known.length > 0 ? ` The known part is at most ${significant(worst.wavenumber_known_unc_invcm, 2)} cm⁻¹, from ${known.join(', ')}.` : ''}`}{' '}
      Level energies are taken as independent, and the field as exact.
    </p>
  )
}
