import { z } from 'zod'
import { FIELD_UNIT_NAMES } from '@/lib/units/field'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, numberParameter } from '@/openapi/core/parameters'
import { Conversion, DecodedTerm, SPECTRAL_SCALES, SublevelMatrix } from '@/openapi/schemas/computed'
import { InlineLevel } from './inline'
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
  summary: 'Sublevels of one LS term given in the request, over fields',
  description:
    'Either `levels` of one LS term, or `level` with `nucleus`. The second form, hyperfine structure, is refused as hyperfine_not_built, and model=intermediate as intermediate_not_built, until they are built.',
  tag: 'Physics',
  role: 'reader',
  body: z.union([
    z.strictObject({
      levels: z.array(InlineLevel).min(1).max(40),
      field: FieldList,
      model: z.enum(['auto', 'linear', 'intermediate']).default('auto'),
      g_values: z.enum(['adopted', 'coupled', 'ls']).default('adopted'),
      g_s: z.number().min(0).max(3).nullish(),
    }),
    z.strictObject({
      level: z.strictObject({ j: z.number().min(0).max(50), g_j: z.number() }),
      nucleus: z.strictObject({ i: z.number().min(0).max(20), a_mhz: z.number(), b_mhz: z.number().nullish(), g_i: z.number().nullish() }),
      field: FieldList,
    }),
  ]),
  answer: SublevelMatrix,
  edition: 'computed',
  problems: ['term_impossible', 'term_mixed', 'intermediate_not_built', 'hyperfine_not_built', 'field_out_of_range', 'g_impossible', 'answer_too_large'],
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
