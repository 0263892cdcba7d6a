import { z } from 'zod'
import { FIELD_UNIT_NAMES } from '@/lib/units/field'
import { defineOperation } from '@/openapi/core/define'
import { bodyEdition } from '@/openapi/core/parameters'
import { GValues } from '@/openapi/schemas/common'
import { FieldTableAnswer } from '@/openapi/schemas/field-tables'
import { PredictionMultiplet } from './predictions'

export const makeFieldTable = defineOperation({
  id: 'makeFieldTable',
  method: 'post',
  path: '/field-tables',
  summary: 'A multiplet over an interval of fields, to interpolate without the network',
  description:
    'Nodes of field with positions, strengths and their slopes. Between two nodes a and b, with h = b - a and t = (B - a)/h, a value is v_a + (v_b - v_a) t^2 (3 - 2t) + h t (1 - t) ((1 - t) s_a - t s_b), which is cubic Hermite interpolation; max_error_invcm and max_strength_error are proved bounds of what it errs by.',
  tag: 'Physics',
  role: 'reader',
  body: z.strictObject({
    edition: bodyEdition,
    multiplet: PredictionMultiplet,
    field: z.strictObject({ start: z.number().min(0), stop: z.number().min(0), unit: z.enum(FIELD_UNIT_NAMES) }),
    model: z.enum(['intermediate', 'linear']).default('intermediate'),
    g_values: GValues.default('adopted'),
    g_s: z.number().min(0).max(3).nullish().meta({ description: 'g factor of the electron spin; default: the CODATA value.' }),
    max_error_invcm: z.number().min(1e-10).max(1e6).default(1e-6).meta({ description: 'The largest error of an interpolated position that is let pass.' }),
    max_strength_error: z.number().min(1e-10).max(1).default(1e-6).meta({ description: 'The same for strengths, of which all of the multiplet sum to 1.' }),
  }),
  answer: FieldTableAnswer,
  edition: 'computed',
  formats: ['arrow'],
  problems: [
    'level_unknown', 'level_retired', 'zero_interval', 'species_differ', 'term_impossible', 'term_mixed', 'term_incomplete', 'no_ls_g', 'g_unknown', 'g_impossible', 'field_too_large', 'field_interval', 'table_too_large', 'error_below_rounding',
    'physics_impossible', 'heavy_requests_waiting', 'computing_interrupted',
  ],
  example: { body: { multiplet: { transition: 'Na-I.1~Na-I.3' }, field: { start: 0, stop: 2, unit: 'T' }, max_error_invcm: 0.000001 } },
})
