import { z } from 'zod'
import { defineOperation } from '@/openapi/core/define'
import { bodyEdition } from '@/openapi/core/parameters'
import { GValues, Kind, Medium, Model, TRANSITION_ID } from '@/openapi/schemas/common'
import { FieldFitAnswer, FitQuantity, FitUnit } from '@/openapi/schemas/field-fits'
import { GIVEN_COMPONENTS_MOST, InlineLevel } from './inline'

export const FIT_LINES_MOST = 20
export const FIT_MEASUREMENTS_MOST = 300

const given = (value: unknown): boolean => value !== undefined && value !== null

/** What is wrong between several members, told beside what is wrong in each. */
const together = { when: ({ value }: { value: unknown }) => typeof value === 'object' && value !== null }

const zero = z.string().min(1).max(40).nullish().meta({ description: 'Lines with the same text share one zero, their distances taken from the levels; without it each line has a zero of its own.' })

const transition = z
  .string()
  .max(60)
  .refine((text) => TRANSITION_ID.test(text), { message: 'Not a transition: write it like Na-I.1~Na-I.3 (two levels with ~ between them).', params: { code: 'transition_malformed' } })

const others = (end: string) => z.array(InlineLevel).max(40).nullish().meta({ description: `The other levels of the term of the ${end} level, which the intermediate model needs.` })

const FitLine = z.union([
  z.strictObject({ transition, kind: Kind.nullish(), zero }),
  z.strictObject({ lower: InlineLevel, upper: InlineLevel, lower_others: others('lower'), upper_others: others('upper'), kind: Kind.nullish(), zero }),
])

const m = z
  .number()
  .min(-50)
  .max(50)
  .refine((value) => Number.isInteger(2 * value), { message: 'm must be a half-integer, such as -0.5 or 1.', params: { code: 'half_integer_malformed' } })
  .nullish()

const q = z.int().min(-2).max(2)

interface Assigned { m_lower?: unknown; m_upper?: unknown; q?: unknown; group?: unknown }

export const FitMeasurement = z
  .strictObject({
    line: z.int().min(0).default(0).meta({ description: 'Index of its line, from 0.' }),
    position: z.number().min(-1e15).max(1e15).meta({ description: 'Position, separation or ring radius, in the unit given.' }),
    position_unc: z.number().min(0).max(1e15).nullish().meta({ description: 'One standard deviation in the same unit; for all measurements or for none.' }),
    m_lower: m.meta({ description: 'With m_upper: the component, assigned by hand.' }),
    m_upper: m,
    q: z.union([q, z.literal('sigma')]).nullish().meta({ description: 'Polarisation where it is known; sigma: either sense. The component is then found among these.' }),
    group: q.nullish().meta({ description: 'The peak is the whole unresolved group of this q, at its centre of gravity.' }),
    order: z.int().min(0).max(10_000).nullish().meta({ description: 'Rings only: how many orders outwards from the innermost one used.' }),
  })
  .refine((one: Assigned) => given(one.m_lower) === given(one.m_upper), { ...together, path: ['m_upper'], message: 'A component is named by m_lower and m_upper together.', params: { code: 'assignment_malformed' } })
  .refine((one: Assigned) => Number(given(one.m_lower) || given(one.m_upper)) + Number(given(one.q)) + Number(given(one.group)) <= 1, {
    ...together,
    path: ['m_lower'],
    message: 'Assign a peak in one way: by m_lower and m_upper, by q, or as a whole group.',
    params: { code: 'assignment_malformed' },
  })

const positive = (description: string) => z.number().gt(0).max(1e15).nullish().meta({ description })
const deviation = (description: string) => z.number().min(0).max(1e15).nullish().meta({ description })

const Etalon = z
  .strictObject({
    free_spectral_range_invcm: positive('Or give thickness_mm.'),
    free_spectral_range_unc_invcm: deviation('One standard deviation.'),
    thickness_mm: positive('Distance of the plates: the free spectral range is 1/(2 n t).'),
    refractive_index: z.number().min(1).max(5).default(1),
    square_step: positive('Step of radius squared from one order to the next, for the first line; or give order_radii. That of the other lines follows, since it grows as the wavelength.'),
    square_step_unc: deviation('One standard deviation.'),
    order_radii: z.array(z.number().gt(0).max(1e7)).min(2).max(100).nullish().meta({ description: 'Radii of one component of the first line in successive orders, from the inside: the step is found by least squares, with its deviation from the scatter where there are three.' }),
  })
  .refine((one: { free_spectral_range_invcm?: unknown; thickness_mm?: unknown }) => given(one.free_spectral_range_invcm) !== given(one.thickness_mm), {
    ...together,
    path: ['free_spectral_range_invcm'],
    message: 'Give the free spectral range or the thickness, one of the two.',
    params: { code: 'etalon_malformed' },
  })
  .refine((one: { square_step?: unknown; order_radii?: unknown }) => given(one.square_step) !== given(one.order_radii), {
    ...together,
    path: ['square_step'],
    message: 'Give the step of radius squared or the radii of successive orders, one of the two.',
    params: { code: 'etalon_malformed' },
  })

const Scale = z
  .strictObject({
    value: z.number().gt(0).max(1e6).default(1).meta({ description: 'Measured = zero + scale x true distance.' }),
    unc: z.number().min(0).max(1e6).nullish().meta({ description: 'One standard deviation: the scale is then fitted within it. Without it, or at 0, exact.' }),
    free: z.boolean().default(false).meta({ description: 'Fitted without knowing anything of it, which needs lines that share a zero.' }),
  })
  .refine((one: { unc?: unknown; free?: unknown }) => !(one.free === true && given(one.unc)), { ...together, path: ['unc'], message: 'A free scale has no uncertainty beforehand: leave out unc, or free.', params: { code: 'scale_malformed' } })

interface Body { unknown?: unknown; field?: unknown; field_unc?: unknown; free_g?: unknown; quantity?: unknown; unit?: unknown; etalon?: unknown; medium?: unknown; visible_q?: unknown; theta_deg?: unknown; mode?: unknown }
const wavelength = (unit: unknown): boolean => unit === 'nm' || unit === 'pm'
const rings = (body: Body): boolean => body.quantity === 'ring_radii'

const fieldText = z.union([z.string().min(1).max(40), z.number().min(0).max(10_000)])

export const FieldFitRequest = z
  .strictObject({
    edition: bodyEdition,
    mode: z.string().max(40).refine((text) => text === 'positions', { message: 'The mode is positions: a fit to a whole spectrum is not built yet. Take the positions of its peaks.', params: { code: 'spectrum_fit_not_built' } }).default('positions').meta({ enum: ['positions'] }),
    unknown: z.enum(['field', 'g']).default('field').meta({ description: 'field: one field over all lines. g: the field is known, and g_J of one or both levels of one line is wanted.' }),
    lines: z.array(FitLine).min(1).max(FIT_LINES_MOST),
    quantity: FitQuantity.default('positions'),
    unit: FitUnit.nullish().meta({ description: 'Of positions and separations; ring radii have none.' }),
    medium: Medium.nullish().meta({ description: 'Of wavelengths; default conventional, judged on each line.' }),
    etalon: Etalon.nullish(),
    measurements: z.array(FitMeasurement).max(FIT_MEASUREMENTS_MOST),
    scale: Scale.nullish(),
    model: Model.default('auto'),
    g_values: GValues.default('adopted'),
    g_s: z.number().min(0).max(3).nullish(),
    tolerance: z.number().min(1e-6).max(1).default(0.01),
    visible_q: z.array(q).min(1).max(5).nullish().meta({ description: 'Which polarisations can be seen, for automatic assignment; default all.' }),
    theta_deg: z.number().min(0).max(180).nullish().meta({ description: 'Or the angle between field and line of sight: along the field only sigma is seen.' }),
    field: fieldText.nullish().meta({ description: 'unknown=g: the field, with its unit; a bare number is tesla.' }),
    field_unc: fieldText.nullish().meta({ description: 'unknown=g: one standard deviation of it; without it exact.' }),
    free_g: z.enum(['lower', 'upper', 'both']).nullish().meta({ description: 'unknown=g: whose g_J is fitted; default upper.' }),
  })
  .refine((body: Body) => body.unknown !== 'g' || given(body.field), { ...together, path: ['field'], message: 'To get g the field must be known: give field.', params: { code: 'field_needed' } })
  .refine((body: Body) => body.unknown === 'g' || !(given(body.field) || given(body.field_unc) || given(body.free_g)), {
    ...together,
    path: ['field'],
    message: 'field, field_unc and free_g belong to unknown=g; here the field is what is fitted.',
    params: { code: 'field_not_wanted' },
  })
  .refine((body: Body) => rings(body) !== given(body.unit), { ...together, path: ['unit'], message: 'Positions and separations need a unit, and ring radii have none here.', params: { code: 'unit_not_applicable' } })
  .refine((body: Body) => !given(body.medium) || wavelength(body.unit), { ...together, path: ['medium'], message: 'A medium belongs to wavelengths (nm, pm); wavenumbers and frequencies are those of vacuum.', params: { code: 'unit_not_applicable' } })
  .refine((body: Body) => rings(body) === given(body.etalon), { ...together, path: ['etalon'], message: 'Ring radii need etalon, and nothing else does.', params: { code: 'etalon_malformed' } })
  .refine((body: Body) => !(given(body.visible_q) && given(body.theta_deg)), { ...together, path: ['visible_q'], message: 'Give visible_q or theta_deg, one of the two.', params: { code: 'assignment_malformed' } })
export type FieldFitRequest = z.output<typeof FieldFitRequest>

export const fitFieldOperation = defineOperation({
  id: 'fitField',
  method: 'post',
  path: '/field-fits',
  summary: 'A magnetic field from measured positions of components, with its uncertainty',
  description:
    'Weighted least squares on centred data for one field and a free zero of each line. Components are assigned by hand (m_lower with m_upper), by polarisation (q), as a whole unresolved group (group), or automatically. '
    + 'model=auto fits by the linear law, and again by diagonalised terms where the linear law does not hold at the field found. Where the data do not fix the field the answer is 200 with status undetermined and says why. '
    + 'mode is positions; a fit to a whole spectrum is not built yet, and another mode is refused as spectrum_fit_not_built. Tables (csv, ndjson, arrow) hold the residuals, one row per measurement. '
    + `Up to ${FIT_LINES_MOST} lines and ${FIT_MEASUREMENTS_MOST} measurements; assignments that would need too much work are refused as fit_too_large, and so are lines given level by level whose distinct multiplets have more than ${GIVEN_COMPONENTS_MOST} components between them. A field beyond 10 000 T is told as undetermined.`,
  tag: 'Physics',
  role: 'reader',
  body: FieldFitRequest,
  answer: FieldFitAnswer,
  edition: 'computed',
  formats: ['csv', 'ndjson', 'arrow'],
  problems: [
    'level_unknown', 'level_retired', 'zero_interval', 'species_differ', 'transition_malformed', 'transition_forbidden', 'term_impossible', 'term_mixed', 'term_incomplete', 'g_impossible', 'no_ls_g', 'g_unknown',
    'g_of_j_zero', 'field_not_positive', 'field_needed', 'field_not_wanted', 'field_malformed', 'field_unit_unknown', 'field_too_large', 'spectrum_fit_not_built', 'assignment_malformed', 'assignment_needed', 'no_such_line', 'no_such_component', 'sigma_for_some',
    'sigma_not_positive', 'spectral_not_positive', 'air_not_applicable', 'unit_not_applicable', 'etalon_malformed', 'scale_malformed', 'one_line_only', 'fit_too_large', 'heavy_requests_waiting', 'computing_interrupted',
  ],
  example: {
    body: {
      lines: [{ transition: 'Na-I.1~Na-I.3' }],
      unit: 'cm-1',
      measurements: [
        { position: 16972.73584, position_unc: 0.006, m_lower: 0.5, m_upper: -0.5 },
        { position: 16973.49179, position_unc: 0.002, q: 0 },
        { position: 16973.99492, position_unc: 0.006 },
      ],
    },
  },
})
