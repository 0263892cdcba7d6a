import type { Column, Table } from '@/openapi/core/table'
import type { Profiles } from '@/openapi/schemas/profiles'

const column = (name: string, unit: string | null, description: string): Column => ({ name, type: 'number', unit, description })

const COLUMNS: readonly Column[] = [
  column('wavenumber_invcm', 'cm-1', 'Vacuum wavenumber'),
  column('wavelength_vac_nm', 'nm', 'Wavelength in vacuum'),
  column('wavelength_air_nm', 'nm', 'Wavelength in standard air, from 200 nm up'),
  column('stokes_i', 'cm', 'What the lines add or take away, weight per cm^-1'),
  column('stokes_q', 'cm', 'Stokes Q; empty without an angle'),
  column('stokes_v', 'cm', 'Stokes V; empty without an angle'),
  column('behind_analyser', 'cm', 'What is added or taken away behind the analyser; empty without one'),
]

/** One row a point of the grid. */
export function profileTable(profiles: Profiles): Table {
  return {
    name: 'profiles',
    columns: COLUMNS,
    rows: {
      *[Symbol.iterator]() {
        for (let i = 0; i < profiles.wavenumber_invcm.length; i += 1) {
          yield [
            profiles.wavenumber_invcm[i], profiles.wavelength_vac_nm[i], profiles.wavelength_air_nm[i] ?? null, profiles.stokes_i[i],
            profiles.stokes_q?.[i] ?? null, profiles.stokes_v?.[i] ?? null, profiles.behind_analyser?.[i] ?? null,
          ]
        }
      },
    },
  }
}
