import { z } from 'zod'
import { Kind, SpeciesId, TransitionId, ValueStatus } from './common'
import { Validity } from './validity'

export const GRID_UNITS = ['wavenumber_invcm', 'vacuum_nm', 'air_nm', 'frequency_ghz'] as const
export const GridUnit = z.enum(GRID_UNITS).meta({ id: 'GridUnit', description: 'Quantity in which a grid takes even steps.' })
export type GridUnit = z.infer<typeof GridUnit>

export const StokesSign = z.enum(['iau', 'solar']).meta({
  id: 'StokesSign',
  description: 'iau: V > 0 turns counter-clockwise as the observer sees it; solar: clockwise.',
})

/** What light passes before it is measured. */
export const Analyser = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('none') }),
    z.strictObject({ kind: z.literal('linear'), angle_deg: z.number().min(-360).max(360).meta({ description: 'From the field projected on the sky.' }) }),
    z.strictObject({ kind: z.literal('circular'), sense: z.enum(['counterclockwise', 'clockwise']).meta({ description: 'Turn of the electric vector that passes, as the observer sees it.' }) }),
  ])
  .meta({ id: 'Analyser', description: 'Ideal analyser in front of the instrument: none, linear at an angle, or circular in either sense.' })
export type Analyser = z.infer<typeof Analyser>

export const ProfiledLine = z
  .strictObject({
    transition: TransitionId.nullable().meta({ description: 'Null for a line given in the request.' }),
    species: SpeciesId.nullable(),
    kind: Kind,
    weight: z.number(),
    model: z.enum(['linear', 'intermediate', 'hyperfine']).meta({ description: 'hyperfine: diagonalised with the nuclear spin, within one J.' }),
    wavenumber_invcm: z.number(),
    wavelength_vac_nm: z.number(),
    wavelength_air_nm: z.number().nullable(),
    component_count: z.int(),
    integral: z.number().meta({ description: 'Integral of I of this line over wavenumber: its weight in the linear model; in the intermediate one strength flows between the lines of a multiplet.' }),
    doppler_fwhm_invcm: z.number().meta({ description: 'Thermal motion and microturbulence.' }),
    instrument_fwhm_invcm: z.number(),
    gaussian_fwhm_invcm: z.number().meta({ description: 'Doppler and instrument in quadrature.' }),
    lorentzian_fwhm_invcm: z.number(),
    fwhm_invcm: z.number().meta({ description: 'Full width at half maximum of one component.' }),
    mass_u: z.number().nullable(),
    mass_status: ValueStatus.meta({ description: 'not_applicable: no temperature was given, so no mass is needed.' }),
    mass_basis: z.enum(['given', 'isotope', 'mean_of_isotopes']).nullable().meta({ description: 'mean_of_isotopes: weighted by abundance.' }),
    isotopes: z
      .array(
        z.strictObject({
          mass_number: z.int(),
          weight: z.number().meta({ description: 'Share of the line; weights sum to 1.' }),
          shift_mhz: z.number().meta({ description: 'Of the line from that of the table.' }),
          shift_known: z.boolean().meta({ description: 'False where none is stored, and 0 was taken.' }),
          hyperfine: z.boolean().meta({ description: 'Whether its components are those of a nucleus with spin.' }),
        }),
      )
      .meta({ description: 'The isotopes whose hyperfine structure is in the profile; empty without it.' }),
    validity: Validity,
  })
  .meta({ id: 'ProfiledLine' })
export type ProfiledLine = z.infer<typeof ProfiledLine>

export const Profiles = z
  .strictObject({
    field_tesla: z.number(),
    theta_deg: z.number().nullable(),
    mode: z.enum(['emission', 'absorption']),
    analyser: Analyser,
    grid: z.strictObject({
      unit: GridUnit,
      start: z.number(),
      stop: z.number(),
      count: z.int(),
      automatic: z.boolean().meta({ description: 'Whether the grid was chosen to show the lines.' }),
    }),
    wavenumber_invcm: z.array(z.number()).meta({ description: 'In the order of the grid: falling where it steps in wavelength.' }),
    wavelength_vac_nm: z.array(z.number()),
    wavelength_air_nm: z.array(z.number().nullable()).meta({ description: 'Null below 200 nm, where air does not apply.' }),
    stokes_i: z.array(z.number()).meta({ description: 'What the lines add (emission) or take away (absorption), in weight per cm^-1.' }),
    stokes_q: z.array(z.number()).nullable().meta({ description: 'Null without theta_deg.' }),
    stokes_v: z.array(z.number()).nullable().meta({ description: 'Null without theta_deg.' }),
    behind_analyser: z.array(z.number()).nullable().meta({ description: 'What the lines add or take away behind the analyser; null where there is none.' }),
    lines: z.array(ProfiledLine),
    bench_sentence: z.string().meta({ description: 'What someone at the apparatus sees.' }),
  })
  .meta({ id: 'Profiles' })
export type Profiles = z.infer<typeof Profiles>
