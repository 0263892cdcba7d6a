import { z } from 'zod'
import { FIELD_UNIT_NAMES } from '@/lib/units/field'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, numberParameter } from '@/openapi/core/parameters'
import { Conversion, DecodedTerm, HyperfineMatrix, SPECTRAL_SCALES, SublevelMatrix } from '@/openapi/schemas/computed'
import { halfInteger, InlineLevel } from './inline'
import { gSParameter, termPath } from './parameters'

export const decodeTerm = defineOperation({
  id: 'decodeTerm',
  method: 'get',
  path: '/terms/{symbol}',
  summary: 'A bare term symbol decoded without the table',
  tag: 'Physics',
  role: 'reader',
  params: z.strictObject({ symbol: termPath }),
  query: z.strictObject({ g_s: gSParameter.optional() }),
  answer: DecodedTerm,
  edition: 'computed',
  problems: ['term_impossible'],
  example: { params: { symbol: '2P*3-2' } },
})

/** A field as `{ values, unit }` of a body. */
const FieldList = z.union([
  z.string().min(1).max(40).meta({ description: 'One field with its unit, such as 1.5T; a bare number is tesla.' }),
  z.number().min(0).max(10_000).meta({ description: 'One field in tesla.' }),
  z.strictObject({ values: z.array(z.number().min(0)).min(1).max(10_000), unit: z.enum(FIELD_UNIT_NAMES) }),
])

export const computeSublevels = defineOperation({
  id: 'computeSublevels',
  method: 'post',
  path: '/sublevels',
  summary: 'Sublevels of one LS term, or of one level with its nucleus, given in the request, over fields',
  description:
    'Either `levels` of one LS term, or `level` with `nucleus` (hyperfine structure, diagonalised in full). model=auto diagonalises within the term where the linear law of some level errs by more than the tolerance at the largest field.',
  tag: 'Physics',
  role: 'reader',
  body: z.union([
    z.strictObject({
      levels: z.array(InlineLevel).min(1).max(40),
      field: FieldList,
      model: z.enum(['auto', 'linear', 'intermediate']).default('auto'),
      g_values: z.enum(['adopted', 'coupled', 'ls']).default('adopted'),
      g_s: z.number().min(0).max(3).nullish(),
      tolerance: z.number().min(1e-6).max(1).nullish().meta({ description: 'Relative error above which model=auto leaves the linear law; 0.01.' }),
    }),
    z.strictObject({
      level: z.strictObject({ j: halfInteger('j'), g_j: z.number().min(-20).max(20).nullish().meta({ description: 'Null only for J = 0.' }) }),
      nucleus: z.strictObject({
        i: halfInteger('i').max(20),
        a_mhz: z.number().min(-1e7).max(1e7),
        b_mhz: z.number().min(-1e7).max(1e7).nullish().meta({ description: 'Dropped where I or J is under 1.' }),
        g_i: z.number().min(-1).max(1).nullish().meta({ description: "g_I' in units of mu_B, negative for a positive moment; without it 0." }),
      }),
      field: FieldList,
    }),
  ]),
  answer: z.union([SublevelMatrix, HyperfineMatrix]),
  edition: 'computed',
  problems: ['term_impossible', 'term_mixed', 'term_incomplete', 'g_unknown', 'field_out_of_range', 'g_impossible', 'answer_too_large'],
  example: {
    body: {
      levels: [
        { energy_invcm: 16956.17025, s: 0.5, l: 1, j: 0.5, parity: 'odd' },
        { energy_invcm: 16973.36619, s: 0.5, l: 1, j: 1.5, parity: 'odd' },
      ],
      field: { values: [0.1, 1.5], unit: 'T' },
      model: 'linear',
    },
  },
})

export const convertWavelength = defineOperation({
  id: 'convertWavelength',
  method: 'get',
  path: '/wavelengths/convert',
  summary: 'Between vacuum and air wavelength, wavenumber, frequency and energy',
  tag: 'Physics',
  role: 'reader',
  query: z.strictObject({
    value: numberParameter('The number to convert, above 0.', { min: 1e-9, max: 1e15, example: 589.158 }),
    from: choiceParameter(SPECTRAL_SCALES, 'Scale of the value.'),
    to: choiceParameter(SPECTRAL_SCALES, 'Scale wanted.'),
    formula: choiceParameter(['ciddor1996', 'peck_reeder1972', 'edlen1966'], 'Dispersion formula of standard air.', 'ciddor1996'),
  }),
  answer: Conversion,
  edition: 'computed',
  problems: ['air_not_applicable'],
  example: { query: { value: '589.158', from: 'vacuum_nm', to: 'air_nm' } },
})
