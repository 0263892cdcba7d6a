import { z } from 'zod'
import { GRID_MOST_POINTS } from '@/lib/atomic/profile-stokes'
import { FIELD_UNIT_NAMES } from '@/lib/units/field'
import { defineOperation } from '@/openapi/core/define'
import { bodyEdition } from '@/openapi/core/parameters'
import { GValues, Kind, Model, TRANSITION_ID } from '@/openapi/schemas/common'
import { Analyser, GRID_UNITS, Profiles, StokesSign } from '@/openapi/schemas/profiles'
import { GIVEN_COMPONENTS_MOST, InlineLevel } from './inline'

export const PROFILE_LINES_MOST = 100

/** One field: text with its unit, a number in tesla, or one value with a unit. */
const OneField = z.union([
  z.string().min(1).max(40).meta({ description: 'A field with its unit, such as 1.5T; a bare number is tesla.' }),
  z.number().min(0).max(10_000).meta({ description: 'A field in tesla.' }),
  z.strictObject({ values: z.array(z.number().min(0)).length(1), unit: z.enum(FIELD_UNIT_NAMES) }),
])

const shared = {
  weight: z.number().min(0).max(1e12).default(1).meta({ description: 'Integral of Stokes I over wavenumber, in any unit that all lines share.' }),
  kind: Kind.nullish(),
  mass_u: z.number().gt(0).max(1000).nullish().meta({ description: "Mass of this line's atom, before every other source of it." }),
}

const others = (end: string) => z.array(InlineLevel).max(40).nullish().meta({ description: `The other levels of the term of the ${end} level, which the intermediate model needs.` })

const transitionText = z
  .string()
  .max(60)
  .refine((text) => TRANSITION_ID.test(text), { message: 'Not a transition: write it like Na-I.1~Na-I.3 (two levels with ~ between them).', params: { code: 'transition_malformed' } })

const ProfileLine = z.union([
  z.strictObject({ transition: transitionText, ...shared }),
  z.strictObject({ lower: InlineLevel, upper: InlineLevel, lower_others: others('lower'), upper_others: others('upper'), ...shared }),
])

const Grid = z.strictObject({
  start: z.number().gt(0).max(1e15),
  stop: z.number().gt(0).max(1e15),
  count: z.int().min(2).max(GRID_MOST_POINTS),
  unit: z.enum(GRID_UNITS).default('wavenumber_invcm'),
})

const width = (description: string) => z.number().min(0).max(1e6).nullish().meta({ description })

const given = (value: unknown): boolean => value !== undefined && value !== null

/** What is wrong between several members, told beside what is wrong in each. */
const together = { when: ({ value }: { value: unknown }) => typeof value === 'object' && value !== null }
interface Together {
  instrument_fwhm_invcm?: unknown
  resolving_power?: unknown
  analyser?: { kind?: unknown } | null
  theta_deg?: unknown
  hyperfine?: unknown
  model?: unknown
  grid?: { start?: unknown; stop?: unknown } | null
}

export const ProfilesRequest = z
  .strictObject({
    edition: bodyEdition,
    lines: z.array(ProfileLine).min(1).max(PROFILE_LINES_MOST),
    field: OneField,
    model: Model.default('auto'),
    g_values: GValues.default('adopted'),
    g_s: z.number().min(0).max(3).nullish(),
    tolerance: z.number().min(1e-6).max(1).default(0.01),
    theta_deg: z.number().min(0).max(180).nullish().meta({ description: 'Angle between the field and the direction from source to observer; without it intensities are averaged over angle, and there are no Q and V.' }),
    isotope: z.union([z.int().min(1).max(400), z.literal('natural')]).nullish().meta({
      description: 'Mass number, of a species of the table: its mass broadens, and with hyperfine its structure is in the profile. natural: the isotopes listed, by abundance.',
    }),
    hyperfine: z.boolean().default(false).meta({ description: 'Put the hyperfine structure of the isotope into the profile; without isotope the natural mixture.' }),
    temperature_k: z.number().min(0).max(1e9).nullish(),
    mass_u: z.number().gt(0).max(1000).nullish().meta({ description: 'Mass of the atom for all lines; without it that of the isotope, or the mean of the isotopes listed.' }),
    microturbulence_km_s: z.number().min(0).max(1e5).nullish().meta({ description: 'Most probable speed.' }),
    instrument_fwhm_invcm: width('Full width at half maximum of the instrument; or give resolving_power.'),
    resolving_power: z.number().gt(0).max(1e12).nullish().meta({ description: 'Wavenumber over the full width at half maximum of the instrument.' }),
    lorentzian_fwhm_invcm: width('Natural and pressure width, full at half maximum.'),
    mode: z.enum(['emission', 'absorption']).default('emission'),
    stokes_sign: StokesSign.default('iau'),
    analyser: Analyser.default({ kind: 'none' }),
    grid: Grid.nullish().meta({ description: 'Even steps from start up to stop; without it a grid that shows the lines.' }),
  })
  .refine((body: Together) => !(given(body.instrument_fwhm_invcm) && given(body.resolving_power)), {
    ...together,
    path: ['resolving_power'],
    message: 'Give the instrument as a width or as a resolving power, not both.',
    params: { code: 'instrument_twice' },
  })
  .refine((body: Together) => given(body.theta_deg) || !given(body.analyser) || body.analyser?.kind === 'none', {
    ...together,
    path: ['analyser'],
    message: 'Behind an analyser the viewing angle counts; give theta_deg.',
    params: { code: 'analyser_without_angle' },
  })
  .refine((body: Together) => !(body.hyperfine === true && body.model === 'intermediate'), {
    ...together,
    path: ['hyperfine'],
    message: 'Hyperfine structure is diagonalised within one J, where the intermediate model has no part; ask for one of them.',
    params: { code: 'models_conflict' },
  })
  .refine((body: Together) => !(typeof body.grid?.start === 'number' && typeof body.grid.stop === 'number') || body.grid.start < body.grid.stop, {
    ...together,
    path: ['grid', 'stop'],
    message: 'A grid rises: stop must be above start.',
    params: { code: 'grid_malformed' },
  })
export type ProfilesRequest = z.output<typeof ProfilesRequest>

export const computeProfiles = defineOperation({
  id: 'computeProfiles',
  method: 'post',
  path: '/profiles',
  summary: 'Stokes I, Q and V of several lines at one field, as an instrument shows them',
  description:
    'Optically thin sums of Voigt profiles over the components of every line. The integral of I of a line over wavenumber is its weight. Widths: temperature with mass, microturbulence, instrument, Lorentzian; at least one is needed, none below 1e-15 of the wavenumber. Reversing the field (theta_deg to 180 - theta_deg) turns V and leaves I and Q. '
    + `Up to ${PROFILE_LINES_MOST} lines; the distinct multiplets of lines whose levels stand in the request have up to ${GIVEN_COMPONENTS_MOST} components between them, more is refused as answer_too_large.`,
  tag: 'Physics',
  role: 'reader',
  body: ProfilesRequest,
  answer: Profiles,
  edition: 'computed',
  formats: ['csv', 'ndjson', 'arrow'],
  problems: [
    'level_unknown', 'level_retired', 'zero_interval', 'species_differ', 'transition_malformed', 'transition_forbidden', 'term_impossible', 'g_impossible', 'no_ls_g', 'g_unknown', 'field_too_large',
    'profile_no_width', 'profile_e2', 'no_ls_amplitude', 'mass_unknown', 'instrument_twice', 'analyser_without_angle', 'grid_malformed', 'isotope_unknown', 'answer_too_large', 'term_incomplete', 'term_mixed', 'air_not_applicable', 'models_conflict', 'hyperfine_unknown', 'nuclear_spin_unknown', 'abundance_unknown', 'physics_impossible',
  ],
  example: {
    body: {
      lines: [{ transition: 'Na-I.1~Na-I.2' }, { transition: 'Na-I.1~Na-I.3', weight: 2 }],
      field: '0.5T',
      theta_deg: 0,
      temperature_k: 500,
      resolving_power: 100000,
    },
  },
})
