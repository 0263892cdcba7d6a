import { z } from 'zod'
import { FIELD_UNIT_NAMES } from '@/lib/units/field'
import { defineOperation } from '@/openapi/core/define'
import { bodyEdition } from '@/openapi/core/parameters'
import { GValues, Model, TransitionId } from '@/openapi/schemas/common'
import { PredictionBlock, PredictionQuantity } from '@/openapi/schemas/predictions'
import { InlineLevel } from './inline'

/** Bounds of one request; how many values it may ask for is another, `answer_too_large`. */
const MOST_LINES = 10_000
const MOST_MULTIPLETS = 1000

const named = z.strictObject({ transition: TransitionId })

export const PredictionLine = z
  .union([named, z.strictObject({ lower: InlineLevel, upper: InlineLevel })])
  .meta({ id: 'PredictionLine', description: 'Two levels: a transition of the table, or both levels inline.' })
export type PredictionLine = z.infer<typeof PredictionLine>

const term = z.array(InlineLevel).min(1).max(40).meta({ description: 'The levels of one term: they share s, l and parity.' })

export const PredictionMultiplet = z
  .union([named, z.strictObject({ lower: term, upper: term })])
  .meta({ id: 'PredictionMultiplet', description: 'Every line between two terms: named by any one of its lines, or by the levels of both terms.' })
export type PredictionMultiplet = z.infer<typeof PredictionMultiplet>

export const PredictionField = z
  .union([
    z.strictObject({ values: z.array(z.number().min(0)).min(1), unit: z.enum(FIELD_UNIT_NAMES) }),
    z.strictObject({ start: z.number().min(0), stop: z.number().min(0), count: z.int().min(1), unit: z.enum(FIELD_UNIT_NAMES) }),
  ])
  .meta({ id: 'PredictionField', description: 'Fields one by one, or `count` of them evenly from start to stop, both included: start + i ((stop - start)/(count - 1)), the last one stop itself; a count of 1 is start.' })
export type PredictionField = z.infer<typeof PredictionField>

export const predict = defineOperation({
  id: 'predict',
  method: 'post',
  path: '/predictions',
  summary: 'Components of many lines and multiplets over many fields',
  description:
    'One block per line, then one per multiplet, in the order given. Components keep one order over all fields (q, m_lower, j_lower, j_upper). `model=auto` is decided once per block from the largest field asked and named in the block. '
    + 'JSON gives all blocks in data; NDJSON one block per row and a last row {"meta": ..., "complete": true}; Arrow one record batch per block and one row per component, with value, derivative, strength (and intensity) as fixed-size lists of float64 over the fields, units in the field metadata, and the field grid, the transition, the model and the validity in the metadata of the batch. '
    + 'Up to 5 000 000 values (fields times components) a request. Answers of any size are streamed; large ones wait for their turn beside those of other callers.',
  tag: 'Physics',
  role: 'reader',
  body: z.strictObject({
    edition: bodyEdition,
    lines: z.array(PredictionLine).max(MOST_LINES).default([]),
    multiplets: z.array(PredictionMultiplet).max(MOST_MULTIPLETS).default([]),
    field: PredictionField,
    model: Model.default('auto'),
    g_values: GValues.default('adopted'),
    g_s: z.number().min(0).max(3).nullish().meta({ description: 'g factor of the electron spin; default: the CODATA value.' }),
    theta_deg: z.number().min(0).max(180).nullish().meta({ description: 'Angle between the field and the direction from source to observer: asks for intensities beside strengths.' }),
    derivatives: z.boolean().default(false).meta({ description: 'Derivatives of the values with respect to the field.' }),
    strengths: z.boolean().default(true).meta({ description: 'Off: positions alone, which is the fastest.' }),
    quantity: PredictionQuantity.default('wavenumber_invcm'),
    tolerance: z.number().min(1e-6).max(1).default(0.01).meta({ description: 'Relative error above which the linear law counts as not valid.' }),
  }),
  answer: z.array(PredictionBlock),
  edition: 'computed',
  formats: ['ndjson', 'arrow'],
  problems: [
    'level_unknown', 'level_retired', 'zero_interval', 'species_differ', 'transition_forbidden', 'term_impossible', 'term_mixed', 'term_incomplete', 'no_ls_g', 'g_unknown', 'g_impossible', 'field_too_large',
    'prediction_empty', 'answer_too_large', 'physics_impossible', 'heavy_requests_waiting', 'computing_interrupted',
  ],
  example: {
    body: {
      lines: [{ transition: 'Na-I.1~Na-I.3' }, { lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' }, upper: { energy_invcm: 18000, s: 0, l: 1, j: 1, parity: 'odd' } }],
      multiplets: [{ transition: 'Na-I.1~Na-I.3' }],
      field: { values: [0.1, 0.2], unit: 'T' },
      model: 'auto',
      derivatives: true,
    },
  },
})
