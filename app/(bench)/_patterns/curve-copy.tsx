'use client'
import { memo, useState } from 'react'
import { valueIn } from '@/lib/prediction/profiles-grid'
import { copyText } from '@/app/_components/copy-button'
import { Menu } from '@/app/_components/menu'
import { tableText, type TableFormat, type TextColumn } from '@/app/_components/table-text'
import type { Curve } from './use-overlay'

/** Columns of the curve as drawn, one row a point; named as the API names them. */
function columnsOf({ wavenumberInvcm, profiles }: Curve): TextColumn<number>[] {
  const at = (values: Float64Array) => (i: number) => values[i] ?? null
  return [
    { name: 'wavenumber_invcm', value: at(wavenumberInvcm) },
    { name: 'wavelength_vac_nm', value: (i) => valueIn('vacuum_nm', wavenumberInvcm[i] ?? 0) },
    { name: 'wavelength_air_nm', value: (i) => valueIn('air_nm', wavenumberInvcm[i] ?? 0) },
    { name: 'stokes_i', value: at(profiles.intensity) },
    ...(profiles.stokesQ ? [{ name: 'stokes_q', value: at(profiles.stokesQ) }] : []),
    ...(profiles.stokesV ? [{ name: 'stokes_v', value: at(profiles.stokesV) }] : []),
  ]
}

/** The drawn curve as text to paste elsewhere. */
export const CurveCopy = memo(function CurveCopy({ curve, caption }: { curve: Curve; caption: string }) {
  const [said, setSaid] = useState('')
  const copy = (format: TableFormat) => async () => {
    const rows = Array.from(curve.wavenumberInvcm.keys())
    setSaid((await copyText(tableText(format, columnsOf(curve), rows, caption))) ? `Copied ${rows.length} points` : 'Could not copy')
  }
  return (
    <span className="no-print inline-flex items-center gap-2">
      <span role="status" className="note">{said}</span>
      <Menu label="Copy curve" items={[{ label: 'as CSV', onSelect: copy('csv') }, { label: 'as TSV', hint: 'spreadsheet', onSelect: copy('tsv') }, { label: 'as LaTeX', onSelect: copy('latex') }]} />
    </span>
  )
})
